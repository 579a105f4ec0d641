import type { Request, Response } from "express";

import { HttpProblem } from "~server/common/errors";
import type { RouteInstaller, RouteParts } from "~server/routes";
import { TABLE_FILES } from "~server/table/files";
import { loadTableFile } from "~server/table/table.service";
import { TABLE_SCHEMA } from "~shared/formats/tableSchema";

import { streamFile } from "./stream";

/**
 * GET /api/tables/SLUG.KIND and /api/tables/SLUG@2.KIND: the newest or a numbered version of a saved table, for
 * whoever may see it. The bytes of a numbered version never change. GET /api/schemas/fitting-table-2.json: what
 * the JSON file looks like.
 */
export const tableDownloads: RouteInstaller = (router, parts) => {
  router.get("/api/schemas/fitting-table-2.json", (_req, res) => {
    res.setHeader("Cache-Control", "public, max-age=3600");
    res.type("application/schema+json").send(`${JSON.stringify(TABLE_SCHEMA, null, 2)}\n`);
  });
  router.get("/api/tables/:file", (req, res) => send(parts, req, res));
};

const NO_TABLE = "There is no table at this address.";

async function send(parts: RouteParts, req: Request, res: Response): Promise<void> {
  const [, slug = "", number, kind = ""] =
    /^([a-z0-9]{1,24})(?:@(\d{1,6}))?\.(.+)$/.exec(String(req.params.file)) ?? [];
  const ctx = await parts.context(req, res);
  const lookup = await loadTableFile(ctx, slug, number === undefined ? null : Number(number));
  if (lookup.found === "nothing" || !Object.hasOwn(TABLE_FILES, kind)) {
    throw new HttpProblem(404, "NOT_FOUND", NO_TABLE);
  }
  if (lookup.found === "deleted") {
    throw new HttpProblem(410, "GONE", "This table was deleted by the person who made it.");
  }
  if (lookup.found === "blind") {
    const sentence = `This table holds ${lookup.numbers.join(", ")}, which you are reading. It opens when your second reading is stored.`;
    throw new HttpProblem(403, "READING", sentence);
  }
  const { table, version } = lookup;
  const file = TABLE_FILES[kind];
  if (!file) throw new HttpProblem(404, "NOT_FOUND", NO_TABLE);
  await streamFile(req, res, {
    type: file.type,
    name: `fogline-table-${table.slug}-v${version.version}.${kind}`,
    etag: `${version.digest}-${version.version}-${version.name}-${kind}`,
    pieces: () => file.pieces({ manager: ctx.database.manager, version }),
  });
}
