import type { EntityManager } from "typeorm";

import type { User } from "~server/account/user.entity";
import { keepCitations } from "~server/citation/citation.service";
import * as drafts from "~server/constraint/draft.service";
import { allFindings, neighbours } from "~server/constraint/neighbours";
import type { Revision } from "~server/constraint/revision.entity";
import { attachEvidence } from "~server/evidence/evidence.service";
import type { Acting } from "~server/event/acting";
import { FieldCommentRecord } from "~server/review/comment.entity";
import * as reviews from "~server/review/review.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { checklistFor } from "~shared/review/checklist";
import { curveFacts } from "~shared/statement/curve";
import type { ConstraintFields } from "~shared/statement/fields";

import { noticeSteps, recusalSteps, reportSteps } from "./aftermath";
import { checkSteps } from "./checks";
import { dataSteps } from "./dataEntries";
import { EVIDENCE } from "./files";
import { PAPERS, type PaperName } from "./papers";
import { PEOPLE, type PersonName } from "./people";
import { releaseSteps } from "./releases";
import { SETS, setSteps } from "./sets";
import { DAY_MS, done, HOUR_MS, type Stage, type Step } from "./stage";
import { contentOf, STORY, type StoryRecord } from "./story";
import { tableSteps } from "./tables";

/** Tells the story, step by step, through the services that people use. */
export class Teller implements Stage {
  private readonly citations = new Map<PaperName, string>();
  private readonly numbers = new Map<string, string>();

  constructor(
    readonly manager: EntityManager,
    private readonly people: ReadonlyMap<PersonName, User>,
    /** Base of the address in a saved table's files. */
    private readonly publicUrl: string,
  ) {}

  async tell(): Promise<void> {
    const steps = [
      ...STORY.flatMap((record) => this.stepsOf(record)),
      ...STORY.flatMap((record) => noticeSteps(this, record)),
      ...SETS.flatMap((set) => setSteps(this, set)),
      ...dataSteps(this),
      ...recusalSteps(this),
      ...checkSteps(this),
      ...reportSteps(this),
      ...releaseSteps(this),
      ...tableSteps(this),
    ];
    steps.sort((a, b) => a.at.getTime() - b.at.getTime());
    for (const step of steps) await step.tell(step.at);
  }

  numberOf(name: string): string {
    const number = this.numbers.get(name);
    if (number === undefined) throw new Error(`the story has not told of ${name} yet`);
    return number;
  }

  /** The content with the numbers of the records that it names. */
  private resolved(fields: ConstraintFields): ConstraintFields {
    const numbers = (words: string[]): string[] =>
      words.map((word) => (word.startsWith("@") ? this.numberOf(word.slice(1)) : word));
    return {
      ...fields,
      conditionedOn: numbers(fields.conditionedOn),
      supersedes: numbers(fields.supersedes),
      erratumOf: numbers(fields.erratumOf),
      reanalysisOf: numbers(fields.reanalysisOf),
      subsetOf: numbers(fields.subsetOf),
    };
  }

  /** What an editor types who reads this content in the paper: of a curve its facts. */
  private readAgain(fields: ConstraintFields) {
    const facts = curveFacts(fields.curveTable, fields.curveColumn);
    return {
      ...this.resolved(fields),
      ...(facts && {
        curveRows: facts.rows,
        curveFirst: facts.first,
        curveLast: facts.last,
        curvePeak: facts.peak,
      }),
    };
  }

  /** A person at an hour of the story; its mails aren't sent. */
  as(name: PersonName, now: Date): Acting {
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
      case "discarded":
        return [draft(right), step(after(2), (now) => this.discard(record, current(), now))];
      case "takenBack":
        return [
          draft(right),
          submit(after(0, 1)),
          step(after(0, 3), (now) => this.discard(record, current(), now)),
        ];
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
    const draft = await drafts.createDraft(this.manager, {
      ownerId: who.viewer.id,
      citationId: await this.citation(record.paper, who),
      fields: this.resolved(fields),
      at,
    });
    if (record.name) this.numbers.set(record.name, formatRecordNumber(draft.constraintId));
    for (const file of EVIDENCE[record.name ?? ""] ?? []) {
      done(await attachEvidence(who, { ...file, revisionId: draft.id }), `file ${file.name}`);
    }
    return draft;
  }

  async citation(paper: PaperName, who: Acting): Promise<string> {
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
    let current = done(await reviews.storeReading(who, id, this.readAgain(reading)), "reading");
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
    const points = checklistFor(submitted.fields).map(({ code }) => code);
    current = done(await reviews.tickChecklist(who, id, points), "checklist");
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
    const read = done(await reviews.storeReading(who, id, this.readAgain(reading)), "reading");
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
    return done(
      await drafts.saveDraft(who, { id, version, fields: this.resolved(fields) }),
      "new revision's text",
    );
  }

  private async discard(record: StoryRecord, open: Revision, at: Date): Promise<Revision> {
    const { id, version } = open;
    done(await drafts.discardDraft(this.as(record.by, at), id, version), "discarding");
    return drafts.reload(this.manager, id);
  }
}
