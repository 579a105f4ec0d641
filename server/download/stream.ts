import { createHash } from "node:crypto";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";

import type { Request, Response } from "express";

/** A file whose bytes never change, written while it is sent. */
export interface StreamedFile {
  type: string;
  /** Name it is saved under. */
  name: string;
  /** What its bytes depend on. */
  etag: string;
  pieces(): AsyncIterable<string | Buffer>;
}

/**
 * Sends a file piece by piece, so that its first byte goes out before its last row is read. Caches must ask each
 * time, and no shared one keeps it: an editor who reads blind gets another answer from one address.
 */
export async function streamFile(req: Request, res: Response, file: StreamedFile): Promise<void> {
  const etag = createHash("sha256").update(file.etag, "utf8").digest("base64url").slice(0, 32);
  res.setHeader("ETag", `"${etag}"`);
  res.setHeader("Cache-Control", "private, no-cache");
  res.vary("Cookie");
  if (req.fresh) {
    res.status(304).end();
    return;
  }
  res.setHeader("Content-Type", file.type);
  res.setHeader("Content-Disposition", `attachment; filename="${file.name}"`);
  res.setHeader("X-Content-Type-Options", "nosniff");
  if (req.method === "HEAD") {
    res.end();
    return;
  }
  try {
    await pipeline(Readable.from(file.pieces()), res);
  } catch (error) {
    // Somebody who went away in the middle is nobody's error.
    if ((error as { code?: string }).code !== "ERR_STREAM_PREMATURE_CLOSE") throw error;
  }
}
