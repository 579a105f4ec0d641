import type { Request, Response } from "express";
import { In, type EntityManager } from "typeorm";

import { compilableBibtex } from "~server/citation/export";
import { HttpProblem } from "~server/common/errors";
import { releaseJson, releaseRows } from "~server/release/releaseContent";
import {
  ReleaseRow,
  rowContent,
  type Release,
  releaseSurroundings,
} from "~server/release/release.entity";
import { findRelease } from "~server/release/release.service";
import { citedRelease, releaseAddress } from "~server/release/release.type";
import { setNumbersReadBlind } from "~server/correlatedSet/readBlind";
import { recordsReadBlind } from "~server/review/blindness";
import type { RouteInstaller, RouteParts } from "~server/routes";
import { inWordsOf } from "~server/table/surroundings";
import { byteByByte, fieldWidths } from "~shared/formats/columnFile/byteByByte";
import type { FileHead, FileRow } from "~shared/formats/columnFile/columnFile";
import { csv } from "~shared/formats/columnFile/csv";
import { ecsv } from "~shared/formats/columnFile/ecsv";
import { votable } from "~shared/formats/columnFile/votable";
import { demonstrationWords, EXPORT_CAUTIONS } from "~shared/formats/exportRow";
import { RECORD_COLUMNS, recordCells } from "~shared/formats/recordColumns";
import { releaseBibtex, releaseCff, releaseCsl } from "~shared/formats/releaseCitation";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { streamFile } from "./stream";

interface Writer {
  type: string;
  /** File name behind "fogline-release-2". */
  ending: string;
  write(manager: EntityManager, release: Release, publicUrl: string): AsyncIterable<string>;
}

async function* whole(text: string): AsyncGenerator<string> {
  yield text;
}

const WRITERS: Record<string, Writer> = {
  json: {
    type: "application/json; charset=utf-8",
    ending: ".json",
    write: (manager, release, publicUrl) =>
      releaseJson(manager, release, releaseAddress(publicUrl, release.number)),
  },
  csv: {
    type: "text/csv; charset=utf-8",
    ending: ".csv",
    write: (manager, release, publicUrl) =>
      csv(headOf(release, publicUrl), rowsOf(manager, release)),
  },
  ecsv: {
    type: "text/plain; charset=utf-8",
    ending: ".ecsv",
    write: (manager, release, publicUrl) =>
      ecsv(headOf(release, publicUrl), rowsOf(manager, release)),
  },
  vot: {
    type: "application/x-votable+xml; charset=utf-8",
    ending: ".vot",
    write: (manager, release, publicUrl) =>
      votable(headOf(release, publicUrl), rowsOf(manager, release)),
  },
  txt: {
    type: "text/plain; charset=us-ascii",
    ending: ".txt",
    write: async function* (manager, release, publicUrl) {
      const widths = await fieldWidths(RECORD_COLUMNS, rowsOf(manager, release));
      yield* byteByByte(headOf(release, publicUrl), widths, rowsOf(manager, release));
    },
  },
  bib: {
    type: "application/x-bibtex; charset=utf-8",
    ending: ".bib",
    write: async function* (manager, release, publicUrl) {
      const papers = new Map<string, { key: string; entryBibtex: string }>();
      for await (const row of releaseRows(manager, release.number)) {
        const { key, entryBibtex } = rowContent(row).citation;
        papers.set(key, { key, entryBibtex });
      }
      yield compilableBibtex([...papers.values()], headOf(release, publicUrl).lines);
    },
  },
  cff: {
    type: "text/plain; charset=utf-8",
    ending: ".cff",
    write: (_, release, publicUrl) => whole(releaseCff(citedRelease(release, publicUrl))),
  },
  "citation.bib": {
    type: "application/x-bibtex; charset=utf-8",
    ending: "-citation.bib",
    write: (_, release, publicUrl) => whole(releaseBibtex(citedRelease(release, publicUrl))),
  },
  "citation.json": {
    type: "application/vnd.citationstyles.csl+json; charset=utf-8",
    ending: "-citation.json",
    write: (_, release, publicUrl) => whole(releaseCsl(citedRelease(release, publicUrl))),
  },
};

/**
 * GET /api/releases/2.json, .csv, .ecsv, .vot, .txt (byte-by-byte), .bib (the papers), .cff, .citation.bib
 * and .citation.json, for anybody. The bytes of a number never change.
 */
export const releaseDownloads: RouteInstaller = (router, parts) => {
  router.get("/api/releases/:file", (req, res) => send(parts, req, res));
};

async function send(parts: RouteParts, req: Request, res: Response): Promise<void> {
  const [, number = "", kind = ""] = /^(\d{1,9})\.(.+)$/.exec(String(req.params.file)) ?? [];
  const writer = Object.hasOwn(WRITERS, kind) ? WRITERS[kind] : undefined;
  const ctx = await parts.context(req, res);
  const { manager } = ctx.database;
  const release = writer ? await findRelease(manager, Number(number)) : null;
  if (!writer || !release) {
    throw new HttpProblem(404, "NOT_FOUND", "There is no such file of a release.");
  }
  const sets = await setNumbersReadBlind(manager, ctx.viewer, new Date());
  const blind = [
    ...(await heldBlind(manager, release, await recordsReadBlind(manager, ctx.viewer, new Date()))),
    ...(sets.size === 0 ? [] : releaseSurroundings(release).sets)
      .map(({ id }) => id)
      .filter((id) => sets.has(id)),
  ];
  if (blind.length > 0) {
    const sentence = `This release holds ${blind.join(", ")}, which you are reading. It opens when your second reading is stored.`;
    throw new HttpProblem(403, "READING", sentence);
  }
  await streamFile(req, res, {
    type: writer.type,
    name: `fogline-release-${release.number}${writer.ending}`,
    etag: `${release.number}-${release.digest}-${kind}`,
    pieces: () => writer.write(manager, release, ctx.config.publicUrl),
  });
}

/** Numbers of the release's records that the viewer is reading blind. */
async function heldBlind(
  manager: EntityManager,
  release: Release,
  blind: ReadonlySet<number>,
): Promise<string[]> {
  if (blind.size === 0) return [];
  const held = await manager.find(ReleaseRow, {
    select: { releaseNumber: true, constraintId: true },
    where: { releaseNumber: release.number, constraintId: In([...blind]) },
    order: { constraintId: "ASC" },
  });
  return held.map((row) => formatRecordNumber(row.constraintId));
}

function headOf(release: Release, publicUrl: string): FileHead {
  const demonstration = demonstrationWords(release.demonstration);
  return {
    title: `Fogline, release ${release.number}: published constraints on the neutral-fraction history`,
    lines: [
      ...(demonstration ? [demonstration] : []),
      `Address: ${releaseAddress(publicUrl, release.number)}`,
      `Date: ${release.cutAt.toISOString().slice(0, 10)}`,
      `Records: ${release.records}`,
      `Digest: sha256:${release.digest} (SHA-256 over the RFC 8785 form of content in the JSON file)`,
      `Licence: ${release.licence}`,
      ...EXPORT_CAUTIONS,
      "Fractions in used_ columns are neutral, at the printed level; an empty cell means nothing is stated.",
    ],
    columns: RECORD_COLUMNS,
  };
}

async function* rowsOf(manager: EntityManager, release: Release): AsyncGenerator<FileRow> {
  const kept = releaseSurroundings(release);
  for await (const row of releaseRows(manager, release.number)) {
    const { number, state, fields, citation } = rowContent(row);
    const { key, shortName, year, doi, arxiv, bibcode } = citation;
    yield inWordsOf(kept, () =>
      recordCells({
        number,
        quotable: formatQuotable(row.constraintId, row.ordinal),
        state,
        fields,
        citation: { key, shortName, year, doi, arxiv, bibcode },
      }),
    );
  }
}
