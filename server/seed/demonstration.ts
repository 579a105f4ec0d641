import { createHash } from "node:crypto";

import type { DataSource, EntityManager } from "typeorm";

import { hashPassword } from "~server/account/password";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import { keepCitations } from "~server/citation/citation.service";
import { Refusal } from "~server/common/outcomes";
import { DEFAULT_PASSWORD_COST, type Config } from "~server/config/config";
import { findApproved } from "~server/constraint/constraint.query";
import { Constraint } from "~server/constraint/constraint.entity";
import * as drafts from "~server/constraint/draft.service";
import { allFindings, neighbours } from "~server/constraint/neighbours";
import type { Revision } from "~server/constraint/revision.entity";
import { markDemonstration } from "~server/database/settings";
import type { Acting } from "~server/event/acting";
import { appendEvent } from "~server/event/eventLog";
import { FieldCommentRecord } from "~server/review/comment.entity";
import * as reviews from "~server/review/review.service";
import { saveTable } from "~server/table/table.service";
import type { ConstraintFilter } from "~shared/filter/filter";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { proposeRows } from "~shared/table/proposeRows";
import type { ConstraintFields } from "~shared/statement/fields";

import { PAPERS, type PaperName } from "./papers";
import { DEMONSTRATION_PASSWORD, PEOPLE, type PersonName } from "./people";
import { contentOf, STORY, type StoryRecord } from "./story";

const DAY_MS = 86_400_000;
const HOUR_MS = 3_600_000;

/**
 * Fills an empty registry with the invented demonstration, in one transaction and through the same
 * services that people use, so that its event log is a real one. Does nothing when there is any
 * record. The story's days are fixed; only the claim under way is made now, lest it have run out.
 *
 * @returns Whether it did anything.
 */
export async function seedDemonstration(
  dataSource: DataSource,
  passwordCost: Config["passwordCost"] = DEFAULT_PASSWORD_COST,
  publicUrl = "",
): Promise<boolean> {
  return dataSource
    .transaction("READ COMMITTED", async (manager) => {
      // The first event locks the log's head: of two processes that seed, one waits and then finds records.
      await appendEvent(manager, {
        kind: "demonstration.seeded",
        actorId: null,
        subject: "registry",
        at: new Date("2026-01-12T08:00:00Z"),
      });
      if ((await manager.count(Constraint)) > 0) throw new AlreadyFilled();
      await markDemonstration(manager);
      await new Teller(manager, await createPeople(manager, passwordCost), publicUrl).tell();
      return true;
    })
    .catch((error: unknown) => {
      if (error instanceof AlreadyFilled) return false;
      throw error;
    });
}

class AlreadyFilled extends Error {}

/** The same id in every demonstration, so that two of them are alike. */
function stableId(word: string): string {
  const hex = createHash("sha256").update(`fogline demonstration: ${word}`).digest("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-4${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}

async function createPeople(
  manager: EntityManager,
  passwordCost: Config["passwordCost"],
): Promise<Map<PersonName, User>> {
  const joined = new Date("2026-01-12T09:00:00Z");
  const people = new Map<PersonName, User>();
  for (const [name, person] of Object.entries(PEOPLE) as [
    PersonName,
    (typeof PEOPLE)[PersonName],
  ][]) {
    const { email, nameOnPapers, roles } = person;
    const user = await manager.save(
      manager.create(User, {
        id: stableId(email),
        email,
        nameOnPapers,
        furtherNames: [],
        orcid: null,
        passwordHash: await hashPassword(passwordCost, DEMONSTRATION_PASSWORD),
        confirmedAt: joined,
        createdAt: joined,
      }),
    );
    for (const role of roles) {
      await manager.insert(RoleGrant, {
        userId: user.id,
        role,
        grantedById: null,
        grantedAt: joined,
      });
      await appendEvent(manager, {
        kind: "role.granted",
        actorId: null,
        subject: `user:${user.id}`,
        detail: { role },
        at: joined,
      });
    }
    people.set(name, user);
  }
  return people;
}

/** One step of the story: all of them are told in the order of their hours. */
interface Step {
  at: Date;
  tell(at: Date): Promise<void>;
}

function done<T>(outcome: T | Refusal, what: string): T {
  if (outcome instanceof Refusal) {
    throw new Error(`the demonstration's ${what} was refused: ${outcome.code}, ${outcome.message}`);
  }
  return outcome;
}

class Teller {
  private readonly citations = new Map<PaperName, string>();

  constructor(
    private readonly manager: EntityManager,
    private readonly people: ReadonlyMap<PersonName, User>,
    /** Base of the address in a saved table's files. */
    private readonly publicUrl: string,
  ) {}

  async tell(): Promise<void> {
    const steps = STORY.flatMap((record) => this.stepsOf(record));
    steps.push({
      at: new Date("2026-10-29T15:00:00Z"),
      tell: (at) =>
        this.table(at, "contributor", "Damping wings, 6 to 8", {
          families: ["dampingWing"],
          zFrom: 6,
          zTo: 8,
        }),
    });
    steps.sort((a, b) => a.at.getTime() - b.at.getTime());
    for (const step of steps) await step.tell(step.at);
  }

  /** A person at an hour of the story; its mails aren't sent. */
  private as(name: PersonName, now: Date): Acting {
    const user = this.people.get(name);
    if (!user) throw new Error(`nobody is called ${name}`);
    return {
      // Every change nests in the one transaction of the seed.
      database: {
        manager: this.manager,
        transaction: this.manager.transaction.bind(this.manager),
      },
      viewer: {
        id: user.id,
        email: user.email,
        nameOnPapers: user.nameOnPapers,
        furtherNames: user.furtherNames,
        orcid: user.orcid,
        roles: PEOPLE[name].roles,
      },
      now,
      licence: "CC BY 4.0",
      publicUrl: this.publicUrl,
      sendsMail: false,
    };
  }

  private stepsOf(record: StoryRecord): Step[] {
    const { fate, slip } = record;
    const right = contentOf(record.fields);
    const early = { ...right, ...slip };
    const begin = new Date(record.from);
    const after = (days: number, hours = 0): Date =>
      new Date(begin.getTime() + days * DAY_MS + hours * HOUR_MS);
    let revision: Revision | null = null;
    const current = (): Revision => {
      if (!revision) throw new Error("the story decides what was never drafted");
      return revision;
    };
    const step = (at: Date, tell: (now: Date) => Promise<Revision>): Step => ({
      at,
      tell: async (now) => {
        revision = await tell(now);
      },
    });

    const draft = (fields: ConstraintFields): Step =>
      step(begin, (now) => this.draft(record, fields, now));
    const submit = (at: Date): Step => step(at, (now) => this.submit(record, current(), now));
    const approve = (at: Date, fields: ConstraintFields): Step =>
      step(at, (now) => this.approve(record, current(), fields, now));
    const revise = (at: Date, fields: ConstraintFields): Step =>
      step(at, (now) => this.revise(record, current(), fields, now));

    switch (fate) {
      case "draft":
        return [draft(right)];
      case "submitted":
        return [draft(right), submit(after(0, 1))];
      case "claimed":
        return [
          draft(right),
          submit(after(0, 1)),
          step(new Date(Math.max(Date.now(), after(3).getTime())), async (now) =>
            done(await reviews.claim(this.as(record.reader, now), current().id), "claim"),
          ),
        ];
      case "returned":
        return [
          draft(early),
          submit(after(0, 1)),
          step(after(4), (now) => this.giveBack(record, current(), right, now)),
        ];
      case "approved":
        return [draft(right), submit(after(0, 1)), approve(after(3), right)];
      case "approvedAfterCorrection":
        return [draft(right), submit(after(0, 1)), approve(after(3), early)];
      case "approvedAfterReturn":
        return [
          draft(early),
          submit(after(0, 1)),
          step(after(2), (now) => this.giveBack(record, current(), right, now)),
          revise(after(5), right),
          submit(after(5, 1)),
          approve(after(8), right),
        ];
      case "approvedTwice":
        return [
          draft(early),
          submit(after(0, 1)),
          approve(after(3), early),
          revise(after(40), right),
          submit(after(40, 1)),
          approve(after(43), right),
        ];
      case "approvedAndChanging":
        return [
          draft(early),
          submit(after(0, 1)),
          approve(after(3), early),
          revise(after(62), right),
          submit(after(62, 1)),
        ];
    }
  }

  private async draft(record: StoryRecord, fields: ConstraintFields, at: Date): Promise<Revision> {
    const who = this.as(record.by, at);
    return drafts.createDraft(this.manager, {
      ownerId: who.viewer.id,
      citationId: await this.citation(record.paper, who),
      fields,
      at,
    });
  }

  private async citation(paper: PaperName, who: Acting): Promise<string> {
    const known = this.citations.get(paper);
    if (known !== undefined) return known;
    const { kept } = done(await keepCitations(who, PAPERS[paper], null), `paper ${paper}`);
    const id = kept[0]?.citation.id;
    if (id === undefined) throw new Error(`the demonstration's paper ${paper} can't be read`);
    this.citations.set(paper, id);
    return id;
  }

  /** Saves the answers to what must be answered, and sends the draft. */
  private async submit(record: StoryRecord, draft: Revision, at: Date): Promise<Revision> {
    const who = this.as(record.by, at);
    const among = await neighbours(this.manager, who.viewer);
    const answers = allFindings(draft.fields, draft.citationId, draft.constraintId, among)
      .filter((finding) => finding.grade === "mustAnswer")
      .map(({ code, message }) => {
        const [, answer] =
          Object.entries(record.answers ?? {}).find(([begin]) => code.startsWith(begin)) ?? [];
        if (answer === undefined) throw new Error(`the story has no answer to ${code}: ${message}`);
        return { code, answer };
      });
    const comments =
      draft.followsId === null
        ? []
        : await this.manager.findBy(FieldCommentRecord, { revisionId: draft.followsId });
    const { id, version, fields } = draft;
    const saved = done(
      await drafts.saveDraft(who, {
        id,
        version,
        fields,
        answers,
        commentAnswers: comments.map((comment) => ({
          commentId: comment.id,
          answer: "You are right; I have corrected it.",
        })),
      }),
      "draft",
    );
    return done(
      await drafts.submitDraft(who, id, saved.version, true),
      `submission ${record.from}`,
    );
  }

  /** Claims, reads, corrects the reading where it slipped, accepts the answers and approves. */
  private async approve(
    record: StoryRecord,
    submitted: Revision,
    reading: ConstraintFields,
    at: Date,
  ): Promise<Revision> {
    const { id } = submitted;
    const who = this.as(record.reader, at);
    done(await reviews.claim(who, id), "claim");
    let current = done(await reviews.storeReading(who, id, reading), "reading");
    if (record.fate === "approvedAfterCorrection" && record.comment) {
      const { field, text } = record.comment;
      current = done(
        await reviews.correctReading(who, id, field, submitted.fields, text),
        "correction",
      );
    }
    for (const { code } of current.answers) {
      current = done(await reviews.acceptAnswer(who, id, code), "accepted answer");
    }
    done(await reviews.approve(who, id, current.version, null), `approval ${record.from}`);
    return drafts.reload(this.manager, id);
  }

  private async giveBack(
    record: StoryRecord,
    submitted: Revision,
    reading: ConstraintFields,
    at: Date,
  ): Promise<Revision> {
    const { id } = submitted;
    const who = this.as(record.reader, at);
    done(await reviews.claim(who, id), "claim");
    const read = done(await reviews.storeReading(who, id, reading), "reading");
    if (!record.comment) throw new Error("the story returns without a comment");
    done(await reviews.returnSubmission(who, id, read.version, [record.comment], null), "return");
    return drafts.reload(this.manager, id);
  }

  private async revise(
    record: StoryRecord,
    decided: Revision,
    fields: ConstraintFields,
    at: Date,
  ): Promise<Revision> {
    const who = this.as(record.by, at);
    const draft = done(await drafts.reviseSubmission(who, decided.id), "new revision");
    const { id, version } = draft;
    return done(await drafts.saveDraft(who, { id, version, fields }), "new revision's text");
  }

  /** A fitting table with the rows that the program proposes. */
  private async table(
    at: Date,
    owner: PersonName,
    name: string,
    filter: ConstraintFilter,
  ): Promise<void> {
    const who = this.as(owner, at);
    const found = await findApproved(
      { database: { manager: this.manager }, viewer: who.viewer },
      filter,
    );
    const rows = proposeRows(
      found.map(({ constraint, revision, citation }) => ({
        number: formatRecordNumber(constraint.id),
        fields: revision.fields,
        citation: citation.id,
        year: citation.year,
      })),
    );
    done(await saveTable(who, { name, filter, rows }), "table");
  }
}
