import { refuse, type Refusal } from "~server/common/outcomes";
import { canonicalFilter } from "~shared/filter/address";
import type { CanonicalFilter } from "~shared/filter/filter";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { REASON_LONGEST, type TableChoices } from "~shared/table/decision";

import type { TableInput } from "./recipe.type";

/** What a table is made from: where its records come from, which of them, and what a person chose. */
export interface TableRecipe {
  /** Number of a release, or null for the latest approved records. */
  readonly release: number | null;
  readonly filter: CanonicalFilter;
  readonly choices: TableChoices;
}

const MOST_CHOICES = 2000;
const LONGEST_ID = 40_000;

/** The recipe in its one form, or why it can't be taken. Open choices are dropped, reasons trimmed. */
export function recipeOf(input: TableInput): TableRecipe | Refusal {
  const { filter } = input;
  const release = input.release ?? null;
  const [decisions, out, forms] = [input.decisions ?? [], input.out ?? [], input.forms ?? []];
  if (decisions.length + out.length + forms.length > MOST_CHOICES) {
    return refuse("tooMany", `A table has at most ${MOST_CHOICES} choices. Narrow the filter.`);
  }
  const reasons = [...decisions, ...out, ...forms].map(({ reason }) => reason?.trim() ?? "");
  if (reasons.some((reason) => reason.length > REASON_LONGEST)) {
    return refuse("reason", `A reason has at most ${REASON_LONGEST} characters.`, "reason");
  }
  if (decisions.some(({ id, option }) => id.length > LONGEST_ID || option.length > LONGEST_ID)) {
    return refuse("decision", "There is no such decision.", "decisions");
  }
  const numbers = [...out, ...forms].map(({ number }) => parseRecordNumber(number));
  if (numbers.includes(null)) {
    return refuse("rows", "A row is named that is no record's number.", "rows");
  }
  if (out.some(({ reason }) => reason.trim() === "")) {
    return refuse("reason", "Say why the row is taken out.", "reason");
  }
  if (forms.some(({ reason }) => reason.trim() === "")) {
    return refuse("reason", "Say why the row takes another form.", "reason");
  }
  const known = (number: string): string => formatRecordNumber(parseRecordNumber(number) ?? 0);
  return {
    release,
    filter: canonicalFilter(filter),
    choices: {
      decisions: decisions.map(({ id, option, byDefault, reason }) => ({
        id,
        option,
        by: byDefault ? "default" : "person",
        reason: byDefault ? null : reason?.trim() || null,
      })),
      out: out.map(({ number, reason }) => ({ number: known(number), reason: reason.trim() })),
      forms: forms.map(({ number, form, smoothing, redshift, reason }) => ({
        number: known(number),
        options: {
          ...(form ? { form } : {}),
          ...(smoothing === null || smoothing === undefined ? {} : { smoothing }),
          ...(redshift ? { redshift } : {}),
        },
        reason: reason.trim(),
      })),
    },
  };
}
