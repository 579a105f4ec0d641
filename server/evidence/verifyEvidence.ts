import type { EntityManager } from "typeorm";

import { EventRecord } from "~server/event/event.entity";
import { formatQuotable } from "~shared/identifiers/recordNumber";

import { Evidence, EvidenceFile } from "./evidence.entity";
import { bytesOf } from "./store";

export interface EvidenceReport {
  files: number;
  /** What does not hold, a sentence each. */
  problems: string[];
}

/**
 * Proves the evidence: that each file's bytes are those of its digest, and that each submitted
 * revision keeps the files with which, as the event log says, it was submitted.
 */
export async function verifyEvidence(manager: EntityManager): Promise<EvidenceReport> {
  const problems: string[] = [];
  const files = await manager.find(EvidenceFile, { order: { digest: "ASC" } });
  for (const { digest } of files) {
    // One at a time: a registry's files together may be larger than its memory.
    if ((await bytesOf(manager, digest)) === null) {
      problems.push(`The bytes of evidence ${digest} are not those that were kept.`);
    }
  }
  const submissions = await manager.find(EventRecord, {
    where: { kind: "revision.submitted" },
    order: { sequence: "ASC" },
  });
  const kept = await keptByRevision(manager);
  for (const { sequence, subject, detail } of submissions) {
    const submitted = Array.isArray(detail.evidence) ? detail.evidence.map(String) : [];
    if (submitted.sort().join() !== (kept.get(subject) ?? []).sort().join()) {
      problems.push(
        `Event ${sequence}: ${subject} does not keep the evidence with which it was submitted.`,
      );
    }
  }
  return { files: files.length, problems };
}

/** Digests of the files of every revision that was ever submitted, by FL-0042.3. */
async function keptByRevision(manager: EntityManager): Promise<Map<string, string[]>> {
  const rows = await manager
    .createQueryBuilder(Evidence, "evidence")
    .innerJoin("evidence.revision", "revision")
    .where("revision.submittedAt IS NOT NULL")
    .select("evidence.digest", "digest")
    .addSelect("revision.constraintId", "number")
    .addSelect("revision.ordinal", "ordinal")
    .getRawMany<{ digest: string; number: number; ordinal: number }>();
  const kept = new Map<string, string[]>();
  for (const { digest, number, ordinal } of rows) {
    const quotable = formatQuotable(Number(number), Number(ordinal));
    kept.set(quotable, [...(kept.get(quotable) ?? []), digest]);
  }
  return kept;
}
