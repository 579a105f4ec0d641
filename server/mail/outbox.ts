import type { EntityManager } from "typeorm";

export interface OutgoingMail {
  to: string;
  subject: string;
  text: string;
}

/** Stores a mail in the caller's transaction; a worker delivers it and retries. */
export async function queueMail(_manager: EntityManager, _mail: OutgoingMail): Promise<void> {
  throw new Error("outbox not wired yet");
}
