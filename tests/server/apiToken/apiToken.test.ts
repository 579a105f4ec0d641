import { ApiToken } from "~server/apiToken/apiToken.entity";
import { hashOf, isWellFormed } from "~server/apiToken/secret";
import { sweepTokens } from "~server/apiToken/store";
import { EventRecord } from "~server/event/event.entity";
import { MOST_TOKENS } from "~shared/review/tokenScopes";

import { TEST_PASSWORD } from "../../factories/user";
import { accountOperations, tokenIn } from "../account/operations";
import { startTestServer, type TestServer } from "../support/harness";
import { tokenOperations, WHO } from "./operations";

let server: TestServer;
let tokens: ReturnType<typeof tokenOperations>;
beforeAll(async () => {
  server = await startTestServer();
  tokens = tokenOperations(server);
});
afterAll(() => server.stop());

const DAY_MS = 86_400_000;

describe("making an API token", () => {
  it("shows the secret once, and keeps its hash only", async () => {
    const { agent, user } = await server.signedIn();
    const before = Date.now();
    const made = await tokens.ask(agent, { name: "  nightly   fits ", scopes: ["fits"] });
    expect(isWellFormed(made.secret)).toBe(true);
    expect(made.token).toMatchObject({
      name: "nightly fits",
      // Every token reads.
      scopes: ["read", "fits"],
      start: made.secret.slice(0, 8),
      state: "active",
      lastUsedAt: null,
      revokedAt: null,
    });
    const days = (Date.parse(made.token.expiresAt) - before) / DAY_MS;
    expect(days).toBeGreaterThanOrEqual(90);
    expect(days).toBeLessThan(90.01);

    const [row] = await server.dataSource.query("SELECT * FROM api_token WHERE ownerId = ?", [
      user.id,
    ]);
    expect(row.hash).toBe(hashOf(made.secret));
    expect(JSON.stringify(row)).not.toContain(made.secret.slice(8));
    expect(JSON.stringify(await tokens.list(agent))).not.toContain(made.secret.slice(8));
  });

  it("asks for the password, and counts wrong ones like failed sign-ins", async () => {
    const narrow = await startTestServer({ limits: { signInPerAddress: 2 } });
    try {
      const { agent } = await narrow.signedIn();
      const { ask, list } = tokenOperations(narrow);
      const answers = [];
      for (let i = 0; i < 3; i += 1) answers.push(await ask(agent, {}, "a guess at it"));
      expect(answers.map(({ code }) => code)).toEqual([
        "PASSWORD_WRONG",
        "PASSWORD_WRONG",
        "TOO_MANY_REQUESTS",
      ]);
      expect(answers[0].field).toBe("password");
      expect(await list(agent)).toEqual([]);
    } finally {
      await narrow.stop();
    }
  });

  it.each([
    ["no name", { name: " " }, "name"],
    ["a long name", { name: "x".repeat(61) }, "name"],
    ["a name with a tag", { name: "<b>" }, "name"],
    ["no day", { days: 0 }, "days"],
    ["more than a year", { days: 366 }, "days"],
  ])("is refused with %s, at the entry", async (_what, wish, field) => {
    const { agent } = await server.signedIn();
    expect(await tokens.ask(agent, wish)).toMatchObject({ __typename: "Refusal", field });
  });

  it("may last a year and no longer", async () => {
    const { agent } = await server.signedIn();
    expect((await tokens.ask(agent, { days: 365 })).__typename).toBe("MadeApiToken");
  });

  it(`stops at ${MOST_TOKENS} live ones, when asked for at once too; a revoked one makes room`, async () => {
    const { agent, user } = await server.signedIn();
    const answers = await Promise.all(
      Array.from({ length: MOST_TOKENS + 4 }, () => tokens.ask(agent)),
    );
    const made = answers.filter(({ __typename }) => __typename === "MadeApiToken");
    expect(made).toHaveLength(MOST_TOKENS);
    expect(await server.dataSource.manager.countBy(ApiToken, { ownerId: user.id })).toBe(
      MOST_TOKENS,
    );
    await tokens.revoke(agent, made[0].token.id);
    expect((await tokens.ask(agent)).__typename).toBe("MadeApiToken");
    expect(await tokens.ask(agent)).toMatchObject({ code: "TOO_MANY_TOKENS" });
  });

  it("is limited per person and hour, so that making and revoking fills no table", async () => {
    const narrow = await startTestServer({ limits: { tokensPerPerson: 2 } });
    try {
      const { agent } = await narrow.signedIn();
      const { ask } = tokenOperations(narrow);
      await ask(agent);
      await ask(agent);
      expect(await ask(agent)).toMatchObject({ code: "TOO_MANY_REQUESTS" });
    } finally {
      await narrow.stop();
    }
  });

  it("tells the owner by mail, without the secret", async () => {
    const { agent, user } = await server.signedIn();
    const { secret } = await tokens.make(agent, { name: "plotting", scopes: ["tables"] });
    const mails = await server.mailsTo(user.email);
    expect(mails).toHaveLength(1);
    expect(mails[0]?.text).toContain("An API token named plotting was made");
    expect(mails[0]?.text).toContain("read, tables");
    expect(mails[0]?.text).not.toContain(secret.slice(4));
  });

  it("and revoking it are events, which name neither the token's name nor its secret", async () => {
    const { agent, user } = await server.signedIn();
    const { secret, id } = await tokens.make(agent, { name: "a private name" });
    await tokens.revoke(agent, id);
    await tokens.revoke(agent, id);
    const events = await server.dataSource.manager.find(EventRecord, {
      where: { actorId: user.id },
      order: { sequence: "ASC" },
    });
    expect(events.map(({ kind, subject }) => [kind, subject])).toEqual([
      ["apiToken.made", `user:${user.id}`],
      ["apiToken.revoked", `user:${user.id}`],
    ]);
    expect(JSON.stringify(events)).not.toMatch(/private name/);
    expect(JSON.stringify(events)).not.toContain(secret.slice(4));
    const maintainer = await server.signedIn(["maintainer"]);
    const { data } = await server.graphql(
      maintainer.agent,
      `{ eventLog(filter: { person: "${user.id}" }, limit: 5) { events { sentence } } }`,
    );
    expect(data?.eventLog.events.map(({ sentence }: { sentence: string }) => sentence)).toEqual([
      "Mirelle Ostrander revoked an API token of the own account.",
      expect.stringMatching(
        /^Mirelle Ostrander made an API token \(read\) that ends on \d{4}-\d\d-\d\d\.$/,
      ),
    ]);
  });
});

describe("an API token", () => {
  it("stands for its person, with the roles of the moment", async () => {
    const { agent, user } = await server.signedIn(["contributor"]);
    const { secret } = await tokens.make(agent);
    const ask = async () =>
      (await tokens.graphql(`Bearer ${secret}`, WHO)).body.data.session.viewer;
    expect(await ask()).toEqual({ id: user.id, email: user.email, roles: ["contributor"] });
    await server.dataSource.query("DELETE FROM role_grant WHERE userId = ?", [user.id]);
    expect((await ask()).roles).toEqual([]);
  });

  it("wins over a cookie, and gets none", async () => {
    const holder = await server.signedIn();
    const other = await server.signedIn();
    const { secret } = await tokens.make(holder.agent);
    const response = await other.agent
      .post("/graphql")
      .set("Authorization", `Bearer ${secret}`)
      .send({ query: WHO });
    expect(response.body.data.session.viewer.id).toBe(holder.user.id);
    expect(response.headers["set-cookie"]).toBeUndefined();
    // And a token that opens nothing is not helped by a cookie.
    const refused = await other.agent
      .post("/graphql")
      .set("Authorization", "Bearer fgl_nothing")
      .send({ query: WHO });
    expect(refused.status).toBe(401);
  });

  it("says when it was last used, and writes that at most once a minute", async () => {
    const { agent } = await server.signedIn();
    const { secret, id } = await tokens.make(agent);
    const { manager } = server.dataSource;
    const used = async () => (await manager.findOneByOrFail(ApiToken, { id })).lastUsedAt;
    await tokens.graphql(`Bearer ${secret}`, WHO);
    const first = await used();
    expect(Math.abs(Date.now() - first!.getTime())).toBeLessThan(60_000);
    await tokens.graphql(`Bearer ${secret}`, WHO);
    expect(await used()).toEqual(first);
    await manager.update(ApiToken, { id }, { lastUsedAt: new Date(first!.getTime() - 61_000) });
    await tokens.get(`Bearer ${secret}`, "/api/constraints.csv");
    expect((await used())!.getTime()).toBeGreaterThanOrEqual(first!.getTime());
    expect((await tokens.list(agent))[0].lastUsedAt).not.toBeNull();
  });

  it("is listed and revoked by its owner only", async () => {
    const { agent } = await server.signedIn();
    const other = await server.signedIn(["maintainer"]);
    const { id, secret } = await tokens.make(agent);
    expect(await tokens.list(other.agent)).toEqual([]);
    expect(await tokens.revoke(other.agent, id)).toMatchObject({ code: "NOT_FOUND" });
    expect((await tokens.graphql(`Bearer ${secret}`, WHO)).status).toBe(200);
    expect(await tokens.revoke(agent, id)).toMatchObject({
      message: "The token “nightly run” is revoked. Whatever uses it is refused from now on.",
    });
    expect((await tokens.list(agent))[0]).toMatchObject({ id, state: "revoked" });
    expect((await tokens.graphql(`Bearer ${secret}`, WHO)).status).toBe(401);
  });

  it("dies with the account, and is then nobody's", async () => {
    const { agent, user } = await server.signedIn();
    const { secret } = await tokens.make(agent);
    await server.graphql(
      agent,
      `mutation ($password: String!) { deleteAccount(password: $password, credit: named) { __typename } }`,
      { password: TEST_PASSWORD },
    );
    expect(await server.dataSource.manager.countBy(ApiToken, { ownerId: user.id })).toBe(0);
    const { status, body } = await tokens.graphql(`Bearer ${secret}`, WHO);
    expect([status, body.errors[0].extensions.code]).toEqual([401, "TOKEN_UNKNOWN"]);
  });

  it("goes on after a changed or a reset password, and the answer and the mail say so", async () => {
    const { agent, user } = await server.signedIn();
    const account = accountOperations(server);
    const { secret } = await tokens.make(agent);
    const changed = await account.changePassword(agent, TEST_PASSWORD, "lifting at last 9");
    expect(changed.message).toMatch(/Your API token goes on working; revoke it if/);
    expect((await server.mailsTo(user.email)).at(-1)?.text).toMatch(/API token goes on working/);
    await account.requestReset(server.agent(), user.email);
    const link = await tokenIn(server, user.email);
    const reset = await account.reset(server.agent(), link, "lifting once more 9");
    expect(reset.message).toMatch(/Your API token goes on working/);
    expect((await tokens.graphql(`Bearer ${secret}`, WHO)).status).toBe(200);
    // Who has none hears nothing about them.
    const without = await server.signedIn();
    const plain = await account.changePassword(without.agent, TEST_PASSWORD, "lifting at last 9");
    expect(plain.message).toBe("Your password is changed, and your other sessions are ended.");
  });

  it("goes on when all sessions end, for it is none", async () => {
    const { agent } = await server.signedIn();
    const { secret } = await tokens.make(agent);
    await server.graphql(agent, "mutation { signOutEverywhere { message } }");
    expect((await tokens.graphql(`Bearer ${secret}`, WHO)).status).toBe(200);
  });

  it("is revoked when the owner of the old address objects to a change of address", async () => {
    const { agent, user } = await server.signedIn();
    const { secret } = await tokens.make(agent);
    await server.graphql(
      agent,
      `mutation ($email: String!, $password: String!) {
         requestAddressChange(email: $email, password: $password) { __typename } }`,
      { email: `taken-${user.email}`, password: TEST_PASSWORD },
    );
    const [, link] = /object\?token=([\w-]+)/.exec(
      (await server.mailsTo(user.email)).map(({ text }) => text).join("\n"),
    )!;
    const { data } = await server.graphql(
      server.agent(),
      `mutation ($token: String!) { objectToAddressChange(token: $token) {
         ... on Done { message } } }`,
      { token: link },
    );
    expect(data.objectToAddressChange.message).toMatch(/every API token revoked/);
    const { body } = await tokens.graphql(`Bearer ${secret}`, WHO);
    expect(body.errors[0].extensions.code).toBe("TOKEN_REVOKED");
  });

  it("that ended half a year ago is forgotten; a later or a live one is kept", async () => {
    const { agent, user } = await server.signedIn();
    const { manager } = server.dataSource;
    const ids: string[] = [];
    for (let i = 0; i < 4; i += 1) ids.push((await tokens.make(agent)).id);
    const ago = (days: number) => new Date(Date.now() - days * DAY_MS);
    await manager.update(ApiToken, { id: ids[0]! }, { expiresAt: ago(181) });
    await manager.update(ApiToken, { id: ids[1]! }, { revokedAt: ago(181) });
    await manager.update(ApiToken, { id: ids[2]! }, { expiresAt: ago(179) });
    await sweepTokens(manager, new Date());
    const left = await manager.findBy(ApiToken, { ownerId: user.id });
    expect(left.map(({ id }) => id).sort()).toEqual([ids[2], ids[3]].sort());
  });
});
