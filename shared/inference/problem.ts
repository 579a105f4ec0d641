import type { Background } from "~shared/cosmology/background";
import type { FitFamily } from "~shared/inference/families";
import type { Predictor } from "~shared/inference/predictor";
import type { CompiledTable, ModelRequests } from "~shared/likelihood/compile";

/** Derived quantities of every fit, in this order. */
export const DERIVED_NAMES = ["tau", "tauEarly", "midpoint", "duration"] as const;
/** One of DERIVED_NAMES. */
export type DerivedName = (typeof DERIVED_NAMES)[number];

/** τ(0, 50), τ(15, 30), z(x = 0.5), z(x = 0.75) − z(x = 0.25), laid out as DERIVED_NAMES. */
const DERIVED_REQUESTS: ModelRequests = {
  points: new Float64Array(0),
  binLows: new Float64Array(0),
  binHighs: new Float64Array(0),
  depthLows: Float64Array.of(0, 15),
  depthHighs: Float64Array.of(50, 30),
  fractions: Float64Array.of(0.5),
  durations: [{ f1: 0.75, f2: 0.25, myr: false }],
  size: DERIVED_NAMES.length,
};

/** A compiled table held against one family: a function of a few parameters. */
export class FitProblem {
  readonly dimension: number;
  readonly names: readonly string[];
  readonly lows: Float64Array;
  readonly highs: Float64Array;
  private readonly values: Float64Array;
  private readonly predict: Predictor;
  private derive: Predictor | null = null;

  /** Builds what the family needs to answer the table's requests quickly; milliseconds. */
  constructor(
    readonly table: CompiledTable,
    readonly family: FitFamily,
    readonly background: Background,
  ) {
    this.dimension = family.parameters.length;
    this.names = family.parameters.map(({ name }) => name);
    this.lows = Float64Array.from(family.parameters, ({ low }) => low);
    this.highs = Float64Array.from(family.parameters, ({ high }) => high);
    this.values = new Float64Array(table.requests.size);
    this.predict = family.predictor(table.requests, background);
  }

  /** −2 ln L at theta, relative to the peaks of the terms; theta must lie in the box. */
  minus2LnL(theta: ArrayLike<number>): number {
    this.predict(theta, this.values);
    return this.table.evaluate(this.values);
  }

  /**
   * −2 ln L along lines of a two-parameter grid, without a call for each point.
   *
   * @param seconds - Values of the second parameter inside its prior, ascending, [n].
   * @returns Fills out, [n], for one value of the first parameter.
   */
  alongSecond(seconds: Float64Array): (first: number, out: Float64Array) => void {
    const n = seconds.length;
    const line = this.predict.along?.(seconds);
    if (!line) {
      const theta = new Float64Array(2);
      return (first, out) => {
        theta[0] = first;
        for (let j = 0; j < n; j++) {
          theta[1] = seconds[j]!;
          out[j] = this.minus2LnL(theta);
        }
      };
    }
    const values = new Float64Array(this.table.requests.size * n);
    return (first, out) => {
      line(first, values);
      this.table.evaluateLine(values, n, out);
    };
  }

  /** ln of likelihood times normalized prior; −Infinity outside the box. */
  logPosterior(theta: ArrayLike<number>): number {
    for (let i = 0; i < this.dimension; i++) {
      if (!(theta[i]! >= this.lows[i]! && theta[i]! <= this.highs[i]!)) return -Infinity;
    }
    const prior = this.family.logPrior(theta);
    return prior === -Infinity ? prior : prior - 0.5 * this.minus2LnL(theta);
  }

  /** −2 ln L of each term of the table at theta, in the order of table.terms; [terms]. */
  termValues(theta: ArrayLike<number>): Float64Array {
    this.predict(theta, this.values);
    const out = new Float64Array(this.table.terms.length);
    this.table.termValues(this.values, out);
    return out;
  }

  /** The model value of each row at theta, in the order of table.rowIds; NaN for none; [rows]. */
  modelValues(theta: ArrayLike<number>): Float64Array {
    this.predict(theta, this.values);
    return this.table.modelValues(this.values);
  }

  /** Fills `out` with the derived quantities, in the order of DERIVED_NAMES; NaN for none; [4]. */
  derived(theta: ArrayLike<number>, out: Float64Array): void {
    this.derive ??= this.family.predictor(DERIVED_REQUESTS, this.background);
    this.derive(theta, out);
  }
}
