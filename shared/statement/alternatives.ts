/** Several answers of one paper to one question: one of them may be the authors' own choice. */
import type { ConstraintFields } from "./fields";
import { error, note, type Finding } from "./finding";
import type { Neighbour } from "./registryRules";

/** A group's label as labels are compared: "Model A" is "model a". */
function groupOf(fields: ConstraintFields): string | null {
  return fields.alternativesGroup?.trim().toLowerCase() || null;
}

/** A preferred one without a group, a second preferred one in a group, a group of one. */
export function alternativesFindings(
  fields: ConstraintFields,
  neighbours: readonly Neighbour[],
): Finding[] {
  const group = groupOf(fields);
  if (group === null) {
    return fields.alternativesPreferred === true
      ? [
          error(
            "preferredWithoutGroup",
            ["alternativesGroup", "alternativesPreferred"],
            "Preferred among which alternatives? Give the group its label, the same in each of them.",
          ),
        ]
      : [];
  }
  const others = neighbours.filter(
    (neighbour) => neighbour.sameCitation && groupOf(neighbour.fields) === group,
  );
  const preferred = others.find((other) => other.fields.alternativesPreferred === true);
  if (preferred && fields.alternativesPreferred === true) {
    return [
      error(
        "preferredTwice",
        ["alternativesPreferred"],
        `${preferred.number} is the preferred answer of this group already. The authors prefer one at most: look which of them it is.`,
      ),
    ];
  }
  return others.length > 0
    ? []
    : [
        note(
          "groupOfOne",
          ["alternativesGroup"],
          "No other approved record of this paper is in this group yet. Use the same label in each of them.",
        ),
      ];
}
