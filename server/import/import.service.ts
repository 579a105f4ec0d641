import type { EntityManager } from "typeorm";

import { isProblem, parseBibtex, type ParsedEntry } from "~server/citation/bibtex";
import { keepEntry } from "~server/citation/citation.service";
import { findExisting } from "~server/citation/matching";
import { titleMatch } from "~server/citation/titles";
import { refuse, Refusal } from "~server/common/outcomes";
import { createDraft, findImported } from "~server/constraint/draft.service";
import { fieldsFromInput, fieldsType } from "~server/constraint/fields.type";
import { Revision } from "~server/constraint/revision.entity";
import { change, undo, type Acting } from "~server/event/acting";
import { findUpload } from "~server/upload/upload.service";
import type { Upload } from "~server/upload/upload.entity";
import {
  buildRows,
  parseList,
  rowIdentity,
  type CsvList,
  type ImportedRow,
  type KeyedCitation,
} from "~shared/formats/importMatching";
import { FIELD_NAMES } from "~shared/statement/words";

import {
  ImportColumn,
  ImportDone,
  ImportPreview,
  ImportRefusal,
  ImportRow,
  ImportWord,
  type ImportInput,
} from "./import.type";
import { matchingFor, rememberMatch, type Matching } from "./match";

const MOST_ROWS = 1000;
const MOST_OPEN_DRAFTS = 2000;
const SAMPLES = 3;

/** A list read with its matching: the rows as they would become drafts, and the papers behind them. */
interface ReadImport {
  list: CsvList;
  matching: Matching;
  rows: ImportedRow[];
  /** Readable papers by the identity that the rows name them by. */
  papers: Map<string, ParsedEntry>;
}

/** Shows what an import would do. Nothing is kept but a match that the person made. */
export async function previewImport(
  who: Acting,
  input: ImportInput,
): Promise<ImportPreview | Refusal> {
  const { manager } = who.database;
  const read = await readImport(manager, who.viewer.id, input);
  if (read instanceof Refusal) return read;
  if (input.columns || input.words) {
    await rememberMatch(manager, who.viewer.id, read.list, read.matching, who.now);
  }

  // Rows of a paper that isn't here can't be here either.
  const registryIds = new Map<string, string>();
  for (const [identity, entry] of read.papers) {
    const { match } = await findExisting(manager, entry);
    if (match) registryIds.set(identity, match.citation.id);
  }
  const identities = read.rows.map((row) => {
    const citationId = registryIds.get(row.citation ?? "");
    return citationId && row.identity !== "" ? rowIdentity(row.fields, citationId) : "";
  });
  const here = await findImported(manager, who.viewer.id, identities.filter(Boolean));
  const rows = read.rows.map((row, index) =>
    rowType(row, row.sameAsLine !== null || here.has(identities[index] ?? "")),
  );
  const count = (outcome: string) => rows.filter((row) => row.outcome === outcome).length;
  return Object.assign(new ImportPreview(), {
    good: count("good"),
    refused: count("refused"),
    alreadyHere: count("already here"),
    remembered: read.matching.remembered,
    columns: read.matching.columns.map(({ column, field }, index) =>
      Object.assign(new ImportColumn(), {
        column,
        proposedField: field,
        sample: samplesOf(read.list, index),
      }),
    ),
    words: read.matching.listed.map((word) => Object.assign(new ImportWord(), word)),
    rows,
  });
}

/**
 * Makes a draft of every good row, and keeps the papers they name: all in one transaction.
 * A row that this person has imported before, whatever became of it, is passed over.
 */
export async function runImport(who: Acting, input: ImportInput): Promise<ImportDone | Refusal> {
  const ownerId = who.viewer.id;
  return change<ImportDone | Refusal>(who, async ({ manager }) => {
    const read = await readImport(manager, ownerId, input);
    if (read instanceof Refusal) return read;
    const good = read.rows.filter((row) => row.refusals.length === 0 && row.sameAsLine === null);

    // Papers first: their gate puts two imports of one person in a line, so that the second sees
    // the rows of the first.
    const citationIds = new Map<string, string>();
    for (const { citation } of good) {
      const entry = citation === null ? undefined : read.papers.get(citation);
      if (citation === null || !entry || citationIds.has(citation)) continue;
      citationIds.set(citation, (await keepEntry(manager, entry, ownerId)).citation.id);
    }
    const planned = good.map((row) => {
      const citationId = citationIds.get(row.citation ?? "");
      if (citationId === undefined) throw new Error(`line ${row.line} names no paper`);
      return { row, citationId, identity: rowIdentity(row.fields, citationId) };
    });
    const here = await findImported(
      manager,
      ownerId,
      planned.map(({ identity }) => identity),
    );
    // Adding each to the set passes over a row that turns out equal once its paper is known.
    const fresh = planned.filter(({ identity }) => !here.has(identity) && here.add(identity));
    const open = await openDrafts(manager, ownerId);
    if (fresh.length > 0 && open + fresh.length > MOST_OPEN_DRAFTS) {
      undo(refuse("tooMany", `You have ${open} open drafts. Send or discard some first.`));
    }
    const submissionIds: string[] = [];
    for (const { row, citationId, identity } of fresh) {
      const { fields } = row;
      const draft = { ownerId, citationId, fields, importIdentity: identity, at: who.now };
      submissionIds.push((await createDraft(manager, draft)).id);
    }
    await rememberMatch(manager, ownerId, read.list, read.matching, who.now);
    const refused = read.rows.filter((row) => row.refusals.length > 0).length;
    return Object.assign(new ImportDone(), {
      created: submissionIds.length,
      alreadyHere: read.rows.length - refused - submissionIds.length,
      refused,
      submissionIds,
    });
  });
}

async function readImport(
  manager: EntityManager,
  ownerId: string,
  input: ImportInput,
): Promise<ReadImport | Refusal> {
  const csv = await findUpload(manager, ownerId, input.csvUploadId, "csv");
  if (!csv)
    return refuse("notFound", "The list is not here any more. Choose the file again.", "csv");
  const bib = await findUpload(manager, ownerId, input.bibUploadId, "bib");
  if (!bib) {
    return refuse(
      "notFound",
      "The bibliography is not here any more. Choose the file again.",
      "bib",
    );
  }
  const list = parseList(csv.text);
  if (!list || list.rows.length === 0) {
    return refuse("unreadable", `${csv.name} holds no rows below its column names.`, "csv");
  }
  if (list.rows.length > MOST_ROWS) {
    const sentence = `${csv.name} has ${list.rows.length} rows; at most ${MOST_ROWS} are taken at once.`;
    return refuse("tooMany", sentence, "csv");
  }
  const matching = await matchingFor(manager, ownerId, list, input);
  if (matching instanceof Refusal) return matching;
  const { citations, papers } = papersOf(bib);
  const rows = buildRows({
    list,
    csvName: csv.name,
    bibName: bib.name,
    columns: matching.columns,
    words: matching.words,
    citations,
  }).map((row) => refuseTooLong(row, csv, matching));
  return { list, matching, rows, papers };
}

/** The file's papers by its keys. Two entries of one paper share one identity. */
function papersOf(bib: Upload): {
  citations: Map<string, KeyedCitation>;
  papers: Map<string, ParsedEntry>;
} {
  const citations = new Map<string, KeyedCitation>();
  const papers = new Map<string, ParsedEntry>();
  for (const result of parseBibtex(bib.text)) {
    // BibTeX takes the first of two entries with one key.
    if (citations.has(result.givenKey)) continue;
    if (isProblem(result)) {
      const { problem, line } = result;
      if (result.givenKey !== "") citations.set(result.givenKey, { problem, line });
      continue;
    }
    const identity =
      result.doi ?? result.arxiv ?? result.bibcode ?? `${titleMatch(result.title)} ${result.year}`;
    if (!papers.has(identity)) papers.set(identity, result);
    citations.set(result.givenKey, { identity, shortName: result.shortName });
  }
  return { citations, papers };
}

/** A draft keeps what the form could have kept, and nothing longer. */
function refuseTooLong(row: ImportedRow, csv: Upload, matching: Matching): ImportedRow {
  const kept = fieldsFromInput(row.fields);
  if (!("tooLong" in kept)) return row;
  const field = kept.tooLong;
  const column = matching.columns.find((match) => match.field === field)?.column ?? null;
  const reason = `${FIELD_NAMES[field]}: the text is too long to keep.`;
  const refusal = { file: csv.name, line: row.line, column, reason };
  return { ...row, refusals: [...row.refusals, refusal] };
}

function openDrafts(manager: EntityManager, ownerId: string): Promise<number> {
  return manager
    .createQueryBuilder(Revision, "revision")
    .innerJoin("revision.constraint", "record")
    .where("record.ownerId = :ownerId AND revision.state = 'draft'", { ownerId })
    .getCount();
}

function rowType(row: ImportedRow, isHere: boolean): ImportRow {
  const refused = row.refusals.length > 0;
  return Object.assign(new ImportRow(), {
    line: row.line,
    key: row.key,
    citationShortName: row.citationShortName,
    fields: fieldsType(row.fields),
    openFields: row.openFields,
    grade: row.grade,
    outcome: refused ? "refused" : isHere ? "already here" : "good",
    refusals: row.refusals.map((refusal) => Object.assign(new ImportRefusal(), refusal)),
  });
}

function samplesOf(list: CsvList, column: number): string[] {
  const cells = list.rows.map((row) => row.cells[column] ?? "").filter(Boolean);
  return [...new Set(cells)].slice(0, SAMPLES).map((cell) => cell.slice(0, 100));
}
