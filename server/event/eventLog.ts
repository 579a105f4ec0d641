import type { EntityManager } from "typeorm";

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
}

/**
 * Appends an event, chained to the one before by its digest.
 * Must run inside the caller's transaction.
 */
export async function appendEvent(_manager: EntityManager, _entry: EventEntry): Promise<void> {
  throw new Error("event log not wired yet");
}
