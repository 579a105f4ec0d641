import type { EntityManager } from "typeorm";

import { refuse, Refusal } from "~server/common/outcomes";
import { digestOf } from "~server/event/eventLog";
import { isWordChoice } from "~shared/formats/importFields";
import {
  isImportField,
  isWordField,
  listWords,
  proposeColumns,
  type ColumnMatch,
  type CsvList,
  type ImportWord,
  type WordMatch,
} from "~shared/formats/importMatching";

import { ImportMatch } from "./importMatch.entity";

/** How a list is read: by what the person said now, else said before, else by what is proposed. */
export interface Matching {
  columns: ColumnMatch[];
  /** What the person chose, now or before. */
  words: WordMatch[];
  /** Every word met, with the choice that counts for it. */
  listed: ImportWord[];
  /** Whether an earlier match took part. */
  remembered: boolean;
}

export interface GivenMatch {
  columns?: readonly { column: string; field?: string | null }[] | null;
  words?: readonly { field: string; word: string; value?: string | null }[] | null;
}

const MOST_WORDS = 5000;

export async function matchingFor(
  manager: EntityManager,
  ownerId: string,
  list: CsvList,
  given: GivenMatch,
): Promise<Matching | Refusal> {
  const columns = given.columns ? checkedColumns(list, given.columns) : null;
  if (columns instanceof Refusal) return columns;
  const words = checkedWords(given.words ?? []);
  if (words instanceof Refusal) return words;

  const earlier = await manager.findOneBy(ImportMatch, { ownerId, signature: signatureOf(list) });
  const chosenColumns = columns ?? earlier?.columns ?? proposeColumns(list.header);
  const chosen = new Map<string, WordMatch>();
  for (const match of [...(earlier?.words ?? []), ...words]) {
    chosen.set(`${match.field}\n${match.word}`, match);
  }
  const listed = listWords(list, chosenColumns).map((word) => {
    const choice = chosen.get(`${word.field}\n${word.word}`);
    return choice ? { ...word, proposed: choice.value } : word;
  });
  return {
    columns: chosenColumns,
    words: [...chosen.values()],
    listed,
    remembered: earlier !== null,
  };
}

/** Keeps a match for this person's next list of the same header. */
export async function rememberMatch(
  manager: EntityManager,
  ownerId: string,
  list: CsvList,
  matching: Matching,
  at: Date,
): Promise<void> {
  const kept = {
    columns: matching.columns,
    words: matching.words.slice(-MOST_WORDS),
    updatedAt: at,
  };
  await manager.upsert(ImportMatch, { ownerId, signature: signatureOf(list), ...kept }, [
    "ownerId",
    "signature",
  ]);
}

function signatureOf(list: CsvList): string {
  return digestOf(list.header);
}

function checkedColumns(
  list: CsvList,
  given: NonNullable<GivenMatch["columns"]>,
): ColumnMatch[] | Refusal {
  const columns = new Map<string, ColumnMatch["field"]>();
  const fields = new Map<string, string>();
  for (const { column, field = null } of given) {
    if (!list.header.includes(column)) {
      return refuse("column", `The list has no column “${shown(column)}”.`, "columns");
    }
    if (field !== null && !isImportField(field)) {
      return refuse("column", `No column can be matched to “${shown(field)}”.`, "columns");
    }
    const other = field === null ? undefined : fields.get(field);
    if (field !== null && other !== undefined && other !== column) {
      return refuse("column", `“${other}” and “${column}” are matched to one field.`, "columns");
    }
    if (field !== null) fields.set(field, column);
    columns.set(column, field);
  }
  // A column that was not spoken of is left out.
  return list.header.map((column) => ({ column, field: columns.get(column) ?? null }));
}

function checkedWords(given: NonNullable<GivenMatch["words"]>): WordMatch[] | Refusal {
  if (given.length > MOST_WORDS) return refuse("word", "Too many words are matched.", "words");
  const words: WordMatch[] = [];
  for (const { field, word, value = null } of given) {
    if (!isWordField(field)) {
      return refuse("word", `“${shown(field)}” is no field with words to match.`, "words");
    }
    if (value !== null && !isWordChoice(field, value)) {
      return refuse("word", `“${shown(value)}” is no choice for “${shown(word)}”.`, "words");
    }
    words.push({ field, word: word.slice(0, 500), value });
  }
  return words;
}

function shown(text: string): string {
  return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}
