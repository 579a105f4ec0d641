import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { approve, claim, returnSubmission, storeReading } from "~server/review/review.service";

import {
  actingAs,
  buildDraft,
  buildFields,
  buildSubmission,
  granted,
  tickAll,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

describe("races", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  const eventsOf = async (number: string, kind: string): Promise<number> =>
    (await server.dataSource.manager.findBy(EventRecord, { kind })).filter((event) =>
      event.subject.startsWith(number),
    ).length;

  it("gives a submission to one of six editors who claim at once", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user);
    const editors = await Promise.all(Array.from({ length: 6 }, () => server.signedIn(["editor"])));
    const outcomes = await Promise.all(
      editors.map(({ agent }) => deskOf(server, agent).claim(submitted.id)),
    );
    const won = outcomes.filter((outcome) => outcome.__typename === "Review");
    expect(won).toHaveLength(1);
    expect(won[0].item.claimedByMe).toBe(true);
    for (const outcome of outcomes.filter((one) => one !== won[0])) {
      expect(outcome).toMatchObject({
        code: "claimed",
        message: "Another editor is reading it already.",
      });
    }
    expect(await eventsOf(won[0].item.number, "claim.made")).toBe(1);
  });

  it("takes one of two decisions made at once, and refuses the other in words", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const first = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.66" });
    const who = actingAs(server.dataSource, first.user);
    granted(await claim(who, submitted.id));
    const read = granted(await storeReading(who, submitted.id, submitted.fields));
    const desk = deskOf(server, first.agent);
    // The holder in two windows: approve here, return there.
    const outcomes = await Promise.all([
      desk.approve(submitted.id, read.version),
      desk.giveBack(submitted.id, read.version, [{ field: "z", text: "no" }]),
      desk.approve(submitted.id, read.version),
    ]);
    expect(outcomes.filter((one) => one.__typename === "Done")).toHaveLength(1);
    for (const outcome of outcomes.filter((one) => one.__typename !== "Done")) {
      expect(["notClaimed", "stale"]).toContain(outcome.code);
      expect(outcome.message).toMatch(/ /);
    }
    const number = read.constraintId;
    const decided = await server.dataSource.query(
      "SELECT COUNT(*) n FROM event WHERE subject = CONCAT('FL-', LPAD(?, 4, '0'), '.1') AND kind IN ('revision.approved', 'revision.returned')",
      [number],
    );
    expect(Number(decided[0].n)).toBe(1);
    expect(await server.mailsTo(contributor.user.email)).toHaveLength(1);
  });

  it("lets one of two editors decide when a claim has changed hands", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const slow = await server.signedIn(["editor"]);
    const quick = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.01" });
    const longAgo = new Date(Date.now() - 80 * 3_600_000);
    const early = actingAs(server.dataSource, slow.user, longAgo);
    granted(await claim(early, submitted.id));
    const read = granted(await storeReading(early, submitted.id, submitted.fields));
    const late = actingAs(server.dataSource, quick.user);
    granted(await claim(late, submitted.id));
    const mine = granted(await storeReading(late, submitted.id, submitted.fields));

    // Both try with what they have on their screens; the slow one even with the right version.
    const [one, two, three] = await Promise.all([
      deskOf(server, slow.agent).approve(submitted.id, read.version),
      deskOf(server, quick.agent).approve(submitted.id, mine.version),
      deskOf(server, slow.agent).giveBack(submitted.id, mine.version, [{ field: "z", text: "no" }]),
    ]);
    expect(one).toMatchObject({ code: "notClaimed" });
    expect(two).toMatchObject({ __typename: "Done" });
    expect(three).toMatchObject({ code: "notClaimed" });
  });

  it("keeps the first of two saves of one version and refuses the other in plain words", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const draft = await buildDraft(server.dataSource, contributor.user);
    const desk = deskOf(server, contributor.agent);
    const outcomes = await Promise.all(
      ["0.1", "0.2", "0.3", "0.4"].map((value) =>
        desk.save(draft.id, draft.version, buildFields({ value })),
      ),
    );
    const won = outcomes.filter((one) => one.__typename === "Submission");
    expect(won).toHaveLength(1);
    expect(outcomes.filter((one) => one.code === "stale")).toHaveLength(3);
    const kept = await desk.submission(draft.id);
    expect(kept.version).toBe(draft.version + 1);
    expect(kept.fields.value).toBe(won[0].fields.value);
  });

  it("submits once when the button is pressed twice, with one mail to each editor", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const draft = await buildDraft(server.dataSource, contributor.user, { z: "7.99" });
    const desk = deskOf(server, contributor.agent);
    const outcomes = await Promise.all([1, 2].map(() => desk.submit(draft.id, draft.version)));
    expect(outcomes.filter((one) => one.__typename === "Submission")).toHaveLength(1);
    expect(await server.mailsTo(editor.user.email)).toHaveLength(1);
  });

  it("answers a return once when it is begun twice at once", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "8.42" });
    const who = actingAs(server.dataSource, editor.user);
    const claimed = granted(await claim(who, submitted.id));
    granted(
      await returnSubmission(who, submitted.id, claimed.version, [{ field: "z", text: "?" }], null),
    );
    const desk = deskOf(server, contributor.agent);
    const outcomes = await Promise.all([1, 2, 3].map(() => desk.revise(submitted.id)));
    expect(new Set(outcomes.map(({ id }) => id)).size).toBe(1);
  });

  it("writes nothing when the mail can't be queued", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "5.21" });
    const who = actingAs(server.dataSource, editor.user);
    granted(await claim(who, submitted.id));
    const read = granted(await storeReading(who, submitted.id, submitted.fields));
    await tickAll(who, read);
    const events = await server.dataSource.manager.count(EventRecord);
    await server.dataSource.query("RENAME TABLE outbox_mail TO elsewhere");
    await expect(approve(who, submitted.id, read.version, null)).rejects.toThrow();
    await server.dataSource.query("RENAME TABLE elsewhere TO outbox_mail");
    expect(await server.dataSource.manager.count(EventRecord)).toBe(events);
    const review = await deskOf(server, editor.agent).review(submitted.id);
    expect(review.item.state).toBe("inReview");
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
    granted(await approve(who, submitted.id, read.version, null));
  });
});
