import { apart, type Task } from "~shared/inference";
import { FAMILY_NAMES, METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";
import { type TableLikelihood, withRows } from "~shared/table/tableLikelihood";

import { densityCurve, picturesOf } from "./densities";
import { FitError } from "./fitError";
import { type FitPosterior, fitPosterior, type FitSetting, quantitiesOf } from "./posterior";
import type { FamiliesResult, FamilyTension, LeftOutPart, PartFit } from "./request";
import { part } from "./shifts";

interface FittedPart {
  readonly part: MethodFamily | "all";
  readonly table: TableLikelihood;
  readonly posterior: FitPosterior;
}

/** Fits each method family of a table by itself and all together, and says how far families pull apart. */
export function* fitFamilies(setting: FitSetting): Task<FamiliesResult> {
  const { table } = setting.request;
  const leftOut: LeftOutPart[] = notOfOneFamily(table);
  const wanted = METHOD_FAMILIES.map((family) => ({
    family,
    table: withRows(table, ({ families }) => families.length === 1 && families[0] === family),
  })).filter((one) => one.table.rows.length > 0);
  const pairs = wanted.flatMap((a, i) => wanted.slice(i + 1).map((b) => [a, b] as const));
  const steps = wanted.length + 1 + pairs.length;

  const fitted: FittedPart[] = [];
  for (const [index, { family, table: own }] of wanted.entries()) {
    const posterior = yield* attempt(setting, own, FAMILY_NAMES[family], index, steps);
    if ("failed" in posterior) {
      const rows = own.rows.map(({ number }) => number);
      leftOut.push({ part: family, rows, reason: posterior.failed });
    } else fitted.push({ part: family, table: own, posterior });
  }
  const all = yield* part(fitPosterior(setting, table), "all rows", wanted.length, steps);

  const tensions: FamilyTension[] = [];
  for (const [index, [a, b]] of pairs.entries()) {
    const ofA = fitted.find((one) => one.part === a.family);
    const ofB = fitted.find((one) => one.part === b.family);
    if (!ofA || !ofB) continue;
    const both = withRows(
      table,
      ({ families }) =>
        families.length === 1 && (families[0] === a.family || families[0] === b.family),
    );
    const stage = `${FAMILY_NAMES[a.family]} and ${FAMILY_NAMES[b.family]}`;
    // Two families that are the whole table are fitted already.
    const together =
      both.rows.length === table.rows.length
        ? all
        : yield* attempt(setting, both, stage, wanted.length + 1 + index, steps);
    tensions.push({
      a: a.family,
      b: b.family,
      quantities: apartIn(ofA.posterior, ofB.posterior),
      ...ratio(ofA.posterior, ofB.posterior, "failed" in together ? null : together),
    });
  }
  return {
    kind: "families",
    parts: [...fitted, { part: "all" as const, table, posterior: all }].map(partFit),
    leftOut,
    tensions,
  };
}

function notOfOneFamily({ rows }: TableLikelihood): LeftOutPart[] {
  const several = rows.filter(({ families }) => families.length > 1);
  const none = rows.filter(({ families }) => families.length === 0);
  const named = (some: TableLikelihood["rows"]): string[] => some.map(({ number }) => number);
  return [
    ...(several.length === 0
      ? []
      : [
          {
            part: null,
            rows: named(several),
            reason: "These rows use methods of more than one family: they take part in “all” only.",
          },
        ]),
    ...(none.length === 0
      ? []
      : [
          {
            part: null,
            rows: named(none),
            reason: "These rows name no method: they take part in “all” only.",
          },
        ]),
  ];
}

function* attempt(
  setting: FitSetting,
  table: TableLikelihood,
  stage: string,
  index: number,
  count: number,
): Task<FitPosterior | { failed: string }> {
  try {
    return yield* part(fitPosterior(setting, table), stage, index, count);
  } catch (error) {
    if (error instanceof FitError) return { failed: error.message };
    throw error;
  }
}

function partFit({ part: name, table, posterior }: FittedPart): PartFit {
  const cloud = posterior.cloud();
  const quantities = quantitiesOf(posterior);
  return {
    part: name,
    rows: table.rows.map(({ number }) => number),
    quantities,
    densities: picturesOf(posterior.problem, cloud, quantities).map((picture) =>
      densityCurve(cloud, picture),
    ),
    logEvidence: posterior.logEvidence?.value ?? null,
    sound: posterior.sound,
  };
}

function apartIn(a: FitPosterior, b: FitPosterior): FamilyTension["quantities"] {
  const others = new Map(quantitiesOf(b).map((summary) => [summary.name, summary]));
  return quantitiesOf(a).flatMap((summary) => {
    const other = others.get(summary.name);
    const tension = other ? apart(summary, other) : Number.NaN;
    return Number.isFinite(tension) ? [{ name: summary.name, tension }] : [];
  });
}

function ratio(
  a: FitPosterior,
  b: FitPosterior,
  both: FitPosterior | null,
): Pick<FamilyTension, "logEvidenceRatio" | "logEvidenceError"> {
  if (!a.logEvidence || !b.logEvidence || !both?.logEvidence) {
    return { logEvidenceRatio: null, logEvidenceError: 0 };
  }
  return {
    logEvidenceRatio: both.logEvidence.value - a.logEvidence.value - b.logEvidence.value,
    logEvidenceError: Math.hypot(a.logEvidence.error, b.logEvidence.error, both.logEvidence.error),
  };
}
