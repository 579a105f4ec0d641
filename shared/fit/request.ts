/** What can be asked of the engine about a table, and what comes back: plain data on both sides. */
import type { BackgroundParameters } from "~shared/cosmology/background";
import type { MethodFamily } from "~shared/methods/vocabulary";
import type { TableLikelihood } from "~shared/table/tableLikelihood";

export type Ends = readonly [low: number, high: number];

/** A family of histories with the priors of this fit; all flat. */
export type FamilyChoice =
  | { readonly kind: "tanh"; readonly zRe: Ends; readonly deltaZ: Ends | number }
  | {
      readonly kind: "powerLaw";
      readonly zEnd: Ends;
      readonly alpha: Ends;
      /** Fixed, or free over [z_end + 1, highest]. */
      readonly zEarly: number | { readonly highest: number };
    }
  | { readonly kind: "freeForm"; readonly redshifts: readonly number[]; readonly ends: Ends };

/** How a posterior of more than two parameters is sampled. */
export interface SamplerChoice {
  readonly seed: number;
  readonly walkers: number;
  readonly steps: number;
}

/** One table under one family. */
export interface FitRequest {
  readonly table: TableLikelihood;
  readonly family: FamilyChoice;
  /** Used beyond two parameters, and for fewer when asked for. */
  readonly sampler: SamplerChoice;
  readonly method: "grid" | "sampler";
  readonly cosmology: BackgroundParameters;
}

/** Mean, standard deviation, median and equal-tailed intervals of one quantity. */
export interface QuantitySummary {
  /** A parameter's name, or one of DERIVED_NAMES. */
  readonly name: string;
  readonly mean: number;
  readonly sd: number;
  readonly median: number;
  readonly interval68: Ends;
  readonly interval95: Ends;
}

/** A density at even places, for drawing; its largest value is 1. [n] each. */
export interface DensityCurve {
  readonly name: string;
  readonly x: readonly number[];
  readonly density: readonly number[];
}

/** Two quantities together, for the corner plot. */
export interface JointDensity {
  readonly x: string;
  readonly y: string;
  readonly xs: readonly number[];
  readonly ys: readonly number[];
  /** [ys, xs], row by row; its largest value is 1. */
  readonly density: readonly number[];
  /** Densities that hold 68.27 and 95.45 % of the probability above them. */
  readonly level68: number;
  readonly level95: number;
}

/** Quantiles of x(z) under the posterior, [n] each. */
export interface HistoryBand {
  readonly z: readonly number[];
  readonly low95: readonly number[];
  readonly low68: readonly number[];
  readonly median: readonly number[];
  readonly high68: readonly number[];
  readonly high95: readonly number[];
}

export interface FittedRow {
  /** A row's number, or the id of a mixture or set. */
  readonly term: string;
  readonly members: readonly string[];
  readonly minus2LnL: number;
  /** Share of the total −2 ln L; 0 where the total is 0. */
  readonly share: number;
  /** Signed root of −2 ln L, above zero where the history lies above the row's peak; null for a mixture or set. */
  readonly pull: number | null;
  /** The history's value of the row's quantity, for each member; null for none. */
  readonly models: readonly (number | null)[];
}

export interface Convergence {
  readonly name: string;
  readonly autocorrelationTime: number;
  readonly effectiveSize: number;
  readonly rHat: number;
}

export interface FitResult {
  /** What the fit was, in words: family, priors, method. */
  readonly prior: string;
  readonly parameterNames: readonly string[];
  readonly method: "grid" | "sampler";
  readonly best: {
    readonly parameters: readonly number[];
    readonly minus2LnL: number;
    readonly atEdge: readonly string[];
    readonly degenerate: boolean;
    /** τ, τ(15, 30), midpoint, duration, laid out as DERIVED_NAMES; null for none. */
    readonly derived: readonly (number | null)[];
    /** Of the best history, over the redshifts of `band`. */
    readonly x: readonly number[];
  };
  readonly rows: readonly FittedRow[];
  /** Parameters, then derived quantities; derived ones that the posterior does not hold are left out. */
  readonly quantities: readonly QuantitySummary[];
  readonly densities: readonly DensityCurve[];
  readonly joint: readonly JointDensity[];
  readonly band: HistoryBand;
  /** What the prior alone implies: the same quantities, without a single row. */
  readonly priorQuantities: readonly QuantitySummary[];
  readonly priorDensities: readonly DensityCurve[];
  /** ln evidence where the grid, or bridge sampling over the chains, gives it. */
  readonly logEvidence: { readonly value: number; readonly error: number } | null;
  /** Of a sampled posterior; empty for a grid. */
  readonly convergence: readonly Convergence[];
  readonly grid: { readonly points: number; readonly lastChange: number } | null;
  readonly sound: boolean;
  /** Plain sentences: not converged, at an edge, degenerate, limits take part, no late tail in a tanh. */
  readonly warnings: readonly string[];
}

// ---- What decides the answer

/** A fit of a part of the table. */
export interface PartFit {
  /** A method family, or "all". */
  readonly part: MethodFamily | "all";
  readonly rows: readonly string[];
  readonly quantities: readonly QuantitySummary[];
  readonly densities: readonly DensityCurve[];
  readonly logEvidence: number | null;
  /** Whether it carries a verdict. */
  readonly sound: boolean;
}

export interface FamilyTension {
  readonly a: MethodFamily;
  readonly b: MethodFamily;
  /** (μ_A − μ_B)/√(σ_A² + σ_B²) of each parameter and derived quantity. */
  readonly quantities: readonly { readonly name: string; readonly tension: number }[];
  /** ln Z_AB − ln Z_A − ln Z_B; null where an evidence could not be found, or no history is allowed by both. */
  readonly logEvidenceRatio: number | null;
  readonly logEvidenceError: number;
}

/** Rows that are in no part, or a part that could not be fitted. */
export interface LeftOutPart {
  /** Null for rows that belong to no one family. */
  readonly part: MethodFamily | null;
  readonly rows: readonly string[];
  /** Why, in a sentence. */
  readonly reason: string;
}

export interface FamiliesResult {
  readonly kind: "families";
  /** In the order of the vocabulary's families, "all" last. */
  readonly parts: readonly PartFit[];
  readonly leftOut: readonly LeftOutPart[];
  readonly tensions: readonly FamilyTension[];
}

export interface LeftOutTerm {
  readonly term: string;
  readonly members: readonly string[];
  readonly minus2LnL: number;
  readonly pull: number | null;
  /** Mean without the term minus mean with it, and the same in widths of the full posterior. */
  readonly midpointShift: number;
  readonly midpointShiftInWidths: number;
  readonly tauShift: number;
  readonly tauShiftInWidths: number;
}

export interface LeaveOneOutResult {
  readonly kind: "leaveOneOut";
  /** The largest shift in widths first. */
  readonly terms: readonly LeftOutTerm[];
}

/** A choice of the table, and one other way to make it. */
export interface OtherChoice {
  /** Id of the decision, or of the row whose form is changed. */
  readonly about: string;
  readonly rows: readonly string[];
  /** What is changed, in words: "FL-0007: two-piece instead of quantile-matched". */
  readonly words: string;
  readonly table: TableLikelihood;
}

export interface ChangedFit {
  readonly about: string;
  readonly rows: readonly string[];
  readonly words: string;
  readonly midpoint: number | null;
  readonly tau: number | null;
  readonly midpointShift: number;
  readonly midpointShiftInWidths: number;
  readonly tauShift: number;
  readonly tauShiftInWidths: number;
  /** Why this could not be fitted, in a sentence; the shifts are then 0 and the change stands last. */
  readonly failed: string | null;
}

export interface ChoicesResult {
  readonly kind: "choices";
  /** Means of the table as it stands. */
  readonly midpoint: number | null;
  readonly tau: number | null;
  /** The largest shift in widths first. */
  readonly changes: readonly ChangedFit[];
}

/** One step on the way from one table to another: a row that came, went or changed. */
export interface AttributedChange {
  /** A row's number, or what a mixture or set is named by. */
  readonly number: string;
  readonly words: string;
  readonly midpointShift: number;
  readonly tauShift: number;
  /** Why this step could not be fitted, in a sentence; its shifts are then 0. */
  readonly failed: string | null;
}

export interface WhatChangedResult {
  readonly kind: "whatChanged";
  readonly midpoint: readonly [before: number | null, after: number | null];
  readonly tau: readonly [before: number | null, after: number | null];
  /** Each row's shift when only it changes, the largest first. */
  readonly rows: readonly AttributedChange[];
  /** What the single shifts do not add up to. */
  readonly midpointTogether: number;
  readonly tauTogether: number;
}

/** What a worker is asked. */
export type EngineJob =
  | { readonly kind: "fit"; readonly request: FitRequest }
  | { readonly kind: "families"; readonly request: FitRequest }
  | { readonly kind: "leaveOneOut"; readonly request: FitRequest }
  | {
      readonly kind: "choices";
      readonly request: FitRequest;
      readonly others: readonly OtherChoice[];
    }
  | {
      readonly kind: "whatChanged";
      readonly request: FitRequest;
      /** The table before; the request holds the one after. */
      readonly before: TableLikelihood;
    };

export type EngineResult =
  | ({ readonly kind: "fit" } & FitResult)
  | FamiliesResult
  | LeaveOneOutResult
  | ChoicesResult
  | WhatChangedResult;
