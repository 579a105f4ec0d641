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

type Digested = Omit<EventRecord, "digest" | "at"> & { at: string };

/** Digest of an event from its parts; `at` in ISO 8601 with milliseconds, UTC. */
function eventDigest(event: Digested): string {
  return digestOf({
    sequence: event.sequence,
    at: event.at,
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

  const at = entry.at ?? new Date();
  const event: Digested = {
    sequence: head.sequence + 1,
    // The database keeps microseconds, a Date milliseconds: nothing is lost on the way back.
    at: at.toISOString(),
    kind: entry.kind,
    actorId: entry.actorId,
    subject: entry.subject,
    // Through JSON once, so that what is digested is what is read back.
    detail: JSON.parse(JSON.stringify(entry.detail ?? {})) as Record<string, unknown>,
    previousDigest: head.digest,
  };
  const digest = eventDigest(event);
  await manager.insert(EventRecord, { ...event, at, digest } as never);
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

/** What a row of the log holds, byte for byte: no driver has turned it into anything nicer. */
interface StoredEvent {
  sequence: number;
  at: string | null;
  kind: string;
  actorId: string | null;
  subject: string;
  detail: string;
  previousDigest: string;
  digest: string;
}

const PAGE = 1000;

/**
 * Walks the whole log, in one consistent look at it, and checks every digest, every link and the head.
 *
 * @param seen - Called with the number and digest of each event that holds, in order.
 */
export async function verifyChain(
  manager: EntityManager,
  seen: (sequence: number, digest: string) => void = () => {},
): Promise<ChainCheck> {
  // One snapshot, so that events added meanwhile don't count as a broken head.
  return manager.transaction("REPEATABLE READ", (snapshot) => walk(snapshot, seen));
}

async function walk(
  manager: EntityManager,
  seen: (sequence: number, digest: string) => void,
): Promise<ChainCheck> {
  let previous = CHAIN_START;
  let sequence = 0;
  for (;;) {
    const events: StoredEvent[] = await manager.query(
      `SELECT sequence, DATE_FORMAT(at, '%Y-%m-%dT%H:%i:%s.%f') AS at, kind, actorId, subject,
              CAST(detail AS CHAR) AS detail, previousDigest, digest
         FROM event WHERE sequence > ? ORDER BY sequence LIMIT ?`,
      [sequence, PAGE],
    );
    for (const event of events) {
      if (event.sequence !== sequence + 1) {
        return { intact: false, sequence: sequence + 1, reason: "the event is missing" };
      }
      sequence = event.sequence;
      if (event.previousDigest !== previous) {
        return { intact: false, sequence, reason: "the event does not name the one before it" };
      }
      if (storedDigest(event) !== event.digest) {
        return { intact: false, sequence, reason: "the event was changed after it was written" };
      }
      previous = event.digest;
      seen(sequence, previous);
    }
    if (events.length < PAGE) break;
  }
  const head = await manager.findOneBy(EventHead, { id: HEAD });
  const ends = head?.sequence ?? 0;
  if (ends > sequence) {
    return { intact: false, sequence: sequence + 1, reason: "the log ends before its head" };
  }
  if (ends < sequence) {
    return { intact: false, sequence: ends + 1, reason: "the event stands after the log's head" };
  }
  if ((head?.digest ?? CHAIN_START) !== previous) {
    return { intact: false, sequence, reason: "the log's head is not this event" };
  }
  return { intact: true, events: sequence };
}

/**
 * Digest of an event as it is stored, or null if it can't have been written by `appendEvent`: a
 * digit beyond the milliseconds, or JSON that says the same in other bytes, is a change too.
 */
function storedDigest({ at, detail, ...event }: StoredEvent): string | null {
  if (at === null || !at.endsWith("000")) return null;
  let value: unknown;
  try {
    value = JSON.parse(detail);
  } catch {
    return null;
  }
  if (JSON.stringify(value) !== detail) return null;
  return eventDigest({
    ...event,
    at: `${at.slice(0, -3)}Z`,
    detail: value as Record<string, unknown>,
  });
}
