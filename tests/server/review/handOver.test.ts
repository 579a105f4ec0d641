import { EventRecord } from "~server/event/event.entity";
import { claim, storeReading } from "~server/review/review.service";

import {
  actingAs,
  buildCitation,
  buildDraft,
  buildSubmission,
  granted,
  send,
  tickAll,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

describe("a claim", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  const people = async () => ({
    contributor: await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" }),
    first: await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" }),
    second: await server.signedIn(["editor"], { nameOnPapers: "Tove Arlund" }),
  });

  it("is handed to another editor, who is told without a number and reads blind anew", async () => {
    const { contributor, first, second } = await people();
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.31" });
    const hers = deskOf(server, first.agent);
    await hers.claim(submitted.id);
    await hers.read(submitted.id, submitted.fields);
    const list = await hers.handOverList(submitted.id);
    const ids = list.map(({ id }: { id: string }) => id);
    expect(ids).toContain(second.user.id);
    expect(ids).not.toContain(first.user.id);
    expect(ids).not.toContain(contributor.user.id);
    expect(await hers.handOver(submitted.id, second.user.id)).toMatchObject({
      __typename: "Done",
      message: expect.stringContaining("Tove Arlund"),
    });

    expect(await hers.approve(submitted.id, 99)).toMatchObject({ code: "notClaimed" });
    const mails = await server.mailsTo(second.user.email);
    const mail = mails.find(({ subject }) => subject.includes("handed to you"));
    expect(mail?.text).toContain("Brisa Kelm handed");
    expect(mail?.text).not.toMatch(/6\.31|0\.43/);
    const seen = await deskOf(server, second.agent).review(submitted.id);
    expect(seen).toMatchObject({
      item: { claimedByMe: true },
      readingStoredAt: null,
      submission: null,
      comparison: [],
      checklist: [],
    });
    const handed = await server.dataSource.manager.findOneByOrFail(EventRecord, {
      kind: "claim.handedOver",
    });
    expect(handed.detail).toEqual({ to: second.user.id });
  });

  it("is handed to nobody who submitted it, wrote the paper or leaves it to others", async () => {
    const contributor = await server.signedIn(["contributor", "editor"]);
    const { first } = await people();
    const author = await server.signedIn(["editor"], { nameOnPapers: "Pelle Umber" });
    const former = await server.signedIn(["editor"], {
      nameOnPapers: "Ida Newname",
      furtherNames: ["R. Quellmark"],
    });
    const leaver = await server.signedIn(["editor"], { nameOnPapers: "Sef Odd" });
    const reader = await server.signedIn([], { nameOnPapers: "Nan Reader" });
    const paper = await buildCitation(server.dataSource, contributor.user, {
      author: "Quellmark, Rona and Umber, Pelle",
    });
    const draft = await buildDraft(server.dataSource, contributor.user, { z: "6.32" }, paper);
    const submitted = await send(server.dataSource, contributor.user, draft);
    expect(await deskOf(server, leaver.agent).leave(paper.id, "A rival.")).toMatchObject({
      __typename: "Done",
    });
    const desk = deskOf(server, first.agent);
    await desk.claim(submitted.id);
    const ids = (await desk.handOverList(submitted.id)).map(({ id }: { id: string }) => id);
    for (const { user } of [contributor, author, former, leaver, reader]) {
      expect(ids).not.toContain(user.id);
      expect(await desk.handOver(submitted.id, user.id)).toMatchObject({ code: "notAnEditor" });
    }
    const why = async (agent: typeof author.agent) =>
      (await deskOf(server, agent).review(submitted.id)).item.barredBecause;
    expect(await why(author.agent)).toMatch(/^You are an author of this paper\./);
    expect(await why(former.agent)).toMatch(/under another of your names/);
    expect(await why(leaver.agent)).toMatch(/can't read this paper impartially/);
  });

  it("can be made again once a recusal is taken back, and ends when one is declared", async () => {
    const { contributor, first } = await people();
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.33" });
    const citationId = submitted.citationId ?? "";
    const desk = deskOf(server, first.agent);
    await desk.claim(submitted.id);
    expect(await desk.leave(citationId)).toMatchObject({ __typename: "Done" });
    const queue = await desk.queue();
    expect(queue.find(({ id }: { id: string }) => id === submitted.id)).toMatchObject({
      state: "submitted",
      claimedByMe: false,
      barredBecause: expect.stringContaining("impartially"),
    });
    expect(await desk.claim(submitted.id)).toMatchObject({ code: "barred" });
    expect(await desk.takeBack(citationId)).toMatchObject({ __typename: "Done" });
    expect(await desk.takeBack(citationId)).toMatchObject({ code: "notDeclared" });
    expect(await desk.claim(submitted.id)).toMatchObject({ __typename: "Review" });
  });

  it("is lengthened in its last day only, and twice at most", async () => {
    const { contributor, first } = await people();
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.34" });
    const desk = deskOf(server, first.agent);
    await desk.claim(submitted.id);
    expect(await desk.renew(submitted.id)).toMatchObject({ code: "notRenewable" });
    const soon = () =>
      server.dataSource.query("UPDATE revision SET claimedUntil = ? WHERE id = ?", [
        new Date(Date.now() + 3_600_000),
        submitted.id,
      ]);
    for (let time = 1; time <= 2; time += 1) {
      await soon();
      const renewed = await desk.renew(submitted.id);
      const left = new Date(renewed.item.claimedUntil).getTime() - Date.now();
      expect(left).toBeGreaterThan(71 * 3_600_000);
    }
    await soon();
    expect(await desk.renew(submitted.id)).toMatchObject({
      code: "notRenewable",
      message: expect.stringContaining("twice already"),
    });
  });

  it("takes one of a hundred decisions by two editors, with a hand-over among them", async () => {
    const { contributor, first, second } = await people();
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "6.35" });
    const early = actingAs(server.dataSource, first.user);
    granted(await claim(early, submitted.id));
    granted(await storeReading(early, submitted.id, submitted.fields));
    const [hers, his] = [deskOf(server, first.agent), deskOf(server, second.agent)];
    granted(await claimedBack());
    async function claimedBack() {
      // To and fro, so that both hold a stored reading and a ticked checklist.
      await hers.handOver(submitted.id, second.user.id);
      const late = actingAs(server.dataSource, second.user);
      const read = granted(await storeReading(late, submitted.id, submitted.fields));
      await tickAll(late, read);
      await his.handOver(submitted.id, first.user.id);
      await tickAll(actingAs(server.dataSource, first.user), read);
      return read;
    }
    const { item } = await hers.review(submitted.id);
    const approve =
      "mutation ($id: ID!, $v: Int!) { approveSubmission(id: $id, version: $v) { __typename ... on Refusal { code message } } }";
    const giveBack =
      'mutation ($id: ID!, $v: Int!) { returnSubmission(id: $id, version: $v, comments: [{ field: "z", text: "no" }]) { __typename ... on Refusal { code message } } }';
    const decide = (desk: typeof hers, index: number) =>
      // What each has on the screen: the version now, and the one after a hand-over.
      desk.call(index % 2 === 0 ? approve : giveBack, {
        id: submitted.id,
        v: item.version + (index % 4 === 3 ? 1 : 0),
      });
    const outcomes = await Promise.all(
      Array.from({ length: 100 }, (_, index) => {
        if (index === 50) void hers.handOver(submitted.id, second.user.id);
        return decide(index % 3 === 0 ? his : hers, index);
      }),
    );
    const won = outcomes.filter((one) => one.__typename === "Done");
    const refused = outcomes.filter((one) => one.__typename === "Refusal");
    expect([won.length, refused.length]).toEqual([1, 99]);
    for (const { code, message } of refused) {
      expect(["notClaimed", "stale"]).toContain(code);
      expect(message).toMatch(/^[A-Z].*\.$/);
      expect(message).not.toMatch(/SQL|undefined|\bat \//);
    }
    const decided = await server.dataSource.manager.find(EventRecord, {
      where: [
        { kind: "revision.approved", subject: `${item.number}.1` },
        { kind: "revision.returned", subject: `${item.number}.1` },
      ],
    });
    expect(decided).toHaveLength(1);
    expect(decided[0]?.actorId).toBe(first.user.id);
  });
});
