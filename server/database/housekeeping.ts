import { IsNull, LessThan, Not, type EntityManager } from "typeorm";

import { MailToken } from "~server/account/mailToken.entity";
import { User } from "~server/account/user.entity";
import { sweepTokens } from "~server/apiToken/store";
import { AuthorCheck } from "~server/authorCheck/authorCheck.entity";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { sweepUnused } from "~server/evidence/store";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { CHECK_ADDRESS_KEPT_DAYS } from "~shared/review/authorCheck";
import { ADDRESS_KEPT_DAYS } from "~shared/review/errorReport";

const DAY_MS = 86_400_000;
/** A mail that was sent or given up is kept this long, for questions about it. */
const MAIL_DAYS = 30;
/** An address nobody confirmed is forgotten; its owner may never have heard of us. */
const UNCONFIRMED_DAYS = 30;

/**
 * Removes what has no use any more: old links, sent mails, registrations never confirmed, the
 * address of a reader whose report was closed long ago, name and address of an author whose check
 * has ended as long ago, API tokens that ended long ago.
 */
export async function sweep(manager: EntityManager, now = new Date()): Promise<void> {
  const before = (days: number): Date => new Date(now.getTime() - days * DAY_MS);
  await manager.delete(MailToken, { expiresAt: LessThan(now) });
  await manager.delete(OutboxMail, { deliveredAt: LessThan(before(MAIL_DAYS)) });
  await manager.delete(OutboxMail, { failedAt: LessThan(before(MAIL_DAYS)) });
  await manager.delete(CaughtMailRow, { at: LessThan(before(MAIL_DAYS)) });
  await manager.update(
    ErrorReport,
    { closedAt: LessThan(before(ADDRESS_KEPT_DAYS)), reporterEmail: Not(IsNull()) },
    { reporterEmail: null },
  );
  const long = before(CHECK_ADDRESS_KEPT_DAYS);
  await manager.update(
    AuthorCheck,
    [
      { endedAt: LessThan(long), authorEmail: Not(IsNull()) },
      // Never answered, or answered and never closed: the link has run out that long ago.
      { endedAt: IsNull(), expiresAt: LessThan(long), authorEmail: Not(IsNull()) },
    ],
    { authorName: null, authorEmail: null },
  );
  await manager.delete(User, {
    confirmedAt: IsNull(),
    createdAt: LessThan(before(UNCONFIRMED_DAYS)),
  });
  await sweepTokens(manager, now);
  await sweepUnused(manager);
}
