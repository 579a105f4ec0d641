import type { DataSource, EntityManager } from "typeorm";

import { requireViewer, type RequestContext, type ViewerIdentity } from "~server/common/context";
import { queueMail, type OutgoingMail } from "~server/mail/outbox";

import { appendEvent, type EventEntry } from "./eventLog";

/** Who acts, when, on which database: what a service needs, whether a request or the seed calls it. */
export interface Acting {
  /** The data source; or, for a story told in one transaction, its entity manager. */
  database: Pick<DataSource, "manager" | "transaction">;
  viewer: ViewerIdentity;
  now: Date;
  /** Data licence that a contributor agrees to. */
  licence: string;
  /** Base of links in mails; no slash at the end. */
  publicUrl: string;
  /** The demonstration tells its story without sending it to anybody. */
  sendsMail: boolean;
}

export function acting(ctx: RequestContext): Acting {
  return {
    database: ctx.database,
    viewer: requireViewer(ctx),
    now: new Date(),
    licence: ctx.config.licence,
    publicUrl: ctx.config.publicUrl,
    sendsMail: true,
  };
}

/** One change of state under way: what is written, logged and mailed in it holds together or not at all. */
export interface Change {
  manager: EntityManager;
  event(entry: Omit<EventEntry, "actorId" | "at">): Promise<void>;
  mail(mail: OutgoingMail): Promise<void>;
}

const ATTEMPTS = 5;
/** Deadlock, lock wait over, record changed since read: the whole transaction may be tried again. */
const TRY_AGAIN = new Set(["ER_LOCK_DEADLOCK", "ER_LOCK_WAIT_TIMEOUT", "ER_CHECKREAD"]);

/**
 * Runs one change of state in a transaction. READ COMMITTED, so that each conditional update
 * sees what others have decided by then. A thrown error undoes everything, and so does `undo`,
 * which still gives its outcome to the caller.
 */
export async function change<T>(who: Acting, work: (change: Change) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await who.database.transaction("READ COMMITTED", (manager) =>
        work({
          manager,
          event: (entry) => appendEvent(manager, { ...entry, actorId: who.viewer.id, at: who.now }),
          mail: async (mail) => {
            if (who.sendsMail) await queueMail(manager, mail);
          },
        }),
      );
    } catch (error) {
      if (error instanceof Undone) return error.outcome as T;
      const code = (error as { code?: string }).code ?? "";
      if (attempt === ATTEMPTS || !TRY_AGAIN.has(code)) throw error;
    }
  }
}

class Undone extends Error {
  constructor(readonly outcome: unknown) {
    super("the change was undone");
  }
}

/** Leaves a `change` with this outcome and with nothing kept of what it wrote. */
export function undo(outcome: unknown): never {
  throw new Undone(outcome);
}
