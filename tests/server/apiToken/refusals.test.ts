import request from "supertest";

import { ApiToken } from "~server/apiToken/apiToken.entity";
import { newSecret } from "~server/apiToken/secret";

import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { tokenOperations, WHO } from "./operations";

let server: TestServer;
let tokens: ReturnType<typeof tokenOperations>;
let agent: Agent;
beforeAll(async () => {
  server = await startTestServer();
  tokens = tokenOperations(server);
  ({ agent } = await server.signedIn());
});
afterAll(() => server.stop());

const SAVE = `mutation { deleteTable(slug: "none") { __typename } }`;

/** Status, code, words and challenge, over GraphQL and over plain HTTP. */
async function bothWays(authorization: string, query = WHO) {
  const graphql = await tokens.graphql(authorization, query);
  const plain = await tokens.get(authorization, "/api/constraints.csv");
  const [error] = graphql.body.errors ?? [];
  return {
    graphql: {
      status: graphql.status,
      code: error?.extensions.code,
      message: error?.message,
      challenge: graphql.headers["www-authenticate"],
    },
    plain: {
      status: plain.status,
      code: plain.body.code,
      message: plain.body.message,
      challenge: plain.headers["www-authenticate"],
    },
  };
}

describe("a token that opens nothing is refused in words of its own, the same over GraphQL and plain HTTP:", () => {
  it("a stranger's", async () => {
    const { graphql, plain } = await bothWays(`Bearer ${newSecret()}`);
    expect(plain).toEqual({
      status: 401,
      code: "TOKEN_UNKNOWN",
      message: "Nobody here has this API token. Make one on your account page.",
      challenge:
        'Bearer realm="Fogline", error="invalid_token", error_description="Nobody here has this API token. Make one on your account page."',
    });
    expect(graphql).toEqual(plain);
  });

  it("an expired one, with the time", async () => {
    const { secret, id } = await tokens.make(agent);
    await server.dataSource.manager.update(
      ApiToken,
      { id },
      { expiresAt: new Date("2026-03-03T10:04:59Z") },
    );
    const { graphql, plain } = await bothWays(`Bearer ${secret}`);
    expect(plain).toMatchObject({
      status: 401,
      code: "TOKEN_EXPIRED",
      message:
        "This API token expired on 3 March 2026 at 10:04 UTC. Make a new one on your account page.",
      challenge: expect.stringMatching(/error="invalid_token".*expired on 3 March 2026/),
    });
    expect(graphql).toEqual(plain);
    expect((await tokens.list(agent)).find((each: { id: string }) => each.id === id).state).toBe(
      "expired",
    );
  });

  it("a revoked one, with the time", async () => {
    const { secret, id } = await tokens.make(agent);
    await tokens.revoke(agent, id);
    await server.dataSource.manager.update(
      ApiToken,
      { id },
      { revokedAt: new Date("2026-04-01T08:30:00Z") },
    );
    const { graphql, plain } = await bothWays(`Bearer ${secret}`);
    expect(plain).toMatchObject({
      status: 401,
      code: "TOKEN_REVOKED",
      message:
        "This API token was revoked on 1 April 2026 at 08:30 UTC. Make a new one on your account page.",
    });
    expect(graphql).toEqual(plain);
  });

  it("one without the scope, with the scope", async () => {
    const { secret } = await tokens.make(agent, { scopes: ["fits"] });
    const response = await tokens.graphql(`Bearer ${secret}`, SAVE);
    expect(response.status).toBe(403);
    expect(response.body.errors[0]).toMatchObject({
      message:
        "This API token lacks the scope “tables”, which this needs. Make one that has it on your account page.",
      extensions: { code: "TOKEN_SCOPE" },
    });
    expect(response.headers["www-authenticate"]).toMatch(
      /^Bearer realm="Fogline", error="insufficient_scope", .*scope="tables"$/,
    );
    expect(response.body.data).toBeUndefined();
  });

  it.each([
    "Bearer",
    "Bearer ",
    "Bearer fgl_short",
    "Bearer something else",
    "Token fgl_0000000000000000000000000000000000000000000000000000000",
    newSecret(),
    `Bearer ${newSecret().toUpperCase()}`,
    `Bearer "${newSecret()}"`,
  ])("a malformed one (%#)", async (authorization) => {
    const { graphql, plain } = await bothWays(authorization);
    expect(plain).toMatchObject({
      status: 401,
      code: "TOKEN_MALFORMED",
      challenge: expect.stringMatching(/error="invalid_token"/),
    });
    expect(graphql).toEqual(plain);
  });
});

it("a header of another server's scheme is none of ours, and asks as nobody", async () => {
  const { graphql, plain } = await bothWays("Basic c3RhZ2luZzpnYXRl");
  expect([graphql.status, plain.status]).toEqual([200, 200]);
});

it("the scheme's case doesn't matter", async () => {
  const { secret } = await tokens.make(agent);
  expect((await tokens.graphql(`bearer ${secret}`, WHO)).body.data.session.viewer).not.toBeNull();
});

it("a token in the address is not looked at", async () => {
  const { secret } = await tokens.make(agent);
  const { body } = await request(server.app)
    .post(`/graphql?access_token=${secret}`)
    .send({ query: WHO });
  expect(body.data.session.viewer).toBeNull();
});

it("an answer to nobody where somebody is needed names the way in", async () => {
  const response = await request(server.app).get("/api/log.csv");
  expect(response.status).toBe(401);
  expect(response.headers["www-authenticate"]).toBe('Bearer realm="Fogline"');
});

it("who fails too often waits, with a right token too: the wait tells nothing about a guess", async () => {
  const narrow = await startTestServer({ limits: { tokenFailuresPerMinute: 3 } });
  try {
    const here = tokenOperations(narrow);
    const { agent: mine } = await narrow.signedIn();
    const { secret } = await here.make(mine);
    const statuses = [];
    for (let i = 0; i < 5; i += 1) {
      statuses.push((await here.graphql(`Bearer ${newSecret()}`, WHO)).status);
    }
    expect(statuses).toEqual([401, 401, 401, 429, 429]);
    const waiting = await here.get(`Bearer ${secret}`, "/api/constraints.csv");
    expect(waiting.status).toBe(429);
    expect(waiting.body.message).toMatch(/^Too many requests\. Try again in \d+ seconds\.$/);
    expect(Number(waiting.headers["retry-after"])).toBeGreaterThan(0);
    // Who comes without a token is not concerned.
    expect((await request(narrow.app).get("/api/constraints.csv")).status).toBe(200);
  } finally {
    await narrow.stop();
  }
});

it("right tokens never count as failures", async () => {
  const narrow = await startTestServer({ limits: { tokenFailuresPerMinute: 2 } });
  try {
    const here = tokenOperations(narrow);
    const { agent: mine } = await narrow.signedIn();
    const { secret } = await here.make(mine);
    for (let i = 0; i < 6; i += 1) {
      expect((await here.graphql(`Bearer ${secret}`, WHO)).status).toBe(200);
    }
  } finally {
    await narrow.stop();
  }
});
