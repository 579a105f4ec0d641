import type { Response } from "express";

const TYPES = {
  csv: "text/csv; charset=utf-8",
  json: "application/json; charset=utf-8",
  bib: "application/x-bibtex; charset=utf-8",
} as const;
type FileKind = keyof typeof TYPES;

/**
 * Sends a file to be saved. Express adds the ETag and answers 304; caches must ask each time,
 * and no shared one keeps it: an editor who reads blind gets another answer from one address.
 */
export function sendFile(res: Response, name: string, kind: FileKind, content: string): void {
  res.setHeader("Content-Type", TYPES[kind]);
  res.setHeader("Content-Disposition", `attachment; filename="${name}.${kind}"`);
  res.setHeader("X-Content-Type-Options", "nosniff");
  res.setHeader("Cache-Control", "private, no-cache");
  res.vary("Cookie");
  res.send(content);
}
