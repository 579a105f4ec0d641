import type { DataSource, EntityManager } from "typeorm";

const TRIES = 5;
/** Deadlock, lock wait over, record changed since read: the whole transaction may be tried again. */
const TRY_AGAIN = new Set(["ER_LOCK_DEADLOCK", "ER_LOCK_WAIT_TIMEOUT", "ER_CHECKREAD"]);

/**
 * Runs `work` in a transaction and again when the database broke it off for another's sake.
 * READ COMMITTED: each statement sees what others have decided by then, and looking for a row
 * that is not there locks no gap in which others insert.
 */
export async function transact<T>(
  database: Pick<DataSource, "transaction">,
  work: (manager: EntityManager) => Promise<T>,
  alsoAgainAfter: readonly string[] = [],
): Promise<T> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await database.transaction("READ COMMITTED", work);
    } catch (error) {
      const code = (error as { code?: string }).code ?? "";
      const again = TRY_AGAIN.has(code) || alsoAgainAfter.includes(code);
      if (!again || attempt === TRIES) throw error;
    }
  }
}
