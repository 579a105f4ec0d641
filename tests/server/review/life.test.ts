import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { Reading } from "~server/review/reading.entity";

import { buildCitation, buildFields } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

describe("a record's life", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it("goes from a wrong digit over a return and a correction into use", async () => {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const hers = deskOf(server, contributor.agent);
    const his = deskOf(server, editor.agent);
    const paper = await buildCitation(server.dataSource, contributor.user);

    // The paper prints 0.17; the contributor types 0.11.
    const wrong = buildFields({ plus: "0.11", printedText: "x = 0.43 +0.11 -0.15 at z = 7.13" });
    const draft = await hers.start(paper.id);
    expect(draft).toMatchObject({ state: "draft", ordinal: 1, version: 1 });
    const saved = await hers.save(draft.id, 1, wrong);
    expect(saved).toMatchObject({ version: 2, fields: { plus: "0.11" } });
    expect(await hers.submit(draft.id, 2, false)).toMatchObject({ code: "licence" });
    const submitted = await hers.submit(draft.id, 2);
    expect(submitted).toMatchObject({ state: "submitted", version: 3 });
    expect((await server.mailsTo(editor.user.email)).map((mail) => mail.subject)).toEqual([
      `${submitted.number}.1 waits for a second reading`,
    ]);

    // Blind before, everything after.
    const claimed = await his.claim(draft.id);
    expect(claimed).toMatchObject({
      item: { claimedByMe: true, state: "inReview" },
      submission: null,
      comparison: [],
      contributor: null,
      blockers: ["Your second reading is not stored yet."],
    });
    expect(claimed.fieldsToRead).toContain("bandLow");
    expect(await his.read(draft.id, { ...wrong, plus: null })).toMatchObject({
      code: "incomplete",
      field: "plus",
    });
    const read = await his.read(draft.id, { ...wrong, plus: "0.17", value: "0.430" });
    expect(read.contributor).toBe("Ottla Firn");
    expect(read.submission.plus).toBe("0.11");
    expect(read.comparison.filter((one: { agrees: boolean }) => !one.agrees)).toEqual([
      { field: "plus", reading: "0.17", submitted: "0.11", agrees: false, earlier: [] },
    ]);
    expect(await his.approve(draft.id, read.item.version)).toMatchObject({ code: "blocked" });

    const comments = [{ field: "plus", text: "I read 0.17 in the table." }];
    expect(await his.giveBack(draft.id, read.item.version, comments)).toMatchObject({
      __typename: "Done",
    });
    const [mail] = await server.mailsTo(contributor.user.email);
    expect(mail?.subject).toBe(`${submitted.number}.1 was returned to you`);
    expect(mail?.text).not.toContain("0.17");

    // The contributor answers with a new revision.
    const returned = await hers.submission(draft.id);
    expect(returned.comments).toMatchObject([
      { field: "plus", text: "I read 0.17 in the table.", by: "Brisa Kelm", answer: null },
    ]);
    const answer = await hers.revise(draft.id);
    expect(answer).toMatchObject({ ordinal: 2, state: "draft", fields: { plus: "0.11" } });
    expect((await hers.revise(draft.id)).id).toBe(answer.id);
    expect((await hers.submission(draft.id)).answeredBy).toBe(answer.id);
    const right = { ...wrong, plus: "0.17", printedText: "x = 0.43 +0.17 -0.15 at z = 7.13" };
    await hers.save(answer.id, 1, right);
    expect(await hers.submit(answer.id, 2)).toMatchObject({
      code: "commentUnanswered",
      field: "plus",
    });
    const answered = await hers.save(answer.id, 2, right, {
      commentAnswers: [{ commentId: returned.comments[0].id, answer: "Yes, a slip." }],
    });
    expect(answered.comments[0].answer).toBe("Yes, a slip.");
    expect(answered.changes).toContainEqual({ field: "plus", before: "0.11", after: "0.17" });
    expect(await hers.submit(answer.id, 3)).toMatchObject({ state: "submitted" });
    expect((await hers.submission(draft.id)).answeredBy).toBe(answer.id);

    // Only the changed field is read again.
    const again = await his.claim(answer.id);
    expect(again.fieldsToRead).toEqual(["plus"]);
    expect(again.submission).toBeNull();
    const reread = await his.read(answer.id, { plus: "0.17" });
    expect(reread.blockers).toEqual([expect.stringContaining("points of the checklist")]);
    expect(reread.comments).toMatchObject([{ field: "plus", answer: "Yes, a slip." }]);
    expect(await his.approve(answer.id, reread.item.version, "Thank you.")).toMatchObject({
      __typename: "Done",
    });
    const mails = await server.mailsTo(contributor.user.email);
    expect(mails.at(-1)?.subject).toBe(`${submitted.number}.2 is approved`);

    const nobody = deskOf(server, server.agent());
    expect(await nobody.constraint(submitted.number)).toMatchObject({
      quotable: `${submitted.number}.2`,
      submittedBy: "Ottla Firn",
      readBy: "Brisa Kelm",
      fields: { plus: "0.17", value: "0.43" },
      revisions: [{ ordinal: 2, changes: [] }],
    });
    expect((await hers.submission(answer.id)).history).toMatchObject([
      { ordinal: 1, state: "returned" },
      { ordinal: 2, state: "approved" },
    ]);
    const kinds = (
      await server.dataSource.manager.find(EventRecord, { order: { sequence: "ASC" } })
    )
      .filter((event) => event.subject.startsWith(submitted.number))
      .map((event) => event.kind);
    expect(kinds).toEqual([
      "revision.drafted",
      "revision.submitted",
      "claim.made",
      "reading.stored",
      "revision.returned",
      "revision.drafted",
      "revision.submitted",
      "claim.made",
      "reading.stored",
      "revision.approved",
    ]);
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
  });

  it("keeps the first reading beside a correction, and approves after it", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const hers = deskOf(server, contributor.agent);
    const his = deskOf(server, editor.agent);
    const fields = buildFields({ z: "6.31", value: "0.29" });
    const draft = await hers.start((await buildCitation(server.dataSource, contributor.user)).id);
    await hers.save(draft.id, 1, fields);
    await hers.submit(draft.id, 2);
    await his.claim(draft.id);
    const read = await his.read(draft.id, { ...fields, value: "0.92" });
    expect(read.blockers[0]).toContain("Value");

    expect(await his.correct(draft.id, "value", { value: "0.29" }, " ")).toMatchObject({
      code: "why",
    });
    expect(await his.correct(draft.id, "minus", { minus: "1" }, "no")).toMatchObject({
      code: "agrees",
    });
    const corrected = await his.correct(draft.id, "value", { value: "0.29" }, "Digits swapped.");
    expect(corrected.comparison.find((one: { field: string }) => one.field === "value")).toEqual({
      field: "value",
      reading: "0.29",
      submitted: "0.29",
      agrees: true,
      earlier: ["0.92"],
    });
    const reading = await server.dataSource.manager.findOneByOrFail(Reading, {
      revisionId: draft.id,
    });
    expect(reading.first.value).toBe("0.92");
    expect(reading.corrections).toMatchObject([
      { field: "value", before: "0.92", why: "Digits swapped." },
    ]);
    expect(await his.approve(draft.id, corrected.item.version)).toMatchObject({
      __typename: "Done",
    });
  });

  it("asks for an answer to a finding, and for the editor's word on the answer", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const hers = deskOf(server, contributor.agent);
    const his = deskOf(server, editor.agent);
    // A ratio of plus to minus above 3 must be answered.
    const fields = buildFields({ z: "5.61", value: "0.31", plus: "0.45", minus: "0.05" });
    const draft = await hers.start((await buildCitation(server.dataSource, contributor.user)).id);
    const saved = await hers.save(draft.id, 1, fields);
    const open = saved.findings.filter((one: { grade: string }) => one.grade === "mustAnswer");
    expect(open.length).toBeGreaterThan(0);
    expect(await hers.submit(draft.id, 2)).toMatchObject({ code: "unanswered" });
    await hers.save(draft.id, 2, fields, {
      answers: open.map(({ code }: { code: string }) => ({ code, answer: "The paper prints it." })),
    });
    expect(await hers.submit(draft.id, 3)).toMatchObject({ state: "submitted" });

    await his.claim(draft.id);
    let review = await his.read(draft.id, fields);
    expect(await his.approve(draft.id, review.item.version)).toMatchObject({ code: "blocked" });
    for (const { code } of open) review = await his.accept(draft.id, code);
    expect(review.blockers).toEqual([]);
    // An older version is refused: the answers have changed since.
    expect(await his.approve(draft.id, review.item.version - 1)).toMatchObject({ code: "stale" });
    expect(await his.approve(draft.id, review.item.version)).toMatchObject({ __typename: "Done" });
  });

  it("refuses to submit what has an error, naming the field", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const hers = deskOf(server, contributor.agent);
    const draft = await hers.start((await buildCitation(server.dataSource, contributor.user)).id);
    await hers.save(draft.id, 1, buildFields({ value: "1.43" }));
    expect(await hers.submit(draft.id, 2)).toMatchObject({ code: "findings", field: "value" });
    const bare = await hers.start(null);
    await hers.save(bare.id, 1, buildFields());
    expect(await hers.submit(bare.id, 2)).toMatchObject({ code: "findings" });
  });

  it("starts another record from the same paper with its context and without its numbers", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const hers = deskOf(server, contributor.agent);
    const paper = await buildCitation(server.dataSource, contributor.user);
    const first = await hers.start(paper.id);
    await hers.save(first.id, 1, buildFields({ conditionedOn: ["cmb"], priorForm: "flat" }));
    const second = await hers.start(null, first.id);
    expect(second.citation.key).toBe(paper.key);
    expect(second.fields).toMatchObject({
      methodTags: ["quasarDampingWing"],
      weighting: "volume",
      dataUsed: ["Test sightline 1"],
      versionRead: "published",
      priorForm: "flat",
      conditionedOn: ["cmb"],
      value: null,
      plus: null,
      minus: null,
      level: null,
      printedText: null,
      place: null,
      z: null,
    });
  });

  it("keeps the approved revision in use while a newer one is reviewed", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const hers = deskOf(server, contributor.agent);
    const his = deskOf(server, editor.agent);
    const fields = buildFields({ z: "8.05", value: "0.71" });
    const draft = await hers.start((await buildCitation(server.dataSource, contributor.user)).id);
    await hers.save(draft.id, 1, fields);
    const { number } = await hers.submit(draft.id, 2);
    await his.claim(draft.id);
    const read = await his.read(draft.id, fields);
    await his.approve(draft.id, read.item.version);

    const next = await hers.revise(draft.id);
    await hers.save(next.id, 1, fields);
    expect(await hers.submit(next.id, 2)).toMatchObject({ code: "unchanged" });
    const changed = { ...fields, minus: "0.16", printedText: "0.71 +0.12 -0.16 at 8.05" };
    await hers.save(next.id, 2, changed);
    expect(await hers.submit(next.id, 3)).toMatchObject({ state: "submitted" });
    const nobody = deskOf(server, server.agent());
    expect(await nobody.constraint(number)).toMatchObject({
      ordinal: 1,
      fields: { minus: "0.15" },
    });

    await his.claim(next.id);
    const reread = await his.read(next.id, { minus: "0.16" });
    await his.approve(next.id, reread.item.version);
    expect(await nobody.constraint(number)).toMatchObject({
      ordinal: 2,
      fields: { minus: "0.16" },
      revisions: [
        { ordinal: 1, changes: [] },
        {
          ordinal: 2,
          changes: expect.arrayContaining([{ field: "minus", before: "0.15", after: "0.16" }]),
        },
      ],
    });
  });

  it("lets a contributor discard a draft or an unclaimed submission, not a claimed one", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const hers = deskOf(server, contributor.agent);
    const paper = await buildCitation(server.dataSource, contributor.user);
    const one = await hers.start(paper.id);
    expect(await hers.discard(one.id, 1)).toMatchObject({ __typename: "Done" });
    expect(await hers.save(one.id, 2, buildFields())).toMatchObject({ code: "notDraft" });

    const two = await hers.start(paper.id);
    await hers.save(two.id, 1, buildFields({ z: "9.2" }));
    await hers.submit(two.id, 2);
    await deskOf(server, editor.agent).claim(two.id);
    expect(await hers.discard(two.id, 4)).toMatchObject({ code: "notDraft" });
    await deskOf(server, editor.agent).release(two.id);
    expect(await hers.discard(two.id, 5)).toMatchObject({ __typename: "Done" });
  });
});
