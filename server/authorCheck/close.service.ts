import type { EntityManager } from "typeorm";

import { refuse, Refusal } from "~server/common/outcomes";
import { lengthProblem, plainText } from "~server/errorReport/text";
import { change, type Acting, type Change } from "~server/event/acting";
import { barredBecause, papersLeftBy } from "~server/review/recusal.service";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { CLOSING_TEXT, type CheckState } from "~shared/review/authorCheck";

import { AuthorCheck, AuthorCheckEntry } from "./authorCheck.entity";
import { loadCheck, seesCheck } from "./authorCheck.query";
import { tellClosed } from "./mails";

const CHANGED = "This check has changed meanwhile. Reload the page.";

/** Why this editor can't act on a check, in words, or null. */
export async function barredFromCheck(
  manager: EntityManager,
  who: Acting,
  check: AuthorCheck,
): Promise<string | null> {
  const left = await papersLeftBy(manager, who.viewer.id);
  return barredBecause(check.revision, who.viewer, left);
}

async function open(
  manager: EntityManager,
  who: Acting,
  id: string,
): Promise<AuthorCheck | Refusal> {
  const check = await loadCheck(manager, { id });
  if (!check || !(await seesCheck(manager, who.viewer, check, who.now))) {
    return refuse("NOT_FOUND", "There is no such check.");
  }
  const barred = await barredFromCheck(manager, who, check);
  return barred ? refuse("BARRED", barred) : check;
}

/** Writes to a check only if it is still at this version and in this state. */
async function moved(
  here: Change,
  check: AuthorCheck,
  version: number,
  from: CheckState,
  set: Partial<AuthorCheck>,
): Promise<boolean> {
  const { affected } = await here.manager
    .createQueryBuilder()
    .update(AuthorCheck)
    .set({ ...set, version: version + 1 } as never)
    .where("id = :id AND version = :version AND state = :from", { id: check.id, version, from })
    .execute();
  return affected === 1;
}

const subjectOf = ({ constraintId, revision }: AuthorCheck): string =>
  formatQuotable(constraintId, revision.ordinal);

/** Closes an answered check. Who commented is told in words what was done about it. */
export async function closeCheck(
  who: Acting,
  id: string,
  version: number,
  given: string | null,
): Promise<AuthorCheck | Refusal> {
  const text = plainText(given ?? "") || null;
  const problem = text === null ? null : lengthProblem(text, CLOSING_TEXT, "Say what was done");
  if (problem) return problem;
  return change<AuthorCheck | Refusal>(who, async (here) => {
    const { manager } = here;
    const check = await open(manager, who, id);
    if (check instanceof Refusal) return check;
    if (check.state !== "answered") {
      return refuse("NOT_ANSWERED", "Only an answered check is closed. An open one is taken back.");
    }
    if (check.verdict === "comments" && text === null) {
      return refuse("TEXT_MISSING", "Tell the author in a sentence what was done.", "text");
    }
    const ended = { state: "closed", endedById: who.viewer.id, endedAt: who.now } as const;
    if (!(await moved(here, check, version, "answered", ended))) return refuse("STALE", CHANGED);
    if (text !== null) {
      await manager.insert(AuthorCheckEntry, {
        checkId: id,
        byId: who.viewer.id,
        verdict: null,
        text,
        at: who.now,
      });
      const { publicUrl, viewer } = who;
      if (who.sendsMail) {
        await tellClosed(manager, check, { editor: viewer.nameOnPapers, text, publicUrl });
      }
    }
    await here.event({
      kind: "authorCheck.closed",
      subject: subjectOf(check),
      detail: { check: id },
    });
    return (await loadCheck(manager, { id })) ?? check;
  });
}

/** Takes a link back that was not answered yet: it opens nothing from then on. */
export async function revokeCheck(
  who: Acting,
  id: string,
  version: number,
): Promise<AuthorCheck | Refusal> {
  return change<AuthorCheck | Refusal>(who, async (here) => {
    const check = await open(here.manager, who, id);
    if (check instanceof Refusal) return check;
    const ended = { state: "revoked", endedById: who.viewer.id, endedAt: who.now } as const;
    if (!(await moved(here, check, version, "sent", ended))) return refuse("STALE", CHANGED);
    await here.event({
      kind: "authorCheck.revoked",
      subject: subjectOf(check),
      detail: { check: id },
    });
    return (await loadCheck(here.manager, { id })) ?? check;
  });
}
