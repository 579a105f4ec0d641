import { randomBytes } from "node:crypto";

import { In, type EntityManager } from "typeorm";

import { ApiToken } from "~server/apiToken/apiToken.entity";
import { AuthorCheck } from "~server/authorCheck/authorCheck.entity";
import type { RequestContext } from "~server/common/context";
import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import { updateAt } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { transact } from "~server/database/transaction";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { appendEvent } from "~server/event/eventLog";
import { ImportMatch } from "~server/import/importMatch.entity";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { queueMail } from "~server/mail/outbox";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { Recusal } from "~server/review/recusal.entity";
import { Upload } from "~server/upload/upload.entity";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { FORMER_MEMBER, type CreditAfterwards } from "~shared/review/formerMember";

import { withOwnPassword } from "./account.service";
import { accountDeletedMail } from "./mails";
import { MailToken } from "./mailToken.entity";
import { hashPassword } from "./password";
import { lockMaintainers } from "./people.service";
import { RoleGrant } from "./roleGrant.entity";
import { User } from "./user.entity";

/**
 * Deletes the signed-in person's account. Records, readings, comments, saved tables and the event
 * log stay, since others rely on them: they name an id, whose row remains without address and
 * password, and without name and ORCID for who wants to be anonymous. Open claims go back to the
 * queue and drafts are discarded.
 */
export async function deleteAccount(
  ctx: RequestContext,
  password: string,
  credit: CreditAfterwards,
): Promise<Done | Refusal> {
  const user = await withOwnPassword(ctx, password, "password");
  if (user instanceof Refusal) return user;
  // Of random bytes that nobody ever saw: no password fits it.
  const passwordHash = await hashPassword(ctx.config.passwordCost, randomBytes(32).toString("hex"));
  const outcome = await transact<Done | Refusal>(ctx.database, async (manager) => {
    const maintainers = await lockMaintainers(manager);
    if (maintainers.length === 1 && maintainers[0]?.userId === user.id) {
      return refuse(
        "LAST_MAINTAINER",
        "You are the last maintainer. Make somebody else a maintainer first.",
      );
    }
    await letGo(manager, user.id);
    await forget(manager, user);
    const name = credit === "anonymous" ? { nameOnPapers: FORMER_MEMBER, orcid: null } : {};
    await manager
      .createQueryBuilder()
      .update(User)
      .set({
        ...name,
        // No mail address: nobody can register it, and no mail is sent to it.
        email: `former:${user.id}`,
        furtherNames: [],
        passwordHash,
        formerAt: new Date(),
        sessionEpoch: () => "sessionEpoch + 1",
      })
      .where("id = :id", { id: user.id })
      .execute();
    await appendEvent(manager, {
      kind: "account.deleted",
      actorId: user.id,
      subject: `user:${user.id}`,
      detail: { credit },
    });
    await queueMail(manager, accountDeletedMail(user));
    return done("Your account is deleted.");
  });
  if (!(outcome instanceof Refusal)) await ctx.signOut();
  return outcome;
}

/** Claims go back into the queue, drafts are put aside; what waits for an editor stays submitted. */
async function letGo(manager: EntityManager, userId: string): Promise<void> {
  const open = await manager
    .createQueryBuilder(Revision, "revision")
    .setLock("pessimistic_write")
    .innerJoin("revision.constraint", "record")
    .where(
      "(revision.state = 'inReview' AND revision.claimedById = :userId) OR (revision.state = 'draft' AND record.ownerId = :userId)",
      { userId },
    )
    .orderBy("revision.id")
    .getMany();
  for (const revision of open) {
    const isDraft = revision.state === "draft";
    await updateAt(
      manager,
      revision.id,
      revision.version,
      [revision.state],
      isDraft
        ? { state: "discarded" }
        : { state: "submitted", claimedById: null, claimedUntil: null },
    );
    await appendEvent(manager, {
      kind: isDraft ? "revision.discarded" : "claim.released",
      actorId: userId,
      subject: formatQuotable(revision.constraintId, revision.ordinal),
      ...(isDraft && { detail: { from: "draft" } }),
    });
  }
}

/** What concerns the person only: roles, links, API tokens, files brought for an import, mails, addresses. */
async function forget(manager: EntityManager, { id, email }: User): Promise<void> {
  await manager.delete(RoleGrant, { userId: id });
  await manager.delete(MailToken, { userId: id });
  await manager.delete(ApiToken, { ownerId: id });
  await manager.delete(Upload, { ownerId: id, kind: In(["csv", "bib"]) });
  await manager.delete(ImportMatch, { ownerId: id });
  await manager.delete(OutboxMail, { to: email });
  await manager.delete(CaughtMailRow, { to: email });
  const nobody = { reporterId: null, reporterEmail: null };
  await manager.update(ErrorReport, { reporterId: id }, nobody);
  await manager.update(ErrorReport, { reporterEmail: email }, { reporterEmail: null });
  await manager.update(
    AuthorCheck,
    { authorEmail: email },
    { authorName: null, authorEmail: null },
  );
  await manager.delete(Recusal, { editorId: id });
}
