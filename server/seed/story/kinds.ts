import { emptyFields, type ConstraintFields } from "~shared/statement/fields";

import type { PaperName } from "../papers";
import type { PersonName } from "../people";

/** How far a record has come by the end of the story. */
export type Fate =
  | "draft"
  | "submitted"
  | "claimed"
  | "returned"
  | "approved"
  /** Returned once, corrected and approved as its second revision. */
  | "approvedAfterReturn"
  /** The editor's first reading was the wrong one and was corrected. */
  | "approvedAfterCorrection"
  /** Approved and changed later: the second revision is approved, too. */
  | "approvedTwice"
  /** Approved; a change of it waits for its reading. */
  | "approvedAndChanging"
  /** A draft that was given up. */
  | "discarded"
  /** Submitted, and taken back before an editor claimed it. */
  | "takenBack";

export interface StoryRecord {
  /** By which other records name it, as "@name" in their lists of records. */
  name?: string;
  paper: PaperName;
  by: PersonName;
  reader: PersonName;
  /** Day of the first draft; what follows comes some days later. */
  from: string;
  fate: Fate;
  fields: Partial<ConstraintFields>;
  /** What the contributor typed wrongly at first, where the fate has an earlier revision. */
  slip?: Partial<ConstraintFields>;
  /** The field of the slip, and what the editor says there. */
  comment?: { field: string; text: string };
  /** Answers to what must be answered, by the beginning of the finding's code. */
  answers?: Record<string, string>;
  /** What a maintainer records of it later. */
  notice?: {
    kind: "erratum" | "superseded" | "withdrawn";
    /** Name of the record that takes its place. */
    replacedBy?: string;
    from: string;
    reason: string;
  };
}

export type Statement = Partial<ConstraintFields>;

/** A volume-averaged neutral fraction, as most papers print it. */
export const FRACTION: Statement = {
  quantity: "neutralFraction",
  species: "neutral",
  scale: "linear",
  weighting: "volume",
};

/** All of a content, from what is special about it. */
export function contentOf(fields: Statement): ConstraintFields {
  return { ...emptyFields(), dataKnown: true, versionRead: "published", ...fields };
}

/** Damping wing of a quasar. */
export const quasar = (fields: Statement): Statement => ({
  ...FRACTION,
  zRole: "point",
  kind: "twoSided",
  level: "oneSigma",
  estimator: "median",
  methodTags: ["quasarDampingWing"],
  modelTags: ["patchy simulation, 400 sightlines"],
  priorForm: "flat",
  priorVariable: "neutral fraction",
  priorRange: "0 to 1",
  cosmicVariance: "included",
  ...fields,
});

/** Limit from dark pixels of the forest. */
export const pixels = (fields: Statement): Statement => ({
  ...FRACTION,
  zRole: "binAverage",
  kind: "upperLimit",
  level: "oneSigma",
  methodTags: ["darkPixels"],
  cosmicVariance: "included",
  dataUsed: ["Candlewick forest sample"],
  ...fields,
});

/** Luminosity function of emitters in a narrow band. */
export const counts = (fields: Statement): Statement => ({
  ...FRACTION,
  weighting: "unknown",
  zRole: "binAverage",
  kind: "twoSided",
  level: "oneSigma",
  estimator: "bestFit",
  methodTags: ["emitterLuminosityFunction"],
  cosmicVariance: "excluded",
  dataUsed: ["Ninefold narrow-band survey"],
  ...fields,
});
