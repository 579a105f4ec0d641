import { createHash } from "node:crypto";

import canonicalize from "canonicalize";
import type { EntityManager } from "typeorm";

import { EventHead, EventRecord } from "./event.entity";

/** One change of state, appended in the transaction that makes the change. */
export interface EventEntry {
  /** What happened: "revision.submitted", "role.granted", … */
  kind: string;
  /** Person who did it; null for the program itself. */
  actorId: string | null;
  /** What it happened to: "FL-0042.1", "user:<id>", "table:<slug>". */
  subject: string;
  /** Facts of the change; never the numbers of an unread submission. */
  detail?: Record<string, unknown>;
  /** When it happened; now unless said. Only the demonstration sets it. */
  at?: Date;
}

/** The end of the log, as exports quote it. */
export interface LastEvent {
  sequence: number;
  digest: string;
  at: Date;
}

const HEAD = 1;

/** Digest that the first event names as the one before it. */
export const CHAIN_START = "0".repeat(64);

/**
 * SHA-256, in hex, over the RFC 8785 form of a JSON value.
 * Equal values give equal digests whatever the order of their keys.
 */
export function digestOf(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError("only a JSON value has a digest");
  return createHash("sha256").update(text, "utf8").digest("hex");
}

type Digested = Omit<EventRecord, "digest">;

function eventDigest(event: Digested): string {
  return digestOf({
    sequence: event.sequence,
    at: event.at.toISOString(),
    kind: event.kind,
    actorId: event.actorId,
    subject: event.subject,
    detail: event.detail,
    previousDigest: event.previousDigest,
  });
}

/**
 * Appends an event, chained to the one before by its digest.
 * Must run inside the caller's transaction: the head row stays locked until it ends, so events
 * are numbered in the order in which they come to be true.
 */
export async function appendEvent(manager: EntityManager, entry: EventEntry): Promise<void> {
  if (!manager.queryRunner?.isTransactionActive) {
    throw new Error(`event ${entry.kind} appended outside a transaction`);
  }
  // An update of nothing, so that the first lock is exclusive: INSERT IGNORE would take a shared
  // one first, and two writers who then want more wait for each other.
  await manager.query(
    `INSERT INTO event_head (id, sequence, digest) VALUES (?, 0, ?)
       ON DUPLICATE KEY UPDATE sequence = sequence`,
    [HEAD, CHAIN_START],
  );
  const head = await manager
    .createQueryBuilder(EventHead, "head")
    .setLock("pessimistic_write")
    .where("head.id = :id", { id: HEAD })
    .getOneOrFail();

  const event: Digested = {
    sequence: head.sequence + 1,
    // The database keeps microseconds, a Date milliseconds: nothing is lost on the way back.
    at: entry.at ?? new Date(),
    kind: entry.kind,
    actorId: entry.actorId,
    subject: entry.subject,
    // Through JSON once, so that what is digested is what is read back.
    detail: JSON.parse(JSON.stringify(entry.detail ?? {})) as Record<string, unknown>,
    previousDigest: head.digest,
  };
  const digest = eventDigest(event);
  await manager.insert(EventRecord, { ...event, digest } as never);
  await manager.update(EventHead, { id: HEAD }, { sequence: event.sequence, digest });
}

/** The newest event, or null when nothing has happened yet. */
export async function lastEvent(manager: EntityManager): Promise<LastEvent | null> {
  const [event] = await manager.find(EventRecord, { order: { sequence: "DESC" }, take: 1 });
  return event ? { sequence: event.sequence, digest: event.digest, at: event.at } : null;
}

/** Outcome of walking the chain: how many events hold, or where and how it breaks. */
export type ChainCheck =
  { intact: true; events: number } | { intact: false; sequence: number; reason: string };

/** Walks the whole log and checks every digest, every link and the head. */
export async function verifyChain(manager: EntityManager): Promise<ChainCheck> {
  const page = 1000;
  let previous = CHAIN_START;
  let sequence = 0;
  for (;;) {
    const events = await manager
      .createQueryBuilder(EventRecord, "event")
      .where("event.sequence > :sequence", { sequence })
      .orderBy("event.sequence")
      .take(page)
      .getMany();
    for (const event of events) {
      if (event.sequence !== sequence + 1) {
        return { intact: false, sequence: sequence + 1, reason: "an event is missing" };
      }
      sequence = event.sequence;
      if (event.previousDigest !== previous) {
        return { intact: false, sequence, reason: "the event does not name the one before it" };
      }
      if (eventDigest(event) !== event.digest) {
        return { intact: false, sequence, reason: "the event was changed after it was written" };
      }
      previous = event.digest;
    }
    if (events.length < page) break;
  }
  const head = await manager.findOneBy(EventHead, { id: HEAD });
  if ((head?.sequence ?? 0) !== sequence || (head?.digest ?? CHAIN_START) !== previous) {
    return { intact: false, sequence: sequence + 1, reason: "the log ends before its head" };
  }
  return { intact: true, events: sequence };
}
