import { createHash } from "node:crypto";

import type { EntityManager } from "typeorm";

import type { EvidenceKind } from "~shared/evidence/evidence";

import { EvidenceChunk, EvidenceFile } from "./evidence.entity";

/** Twice as long as a statement's text: far below the 1 MB that the oldest servers take. */
const CHUNK = 256 * 1024;

export function digestOfBytes(bytes: Buffer): string {
  return createHash("sha256").update(bytes).digest("hex");
}

/** Keeps the bytes under their digest, unless they are there. Runs in the caller's transaction. */
export async function keepBytes(
  manager: EntityManager,
  bytes: Buffer,
  kind: EvidenceKind,
): Promise<string> {
  const digest = digestOfBytes(bytes);
  // Waits for whoever keeps the same bytes at this moment; one of the two then finds them there.
  const { affectedRows }: { affectedRows: number } = await manager.query(
    "INSERT IGNORE INTO evidence_file (digest, kind, bytes) VALUES (?, ?, ?)",
    [digest, kind, bytes.length],
  );
  if (affectedRows === 0) return digest;
  for (let at = 0; at < bytes.length; at += CHUNK) {
    const chunk = { digest, ordinal: at / CHUNK, data: bytes.subarray(at, at + CHUNK) };
    await manager.insert(EvidenceChunk, chunk);
  }
  return digest;
}

/** The bytes of a digest; null when they are not there or not those of the digest any more. */
export async function bytesOf(manager: EntityManager, digest: string): Promise<Buffer | null> {
  const chunks = await manager.find(EvidenceChunk, {
    where: { digest },
    order: { ordinal: "ASC" },
  });
  const bytes = Buffer.concat(chunks.map(({ data }) => data));
  return digestOfBytes(bytes) === digest ? bytes : null;
}

/** Forgets bytes that belong to no revision any more. */
export async function forgetUnused(
  manager: EntityManager,
  digests: readonly string[],
): Promise<void> {
  for (const digest of new Set(digests)) {
    try {
      await manager.query(
        `DELETE FROM evidence_file WHERE digest = ?
           AND NOT EXISTS (SELECT 1 FROM evidence e WHERE e.digest = ?)`,
        [digest, digest],
      );
    } catch (error) {
      // Somebody attached the same bytes meanwhile: the foreign key keeps them.
      if ((error as { code?: string }).code !== "ER_ROW_IS_REFERENCED_2") throw error;
    }
  }
}

/** Bytes that nothing names: of a draft that went with its record, say. */
export async function sweepUnused(manager: EntityManager): Promise<void> {
  const unused = await manager
    .createQueryBuilder(EvidenceFile, "file")
    .where("NOT EXISTS (SELECT 1 FROM evidence e WHERE e.digest = file.digest)")
    .take(1000)
    .getMany();
  await forgetUnused(
    manager,
    unused.map(({ digest }) => digest),
  );
}
