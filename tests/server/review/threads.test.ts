import { EventRecord } from "~server/event/event.entity";
import { claim, returnSubmission, storeReading } from "~server/review/review.service";

import { actingAs, buildSubmission, granted } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

describe("a comment's thread", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it("goes on between editor and contributor while the answer is with the editors, and stays in the trail", async () => {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const stranger = await server.signedIn(["editor"], { nameOnPapers: "Tove Arlund" });
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.61" });
    const who = actingAs(server.dataSource, editor.user);
    granted(await claim(who, submitted.id));
    const read = granted(await storeReading(who, submitted.id, submitted.fields));
    granted(
      await returnSubmission(
        who,
        submitted.id,
        read.version,
        [{ field: "place", text: "Which table?" }],
        "Nearly there.",
      ),
    );
    const hers = deskOf(server, contributor.agent);
    const next = await hers.revise(submitted.id);
    const [comment] = next.comments;
    expect(await hers.reply(comment.id, "Table 2.")).toMatchObject({ code: "closed" });
    const saved = await hers.save(
      next.id,
      next.version,
      { ...submitted.fields, place: "Table 2, row 4" },
      {
        commentAnswers: [{ commentId: comment.id, answer: "Table 2." }],
        answers: next.answers.map(({ code, answer }: { code: string; answer: string }) => ({
          code,
          answer,
        })),
      },
    );
    expect(await hers.submit(next.id, saved.version)).toMatchObject({ state: "submitted" });
    expect(await hers.reply(comment.id, "Once more.")).toMatchObject({ code: "notYourTurn" });

    const his = deskOf(server, editor.agent);
    expect(await his.reply(comment.id, "Row 4?")).toMatchObject({ code: "notFound" });
    await his.claim(next.id);
    const revision = granted(await storeReading(who, next.id, submitted.fields));
    expect(await his.reply(comment.id, "Row 4 of it?")).toMatchObject({
      comment: { answer: "Table 2.", messages: [{ mine: true, text: "Row 4 of it?" }] },
    });
    expect(await hers.reply(comment.id, "Yes, row 4.")).toMatchObject({
      comment: { messages: [{ mine: false }, { mine: true, text: "Yes, row 4." }] },
    });
    expect(await deskOf(server, stranger.agent).reply(comment.id, "Me too")).toMatchObject({
      code: "notFound",
    });
    expect(await his.reply(comment.id, "x")).toMatchObject({ code: "TEXT_LENGTH" });
    expect(await his.approve(next.id, revision.version, "Thank you.")).toMatchObject({
      __typename: "Done",
    });
    expect(await hers.reply(comment.id, "And so on")).toMatchObject({ code: "closed" });

    const events = await server.dataSource.manager.findBy(EventRecord, { kind: "comment.replied" });
    expect(events.map(({ detail }) => detail)).toEqual([{ field: "place" }, { field: "place" }]);

    expect(await hers.trail(next.id)).toMatchObject({
      trail: [
        {
          ordinal: 1,
          state: "returned",
          enteredBy: "Ottla Firn",
          readBy: "Brisa Kelm",
          decisionNote: "Nearly there.",
          comments: [
            {
              text: "Which table?",
              answer: "Table 2.",
              messages: [{ by: "Brisa Kelm" }, { by: "Ottla Firn" }],
            },
          ],
        },
        {
          ordinal: 2,
          state: "approved",
          decisionNote: "Thank you.",
          changes: [{ field: "place", before: "Table 2, row 3", after: "Table 2, row 4" }],
        },
      ],
    });
  });
});
