/** A table's choices, each made otherwise: what a comparison of choices fits. */
import { FORM_WORDS, type FormName } from "~shared/likelihood";
import { CompiledTable } from "~shared/likelihood/compile";
import { DomainError } from "~shared/errors/DomainError";
import { familiesOf } from "~shared/methods/vocabulary";
import { choosableForms } from "~shared/table/choosableForms";
import {
  type Decision,
  type DecisionOption,
  type TableChoices,
  type TableRecord,
  type TableSurroundings,
} from "~shared/table/decision";
import { settleTable, type SettledTable } from "~shared/table/settleTable";
import { specOf, type LikelihoodRow, type TableLikelihood } from "~shared/table/tableLikelihood";

import type { OtherChoice } from "./request";

/** Refits that one comparison is worth. */
export const MOST_OTHER_CHOICES = 60;

/** What a row is called beside its own content. */
export interface RowNames {
  readonly quotable: string;
  readonly citationKey: string;
}

export interface OtherChoices {
  readonly others: readonly OtherChoice[];
  /** Choices that are not among them, and why, in sentences. */
  readonly leftOut: readonly string[];
}

/**
 * Every other way to make each choice of a table, one at a time: each decision's other options, then each row's
 * other likelihood forms.
 *
 * @param records - As for settleTable, as are surroundings and choices; in the words of the vocabulary in force.
 * @param names - Of the rows, by number.
 * @returns At most MOST_OTHER_CHOICES, decisions before forms.
 */
export function otherChoices(
  records: readonly TableRecord[],
  surroundings: TableSurroundings,
  choices: TableChoices,
  names: ReadonlyMap<string, RowNames>,
): OtherChoices {
  const settled = settleTable(records, surroundings, choices);
  const asItStands = likelihoodOf(settled, records, names);
  const seen = new Set([fingerprint(asItStands)]);
  const leftOut: string[] = [];
  const others: OtherChoice[] = [];
  const add = (other: OtherChoice): void => {
    const obstacle = obstacleOf(other.table);
    if (obstacle) leftOut.push(`${other.words}: ${obstacle}`);
    else if (!seen.has(fingerprint(other.table))) {
      seen.add(fingerprint(other.table));
      others.push(other);
    }
  };

  for (const decision of settled.decisions) {
    const now = optionNow(decision);
    for (const option of decision.options) {
      if (option.code === now.code) continue;
      const changed = settleTable(records, surroundings, withOption(choices, decision, option));
      add({
        about: decision.id,
        rows: decision.rows,
        words: `${decision.rows.join(", ")}: ${lower(option.words)} instead of: ${lower(now.words)}`,
        table: likelihoodOf(changed, records, names),
      });
    }
  }
  for (const row of asItStands.rows) {
    for (const other of otherForms(row, asItStands)) add(other);
  }
  const beyond = others.slice(MOST_OTHER_CHOICES);
  if (beyond.length > 0) {
    leftOut.push(
      `${beyond.length} more ways to choose, beyond the first ${MOST_OTHER_CHOICES}: ${[...new Set(beyond.flatMap(({ rows }) => rows))].join(", ")}.`,
    );
  }
  return { others: others.slice(0, MOST_OTHER_CHOICES), leftOut };
}

/** A settled table as the engine's plain data: rows that are in, mixtures and sets. */
function likelihoodOf(
  { rows, mixtures, sets }: SettledTable,
  records: readonly TableRecord[],
  names: ReadonlyMap<string, RowNames>,
): TableLikelihood {
  return {
    rows: rows.flatMap(
      ({ number, included, used, options, likelihood }, index): LikelihoodRow[] => {
        const record = records[index]!;
        if (!included || !used || "leftOut" in likelihood) return [];
        return [
          {
            number,
            quotable: names.get(number)?.quotable ?? number,
            label: record.shortName,
            citationKey: names.get(number)?.citationKey ?? number,
            families: familiesOf(record.fields.methodTags),
            used,
            options,
          },
        ];
      },
    ),
    mixtures: mixtures.map(({ label, members }) => ({ label, members })),
    sets: sets.map(({ id, label, members, rho }) => ({ id, label, members, rho })),
  };
}

/** The option that holds: the one taken, else the proposal. */
function optionNow({ options, taken, proposed }: Decision): DecisionOption {
  const code = taken?.option ?? proposed;
  return options.find((option) => option.code === code) ?? options[0]!;
}

function withOption(
  choices: TableChoices,
  { id, proposed }: Decision,
  { code, override }: DecisionOption,
): TableChoices {
  const isDefault = code === proposed && !override;
  return {
    ...choices,
    decisions: [
      ...choices.decisions.filter((taken) => taken.id !== id),
      {
        id,
        option: code,
        by: isDefault ? "default" : "person",
        reason: isDefault ? null : "Tried in a comparison of choices",
      },
    ],
  };
}

function otherForms(row: LikelihoodRow, table: TableLikelihood): OtherChoice[] {
  const [first, ...rest] = choosableForms(row.used, row.options);
  if (first === undefined) return [];
  const now = row.options.form ?? first;
  return [first, ...rest]
    .filter((form) => form !== now)
    .map((form) => ({
      about: row.number,
      rows: [row.number],
      words: `${row.number}: ${FORM_WORDS[form]} instead of ${FORM_WORDS[now]}`,
      table: { ...table, rows: table.rows.map((one) => (one === row ? withForm(row, form) : one)) },
    }));
}

function withForm(row: LikelihoodRow, form: FormName): LikelihoodRow {
  return { ...row, options: { ...row.options, form } };
}

/** Why the engine can't take a table; null where it can. */
function obstacleOf(table: TableLikelihood): string | null {
  try {
    new CompiledTable(specOf(table));
    return null;
  } catch (error) {
    if (error instanceof DomainError) return `${error.message}.`;
    throw error;
  }
}

/** Two tables with the same fingerprint have the same likelihood. */
function fingerprint({ rows, mixtures, sets }: TableLikelihood): string {
  return JSON.stringify([
    rows.map(({ number, used, options }) => [number, used, Object.entries(options).sort()]),
    mixtures.map(({ members }) => members),
    sets.map(({ members, rho }) => [members, rho]),
  ]);
}

function lower(words: string): string {
  return words.charAt(0).toLowerCase() + words.slice(1);
}
