import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";

import type { Request, Response } from "express";
import Papa from "papaparse";
import type { EntityManager } from "typeorm";

import { findEvents, type LogEntry, type LogFilter } from "~server/event/log.query";
import { requireMay } from "~server/http/context";
import type { RouteInstaller } from "~server/routes";
import { safeCell } from "~shared/formats/exportRow";

const PAGE = 1000;

const COLUMNS: readonly (readonly [name: string, cell: (event: LogEntry) => string])[] = [
  ["sequence", ({ sequence }) => String(sequence)],
  ["at", ({ at }) => at.toISOString()],
  ["kind", ({ kind }) => kind],
  ["in_words", ({ sentence }) => sentence],
  ["who", ({ who }) => who ?? ""],
  ["actor_id", ({ actorId }) => actorId ?? ""],
  ["subject", ({ subject }) => subject],
  ["detail", ({ detail }) => JSON.stringify(detail)],
  ["previous_digest", ({ previousDigest }) => previousDigest],
  ["digest", ({ digest }) => digest],
];

const csvLine = (cells: readonly string[]): string =>
  `${Papa.unparse([cells.map(safeCell)], { newline: "\r\n" })}\r\n`;

/** As it is digested (RFC 8785, without `digest`), so that anybody can follow the chain. */
function jsonLine(event: LogEntry): string {
  const { sequence, at, kind, actorId, subject, detail, previousDigest, digest } = event;
  const digested = { sequence, at: at.toISOString(), kind, actorId, subject, detail };
  return `${JSON.stringify({ ...digested, previousDigest, digest })}\n`;
}

/**
 * GET /api/log.csv and /api/log.jsonl, for maintainers: the events of a filter (`person`, `about`,
 * `kind`, `from`, `to`), newest first, sent page by page so that no long log fills the memory.
 */
export const logDownloads: RouteInstaller = (router, parts) => {
  const send = async (
    req: Request,
    res: Response,
    kind: "csv" | "jsonl",
    type: string,
    head: string,
    line: (event: LogEntry) => string,
  ): Promise<void> => {
    requireMay(await parts.context(req, res), "readEventLog");
    res.setHeader("Content-Type", type);
    res.setHeader("Content-Disposition", `attachment; filename="fogline-log.${kind}"`);
    res.setHeader("X-Content-Type-Options", "nosniff");
    const lines = linesOf(parts.database.manager, filterOf(req.query), head, line);
    await pipeline(Readable.from(lines), res).catch((error: unknown) => {
      // A reader who went away is no fault of the server.
      if ((error as { code?: string }).code !== "ERR_STREAM_PREMATURE_CLOSE") throw error;
    });
  };
  router.get("/api/log.csv", (req, res) =>
    send(
      req,
      res,
      "csv",
      "text/csv; charset=utf-8",
      csvLine(COLUMNS.map(([name]) => name)),
      (event) => csvLine(COLUMNS.map(([, cell]) => cell(event))),
    ),
  );
  router.get("/api/log.jsonl", (req, res) =>
    send(req, res, "jsonl", "application/jsonl; charset=utf-8", "", jsonLine),
  );
};

async function* linesOf(
  manager: EntityManager,
  filter: LogFilter,
  head: string,
  line: (event: LogEntry) => string,
): AsyncGenerator<string> {
  if (head !== "") yield head;
  let before: number | null = null;
  for (;;) {
    const events: LogEntry[] = await findEvents(manager, filter, { before, limit: PAGE });
    if (events.length > 0) yield events.map(line).join("");
    before = events.at(-1)?.sequence ?? null;
    if (events.length < PAGE) return;
  }
}

function filterOf(query: Request["query"]): LogFilter {
  const word = (name: keyof LogFilter): string | null => {
    const value = query[name];
    return typeof value === "string" ? value : null;
  };
  return {
    person: word("person"),
    about: word("about"),
    kind: word("kind"),
    from: word("from"),
    to: word("to"),
  };
}
