/** Rules about the printed text, the methods and the data. */
import { carriesTag, currentTag, findTag } from "~shared/methods/vocabulary";

import { parseDecimal } from "./decimal";
import { error, mustAnswer } from "./finding";
import type { Finding } from "./finding";
import type { ConstraintFields, FieldName } from "./fields";
import { printsNumber } from "./printedText";
import type { NumberField } from "./relevant";
import { inSentence, relevantNumbers, typed } from "./ruleText";
import { FIELD_NAMES } from "./words";

export const PRINTED_TEXT_LONGEST = 300;
const NOTE_LONGEST = 2000;
const WIDE_BIN = 0.4;

/** Numbers of the statement, which the printed text must hold. */
const STATED: readonly NumberField[] = [
  "value",
  "plus",
  "minus",
  "limitBase",
  "limitSigma",
  "bandLow",
  "bandHigh",
];

/** Texts that are too long; a printed text without the numbers. */
export function texts(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  const printed = fields.printedText ?? "";
  if (printed.length > PRINTED_TEXT_LONGEST) {
    found.push(
      error(
        "tooLong.printedText",
        ["printedText"],
        `The printed text has ${printed.length} characters; keep the sentence with the numbers, ${PRINTED_TEXT_LONGEST} at most.`,
      ),
    );
  }
  for (const [name, held] of Object.entries(fields) as [FieldName, unknown][]) {
    const longest = Array.isArray(held)
      ? Math.max(0, ...held.map((entry) => String(entry).length))
      : typeof held === "string"
        ? held.length
        : 0;
    // A curve says itself that it is too long.
    if (name !== "printedText" && name !== "curveTable" && longest > NOTE_LONGEST) {
      found.push(
        error(
          `tooLong.${name}`,
          [name],
          `${FIELD_NAMES[name]} has ${longest} characters; ${NOTE_LONGEST} at most.`,
        ),
      );
    }
  }
  if (printed.trim() !== "") {
    const relevant = relevantNumbers(fields);
    const absent = STATED.filter(
      (name) =>
        relevant.includes(name) &&
        parseDecimal(fields[name]) !== null &&
        !printsNumber(printed.slice(0, NOTE_LONGEST), fields[name] ?? ""),
    );
    if (absent.length > 0) {
      const list = absent.map((name) => `${inSentence(name)} ${typed(fields[name])}`).join(", ");
      found.push(
        mustAnswer(
          "printedWithoutNumbers",
          [...absent, "printedText"],
          `The printed text doesn't contain ${list}. Compare both with the paper.`,
        ),
      );
    }
  }
  return found;
}

/** Tags whose result comes from single lines of sight. */
const SIGHTLINE_TAGS = ["quasarDampingWing", "burstDampingWing", "nearZones", "twentyOneCmForest"];
/** Names that say themselves that they are more than one sightline. */
const COLLECTION =
  /\b(?:samples?|surveys?|stack(?:ed)?|fields?|quasars|qsos|bursts|sightlines|spectra)\b/i;

/** Methods out of the vocabulary, one sightline as the mean, data named and unknown, a wide bin without a role. */
export function origin(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  for (const tag of fields.methodTags) {
    if (currentTag(tag) === null) {
      const near = findTag(tag);
      found.push(
        error(
          `unknownMethod.${tag.slice(0, 40)}`,
          ["methodTags"],
          `"${typed(tag)}" is not in the method vocabulary.${near ? ` Did you mean ${near.name}?` : ""}`,
        ),
      );
    }
  }
  const sightlines =
    fields.methodTags.length > 0 &&
    fields.methodTags.every((tag) => SIGHTLINE_TAGS.some((one) => carriesTag([tag], one)));
  const only = fields.dataUsed.length === 1 ? (fields.dataUsed[0] ?? "") : "";
  if (
    fields.quantity === "neutralFraction" &&
    fields.kind !== "qualitative" &&
    sightlines &&
    only !== "" &&
    !COLLECTION.test(only) &&
    fields.cosmicVariance !== "included"
  ) {
    found.push(
      mustAnswer(
        "oneSightline",
        ["dataUsed", "cosmicVariance"],
        `One sightline (${typed(only)}) stands for the cosmic mean. Look whether the quoted error contains the scatter between sightlines, and set cosmic variance or say what the paper means.`,
      ),
    );
  }
  if (fields.dataKnown === false && fields.dataUsed.length > 0) {
    found.push(
      error(
        "dataUnknownAndNamed",
        ["dataKnown", "dataUsed"],
        "The data are said to be unknown, yet some are named. Keep one of the two.",
      ),
    );
  }
  if (fields.quantity === "neutralFraction" && fields.zRole === null) {
    const low = parseDecimal(fields.zLow);
    const high = parseDecimal(fields.zHigh);
    if (low && high && high.minus(low).gt(WIDE_BIN)) {
      found.push(
        mustAnswer(
          "wideBinNoRole",
          ["zRole", "zLow", "zHigh"],
          `The redshift runs over ${high.minus(low).toFixed()}, more than ${WIDE_BIN}, and its role is open. Look whether the paper averages over the bin, or whether it is an uncertainty or the range of a sample.`,
        ),
      );
    }
  }
  return found;
}
