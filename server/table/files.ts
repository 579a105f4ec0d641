/** The files of a table's version, in pieces, from what was written when it was saved. */
import { Readable } from "node:stream";

import type { EntityManager } from "typeorm";
import { ZipFile } from "yazl";

import { compilableBibtex } from "~server/citation/export";
import { REGISTRY } from "~server/download/header";
import { findRelease } from "~server/release/release.service";
import { citedRelease } from "~server/release/release.type";
import { byteByByte, fieldWidths } from "~shared/formats/columnFile/byteByByte";
import type { FileHead, FileRow } from "~shared/formats/columnFile/columnFile";
import { csv } from "~shared/formats/columnFile/csv";
import { ecsv } from "~shared/formats/columnFile/ecsv";
import { votable } from "~shared/formats/columnFile/votable";
import { releaseBibtex, releaseKey, type CitedRelease } from "~shared/formats/releaseCitation";
import { latexTable } from "~shared/formats/latexTable";

import { contentPieces, DIGEST_NOTE, TABLE_FORMAT } from "./tableContent";
import { TableVersionRow, type TableVersion } from "./tableVersion.entity";

export interface FiledVersion {
  manager: EntityManager;
  version: TableVersion;
}

export interface TableFileKind {
  words: string;
  type: string;
  pieces(filed: FiledVersion): AsyncIterable<string | Buffer>;
}

const PAGE = 200;

/** One column of the rows, in their order. */
async function* rows<K extends "content" | "cells" | "latex">(
  { manager, version: { slug, version } }: FiledVersion,
  column: K,
): AsyncGenerator<NonNullable<TableVersionRow[K]>> {
  let after = -1;
  for (;;) {
    const page = await manager
      .createQueryBuilder(TableVersionRow, "row")
      .select(["row.slug", "row.version", "row.position", `row.${column}`])
      .where("row.slug = :slug AND row.version = :version AND row.position > :after", {
        slug,
        version,
        after,
      })
      .andWhere(`row.${column} IS NOT NULL`)
      .orderBy("row.position")
      .limit(PAGE)
      .getMany();
    for (const row of page) yield row[column] as NonNullable<TableVersionRow[K]>;
    const last = page.at(-1);
    if (!last || page.length < PAGE) return;
    after = last.position;
  }
}

const cellRows = (filed: FiledVersion): AsyncGenerator<FileRow> => rows(filed, "cells");

/** Papers of all rows or of the rows in, each once, in the order of their keys. */
async function* papers(
  { manager, version: { slug, version } }: FiledVersion,
  which: "all" | "included",
): AsyncGenerator<string> {
  let after = "";
  for (;;) {
    // The first row of each key stands for the paper.
    const page: { citationKey: string; paper: string }[] = await manager.query(
      `SELECT one.citationKey, one.paper
         FROM (SELECT citationKey, MIN(position) AS position FROM fitting_table_row
                WHERE slug = ? AND version = ? AND citationKey > ? AND (included = 1 OR ? = 'all')
                GROUP BY citationKey ORDER BY citationKey LIMIT ${PAGE}) firsts
         JOIN fitting_table_row one
           ON one.slug = ? AND one.version = ? AND one.position = firsts.position
        ORDER BY one.citationKey`,
      [slug, version, after, which, slug, version],
    );
    for (const { paper } of page) yield paper;
    const last = page.at(-1);
    if (!last || page.length < PAGE) return;
    after = last.citationKey;
  }
}

function headOf({ version }: FiledVersion): FileHead {
  return {
    title: `${REGISTRY}: fitting table "${version.name}", version ${version.version}`,
    lines: version.lines,
    columns: version.columns,
  };
}

async function* json(filed: FiledVersion): AsyncGenerator<string> {
  const { version } = filed;
  const { name, address } = version;
  const head = {
    $schema: `${new URL(address).origin}/api/schemas/fitting-table-2.json`,
    format: TABLE_FORMAT,
    digest: `sha256:${version.digest}`,
    digestOver: DIGEST_NOTE,
    name,
    version: version.version,
    address,
    lastEvent: {
      sequence: version.lastEventSequence,
      digest: version.lastEventDigest,
      at: version.lastEventAt.toISOString(),
    },
  };
  yield `${JSON.stringify(head).slice(0, -1)},"content":`;
  yield* contentPieces(contentOf(version), papers(filed, "all"), rows(filed, "content"));
  yield "}\n";
}

function contentOf(version: TableVersion): Parameters<typeof contentPieces>[0] {
  const { recipe, decisions, mixtures, sets, licence, demonstration } = version;
  return {
    cautions: version.cautions,
    decisions,
    demonstration,
    filter: { words: version.filterWords, recipe: recipe.filter },
    licence,
    mixtures,
    sets,
    source:
      version.releaseNumber === null
        ? {
            release: null,
            lastEvent: { sequence: version.lastEventSequence, digest: version.lastEventDigest },
          }
        : { release: version.releaseNumber, lastEvent: null },
  };
}

async function* bib(filed: FiledVersion): AsyncGenerator<string> {
  const kept: { key: string; entryBibtex: string }[] = [];
  for await (const paper of papers(filed, "included")) {
    const { key, bibtex } = JSON.parse(paper) as { key: string; bibtex: string };
    kept.push({ key, entryBibtex: bibtex });
  }
  const release = await pinnedRelease(filed);
  if (release) kept.push({ key: releaseKey(release), entryBibtex: releaseBibtex(release) });
  yield compilableBibtex(kept, [headOf(filed).title, ...filed.version.lines]);
}

/** The release that a table pins is a cited work like its papers. */
async function pinnedRelease({ manager, version }: FiledVersion): Promise<CitedRelease | null> {
  if (version.releaseNumber === null) return null;
  const release = await findRelease(manager, version.releaseNumber);
  return release && citedRelease(release, new URL(version.address).origin);
}

async function* tex(filed: FiledVersion): AsyncGenerator<string> {
  yield* latexTable(
    `Constraints of the fitting table "${filed.version.name}" (${REGISTRY}).`,
    [
      `Errors and limits as printed, turned into neutral fractions. ${filed.version.address}`,
      `SHA-256 ${filed.version.digest}`,
    ],
    rows(filed, "latex"),
  );
}

async function* whole(text: string): AsyncGenerator<string> {
  yield text;
}

async function* byBytes(filed: FiledVersion): AsyncGenerator<string> {
  const widths = await fieldWidths(filed.version.columns, cellRows(filed));
  yield* byteByByte(headOf(filed), widths, cellRows(filed));
}

/** The kinds of a version's files, by the ending of their address. */
export const TABLE_FILES: Readonly<Record<string, TableFileKind>> = {
  csv: {
    words: "CSV",
    type: "text/csv; charset=utf-8",
    pieces: (filed) => csv(headOf(filed), cellRows(filed)),
  },
  json: { words: "JSON", type: "application/json; charset=utf-8", pieces: json },
  ecsv: {
    words: "ECSV",
    type: "text/plain; charset=utf-8",
    pieces: (filed) => ecsv(headOf(filed), cellRows(filed)),
  },
  vot: {
    words: "VOTable",
    type: "application/x-votable+xml; charset=utf-8",
    pieces: (filed) => votable(headOf(filed), cellRows(filed)),
  },
  txt: { words: "Machine-readable table", type: "text/plain; charset=us-ascii", pieces: byBytes },
  tex: { words: "LaTeX table", type: "application/x-tex; charset=utf-8", pieces: tex },
  bib: { words: "BibTeX", type: "application/x-bibtex; charset=utf-8", pieces: bib },
  "methods.tex": {
    words: "Methods paragraph",
    type: "application/x-tex; charset=utf-8",
    pieces: ({ version }) => whole(version.methods),
  },
  svg: {
    words: "Figure, SVG",
    type: "image/svg+xml; charset=utf-8",
    pieces: ({ version }) => whole(version.figure),
  },
  zip: { words: "Everything, ZIP", type: "application/zip", pieces: bundle },
};

/** The first day a ZIP file can name: the bundle holds no clock. */
const ZIP_DAY = new Date(1980, 0, 1);

/** Every other file and a README, in one archive whose bytes depend on them alone. */
async function* bundle(filed: FiledVersion): AsyncGenerator<Buffer> {
  const zip = new ZipFile();
  const options = { mtime: ZIP_DAY, forceDosTimestamp: true, mode: 0o100644 };
  zip.addBuffer(Buffer.from(readme(filed), "utf8"), "README.txt", options);
  for (const [kind, { pieces }] of Object.entries(TABLE_FILES)) {
    if (kind === "zip") continue;
    // Opened when its turn comes, so that one file at a time is read.
    zip.addReadStreamLazy(fileName(kind), options, (ready) => {
      ready(null, Readable.from(encoded(pieces(filed)), { objectMode: false }));
    });
  }
  zip.end();
  for await (const part of zip.outputStream) yield part as Buffer;
}

async function* encoded(pieces: AsyncIterable<string | Buffer>): AsyncGenerator<Buffer> {
  for await (const piece of pieces) {
    yield typeof piece === "string" ? Buffer.from(piece, "utf8") : piece;
  }
}

function fileName(kind: string): string {
  return kind === "methods.tex" ? "methods.tex" : `table.${kind}`;
}

function readme(filed: FiledVersion): string {
  const { title, lines } = headOf(filed);
  const files = Object.entries(TABLE_FILES)
    .filter(([kind]) => kind !== "zip")
    .map(([kind, { words }]) => `${fileName(kind).padEnd(14)}${words}`);
  return `${[title, "", ...lines, "", "Files", ...files].join("\n")}\n`;
}
