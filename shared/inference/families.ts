import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import { DEFAULT_Z_EARLY, powerLawHistory } from "~shared/history/powerLaw";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";
import { DomainError } from "~shared/errors/DomainError";
import { historyPredictor, type Predictor } from "~shared/inference/predictor";
import { freeFormPredictor } from "~shared/inference/freeFormPredictor";
import { tanhPredictor } from "~shared/inference/tanhPredictor";
import { powerLawPredictor } from "~shared/inference/powerLawPredictor";
import type { ModelRequests } from "~shared/likelihood/compile";

/** One parameter of a fit with the ends of its flat prior. */
export interface FitParameter {
  readonly name: string;
  readonly low: number;
  readonly high: number;
}

/** A family of histories with its priors: what a fit varies. */
export interface FitFamily {
  readonly kind: "tanh" | "powerLaw" | "freeForm";
  readonly parameters: readonly FitParameter[];
  /** The prior in words, exported with every fit. */
  readonly prior: string;
  /** Normalized log prior density inside the box of the parameters; −Infinity where it is zero. */
  logPrior(theta: ArrayLike<number>): number;
  /** The point of the prior that a point of the unit cube stands for: even in the one is drawn from the other. */
  fromUnit(unit: ArrayLike<number>): Float64Array;
  /** The history at a point of the box, [parameters.length]. */
  history(theta: ArrayLike<number>): History;
  /** A fast way to answer a table's requests anywhere in the box. */
  predictor(requests: ModelRequests, background: Background): Predictor;
}

type Ends = readonly [low: number, high: number];

/** Priors unless a table says otherwise. */
export const DEFAULT_PRIORS = {
  zRe: [5, 12],
  deltaZ: [0.1, 3],
  zEnd: [4, 9],
  alpha: [0.5, 12],
  zEarlyHighest: 30,
  /** The free form is fixed to x = 0 here … */
  freeLow: 4,
  /** … and to x = 1 here. */
  freeHigh: 20,
} as const satisfies Record<string, Ends | number>;

function parameter(name: string, [low, high]: Ends): FitParameter {
  if (!(low < high))
    throw new DomainError(name, `[${low}, ${high}]`, "a range with its ends in order");
  return { name, low, high };
}

function boxLogPrior(parameters: readonly FitParameter[]): number {
  return -parameters.reduce((sum, { low, high }) => sum + Math.log(high - low), 0);
}

function boxPoint(parameters: readonly FitParameter[], unit: ArrayLike<number>): Float64Array {
  return Float64Array.from(parameters, ({ low, high }, d) => low + unit[d]! * (high - low));
}

function boxWords(parameters: readonly FitParameter[]): string {
  return `Flat in ${parameters.map(({ name, low, high }) => `${name} from ${low} to ${high}`).join(", ")}.`;
}

/**
 * The tanh family over z_re and Δz, or over z_re alone with Δz fixed.
 *
 * @param options - Ends of the flat priors in redshift; a number for Δz fixes it. PHYSICS.md's unless given.
 * @throws {DomainError} If a prior's ends are out of order.
 */
export function tanhFamily({
  zRe = DEFAULT_PRIORS.zRe,
  deltaZ = DEFAULT_PRIORS.deltaZ,
}: { zRe?: Ends; deltaZ?: Ends | number } = {}): FitFamily {
  const fixed = typeof deltaZ === "number" ? deltaZ : null;
  const parameters = [parameter("zRe", zRe)];
  if (typeof deltaZ !== "number") parameters.push(parameter("deltaZ", deltaZ));
  const logPrior = boxLogPrior(parameters);
  const history = (theta: ArrayLike<number>): History =>
    tanhHistory({ zRe: theta[0]!, deltaZ: fixed ?? theta[1]! });
  return {
    kind: "tanh",
    parameters,
    prior: boxWords(parameters) + (fixed === null ? "" : ` deltaZ fixed to ${fixed}.`),
    logPrior: () => logPrior,
    fromUnit: (unit) => boxPoint(parameters, unit),
    history,
    predictor: (requests, background) =>
      fixed === null
        ? tanhPredictor(requests, background, parameters)
        : historyPredictor(requests, background, history),
  };
}

/**
 * The power-law family over z_end and α with z_early fixed, or free over [z_end + 1, highest], flat
 * there for each z_end.
 *
 * @param options - Ends of the flat priors; a number for z_early fixes it.
 * @throws {DomainError} If a prior's ends are out of order, or leave no room for z_early.
 */
export function powerLawFamily({
  zEnd = DEFAULT_PRIORS.zEnd,
  alpha = DEFAULT_PRIORS.alpha,
  zEarly = DEFAULT_Z_EARLY,
}: { zEnd?: Ends; alpha?: Ends; zEarly?: number | { highest: number } } = {}): FitFamily {
  const parameters = [parameter("zEnd", zEnd), parameter("alpha", alpha)];
  const fixed = typeof zEarly === "number" ? zEarly : null;
  const highest = typeof zEarly === "number" ? zEarly : zEarly.highest;
  if (!(highest > zEnd[1] + (fixed === null ? 1 : 0))) {
    throw new DomainError("zEarly", highest, `above the highest zEnd, ${zEnd[1]}`);
  }
  const box = boxLogPrior(parameters);
  if (fixed === null) parameters.push(parameter("zEarly", [zEnd[0] + 1, highest]));
  const history = (theta: ArrayLike<number>): History =>
    powerLawHistory({ zEnd: theta[0]!, alpha: theta[1]!, zEarly: fixed ?? theta[2]! });
  return {
    kind: "powerLaw",
    parameters,
    prior:
      boxWords(parameters.slice(0, 2)) +
      (fixed === null ? ` zEarly flat from zEnd + 1 to ${highest}.` : ` zEarly fixed to ${fixed}.`),
    logPrior: (theta) => {
      if (fixed !== null) return box;
      const room = highest - theta[0]! - 1;
      return theta[2]! >= theta[0]! + 1 ? box - Math.log(room) : -Infinity;
    },
    fromUnit: (unit) => {
      const theta = boxPoint(parameters, unit);
      if (fixed === null) theta[2] = highest - (1 - unit[2]!) * (highest - theta[0]! - 1);
      return theta;
    },
    history,
    predictor: (requests, background) =>
      fixed === null
        ? historyPredictor(requests, background, history)
        : powerLawPredictor(requests, background, parameters, fixed),
  };
}

/**
 * The monotone free form: x at ordered redshifts, joined by PCHIP, 0 at z = 4 and 1 at z = 20; flat
 * over ordered values.
 *
 * @param redshifts - Where x is free, ascending, between the fixed ends, [n], n from 1 to 12.
 * @throws {DomainError} If they are out of order or outside the fixed ends.
 */
export function freeFormFamily(
  redshifts: readonly number[],
  ends: Ends = [DEFAULT_PRIORS.freeLow, DEFAULT_PRIORS.freeHigh],
): FitFamily {
  const n = redshifts.length;
  if (n < 1 || n > 12) throw new DomainError("redshifts", `${n} values`, "1 to 12 values");
  const z = [ends[0], ...redshifts, ends[1]];
  z.forEach((value, i) => {
    if (i > 0 && !(value > z[i - 1]!))
      throw new DomainError("redshifts", value, `above ${z[i - 1]}`);
  });
  let logOrders = 0;
  for (let i = 2; i <= n; i++) logOrders += Math.log(i);
  const history = (theta: ArrayLike<number>): History =>
    tabulatedHistory(z, [0, ...Array.from(theta), 1]);
  return {
    kind: "freeForm",
    parameters: redshifts.map((value) => ({ name: `x(${value})`, low: 0, high: 1 })),
    prior: `Flat over ordered x at z = ${redshifts.join(", ")}; x = 0 at ${ends[0]} and 1 at ${ends[1]}.`,
    logPrior: (theta) => {
      for (let i = 1; i < n; i++) if (theta[i]! < theta[i - 1]!) return -Infinity;
      return logOrders;
    },
    // Ordered values are even ones put in order.
    fromUnit: (unit) => Float64Array.from(unit).sort(),
    history,
    predictor: (requests, background) => freeFormPredictor(requests, background, z),
  };
}
