/** The rules that make a record vetted, checked in the form and again on the server. */
import { curveFindings } from "./curveRules";
import { parseDecimal } from "./decimal";
import { note, sortFindings } from "./finding";
import type { Finding } from "./finding";
import { CONDITION_KINDS } from "./fields";
import type { ConstraintFields } from "./fields";
import { levels, limits } from "./limitRules";
import { digitizingErrorSaysNothing, missing } from "./missingRules";
import { notNumbers, orderOfEnds, quantityRange, ranges, widths } from "./numberRules";
import { isFractionBearing, isOpen, NUMBER_FIELDS, relevantFields } from "./relevant";
import { inSentence, typed } from "./ruleText";
import { origin, texts } from "./sourceRules";

export { FINDING_GRADES, hasErrors, sortFindings } from "./finding";
export type { Finding, FindingGrade } from "./finding";
export { registryFindings, sentAlready } from "./registryRules";
export type { Neighbour } from "./registryRules";
export { notANumberMessage } from "./numberRules";
export { PRINTED_TEXT_LONGEST } from "./sourceRules";

const HIGHEST_USUAL_REDSHIFT = 30;

export interface FindingOptions {
  /** Whether the record has a citation that could be read. */
  citation: boolean;
  /**
   * True at submission, where everything required must be there (grade error, codes "missing.…").
   * False for a draft or an imported row, where only contradictions are errors. Default true.
   */
  complete?: boolean;
}

/**
 * Everything that can be said about the fields alone, errors first.
 *
 * @param fields - As typed; any strings may come in, nothing throws.
 */
export function fieldFindings(fields: ConstraintFields, options: FindingOptions): Finding[] {
  const complete = options.complete ?? true;
  const findings = [
    ...(complete ? missing(fields, options.citation) : []),
    ...notNumbers(fields),
    ...orderOfEnds(fields),
    ...ranges(fields),
    ...widths(fields),
    ...limits(fields),
    ...levels(fields),
    ...texts(fields),
    ...origin(fields),
    ...digitizingErrorSaysNothing(fields),
    ...curveFindings(fields, quantityRange(fields)),
    ...notes(fields),
  ];
  return sortFindings(findings);
}

function notes(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (fields.kind === "qualitative") {
    found.push(note("qualitative", ["kind"], "A qualitative statement is shown and never fitted."));
  }
  if (
    fields.level === "notStated" &&
    fields.kind !== "curve" &&
    relevantFields(fields).includes("level")
  ) {
    found.push(
      note(
        "levelNotStated",
        ["level"],
        "Without a level the widths can't be turned into sigma: each fitting table has to decide.",
      ),
    );
  }
  if (fields.quantity === "neutralFraction") {
    if (fields.weighting === "mass") {
      found.push(
        note(
          "massWeighted",
          ["weighting"],
          "Mass-weighted: shown as such and never converted to a volume average.",
        ),
      );
    }
    if (fields.weighting === null) {
      found.push(
        note("weightingOpen", ["weighting"], "The weighting is open and counts as unknown."),
      );
    }
    const z = parseDecimal(fields.z);
    if (z?.gt(HIGHEST_USUAL_REDSHIFT)) {
      found.push(
        note(
          "highRedshift",
          ["z"],
          `The redshift is ${typed(fields.z)}, above ${HIGHEST_USUAL_REDSHIFT}. Look at it again.`,
        ),
      );
    }
  }
  if (
    isFractionBearing(fields.quantity) &&
    fields.species === "electron" &&
    fields.helium === "unknown"
  ) {
    found.push(
      note(
        "heliumUnknown",
        ["helium"],
        "While it is unknown whether helium electrons are counted, the record is shown and not used.",
      ),
    );
  }
  if (fields.versionRead === "preprint") {
    found.push(
      note(
        "preprintOnly",
        ["versionRead"],
        isOpen(fields, "preprintVersion")
          ? "Read in a preprint: say which version. Each fitting table decides whether it takes preprints."
          : "Read in a preprint: each fitting table decides whether it takes preprints.",
      ),
    );
  }
  for (const condition of fields.conditionedOn) {
    if (
      !(CONDITION_KINDS as readonly string[]).includes(condition) &&
      !/^FL-\d{4,}$/.test(condition)
    ) {
      found.push(
        note(
          `unknownCondition.${condition.slice(0, 40)}`,
          ["conditionedOn"],
          `"${typed(condition)}" is neither a record's number nor a kind of data; a table can't follow it.`,
        ),
      );
    }
  }
  const relevant = relevantFields(fields);
  const left = NUMBER_FIELDS.filter((name) => !relevant.includes(name) && !isOpen(fields, name));
  if (left.length > 0 && fields.quantity !== null && fields.kind !== null) {
    found.push(
      note(
        "notUsed",
        left,
        `Not used for this quantity and kind of statement: ${left.map(inSentence).join(", ")}.`,
      ),
    );
  }
  return found;
}
