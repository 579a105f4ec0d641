/** What an editor confirms beyond the compared numbers before a submission can be approved. */
import type { ConstraintFields, StatementKind } from "~shared/statement/fields";

export interface ChecklistPoint {
  /** Stable word; kept with the reading. */
  code: string;
  /** A sentence that the editor says by ticking it. */
  text: string;
}

const point = (code: string, text: string): ChecklistPoint => ({ code, text });

const PLACE = point(
  "place",
  "The statement stands at the place given, in the version that is named.",
);
const WORDS = point("printedText", "The printed text is the paper's own, word by word.");
const DATA = point("data", "Every sightline, field and sample that the paper used is named.");
const DEPENDENCE = point(
  "dependence",
  "Prior, models and everything that the result is conditioned on are named.",
);
const SIDES = point(
  "sides",
  "Plus is the upper error and minus the lower one, also where the paper prints them in a row.",
);
const DIRECTION = point("direction", "The limit bounds from the side that the paper says.");
const LEVEL = point(
  "level",
  "The level is the paper's own word for this number, not that of another one near it.",
);
const LIMIT_LEVEL = point(
  "level",
  "The level belongs to this limit, and one-sided or two-sided is as the paper says.",
);
const ENDS = point(
  "ends",
  "Both ends of the band belong to one level, and the paper names no best value in it.",
);
const COLUMNS = point(
  "columns",
  "The columns are what the file's head says: values in order, density or ln L as declared.",
);
const NO_NUMBER = point(
  "noNumber",
  "The paper really gives no number here that could be entered as a limit.",
);

const BY_KIND: Record<StatementKind, readonly ChecklistPoint[]> = {
  twoSided: [SIDES, LEVEL],
  upperLimit: [DIRECTION, LIMIT_LEVEL],
  lowerLimit: [DIRECTION, LIMIT_LEVEL],
  band: [ENDS, LEVEL],
  curve: [COLUMNS],
  qualitative: [NO_NUMBER],
};

/** The points for a statement of this kind, in the order in which they are shown. */
export function checklistFor(fields: Pick<ConstraintFields, "kind">): readonly ChecklistPoint[] {
  return [PLACE, ...(fields.kind === null ? [] : BY_KIND[fields.kind]), WORDS, DATA, DEPENDENCE];
}
