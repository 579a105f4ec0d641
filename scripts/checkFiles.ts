/** Reads the schemas of tests/fixtures/checks: statements, histories and cosmologies as they write them. */
import { type Background, background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import { powerLawHistory } from "~shared/history/powerLaw";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";
import type { ReadyRow } from "~shared/likelihood/compile";
import {
  bandWideTails,
  flatThenGaussian,
  type Form,
  gaussian,
  halfGaussianUnbounded,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { sigmasOfLevel } from "~shared/numerics/special";

/** A case that can't be read: the message names what is wrong with it. */
export class CaseError extends Error {
  override readonly name = "CaseError";
}

export type Json = null | boolean | number | string | Json[] | { [key: string]: Json };
export type JsonObject = { [key: string]: Json };

export function objectIn(parent: JsonObject, key: string): JsonObject {
  const value = parent[key];
  if (value === null || typeof value !== "object" || Array.isArray(value)) {
    throw new CaseError(`“${key}” is missing or not an object`);
  }
  return value;
}

export function numberIn(parent: JsonObject, key: string): number {
  const value = parent[key];
  if (typeof value !== "number") throw new CaseError(`“${key}” is missing or not a number`);
  return value;
}

export function numbersIn(parent: JsonObject, key: string): number[] {
  const value = parent[key];
  if (!Array.isArray(value) || value.some((entry) => typeof entry !== "number")) {
    throw new CaseError(`“${key}” is missing or not a list of numbers`);
  }
  return value as number[];
}

export function textIn(parent: JsonObject, key: string): string {
  const value = parent[key];
  if (typeof value !== "string") throw new CaseError(`“${key}” is missing or not a text`);
  return value;
}

export function backgroundIn(cosmology: JsonObject): Background {
  return background({
    h: numberIn(cosmology, "H0") / 100,
    omegaBh2: numberIn(cosmology, "ombh2"),
    omegaCh2: numberIn(cosmology, "omch2"),
    heliumFraction: numberIn(cosmology, "Y"),
  });
}

export function historyIn(history: JsonObject): History {
  const type = textIn(history, "type");
  switch (type) {
    case "tanh":
      return tanhHistory({ zRe: numberIn(history, "z_re"), deltaZ: numberIn(history, "Dz") });
    case "power_law":
      return powerLawHistory({
        zEnd: numberIn(history, "z_end"),
        alpha: numberIn(history, "alpha"),
        zEarly: numberIn(history, "z_early"),
      });
    case "tabulated":
      return tabulatedHistory(numbersIn(history, "z"), numbersIn(history, "x_HI"));
    default:
      throw new CaseError(`there is no history of type “${type}”`);
  }
}

export function formIn(statement: JsonObject): Form {
  const type = textIn(statement, "type");
  const name = statement["form"] === undefined ? type : textIn(statement, "form");
  const n = (key: string): number => numberIn(statement, key);
  const side = type === "upper_limit" ? "upper" : "lower";
  const limit = (): number => n(side === "upper" ? "u" : "l");
  const k = (): number => sigmasOfLevel(n("CL"));
  switch (name) {
    case "split_normal":
      return twoPiece(n("m"), n("minus") / k(), n("plus") / k());
    case "variable_width":
      return variableWidth(n("m"), n("minus"), n("plus"), k());
    case "half_gaussian":
      return halfGaussianUnbounded(side, limit(), k());
    case "flat_tail":
      return flatThenGaussian(side, limit(), n("s"));
    case "smoothed_step":
      return smoothedStep(side, limit(), n("s"));
    case "interval":
      return bandWideTails(n("lo"), n("hi"), k());
    case "gaussian":
      return gaussian(n("m"), n("sigma"));
    case "tabulated":
      return tabulated(numbersIn(statement, "x"), numbersIn(statement, "p"));
    default:
      throw new CaseError(`there is no form “${name}”`);
  }
}

/** A row of a fit file: at a redshift, or over a bin. */
export function rowIn(row: JsonObject): ReadyRow {
  return {
    id: textIn(row, "id"),
    shape: formIn(objectIn(row, "statement")),
    evaluatedIn: "linear",
    quantity: "neutralFraction",
    request:
      row["z"] === undefined
        ? { kind: "binMean", zLow: numberIn(row, "z_lo"), zHigh: numberIn(row, "z_hi") }
        : { kind: "point", z: numberIn(row, "z") },
  };
}

/** The optical-depth row of a fit file. */
export function tauRowIn(row: JsonObject): ReadyRow {
  return {
    id: textIn(row, "id"),
    shape: formIn(row),
    evaluatedIn: "linear",
    quantity: "opticalDepth",
    request: { kind: "opticalDepth", z1: 0, z2: 50 },
  };
}

/** The rows of a named set of a fit file: all_rows_plus_tau, all_rows_no_tau, tau_only, method:NAME. */
export function rowsOfSet(file: JsonObject, set: string): ReadyRow[] {
  const rows = file["rows"];
  if (!Array.isArray(rows)) throw new CaseError("“rows” is missing or not a list");
  const all = rows.map((row) => row as JsonObject);
  const tau = (): ReadyRow => tauRowIn(objectIn(file, "tau_row"));
  if (set === "all_rows_plus_tau") return [...all.map(rowIn), tau()];
  if (set === "all_rows_no_tau") return all.map(rowIn);
  if (set === "tau_only") return [tau()];
  if (set.startsWith("method:")) {
    const chosen = all.filter((row) => row["method"] === set.slice("method:".length));
    if (chosen.length > 0) return chosen.map(rowIn);
  }
  throw new CaseError(`there is no set “${set}”`);
}
