import "reflect-metadata";

import { claim, storeReading } from "~server/review/review.service";
import { ROLES, type Role } from "~shared/review/states";

import {
  actingAs,
  buildCitation,
  buildDraft,
  buildFields,
  buildSubmission,
  granted,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

/** Every call of the desk and the tables, with the roles that may make it; null: any signed-in person. */
const CALLS: { name: string; roles: readonly Role[] | null; query: string }[] = [
  {
    name: "mySubmissions",
    roles: null,
    query: "query ($id: ID!) { mySubmissions { id } submission(id: $id) { id } }",
  },
  {
    name: "checkFields",
    roles: ["contributor"],
    query: "query ($id: ID!) { checkFields(fields: {}, submissionId: $id) { code } }",
  },
  {
    name: "startDraft",
    roles: ["contributor"],
    query: "mutation ($id: ID!) { startDraft(citationId: $id) { __typename } }",
  },
  {
    name: "saveDraft",
    roles: ["contributor"],
    query:
      "mutation ($id: ID!) { saveDraft(input: { id: $id, version: 1, fields: {} }) { __typename } }",
  },
  {
    name: "submitDraft",
    roles: ["contributor"],
    query:
      "mutation ($id: ID!) { submitDraft(id: $id, version: 1, agreeToLicence: true) { __typename } }",
  },
  {
    name: "discardDraft",
    roles: ["contributor"],
    query: "mutation ($id: ID!) { discardDraft(id: $id, version: 1) { __typename } }",
  },
  {
    name: "reviseSubmission",
    roles: ["contributor"],
    query: "mutation ($id: ID!) { reviseSubmission(id: $id) { __typename } }",
  },
  { name: "queue", roles: ["editor"], query: "query { queue { id } }" },
  { name: "review", roles: ["editor"], query: "query ($id: ID!) { review(id: $id) { blockers } }" },
  {
    name: "claimSubmission",
    roles: ["editor"],
    query: "mutation ($id: ID!) { claimSubmission(id: $id) { __typename } }",
  },
  {
    name: "releaseClaim",
    roles: ["editor"],
    query: "mutation ($id: ID!) { releaseClaim(id: $id) { __typename } }",
  },
  {
    name: "storeReading",
    roles: ["editor"],
    query: "mutation ($id: ID!) { storeReading(id: $id, reading: {}) { __typename } }",
  },
  {
    name: "correctReading",
    roles: ["editor"],
    query:
      'mutation ($id: ID!) { correctReading(id: $id, field: "z", reading: {}, why: "so") { __typename } }',
  },
  {
    name: "acceptAnswer",
    roles: ["editor"],
    query: 'mutation ($id: ID!) { acceptAnswer(id: $id, code: "x") { __typename } }',
  },
  {
    name: "approveSubmission",
    roles: ["editor"],
    query: "mutation ($id: ID!) { approveSubmission(id: $id, version: 1) { __typename } }",
  },
  {
    name: "returnSubmission",
    roles: ["editor"],
    query:
      "mutation ($id: ID!) { returnSubmission(id: $id, version: 1, comments: []) { __typename } }",
  },
  {
    name: "saveTable",
    roles: null,
    query:
      'mutation { saveRecipe(input: { name: "x", visibility: private, recipe: { filter: {} } }) { __typename } }',
  },
  {
    name: "deleteTable",
    roles: null,
    query: "mutation ($id: ID!) { deleteTable(slug: $id) { __typename } }",
  },
];

const UNKNOWN_ID = "00000000-0000-4000-8000-000000000000";

describe("roles", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it.each(CALLS)(
    "$name is open to those who hold its role and to nobody else",
    async ({ query, roles }) => {
      const variables = query.includes("$id") ? { id: UNKNOWN_ID } : {};
      const nobody = await server.graphql(server.agent(), query, variables);
      expect(nobody.errors?.[0]?.extensions.code).toBe("UNAUTHENTICATED");
      for (const held of [null, ...ROLES]) {
        const { agent } = await server.signedIn(held === null ? [] : [held]);
        const { errors } = await server.graphql(agent, query, variables);
        const open = roles === null || (held !== null && roles.includes(held));
        expect([held, errors?.[0]?.extensions.code]).toEqual([
          held,
          open ? undefined : "FORBIDDEN",
        ]);
      }
    },
  );

  it("serves constraints and tables to nobody in particular", async () => {
    const { data, errors } = await server.graphql(
      server.agent(),
      '{ constraints { total } constraint(number: "FL-0001") { number } fittingTables { slug } fittingTable(slug: "x") { slug } }',
    );
    expect(errors).toBeUndefined();
    expect(data).toMatchObject({ constraint: null, fittingTable: null });
  });

  it("shows and changes a draft for its owner only", async () => {
    const owner = await server.signedIn(["contributor"]);
    const other = await server.signedIn(["contributor", "editor", "maintainer"]);
    const draft = await buildDraft(server.dataSource, owner.user);
    const theirs = deskOf(server, other.agent);
    expect(await theirs.submission(draft.id)).toBeNull();
    expect(await theirs.review(draft.id)).toBeNull();
    expect(await theirs.mine()).toEqual([]);
    const refused = [
      await theirs.save(draft.id, 1, buildFields()),
      await theirs.submit(draft.id, 1),
      await theirs.discard(draft.id, 1),
      await theirs.revise(draft.id),
      await theirs.start(null, draft.id),
      await theirs.claim(draft.id),
    ];
    expect(refused.map(({ code }) => code)).toEqual(Array(6).fill("notFound"));
    expect((await deskOf(server, owner.agent).submission(draft.id)).version).toBe(1);
  });

  it("keeps an editor from an own submission, in the queue and through every call", async () => {
    const both = await server.signedIn(["contributor", "editor"]);
    const own = await buildSubmission(server.dataSource, both.user, { z: "7.77" });
    const desk = deskOf(server, both.agent);
    const item = (await desk.queue()).find(({ id }: { id: string }) => id === own.id);
    expect(item.barredBecause).toMatch(/You submitted it/);
    expect(await desk.claim(own.id)).toMatchObject({ code: "barred" });
    expect(await desk.read(own.id, own.fields)).toMatchObject({ code: "notClaimed" });
    expect(await desk.approve(own.id, own.version)).toMatchObject({ code: "notClaimed" });
    // Even with a claim that something else had put there.
    await server.dataSource.query(
      "UPDATE revision SET state = 'inReview', claimedById = ?, claimedUntil = '2099-01-01' WHERE id = ?",
      [both.user.id, own.id],
    );
    expect(await desk.read(own.id, own.fields)).toMatchObject({ code: "barred" });
    expect(await desk.approve(own.id, own.version)).toMatchObject({ code: "barred" });
    expect(await desk.giveBack(own.id, own.version, [{ field: "z", text: "no" }])).toMatchObject({
      code: "barred",
    });
  });

  it("keeps an author from judging the paper", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const author = await server.signedIn(["editor"], { nameOnPapers: "R. Quintavel" });
    const paper = await buildCitation(server.dataSource, contributor.user, {
      author: "Quintavel, Rhona and Umber, Pelle",
    });
    const submitted = await buildSubmission(
      server.dataSource,
      contributor.user,
      { z: "9.31" },
      paper,
    );
    const desk = deskOf(server, author.agent);
    expect(await desk.claim(submitted.id)).toMatchObject({
      code: "barred",
      message: expect.stringMatching(/author of this paper/),
    });
    expect(await server.mailsTo(author.user.email)).toEqual([]);
    const items = await desk.queue();
    expect(items.find(({ id }: { id: string }) => id === submitted.id).barredBecause).toMatch(
      /author/,
    );
  });

  it("lets only the holder of the claim read, correct, accept and decide", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const holder = await server.signedIn(["editor"]);
    const other = await server.signedIn(["editor", "maintainer"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "5.93" });
    const who = actingAs(server.dataSource, holder.user);
    granted(await claim(who, submitted.id));
    const read = granted(await storeReading(who, submitted.id, submitted.fields));
    const desk = deskOf(server, other.agent);
    const calls = [
      await desk.read(submitted.id, submitted.fields),
      await desk.correct(submitted.id, "z", { z: "1" }, "so"),
      await desk.accept(submitted.id, "x"),
      await desk.approve(submitted.id, read.version),
      await desk.giveBack(submitted.id, read.version, [{ field: "z", text: "no" }]),
      await desk.release(submitted.id),
    ];
    expect(calls.map(({ code }) => code)).toEqual(Array(6).fill("notClaimed"));
    expect(await desk.claim(submitted.id)).toMatchObject({ code: "claimed" });
  });

  it("lets a claim run out after 72 hours and says so in the log", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "8.88" });
    const threeDaysAgo = new Date(Date.now() - 72 * 3_600_000 - 1000);
    granted(await claim(actingAs(server.dataSource, editor.user, threeDaysAgo), submitted.id));
    const desk = deskOf(server, editor.agent);
    expect(await desk.read(submitted.id, submitted.fields)).toMatchObject({ code: "notClaimed" });
    const item = (await desk.queue()).find(({ id }: { id: string }) => id === submitted.id);
    expect(item).toMatchObject({ state: "submitted", claimedByMe: false, claimedUntil: null });
    const [event] = await server.dataSource.query(
      "SELECT actorId FROM event WHERE kind = 'claim.lapsed'",
    );
    expect(event.actorId).toBeNull();
    expect(await desk.claim(submitted.id)).toMatchObject({ item: { claimedByMe: true } });
  });

  it("stands the queue oldest first", async () => {
    const times = (await deskOf(server, (await server.signedIn(["editor"])).agent).queue()).map(
      ({ submittedAt }: { submittedAt: string }) => submittedAt,
    );
    expect(times.length).toBeGreaterThan(2);
    expect(times).toEqual([...times].sort());
  });
});
