/**
 * What one move of a slider on History computes, to be timed inside a browser: the page's own code for
 * models, readouts and scores, with two histories and 60 invented rows. Nothing is remembered between
 * moves, so that both histories cost in full.
 */
import { historyOfModel, type Model, newModel } from "@/features/history/models";
import { readoutOf } from "@/features/history/readouts";
import { decideByDefault, scoreHistory } from "@/features/history/scoring";
import { background } from "~shared/cosmology/background";
import { asUsed } from "~shared/statement/asUsed";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

const ROWS = 60;
/** Places of a drawn curve, as src/charts draws it. */
const PLACES = 241;

export interface Moves {
  /** Milliseconds of each move; a browser's clock ticks coarsely. */
  ms: number[];
  /** Mean over all of them, which that does not touch. */
  mean: number;
  scored: number;
}

/** Row i of the table: every quantity, kind and redshift role has its turn. */
function fieldsOf(i: number): ConstraintFields {
  const z = 5.5 + (i % 30) * 0.12;
  const common: ConstraintFields = {
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    z: z.toFixed(2),
    zRole: "point",
    level: "percent68",
    estimator: i % 2 === 0 ? "median" : "mode",
    methodTags: ["galaxyDampingWing"],
    dataKnown: true,
    dataUsed: [`Invented field ${i}`],
  };
  const value = {
    ...common,
    kind: "twoSided",
    value: (0.1 + (i % 30) * 0.027).toFixed(2),
    plus: "0.12",
    minus: "0.09",
  } as const satisfies ConstraintFields;
  const bin = { zLow: (z - 0.3).toFixed(2), zHigh: (z + 0.3).toFixed(2) };
  switch (i % 10) {
    case 0:
      return { ...common, kind: "upperLimit", value: "0.45", level: "percent95" };
    case 1:
      return { ...common, kind: "lowerLimit", value: "0.20", level: "percent95" };
    case 2:
      return { ...value, ...bin, zRole: "binAverage" };
    case 3:
      return { ...value, ...bin, zRole: "uncertain" };
    case 4:
      return { ...common, kind: "band", bandLow: "0.10", bandHigh: "0.60" };
    case 5:
      return i < 30
        ? {
            ...value,
            quantity: "opticalDepth",
            z: null,
            value: "0.056",
            plus: "0.007",
            minus: "0.007",
          }
        : {
            ...value,
            quantity: "duration",
            z: null,
            value: "1.1",
            plus: "0.5",
            minus: "0.4",
            fractionFrom: "0.75",
            fractionTo: "0.25",
            durationUnit: "redshift",
          };
    default:
      return value;
  }
}

/**
 * Moves a slider `count` times and times each.
 *
 * @throws If the numbers of the moves are not numbers: then nothing was timed.
 */
export function moveSlider(count: number): Moves {
  const rows = Array.from({ length: ROWS }, (_, i) => {
    const fields = fieldsOf(i);
    return {
      number: `FL-${String(i + 1).padStart(4, "0")}`,
      quotable: "",
      citation: { key: `Invented${i}`, year: 2000 + (i % 25) },
      fields,
      family: "other",
      used: asUsed(fields),
      plane: null,
    };
  });
  const decided = decideByDefault(rows as unknown as Parameters<typeof decideByDefault>[0]);
  const cosmology = background();
  const zs = Float64Array.from({ length: PLACES }, (_, i) => 4 + (12 * i) / (PLACES - 1));
  let kept = 0;
  let scored = 0;

  const move = (i: number): void => {
    const shift = (i % 100) / 100;
    const models: Model[] = [
      { ...newModel("tanh", "a"), values: { zRe: 7 + shift, deltaZ: 0.4 + shift } },
      { ...newModel("powerLaw", "b"), values: { zEnd: 5.5 + shift, alpha: 6 + shift } },
    ];
    for (const model of models) {
      const history = historyOfModel(model);
      const { opticalDepth, duration, durationMyr } = readoutOf(history, cosmology);
      const score = scoreHistory(decided, history, cosmology);
      scored = score.scored;
      kept += opticalDepth + (duration ?? 0) + (durationMyr ?? 0) + Math.min(score.minus2LnL, 1e9);
      for (let j = 0; j < PLACES; j++) kept += history.x(zs[j]!);
    }
  };
  const ms: number[] = [];
  const begin = performance.now();
  for (let i = 0; i < count; i++) {
    const start = performance.now();
    move(i);
    ms.push(performance.now() - start);
  }
  const mean = (performance.now() - begin) / count;
  if (!Number.isFinite(kept)) throw new Error("a move computed nothing");
  return { ms, mean, scored };
}
