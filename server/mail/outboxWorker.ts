import { createTransport } from "nodemailer";
import type { DataSource } from "typeorm";

import { failure, type Logger } from "~server/logging/logger";

import { OutboxMail } from "./outboxMail.entity";

const SECOND_MS = 1000;
const HOUR_MS = 3_600_000;
/** A mail taken for delivery is left alone this long; then another process may take it. */
const LEASE_MS = 300 * SECOND_MS;
const FIRST_WAIT_MS = 15 * SECOND_MS;
const LONGEST_WAIT_MS = 6 * HOUR_MS;
/** With the waits above, about two days. */
export const MAX_TRIES = 18;
const BATCH = 20;

export interface OutboxWorker {
  /** Delivers what is due now; resolves when that is done. */
  deliver(): Promise<void>;
  close(): Promise<void>;
}

export interface OutboxParts {
  dataSource: DataSource;
  logger: Logger;
  smtpUrl: string;
  from: string;
  /** How often it looks. */
  everyMs?: number;
}

/** Wait before the next try, after so many. */
export function backoffMs(tries: number): number {
  return Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** Math.max(0, tries - 1));
}

/**
 * Delivers the outbox. A mail is marked delivered after the mail server has taken it, so that a
 * crash in between sends it twice and never not at all; the message id stays the same.
 */
export function startOutbox(parts: OutboxParts): OutboxWorker {
  const { dataSource, logger, smtpUrl, from, everyMs = SECOND_MS } = parts;
  const transport = createTransport(smtpUrl, {
    from,
    disableFileAccess: true,
    disableUrlAccess: true,
    connectionTimeout: 15 * SECOND_MS,
    greetingTimeout: 15 * SECOND_MS,
    socketTimeout: 60 * SECOND_MS,
  } as object);
  const host = /@([^>\s]+)/.exec(from)?.[1] ?? "localhost";
  let closed = false;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let running: Promise<void> = Promise.resolve();

  const sendOne = async (mail: OutboxMail): Promise<void> => {
    try {
      await transport.sendMail({
        from,
        to: mail.to,
        subject: mail.subject,
        text: mail.text,
        date: mail.createdAt,
        messageId: `<outbox-${mail.id}-${mail.createdAt.getTime()}@${host}>`,
        headers: { "Auto-Submitted": "auto-generated" },
      });
    } catch (error) {
      await putOff(mail, error);
      return;
    }
    // The text may hold a link that opens an account: once it is sent, nobody needs it here.
    await dataSource.manager.update(
      OutboxMail,
      { id: mail.id },
      { deliveredAt: new Date(), text: "" },
    );
  };

  const putOff = async (mail: OutboxMail, error: unknown): Promise<void> => {
    const giveUp = isPermanent(error) || mail.tries >= MAX_TRIES;
    logger.warn(
      { mail: mail.id, tries: mail.tries, giveUp, code: failure(error).code },
      "mail not delivered",
    );
    await dataSource.manager.update(
      OutboxMail,
      { id: mail.id },
      giveUp
        ? { failedAt: new Date(), text: "" }
        : { nextTryAt: new Date(Date.now() + backoffMs(mail.tries)) },
    );
  };

  const deliverDue = async (): Promise<void> => {
    while (!closed) {
      const mails = await takeDue(dataSource);
      for (const mail of mails) await sendOne(mail);
      if (mails.length < BATCH) return;
    }
  };

  const deliver = (): Promise<void> => {
    running = running.then(deliverDue).catch((error: unknown) => {
      logger.error(failure(error), "outbox failed");
    });
    return running;
  };

  const look = async (): Promise<void> => {
    await deliver();
    if (!closed) timer = setTimeout(() => void look(), everyMs);
  };
  void look();

  return {
    deliver,
    close: async () => {
      closed = true;
      clearTimeout(timer);
      await running;
      transport.close();
    },
  };
}

/** The mail server refused this mail for good; trying again would only repeat it. */
function isPermanent(error: unknown): boolean {
  const { code, responseCode } = error as { code?: string; responseCode?: number };
  return (code === "EENVELOPE" || code === "EMESSAGE") && (responseCode ?? 0) >= 500;
}

/** Takes due mails for this process; others, and a second look of this one, pass them over. */
async function takeDue(dataSource: DataSource): Promise<OutboxMail[]> {
  return dataSource.transaction("READ COMMITTED", async (manager) => {
    const now = new Date();
    const mails = await manager
      .createQueryBuilder(OutboxMail, "mail")
      .setLock("pessimistic_write")
      .setOnLocked("skip_locked")
      .where("mail.deliveredAt is null and mail.failedAt is null and mail.nextTryAt <= :now", {
        now,
      })
      .orderBy("mail.id")
      .limit(BATCH)
      .getMany();
    for (const mail of mails) {
      mail.tries += 1;
      await manager.update(
        OutboxMail,
        { id: mail.id },
        { tries: mail.tries, nextTryAt: new Date(now.getTime() + LEASE_MS) },
      );
    }
    return mails;
  });
}
