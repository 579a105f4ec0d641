/** What an editor confirms beyond the compared numbers before a submission can be approved. */
import type { ConstraintFields } from "~shared/statement/fields";
import { isOpen } from "~shared/statement/relevant";

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
const DATA_UNKNOWN = point("data", "The paper really doesn't say which data it used.");
const DEPENDENCE = point(
  "dependence",
  "Prior, models and everything that the result is conditioned on are named.",
);
const FIGURE = point(
  "figure",
  "The paper prints no number for it, and the digitizing error fits the figure's axes and marks.",
);

// ---- What is stated about

const FRACTION = point(
  "fraction",
  "The paper's fraction is the one entered, neutral or ionized, and weighted as it says.",
);
const ELECTRONS = point(
  "fraction",
  "The paper counts electrons per hydrogen, with or without those of helium as entered.",
);
const LOGARITHM = point("scale", "Number and errors are of log10, as the paper gives them.");
const REDSHIFT = point(
  "redshift",
  "The redshift is that of this number, and stands for what the paper says: a point, a bin, an uncertain one or a sample's range.",
);
const DEPTH = point(
  "assumed",
  "History family, helium and the redshift it is taken from are those of the paper.",
);
const DEPTH_RANGE = point(
  "assumed",
  "Both ends of the range, the history family and helium are those of the paper.",
);
const AT_FRACTION = point(
  "fraction",
  "The fraction at which the redshift holds is the one entered, neutral or ionized.",
);
const DURATION = point(
  "fraction",
  "Both fractions, which of them comes first, and the unit are the paper's.",
);

// ---- What is stated

const SIDES = point(
  "sides",
  "Plus is the upper error and minus the lower one, also where the paper prints them in a row.",
);
const LEVEL = point(
  "level",
  "The level is the paper's own word for this number, not that of another one near it.",
);
const NO_LEVEL = point("level", "The paper names no level for this number, here or elsewhere.");
const DIRECTION = point("direction", "The limit bounds from the side that the paper says.");
const LIMIT_LEVEL = point(
  "level",
  "The level belongs to this limit, and one-sided or two-sided is as the paper says.",
);
const BASE = point(
  "base",
  "The base is the number that the paper adds its sigma to, and the sigma is not included in it.",
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

function aboutQuantity(fields: ConstraintFields): ChecklistPoint[] {
  switch (fields.quantity) {
    case null:
      return [];
    case "neutralFraction":
      return [
        fields.species === "electron" ? ELECTRONS : FRACTION,
        ...(fields.scale === "log10" ? [LOGARITHM] : []),
        REDSHIFT,
      ];
    case "opticalDepth":
      return [DEPTH];
    case "opticalDepthRange":
      return [DEPTH_RANGE];
    case "redshiftAtFraction":
      return [AT_FRACTION];
    case "duration":
      return [DURATION];
  }
}

function aboutStatement(fields: ConstraintFields): ChecklistPoint[] {
  const level = (usual: ChecklistPoint) => (fields.level === "notStated" ? NO_LEVEL : usual);
  switch (fields.kind) {
    case null:
      return [];
    case "twoSided":
      return [SIDES, level(LEVEL)];
    case "upperLimit":
    case "lowerLimit":
      return [DIRECTION, ...(isOpen(fields, "limitBase") ? [] : [BASE]), level(LIMIT_LEVEL)];
    case "band":
      return [ENDS, level(LEVEL)];
    case "curve":
      return isOpen(fields, "value") ? [COLUMNS] : [COLUMNS, SIDES, level(LEVEL)];
    case "qualitative":
      return [NO_NUMBER];
  }
}

/** The points for a statement of this quantity and kind, in the order in which they are shown. */
export function checklistFor(fields: ConstraintFields): readonly ChecklistPoint[] {
  return [
    PLACE,
    ...aboutQuantity(fields),
    ...aboutStatement(fields),
    ...(fields.readOffFigure === true ? [FIGURE] : []),
    WORDS,
    fields.dataKnown === false ? DATA_UNKNOWN : DATA,
    DEPENDENCE,
  ];
}
