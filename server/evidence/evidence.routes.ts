import type { Request, Response } from "express";
import multer, { MulterError } from "multer";

import { HttpProblem, tooManySentence } from "~server/common/errors";
import { Refusal } from "~server/common/outcomes";
import { acting } from "~server/event/acting";
import { requireMay } from "~server/http/context";
import { seesEvidence } from "~server/review/blindness";
import type { RouteInstaller } from "~server/routes";
import { bytesInWords, EVIDENCE_LIMITS, type EvidenceKind } from "~shared/evidence/evidence";

import { lie, nameProblem } from "./claims";
import { kindOf } from "./content";
import { Evidence } from "./evidence.entity";
import { attachEvidence } from "./evidence.service";
import { evidenceType } from "./evidence.type";
import { bytesOf } from "./store";

const TOO_LARGE = `The file is larger than ${bytesInWords(EVIDENCE_LIMITS.bytes)}.`;

const receive = multer({
  storage: multer.memoryStorage(),
  // Names of files are UTF-8; multer reads them as Latin-1 unless told. Paths are kept, to be refused.
  defParamCharset: "utf8",
  preservePath: true,
  limits: {
    ...{ fileSize: EVIDENCE_LIMITS.bytes, files: 1, fields: 4, parts: 5 },
    ...{ fieldSize: 4 * EVIDENCE_LIMITS.caption, fieldNameSize: 40, headerPairs: 20 },
  },
}).single("file");

/** Files that are being received wait in memory: so many at once, and so many of one person. */
const AT_ONCE = { all: 8, person: 2 };

/** POST /api/evidence attaches one file to a draft; GET /api/evidence/ID hands it to who may see it. */
export const evidenceRoutes: RouteInstaller = (router, parts) => {
  const receiving = new Map<string, number>();

  router.post("/api/evidence", async (req, res) => {
    // Asked before the file is read: a stranger's bytes are not even collected.
    const ctx = await parts.context(req, res);
    const { id: personId } = requireMay(ctx, "keepEvidence");
    const wait = await parts.limits.evidence.take(personId);
    if (wait > 0) throw busy(tooManySentence(wait), wait);
    const own = receiving.get(personId) ?? 0;
    const all = [...receiving.values()].reduce((sum, n) => sum + n, 0);
    if (own >= AT_ONCE.person || all >= AT_ONCE.all) {
      throw busy("Other files are arriving just now. Try again in a moment.", 5);
    }
    receiving.set(personId, own + 1);
    try {
      await received(req, res);
      const { file } = req;
      if (!file) throw unreadable("Send the file in the field `file`.");
      const outcome = await attachEvidence(acting(ctx), {
        revisionId: field(req, "revision"),
        caption: field(req, "caption"),
        name: file.originalname.normalize("NFC").trim(),
        kind: foundKind(file),
        bytes: file.buffer,
      });
      if (outcome instanceof Refusal) {
        const status = outcome.code === "notFound" ? 404 : 409;
        throw new HttpProblem(status, outcome.code, outcome.message);
      }
      const { id, name, kind, bytes, digest, address } = evidenceType(outcome, true);
      res.status(201).json({ id, name, kind, bytes, digest, address });
    } finally {
      const left = (receiving.get(personId) ?? 1) - 1;
      if (left > 0) receiving.set(personId, left);
      else receiving.delete(personId);
    }
  });

  router.get("/api/evidence/:id", async (req, res) => {
    const ctx = await parts.context(req, res);
    if (!ctx.viewer) throw new HttpProblem(401, "UNAUTHENTICATED", "Sign in first.");
    const { manager } = parts.database;
    const evidence = await manager.findOne(Evidence, {
      where: { id: req.params.id },
      relations: { file: true, revision: { constraint: true } },
    });
    if (!evidence || !(await seesEvidence(manager, ctx.viewer, evidence.revision, new Date()))) {
      throw new HttpProblem(
        404,
        "NOT_FOUND",
        "There is no such file, or it is not for you to see.",
      );
    }
    const bytes = await bytesOf(manager, evidence.digest);
    if (!bytes) throw new Error(`evidence ${evidence.digest} is not the bytes of its digest`);
    sendEvidence(res, evidence.name, evidence.file.kind, bytes);
  });
};

/** A table is sent as plain text, which no browser takes for anything else. */
const TYPES: Record<EvidenceKind, string> = {
  pdf: "application/pdf",
  png: "image/png",
  jpeg: "image/jpeg",
  csv: "text/plain; charset=utf-8",
};

/**
 * Sends a stranger's bytes so that they are only ever saved, or drawn by our own <img>: as what
 * they were found to be, not to be guessed at, never as a page, in nobody else's page, kept by
 * no cache.
 */
function sendEvidence(res: Response, name: string, kind: EvidenceKind, bytes: Buffer): void {
  res.attachment(name);
  res.setHeader("Content-Type", TYPES[kind]);
  res.setHeader("X-Content-Type-Options", "nosniff");
  res.setHeader("Content-Security-Policy", "default-src 'none'; sandbox");
  res.setHeader("Cross-Origin-Resource-Policy", "same-origin");
  res.setHeader("Cache-Control", "no-store");
  res.end(bytes);
}

function foundKind(file: Express.Multer.File): EvidenceKind {
  const wrongName = nameProblem(file.originalname);
  if (wrongName !== null) throw unreadable(wrongName);
  const found = kindOf(file.buffer);
  if ("refused" in found) throw unreadable(found.refused);
  const contradiction = lie(found.kind, file.originalname, file.mimetype);
  if (contradiction !== null) throw unreadable(contradiction);
  return found.kind;
}

function field(req: Request, name: string): string {
  const value: unknown = (req.body as Record<string, unknown> | undefined)?.[name];
  return typeof value === "string" ? value : "";
}

const unreadable = (sentence: string): HttpProblem =>
  new HttpProblem(400, "UNREADABLE_FILE", sentence);

function busy(sentence: string, seconds: number): HttpProblem {
  return new HttpProblem(429, "TOO_MANY_REQUESTS", sentence, {
    "Retry-After": String(Math.ceil(seconds)),
  });
}

function received(req: Request, res: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    receive(req, res, (error: unknown) => {
      if (!error) resolve();
      else if (error instanceof MulterError && error.code === "LIMIT_FILE_SIZE") {
        reject(new HttpProblem(413, "FILE_TOO_LARGE", TOO_LARGE));
      } else {
        reject(unreadable("The file did not arrive whole. Send one file as multipart/form-data."));
      }
    });
  });
}
