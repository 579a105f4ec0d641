/** What a table's version hands out, written once when it is saved. */
import { REGISTRY } from "~server/download/header";
import type { LastEvent } from "~server/event/eventLog";
import { canonicalText, digestOfPieces } from "~server/release/releaseContent";
import { filterWords } from "~shared/filter/describe";
import type { FileColumn, FileRow } from "~shared/formats/columnFile/columnFile";
import { demonstrationWords, lastEventWords, TABLE_CAUTIONS } from "~shared/formats/exportRow";
import { FITTING_COLUMNS, fittingCells, type FittingRow } from "~shared/formats/fittingRow";
import { latexRow } from "~shared/formats/latexTable";
import { methodsParagraph } from "~shared/formats/methodsParagraph";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { DECISION_WORDS } from "~shared/table/decision";
import type { SettledTable } from "~shared/table/settleTable";

import type { TableRecipe } from "./recipe";
import type { SnapshotConstraint } from "./snapshot";
import { inWordsOf, type KeptSurroundings } from "./surroundings";

/** Everything a version is written from. */
export interface TableSource {
  recipe: TableRecipe;
  records: readonly SnapshotConstraint[];
  settled: SettledTable;
  /** The method vocabulary that it was settled in. */
  methods: KeptSurroundings["methods"];
  lastEvent: LastEvent;
  licence: string;
  demonstration: boolean;
  /** Of the table's page. */
  address: string;
}

export interface WrittenRow {
  constraintId: number;
  included: boolean;
  citationKey: string;
  content: string;
  cells: FileRow | null;
  latex: string | null;
  paper: string;
  record: string;
}

export interface WrittenTable {
  rows: WrittenRow[];
  digest: string;
  lines: string[];
  cautions: string[];
  columns: FileColumn[];
  methods: string;
}

export const TABLE_FORMAT = "fogline-fitting-table/2";
export const DIGEST_NOTE = "SHA-256 over the RFC 8785 form of content";

export async function writeTable(source: TableSource): Promise<WrittenTable> {
  const rows = fittingRows(source);
  const written = inWordsOf(source, () =>
    rows.map((row, index) => writtenRow(row, source.records[index] as SnapshotConstraint)),
  );
  const digest = await digestOfPieces(
    contentPieces(
      parts(source),
      unique(written),
      written.map(({ content }) => content),
    ),
  );
  return {
    rows: written,
    digest,
    lines: linesOf(source, digest),
    cautions: cautionsOf(source),
    columns: FITTING_COLUMNS.map(({ name, meaning, kind, unit, ucd }) => ({
      name,
      meaning,
      kind,
      ...(unit === undefined ? {} : { unit }),
      ...(ucd === undefined ? {} : { ucd }),
    })),
    methods: inWordsOf(source, () =>
      methodsParagraph({
        registry: REGISTRY,
        source: sourceWords(source),
        sourceKey:
          source.recipe.release === null ? null : `${REGISTRY}Release${source.recipe.release}`,
        address: source.address,
        digest,
        filter: filterWords(source.recipe.filter),
        rows,
        decisions: source.settled.decisions,
      }),
    ),
  };
}

function fittingRows({ records, settled }: TableSource): FittingRow[] {
  const labels = new Map(settled.sets.map(({ id, label }) => [id, label]));
  return records.map((record, index) => {
    const row = settled.rows[index];
    if (row?.number !== record.number) throw new Error(`${record.number} was not settled`);
    const { key, shortName, year, doi, arxiv, bibcode } = record.citation;
    return {
      record: {
        number: record.number,
        quotable: formatQuotable(record.id, record.ordinal),
        state: record.state,
        fields: record.fields,
        citation: { key, shortName, year, doi, arxiv, bibcode },
      },
      settled: row,
      setLabel: row.set === null ? null : (labels.get(row.set) ?? null),
    };
  });
}

function writtenRow(row: FittingRow, record: SnapshotConstraint): WrittenRow {
  const { settled } = row;
  const { key, entryBibtex, csl } = record.citation;
  const { likelihood } = settled;
  return {
    constraintId: record.id,
    included: settled.included,
    citationKey: key,
    content: canonicalText({
      record: row.record.number,
      revision: row.record.quotable,
      state: row.record.state,
      included: settled.included,
      reason: settled.reason,
      cautions: settled.cautions,
      citation: row.record.citation,
      printed: row.record.fields,
      used: settled.used,
      likelihood:
        "leftOut" in likelihood
          ? null
          : {
              form: likelihood.form,
              formula: likelihood.formula,
              redshift: likelihood.redshift,
              level: settled.used?.level ?? settled.options.level ?? null,
              smoothing: settled.options.smoothing ?? null,
              curve: settled.options.curve ?? null,
              reason: settled.formReason,
            },
      weight: settled.weight,
      mixture: settled.mixture,
      correlatedSet: settled.set,
    }),
    cells: settled.included ? fittingCells(row) : null,
    latex: settled.included ? latexRow(row) : null,
    paper: canonicalText({ key, bibtex: entryBibtex, csl }),
    record: canonicalText(record),
  };
}

/** Papers of the rows, each once, in the order of their keys. */
function unique(rows: readonly WrittenRow[]): string[] {
  const papers = new Map(rows.map(({ citationKey, paper }) => [citationKey, paper]));
  return [...papers].sort(([a], [b]) => (a < b ? -1 : 1)).map(([, paper]) => paper);
}

type ContentParts = ReturnType<typeof parts>;

function parts({ recipe, settled, licence, demonstration, lastEvent, ...rest }: TableSource) {
  return {
    cautions: cautionsOf({ settled, records: rest.records }),
    decisions: settled.decisions,
    demonstration,
    filter: { words: filterWords(recipe.filter), recipe: recipe.filter },
    licence,
    mixtures: settled.mixtures,
    sets: settled.sets,
    source:
      recipe.release === null
        ? { release: null, lastEvent: { sequence: lastEvent.sequence, digest: lastEvent.digest } }
        : { release: recipe.release, lastEvent: null },
  };
}

/**
 * The RFC 8785 form of a table's content in pieces. It holds no clock, name, owner or address: the same choices over
 * the same revisions have the same digest.
 *
 * @param papers - Canonical texts in the order of their keys.
 * @param rows - Canonical texts in the order of the table.
 */
export async function* contentPieces(
  content: ContentParts,
  papers: Iterable<string> | AsyncIterable<string>,
  rows: Iterable<string> | AsyncIterable<string>,
): AsyncGenerator<string> {
  const { cautions, decisions, demonstration, filter, licence, mixtures, sets, source } = content;
  const before = canonicalText({ cautions, decisions, demonstration, filter, licence, mixtures });
  yield `${before.slice(0, -1)},"papers":[`;
  yield* joined(papers);
  yield `],"registry":${JSON.stringify(REGISTRY)},"rows":[`;
  yield* joined(rows);
  yield `],${canonicalText({ sets, source }).slice(1)}`;
}

async function* joined(texts: Iterable<string> | AsyncIterable<string>): AsyncGenerator<string> {
  let first = true;
  for await (const text of texts) {
    yield first ? text : `,${text}`;
    first = false;
  }
}

/** What a reader of this table must know, beside what holds for every export. */
function cautionsOf({ settled, records }: Pick<TableSource, "settled" | "records">): string[] {
  const included = records.filter((_, index) => settled.rows[index]?.included);
  const fractions = included.filter(({ fields }) => fields.quantity === "neutralFraction");
  const weightings = new Set(fractions.map(({ fields }) => fields.weighting ?? "unknown"));
  const depth = included.some(
    ({ fields }) => fields.quantity === "opticalDepth" || fields.quantity === "opticalDepthRange",
  );
  return [
    ...TABLE_CAUTIONS,
    ...(weightings.size > 1
      ? ["Neutral fractions of different weightings stand side by side; none is converted."]
      : []),
    ...(depth
      ? [
          "An optical depth came from a history family, with helium and weighting assumed by its authors.",
        ]
      : []),
  ];
}

/** "release 2", or "the approved records up to event 411" */
function sourceWords({ recipe, lastEvent }: Pick<TableSource, "recipe" | "lastEvent">): string {
  return recipe.release === null
    ? `the approved records up to event ${lastEvent.sequence}`
    : `release ${recipe.release}`;
}

function linesOf(source: TableSource, digest: string): string[] {
  const { settled, recipe } = source;
  const demonstration = demonstrationWords(source.demonstration);
  const rowsIn = settled.rows.filter(({ included }) => included).length;
  return [
    ...(demonstration ? [demonstration] : []),
    `Address: ${source.address}`,
    `Source: ${sourceWords(source)}`,
    `Filter: ${filterWords(recipe.filter)}`,
    `Rows in: ${rowsIn}; rows out: ${settled.rows.length - rowsIn}`,
    `Last event: ${lastEventWords({ lastEvent: { ...source.lastEvent, at: source.lastEvent.at.toISOString() } } as never)}`,
    `Digest: sha256:${digest} (${DIGEST_NOTE} in the JSON file)`,
    `Licence: ${source.licence}`,
    ...settled.decisions.map(({ kind, rows, options, taken }) => {
      const words = options.find(({ code }) => code === taken?.option)?.words ?? "open";
      const why = taken?.reason ? `: ${taken.reason}` : "";
      return `Decision: ${DECISION_WORDS[kind]} (${rows.join(", ")}): ${words} (${taken?.by ?? "open"})${why}`;
    }),
    ...settled.rows
      .filter(({ included }) => !included)
      .map(({ number, reason }) => `Out: ${number}: ${reason ?? ""}`),
    ...settled.rows
      .filter(({ included, formReason }) => included && formReason !== null)
      .map(({ number, formReason }) => `Form: ${number}: ${formReason ?? ""}`),
    ...cautionsOf(source),
    "Fractions in used_ columns are neutral, at the printed level; an empty cell means nothing is stated.",
  ];
}
