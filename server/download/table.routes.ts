import type { Request, Response } from "express";

import { HttpProblem } from "~server/common/errors";
import type { RouteInstaller, RouteParts } from "~server/routes";
import { loadTableFile } from "~server/table/table.service";

import { sendFile, type FileKind } from "./send";

/** GET /api/tables/SLUG.csv, .json and .bib: a saved table, for anybody. */
export const tableDownloads: RouteInstaller = (router, parts) => {
  router.get("/api/tables/:slug.csv", (req, res) => send(parts, req, res, "csv"));
  router.get("/api/tables/:slug.json", (req, res) => send(parts, req, res, "json"));
  router.get("/api/tables/:slug.bib", (req, res) => send(parts, req, res, "bib"));
};

async function send(parts: RouteParts, req: Request, res: Response, kind: FileKind): Promise<void> {
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
  sendFile(res, `fogline-table-${table.slug}`, kind, table.snapshot.files[kind]);
}
