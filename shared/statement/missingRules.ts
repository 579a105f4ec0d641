/** Rules about what a submission lacks. */
import { error } from "./finding";
import type { Finding } from "./finding";
import type { ConstraintFields, FieldName } from "./fields";
import { isOpen } from "./relevant";
import { openFields } from "./required";
import { inSentence } from "./ruleText";

const MISSING_WORDS: Partial<Record<FieldName, string>> = {
  quantity: "Say which quantity the paper states.",
  species: "Say whether the paper prints the neutral, the ionized or the electron fraction.",
  helium: "Say whether the electron fraction counts the electrons of helium; unknown is an answer.",
  scale: "Say whether the paper prints the fraction itself or its log10.",
  zRole:
    "Say what the redshift stands for: a point, a bin average, an uncertain redshift or the range of a sample.",
  kind: "Say what kind of statement the paper makes.",
  value: "Give the value as printed.",
  plus: "Give the error above the value as printed.",
  minus: "Give the error below the value as printed.",
  limitBase: "Give the base of the limit: the number before its own sigma.",
  limitSigma: "Give the sigma that the paper adds to the base of the limit.",
  level: "Give the credible level, or choose not stated if the paper gives none.",
  levelPercent: "Give the level in percent.",
  estimator: "Say what the value is: median, mean, mode, best fit, or not stated.",
  printedText: "Copy the exact text the paper prints.",
  methodTags: "Choose at least one method.",
  dataKnown: "Name the data used, or say that they are unknown.",
  dataUsed: "Name at least one sightline, field or sample, or say that the data are unknown.",
  versionRead: "Say which version you read: published, preprint or erratum.",
  place: "Say where in the paper it stands: table and row, figure, section.",
  curveTable: "Give the curve: a file, or its rows pasted.",
  curveColumn: "Say what the second column of the curve holds: a density or ln L.",
  digitizingError:
    "Read off a figure: give the digitizing error, how far off the number can be for having been read.",
};

/** Every required field that is open, and the citation. */
export function missing(fields: ConstraintFields, citation: boolean): Finding[] {
  const found = openFields(fields).map((name) =>
    error(`missing.${name}`, [name], MISSING_WORDS[name] ?? `Give: ${inSentence(name)}.`),
  );
  return citation
    ? found
    : [error("missing.citation", [], "Choose the citation: a record needs a paper."), ...found];
}

/** A digitizing error is text ("0.1 dex"), but one that says how large it is. */
export function digitizingErrorSaysNothing(fields: ConstraintFields): Finding[] {
  if (fields.readOffFigure !== true || isOpen(fields, "digitizingError")) return [];
  return /[1-9]/.test(fields.digitizingError ?? "")
    ? []
    : [
        error(
          "digitizingErrorWithoutNumber",
          ["digitizingError"],
          "Give the digitizing error as a number above zero, with its unit if it has one.",
        ),
      ];
}
