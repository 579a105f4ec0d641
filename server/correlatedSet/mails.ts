import type { EntityManager } from "typeorm";

import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { ViewerIdentity } from "~server/common/context";
import type { Acting, Change } from "~server/event/acting";
import { barredFromPaper, papersLeftBy } from "~server/review/recusal.service";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import type { CorrelatedSet } from "./correlatedSet.entity";

// As for submissions: none of these holds a number of the matrix, a label or a comment.

/** Why a person can't judge this set's paper, in words: an author, or said not to be impartial. */
export async function barredFromSetsPaper(
  manager: EntityManager,
  person: Pick<ViewerIdentity, "id" | "nameOnPapers" | "furtherNames" | "orcid">,
  set: CorrelatedSet,
): Promise<string | null> {
  return barredFromPaper(person, set.citation, await papersLeftBy(manager, person.id));
}

function paper({ citation }: CorrelatedSet): string {
  return `${citation.title} (${citation.key})`;
}

/** Tells every editor who may read it that a matrix waits. */
export async function tellEditorsOfSet(
  here: Change,
  who: Acting,
  set: CorrelatedSet,
): Promise<void> {
  const number = formatSetNumber(set.id);
  const editors = await here.manager
    .createQueryBuilder(User, "user")
    .innerJoin(RoleGrant, "role", "role.userId = user.id AND role.role = 'editor'")
    .where("user.id <> :owner AND user.confirmedAt IS NOT NULL", { owner: set.ownerId })
    .orderBy("user.email")
    .getMany();
  for (const editor of editors) {
    if ((await barredFromSetsPaper(here.manager, editor, set)) !== null) continue;
    await here.mail({
      to: editor.email,
      subject: `${number} waits for a second reading`,
      text: [
        `The correlated set ${number} was submitted and waits for a second reading.`,
        `Paper: ${paper(set)}.`,
        `Claim it at your desk: ${who.publicUrl}/desk/set-review/${number}`,
        "",
      ].join("\n\n"),
    });
  }
}

/** Tells the contributor what became of the set. */
export async function tellOwnerOfSet(
  here: Change,
  who: Acting,
  set: CorrelatedSet,
  what: "approved" | "returned" | "withdrawn",
): Promise<void> {
  const number = formatSetNumber(set.id);
  const owner = await here.manager.findOneByOrFail(User, { id: set.ownerId });
  const lines = {
    approved: [
      `An editor read the matrix of ${number} again, from ${paper(set)}, and approved it.`,
      `It stands at ${who.publicUrl}/sets/${number}`,
    ],
    returned: [
      `An editor read the matrix of ${number} again, from ${paper(set)}, and returned it with a comment.`,
      `Read it and answer: ${who.publicUrl}/desk/sets/${number}`,
    ],
    withdrawn: [
      `A maintainer withdrew the correlated set ${number} of ${paper(set)}. The reason stands on its page.`,
      `${who.publicUrl}/sets/${number}`,
    ],
  }[what];
  await here.mail({
    to: owner.email,
    subject: what === "returned" ? `${number} was returned to you` : `${number} is ${what}`,
    text: [...lines, ""].join("\n\n"),
  });
}
