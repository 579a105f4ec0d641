import type { Request, Response } from "express";

import { compilableBibtex } from "~server/citation/export";
import type { RequestContext } from "~server/common/context";
import { HttpProblem } from "~server/common/errors";
import { isDemonstration } from "~server/database/settings";
import type { RouteInstaller, RouteParts } from "~server/routes";
import type { SavedTable } from "~server/table/table.entity";
import { loadTableFile } from "~server/table/table.service";
import { filterWords } from "~shared/filter/describe";
import { tableCsv, tableJson, type TableFile } from "~shared/formats/tableFiles";
import { formatQuotable } from "~shared/identifiers/recordNumber";

import { bibliographyLines, REGISTRY } from "./header";
import { likelihoodWords } from "./likelihoodWords";
import { sendFile, type FileKind } from "./send";

/** GET /api/tables/SLUG.csv, .json and .bib: a saved table, for anybody. */
export const tableDownloads: RouteInstaller = (router, parts) => {
  router.get("/api/tables/:slug.csv", (req, res) =>
    send(parts, req, res, "csv", (file, table) => tableCsv(file, table.digest)),
  );
  router.get("/api/tables/:slug.json", (req, res) =>
    send(parts, req, res, "json", (file, table) => tableJson(file, table.digest)),
  );
  router.get("/api/tables/:slug.bib", (req, res) =>
    send(parts, req, res, "bib", (file, table) => {
      const included = new Set(
        table.snapshot.rows.filter((row) => row.included).map((row) => row.number),
      );
      const citations = table.snapshot.constraints
        .filter((constraint) => included.has(constraint.number))
        .map((constraint) => constraint.citation);
      return compilableBibtex(citations, bibliographyLines(file, `papers of “${file.name}”`));
    }),
  );
};

async function send(
  parts: RouteParts,
  req: Request,
  res: Response,
  kind: FileKind,
  write: (file: TableFile, table: SavedTable) => string,
): Promise<void> {
  const ctx = await parts.context(req, res);
  const slug = String(req.params.slug);
  const lookup = await loadTableFile(ctx, slug);
  if (lookup.found === "nothing") {
    throw new HttpProblem(404, "NOT_FOUND", "There is no table at this address.");
  }
  if (lookup.found === "deleted") {
    throw new HttpProblem(410, "GONE", "This table was deleted by the person who made it.");
  }
  if (lookup.found === "blind") {
    const sentence = `This table holds ${lookup.numbers.join(", ")}, which you are reading. It opens when your second reading is stored.`;
    throw new HttpProblem(403, "READING", sentence);
  }
  const { table } = lookup;
  sendFile(res, `fogline-table-${table.slug}`, kind, write(await tableFile(ctx, table), table));
}

/** What was saved, in the form of the files; nothing in it is looked up anew but the settings. */
async function tableFile(ctx: RequestContext, table: SavedTable): Promise<TableFile> {
  const { snapshot } = table;
  const byNumber = new Map(snapshot.constraints.map((saved) => [saved.number, saved]));
  return {
    registry: REGISTRY,
    demonstration: await isDemonstration(ctx.database.manager),
    lastEvent: {
      sequence: table.lastEventSequence,
      at: table.lastEventAt.toISOString(),
      digest: table.lastEventDigest,
    },
    filter: filterWords(snapshot.filter),
    filterRecipe: snapshot.filter,
    licence: ctx.config.licence,
    name: table.name,
    slug: table.slug,
    address: `${ctx.config.publicUrl}/tables/${table.slug}`,
    rows: snapshot.rows.map((row) => {
      const saved = byNumber.get(row.number);
      if (!saved) throw new Error(`table ${table.slug} has no record ${row.number}`);
      const { key, shortName, year, doi, arxiv, bibcode } = saved.citation;
      return {
        number: saved.number,
        quotable: formatQuotable(saved.id, saved.ordinal),
        state: saved.state,
        fields: saved.fields,
        citation: { key, shortName, year, doi, arxiv, bibcode },
        included: row.included,
        proposed: row.proposed,
        reason: row.reason,
        ...likelihoodWords(saved.fields),
      };
    }),
  };
}
