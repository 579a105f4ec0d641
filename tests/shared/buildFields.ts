import { emptyFields } from "~shared/statement/fields";
import type { ConstraintFields } from "~shared/statement/fields";

/** A complete two-sided neutral fraction that no rule has anything to say about; all invented. */
export function buildFields(changes: Partial<ConstraintFields> = {}): ConstraintFields {
  return {
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    z: "7.12",
    zRole: "point",
    kind: "twoSided",
    value: "0.42",
    plus: "0.19",
    minus: "0.17",
    level: "percent68",
    estimator: "median",
    printedText: "x_HI = 0.42 +0.19 -0.17 (68%)",
    methodTags: ["galaxyDampingWing"],
    dataKnown: true,
    dataUsed: ["Kestrel spectroscopic survey"],
    versionRead: "published",
    place: "Table 4, row 1",
    ...changes,
  };
}
