import type { EntityManager } from "typeorm";

import { OutboxMail } from "./outboxMail.entity";

export interface OutgoingMail {
  to: string;
  subject: string;
  text: string;
}

const SUBJECT_LENGTH = 200;

/**
 * Stores a mail in the caller's transaction; a worker delivers it and retries.
 *
 * @param notBefore - Keep it back until then; null delivers it as soon as may be.
 */
export async function queueMail(
  manager: EntityManager,
  mail: OutgoingMail,
  notBefore: Date | null = null,
): Promise<void> {
  // Who has left the registry has no address any more (server/account/leave.service.ts).
  if (!mail.to.includes("@")) return;
  await manager.insert(OutboxMail, {
    to: mail.to,
    // A subject may quote what a person typed: a line break in it would start another header.
    subject: mail.subject.replace(/[\u0000-\u001f\u007f]+/g, " ").slice(0, SUBJECT_LENGTH),
    text: mail.text,
    ...(notBefore && { nextTryAt: notBefore }),
  });
}
