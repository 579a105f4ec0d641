/** What a fitting table must settle before it is complete, what is proposed, and what was taken. */
import type { RowOptions } from "~shared/likelihood";
import type { RecordState } from "~shared/review/states";
import type { ConditionKind, ConstraintFields } from "~shared/statement/fields";

import type { Overlap } from "./overlapClusters";

/** An approved record that the table's filter matches. */
export interface TableRecord {
  /** FL-0042 */
  readonly number: string;
  readonly fields: ConstraintFields;
  /** What tells papers apart: an id or a key. */
  readonly citation: string;
  /** Tarrowin et al. 2025 */
  readonly shortName: string;
  readonly year: number | null;
  readonly state: RecordState;
  /** Number of the record that took its place, if one did. */
  readonly supersededBy: string | null;
}

/** Something a record is conditioned on, directly or through other records. */
export interface ConditionPath {
  /** Records on the way, the record itself first. */
  readonly through: readonly string[];
  /** The kind of data or the record's number at the end of the way. */
  readonly on: ConditionKind | string;
}

/** An approved correlated set. */
export interface TableSet {
  readonly id: string;
  readonly label: string;
  /** Numbers of its records, [n]. */
  readonly members: readonly string[];
  /** Correlation matrix as used, [n, n]. */
  readonly rho: readonly (readonly number[])[];
}

/** What the registry knows about the records beside their own content. */
export interface TableSurroundings {
  /** Pairs of records that share data directly; unknown data are no overlap. */
  readonly overlaps: readonly Overlap[];
  readonly conditions: ReadonlyMap<string, readonly ConditionPath[]>;
  readonly sets: readonly TableSet[];
}

export const DECISION_KINDS = [
  "superseded",
  "preprintOnly",
  "readOffFigure",
  "levelNotStated",
  "massWeighted",
  "limitForm",
  "alternatives",
  "jointInference",
  "overlap",
  "conditioned",
  "correlatedSet",
] as const;
export type DecisionKind = (typeof DECISION_KINDS)[number];

export const DECISION_WORDS: Record<DecisionKind, string> = {
  superseded: "Superseded record",
  preprintOnly: "Preprints only",
  readOffFigure: "Read off a figure",
  levelNotStated: "Level not stated",
  massWeighted: "Mass-weighted value",
  limitForm: "Form of a limit",
  alternatives: "Alternatives",
  jointInference: "Joint inference",
  overlap: "Overlapping data",
  conditioned: "Conditioned on the table's own data",
  correlatedSet: "Part of a correlated set",
};

export interface DecisionOption {
  /** "keep:FL-0003+FL-0007", "mixture", "level:0.6827" */
  readonly code: string;
  readonly words: string;
  /** Whether it goes against a rule of the registry, so that even a careful person has to say why. */
  readonly override: boolean;
}

/** A choice as it is kept and exported. */
export interface TakenDecision {
  /** The decision it settles; another one, as soon as the rows concerned are others. */
  readonly id: string;
  readonly option: string;
  /** "default" for the proposal as it stood. */
  readonly by: "default" | "person";
  readonly reason: string | null;
}

export interface Decision {
  /** Kind and rows: "overlap:FL-0003+FL-0007". */
  readonly id: string;
  readonly kind: DecisionKind;
  /** Records concerned, by number, ascending. */
  readonly rows: readonly string[];
  /** What is the matter, in sentences. */
  readonly words: string;
  readonly options: readonly DecisionOption[];
  /** Code of the option proposed, and why. */
  readonly proposed: string;
  readonly because: string;
  /** Null while it is open. */
  readonly taken: TakenDecision | null;
}

/** What a person chose about a table. */
export interface TableChoices {
  readonly decisions: readonly TakenDecision[];
  /** Rows taken out by hand, with the reason. */
  readonly out: readonly { readonly number: string; readonly reason: string }[];
  /** Likelihood forms other than the default, with the reason. */
  readonly forms: readonly FormChoice[];
}

export interface FormChoice {
  readonly number: string;
  readonly options: Pick<RowOptions, "form" | "smoothing" | "redshift">;
  readonly reason: string;
}

export const NO_CHOICES: TableChoices = { decisions: [], out: [], forms: [] };

/** Longest reason kept. */
export const REASON_LONGEST = 500;

/** Whether a stored choice settles this decision: its option is there, and it says why where it must. */
export function settles(
  decision: Pick<Decision, "id" | "options" | "proposed">,
  taken: TakenDecision,
): boolean {
  const option = decision.options.find(({ code }) => code === taken.option);
  if (taken.id !== decision.id || !option) return false;
  if (taken.by === "default") return option.code === decision.proposed && !option.override;
  const reason = taken.reason?.trim() ?? "";
  const needsReason = option.override || option.code !== decision.proposed;
  return reason.length <= REASON_LONGEST && (!needsReason || reason !== "");
}

/** The choice that takes a decision's proposal. */
export function takeProposal(decision: Pick<Decision, "id" | "proposed">): TakenDecision {
  return { id: decision.id, option: decision.proposed, by: "default", reason: null };
}
