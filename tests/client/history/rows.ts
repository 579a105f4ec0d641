import { type HistoryConstraint, type HistoryRow, historyRow } from "@/charts/rows";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

/** A constraint as the API gives it; invented: x_HI = 0.5 ± 0.1 (one sigma) at z = 7. */
export function buildConstraint(
  number: string,
  fields: Partial<ConstraintFields>,
  citation: Partial<HistoryConstraint["citation"]> = {},
): HistoryConstraint {
  return {
    __typename: "Constraint",
    number,
    quotable: `${number}.1`,
    state: "current",
    supersededBy: null,
    fields: {
      __typename: "ConstraintFields",
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      weighting: "volume",
      z: "7",
      zRole: "point",
      kind: "twoSided",
      value: "0.5",
      plus: "0.1",
      minus: "0.1",
      level: "oneSigma",
      estimator: "median",
      methodTags: ["quasarDampingWing"],
      dataKnown: true,
      ...fields,
    } as HistoryConstraint["fields"],
    citation: {
      __typename: "Citation",
      id: "c1",
      key: "vask2024",
      shortName: "Vask 2024",
      year: 2024,
      title: "Neutral gas before the Corrie field clears",
      ...citation,
    },
  };
}

export function buildRow(...parts: Parameters<typeof buildConstraint>): HistoryRow {
  return historyRow(buildConstraint(...parts));
}
