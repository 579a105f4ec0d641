import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { correlatedSet } from "~shared/likelihood/correlatedSet";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildApproved, buildCitation, buildSubmission } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { pairReading, setsOf } from "./sets";

describe("a correlated set", () => {
  let server: TestServer;
  beforeEach(async () => {
    server = await startTestServer();
  });
  afterEach(() => server.stop());

  async function people() {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const other = await server.signedIn(["editor"], { nameOnPapers: "Tove Aldrin" });
    const maintainer = await server.signedIn(["maintainer"], { nameOnPapers: "Nils Ombre" });
    return { contributor, editor, other, maintainer };
  }

  type People = Awaited<ReturnType<typeof people>>;

  const BINS: Partial<ConstraintFields>[] = [
    { z: "6.6", value: "0.30", plus: "0.10", minus: "0.10" },
    { z: "7.2", value: "0.50", plus: "0.10", minus: "0.10" },
  ];

  /** Two approved bins of one paper. */
  async function bins({ contributor, other }: People, overrides: Partial<ConstraintFields> = {}) {
    const paper = await buildCitation(server.dataSource, contributor.user);
    const members: string[] = [];
    for (const bin of BINS) {
      const { constraintId } = await buildApproved(
        server.dataSource,
        contributor.user,
        other.user,
        { ...bin, ...overrides },
        paper,
      );
      members.push(formatRecordNumber(constraintId));
    }
    return { paper, members };
  }

  async function submitted(who: People, triangle = [["1"], ["0.60", "1"]]) {
    const { paper, members } = await bins(who);
    const hers = setsOf(server, who.contributor.agent);
    const started = await hers.start(paper.id, members);
    const saved = await hers.save(started, {
      label: "Two bins",
      members,
      matrixKind: "correlation",
      triangle,
      place: "Table 5",
    });
    const set = await hers.submit(saved.number, saved.version);
    expect(set.__typename).toBe("CorrelatedSet");
    return { paper, members, number: set.number as string };
  }

  async function approved(who: People) {
    const set = await submitted(who);
    const his = setsOf(server, who.editor.agent);
    await his.claim(set.number);
    const { item } = await his.read(set.number, pairReading("0.6"));
    expect((await his.approve(set.number, item.version)).__typename).toBe("Done");
    return set;
  }

  it("goes from draft through a blind reading into use, with its events and mails", async () => {
    const who = await people();
    const { number, members } = await submitted(who);
    const hers = setsOf(server, who.contributor.agent);
    const his = setsOf(server, who.editor.agent);
    const nobody = setsOf(server, server.agent());
    expect(await nobody.set(number)).toBeNull();
    expect(await nobody.inUse()).toEqual([]);
    expect(await his.queue()).toMatchObject([{ number, members, barredBecause: null }]);
    const mails = await server.mailsTo(who.editor.user.email);
    expect(mails.at(-1)?.subject).toBe(`${number} waits for a second reading`);

    await his.claim(number);
    const read = await his.read(number, pairReading("0.6"));
    expect(read).toMatchObject({
      __typename: "SetReview",
      blockers: [],
      set: { label: "Two bins" },
    });
    expect(read.comparison.every(({ agrees }: { agrees: boolean }) => agrees)).toBe(true);
    expect(await his.approve(number, read.item.version)).toMatchObject({ __typename: "Done" });

    const [used] = await nobody.inUse(members[1]);
    expect(used).toMatchObject({
      number,
      state: "approved",
      submittedBy: "Ottla Firn",
      readBy: "Brisa Kelm",
      usedRho: [
        [1, 0.6],
        [0.6, 1],
      ],
      changedMembers: [],
      findings: [],
      decisionNote: null,
    });
    expect(await nobody.linksOf(members[0] ?? "")).toEqual({
      correlatedSets: [{ number, label: "Two bins", members }],
    });
    expect(await hers.mine()).toMatchObject([{ number, state: "approved", mine: true }]);

    const events = await server.dataSource.manager.find(EventRecord, {
      where: { subject: number },
      order: { sequence: "ASC" },
    });
    expect(events.map(({ kind }) => kind)).toEqual([
      "correlatedSet.drafted",
      "correlatedSet.submitted",
      "correlatedSet.claimed",
      "correlatedSet.readingStored",
      "correlatedSet.approved",
    ]);
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
  });

  it("gives χ² 1.25 to two bins that lie one sigma high at ρ 0.6 (PHYSICS.md, worked values)", async () => {
    const who = await people();
    await approved(who);
    const [set] = await setsOf(server, server.agent()).inUse();
    expect(correlatedSet(set.usedRho).chiSquared([1, 1])).toBeCloseTo(1.25, 12);
  });

  it("blocks a reading that differs until it is read again or the set goes back", async () => {
    const who = await people();
    const { number } = await submitted(who);
    const his = setsOf(server, who.editor.agent);
    await his.claim(number);
    const read = await his.read(number, pairReading("-0.60"));
    expect(read.blockers).toEqual([
      "Your reading differs at: row 2, column 1. Correct it, or return the set.",
    ]);
    expect(await his.approve(number, read.item.version)).toMatchObject({ code: "blocked" });
    expect(await his.correct(number, { row: 1, column: 0, text: "0.6", why: " " })).toMatchObject({
      code: "why",
    });
    const again = await his.correct(number, {
      row: 1,
      column: 0,
      text: "0.6",
      why: "The minus belongs to the line above.",
    });
    expect(again.blockers).toEqual([]);
    const entry = again.comparison.find(({ row }: { row: number | null }) => row === 1);
    expect(entry).toMatchObject({ reading: "0.6", submitted: "0.60", earlier: ["-0.60"] });
    expect(await his.correct(number, { row: 1, column: 0, text: "0.5", why: "x" })).toMatchObject({
      code: "agrees",
    });
  });

  it("comes back with a comment, and the answer is a new set of the same chain", async () => {
    const who = await people();
    const { number, members } = await submitted(who, [["1"], ["0.06", "1"]]);
    const hers = setsOf(server, who.contributor.agent);
    const his = setsOf(server, who.editor.agent);
    await his.claim(number);
    const read = await his.read(number, pairReading("0.6"));
    expect(await his.giveBack(number, read.item.version, "")).toMatchObject({ code: "comment" });
    await his.giveBack(number, read.item.version, "Row 2: look at the digits.");
    expect(await hers.set(number)).toMatchObject({
      state: "returned",
      decisionNote: "Row 2: look at the digits.",
    });
    const next = await hers.revise(number);
    expect(next).toMatchObject({
      state: "draft",
      follows: number,
      triangle: [["1"], ["0.06", "1"]],
    });
    // Asked twice, the same answer is handed back.
    expect((await hers.revise(number)).number).toBe(next.number);
    const saved = await hers.save(next, {
      label: "Two bins",
      members,
      matrixKind: "correlation",
      triangle: [["1"], ["0.60", "1"]],
      place: "Table 5",
    });
    expect((await hers.submit(next.number, saved.version)).state).toBe("submitted");
  });

  it("is withdrawn by a maintainer with the reason, and stays readable", async () => {
    const who = await people();
    const { number, members } = await approved(who);
    const keeper = setsOf(server, who.maintainer.agent);
    const { version } = await keeper.set(number);
    expect(await keeper.withdraw(number, version, "  ")).toMatchObject({ code: "reason" });
    expect(await keeper.withdraw(number, version, "Belongs to another model.")).toMatchObject({
      __typename: "Done",
    });
    const nobody = setsOf(server, server.agent());
    expect(await nobody.inUse(members[0])).toEqual([]);
    expect(await nobody.set(number)).toMatchObject({
      state: "withdrawn",
      withdrawnBecause: "Belongs to another model.",
    });
    expect(await nobody.inUse()).toEqual([]);
  });

  it("is replaced by the approved set that follows it", async () => {
    const who = await people();
    const { number } = await approved(who);
    const hers = setsOf(server, who.contributor.agent);
    const his = setsOf(server, who.editor.agent);
    const next = await hers.revise(number);
    const { label, matrixKind, place, members } = next;
    const saved = await hers.save(next, {
      label,
      matrixKind,
      place,
      members: members.map((member: { number: string }) => member.number),
      triangle: [["1"], ["0.55", "1"]],
    });
    await hers.submit(next.number, saved.version);
    await his.claim(next.number);
    const { item } = await his.read(next.number, pairReading("0.55"));
    await his.approve(next.number, item.version);
    expect((await hers.inUse()).map((set: { number: string }) => set.number)).toEqual([
      next.number,
    ]);
    expect(await hers.set(number)).toMatchObject({
      state: "withdrawn",
      withdrawnBecause: `Replaced by ${next.number}.`,
    });
  });

  it("refuses in words what is no set, and takes a record into one matrix only", async () => {
    const who = await people();
    const hers = setsOf(server, who.contributor.agent);
    const { paper, members, number } = await submitted(who);
    const { constraintId } = await buildSubmission(
      server.dataSource,
      who.contributor.user,
      { z: "8.1", kind: "upperLimit", value: "0.8", plus: null, minus: null },
      paper,
    );
    const limit = formatRecordNumber(constraintId);
    expect(await hers.candidates(paper.id)).toEqual([
      { number: members[0], approved: true, cannotJoin: null },
      { number: members[1], approved: true, cannotJoin: null },
      { number: limit, approved: false, cannotJoin: expect.stringMatching(/^is a limit/) },
    ]);
    const started = await hers.start(paper.id, [members[0] ?? "", limit]);
    const withLimit = await hers.save(started, {
      label: "x",
      members: [members[0] ?? "", limit],
      matrixKind: "correlation",
      triangle: [["1"], ["0.2", "1"]],
      place: "Table 5",
    });
    expect(await hers.submit(withLimit.number, withLimit.version)).toMatchObject({
      code: "findings",
      message: expect.stringContaining(`${limit} is a limit`),
    });
    const twice = await hers.save(withLimit, {
      label: "x",
      members,
      matrixKind: "correlation",
      triangle: [["1"], ["0.2", "1"]],
      place: "Table 5",
    });
    expect(await hers.submit(twice.number, twice.version)).toMatchObject({
      code: "otherSet",
      message: expect.stringContaining(`${members[0]} is part of ${number} already`),
    });
    expect(await hers.submit(twice.number, twice.version, false)).toMatchObject({
      code: "licence",
    });
    expect(await hers.save(withLimit, { members, triangle: [] })).toMatchObject({ code: "stale" });
    expect(
      await hers.save(twice, { members, triangle: [["1"], ["1".repeat(41), "1"]] }),
    ).toMatchObject({ code: "tooLong" });
    expect(await hers.save(twice, { members: Array(41).fill("FL-1"), triangle: [] })).toMatchObject(
      { code: "tooMany" },
    );
    expect(await hers.discard(twice.number, twice.version)).toMatchObject({ __typename: "Done" });
    // What others own is as unknown as what isn't there.
    const stranger = setsOf(server, (await server.signedIn(["contributor"])).agent);
    expect(await stranger.save(twice, { members, triangle: [] })).toMatchObject({
      code: "notFound",
    });
    expect(await stranger.revise(number)).toMatchObject({ code: "notFound" });
    expect(await stranger.set(number)).toBeNull();
  });

  it("asks for an answer where a variance is no error squared, and the editor accepts it", async () => {
    const who = await people();
    const hers = setsOf(server, who.contributor.agent);
    const { paper, members } = await bins(who);
    const started = await hers.start(paper.id, members);
    const parts = {
      label: "Two bins",
      members,
      matrixKind: "covariance" as const,
      triangle: [["0.010"], ["0.006", "0.020"]],
      place: "Eq. 12",
    };
    const saved = await hers.save(started, parts);
    expect(await hers.submit(saved.number, saved.version)).toMatchObject({ code: "unanswered" });
    const code = `variance.${members[1]}`;
    const answered = await hers.save(saved, {
      ...parts,
      answers: [{ code, answer: "The matrix includes cosmic variance, the table does not." }],
    });
    await hers.submit(saved.number, answered.version);
    const his = setsOf(server, who.editor.agent);
    await his.claim(saved.number);
    const read = await his.read(saved.number, parts.triangle, "covariance");
    expect(read.set.answers).toMatchObject([{ code, accepted: false }]);
    expect(await his.approve(saved.number, read.item.version)).toMatchObject({ code: "blocked" });
    expect(await his.approve(saved.number, read.item.version, [code])).toMatchObject({
      __typename: "Done",
    });
    const [used] = await hers.inUse();
    // 0.006 / √(0.010 · 0.020)
    expect(used.printedRho[1][0]).toBeCloseTo(0.4242640687, 9);
  });

  it("bars its owner, an author of the paper, and everybody until its records are approved", async () => {
    const who = await people();
    const { contributor } = who;
    const owner = await server.signedIn(["contributor", "editor"], { nameOnPapers: "Ida Brume" });
    const paper = await buildCitation(server.dataSource, contributor.user, {
      author: "Kelm, Brisa and Umber, Pelle",
    });
    const members: string[] = [];
    for (const bin of BINS) {
      const revision = await buildSubmission(server.dataSource, owner.user, bin, paper);
      members.push(formatRecordNumber(revision.constraintId));
    }
    const theirs = setsOf(server, owner.agent);
    const started = await theirs.start(paper.id, members);
    const saved = await theirs.save(started, {
      label: "Two bins",
      members,
      matrixKind: "correlation",
      triangle: [["1"], ["0.6", "1"]],
      place: "Table 5",
    });
    const { number } = await theirs.submit(saved.number, saved.version);
    expect(await theirs.claim(number)).toMatchObject({
      code: "barred",
      message: expect.stringContaining("submitted it"),
    });
    expect(await setsOf(server, who.editor.agent).claim(number)).toMatchObject({
      code: "barred",
      message: expect.stringContaining("author of this paper"),
    });
    expect(await setsOf(server, who.other.agent).claim(number)).toMatchObject({
      code: "barred",
      message: `It waits until ${members[0]} is approved.`,
    });
  });

  it("lets one of many editors claim it and takes one decision", async () => {
    const who = await people();
    const { number } = await submitted(who);
    const his = setsOf(server, who.editor.agent);
    const theirs = setsOf(server, who.other.agent);
    const claims = await Promise.all([his.claim(number), theirs.claim(number)]);
    expect(claims.map(({ __typename }) => __typename).sort()).toEqual(["Refusal", "SetReview"]);
    const winner = claims[0].__typename === "SetReview" ? his : theirs;
    const { item } = await winner.read(number, pairReading("0.6"));
    const outcomes = await Promise.all(
      Array.from({ length: 12 }, (_, at) =>
        at % 2 === 0
          ? winner.approve(number, item.version)
          : winner.giveBack(number, item.version, "No."),
      ),
    );
    expect(outcomes.filter(({ __typename }) => __typename === "Done")).toHaveLength(1);
    const decisions = await server.dataSource.manager.find(EventRecord, {
      where: [
        { subject: number, kind: "correlatedSet.approved" },
        { subject: number, kind: "correlatedSet.returned" },
      ],
    });
    expect(decisions).toHaveLength(1);
  });
});
