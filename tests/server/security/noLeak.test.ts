import "reflect-metadata";

import { Writable } from "node:stream";

import pino from "pino";
import request from "supertest";
import { ArgumentValidationError } from "type-graphql";

import { findPeople } from "~server/account/people.service";
import { HttpProblem } from "~server/common/errors";
import { formatError } from "~server/http/graphql";
import { routes, type RouteInstaller } from "~server/routes";

import { tokenOperations } from "../apiToken/operations";
import { startTestServer, type TestServer } from "../support/harness";

jest.mock("~server/account/people.service", () => ({
  ...jest.requireActual<object>("~server/account/people.service"),
  findPeople: jest.fn(),
}));

const SECRET = "ER_SECRET at /srv/fogline/server/secret.ts: SELECT passwordHash FROM user";

const failing: RouteInstaller = (router) => {
  router.get("/api/test/throws", () => {
    throw new Error(SECRET);
  });
  router.get("/api/test/rejects", async () => {
    throw Object.assign(new Error(SECRET), { status: 500, expose: true, sql: SECRET });
  });
  router.get("/api/test/problem", () => {
    throw new HttpProblem(409, "CONFLICT", "Somebody was faster.");
  });
  router.get("/api/test/string", () => {
    throw SECRET;
  });
};

let server: TestServer;
const lines: string[] = [];
beforeAll(async () => {
  routes.push(failing);
  const sink = new Writable({
    write: (chunk, _encoding, done) => {
      lines.push(...String(chunk).trim().split("\n"));
      done();
    },
  });
  server = await startTestServer({ logger: pino({ level: "info", base: null }, sink) });
  routes.splice(routes.indexOf(failing), 1);
});
beforeEach(() => {
  lines.length = 0;
});
afterAll(() => server.stop());

const LEAK = /SELECT|passwordHash|\/srv|\.ts\b|node_modules|\bat \S+ \(|stack|sql/i;

it.each(["throws", "rejects", "string"])(
  "a fault behind a plain address leaves as INTERNAL with the request's id: %s",
  async (kind) => {
    const response = await request(server.app).get(`/api/test/${kind}`);
    expect(response.status).toBe(500);
    expect(Object.keys(response.body).sort()).toEqual(["code", "message", "requestId"]);
    expect(response.body).toMatchObject({
      code: "INTERNAL",
      requestId: response.headers["x-request-id"],
    });
    expect(response.text).not.toMatch(LEAK);
  },
);

it("an answer in words leaves as it is", async () => {
  const response = await request(server.app).get("/api/test/problem");
  expect(response.status).toBe(409);
  expect(response.body).toMatchObject({ code: "CONFLICT", message: "Somebody was faster." });
});

it("a fault in a resolver leaves as INTERNAL with the request's id, and is logged under it", async () => {
  const { agent } = await server.signedIn(["maintainer"]);
  jest
    .mocked(findPeople)
    .mockRejectedValueOnce(
      Object.assign(new Error(SECRET), { code: "FORBIDDEN", extensions: { sql: SECRET } }),
    );
  const response = await agent.post("/graphql").send({ query: "{ people { id } }" });
  expect(response.body.errors).toHaveLength(1);
  expect(response.body.errors[0].extensions).toEqual({
    code: "INTERNAL",
    requestId: response.headers["x-request-id"],
  });
  expect(response.text).not.toMatch(LEAK);
  const logged = lines.map((line) => JSON.parse(line)).find(({ msg }) => msg === "resolver failed");
  expect(logged).toMatchObject({ id: response.headers["x-request-id"], level: 50 });
});

it("a fault of the database leaves without a word of SQL", async () => {
  const { agent } = await server.signedIn(["maintainer"]);
  jest.mocked(findPeople).mockImplementationOnce(async (ctx) => {
    await ctx.database.query("SELECT passwordHash FROM no_such_table");
    return [];
  });
  const response = await agent.post("/graphql").send({ query: "{ people { id } }" });
  expect(response.body.errors[0].extensions.code).toBe("INTERNAL");
  expect(response.text).not.toMatch(LEAK);
});

it("an argument that breaks a rule is named, and neither its value nor our classes leave", () => {
  const error = new ArgumentValidationError([
    {
      property: "nameOnPapers",
      value: "a private value",
      target: { passwordHash: SECRET },
      constraints: { maxLength: "too long" },
    },
  ]);
  const formatted = {
    message: error.message,
    extensions: { ...error.extensions, stacktrace: [SECRET] },
  };
  const answer = formatError(pino({ level: "silent" }), formatted as never, error);
  expect(answer).toEqual({
    message: "Not acceptable: nameOnPapers.",
    extensions: { code: "BAD_USER_INPUT", requestId: "none" },
  });
});

it.each([
  ["not JSON", "{broken"],
  ["no query", "{}"],
  ["null", "null"],
  ["a number", "7"],
  ["a query that is no text", '{"query":7}'],
  ["variables that are no object", '{"query":"{session{licence}}","variables":"x"}'],
  ["an unknown field", '{"query":"{ session { secretField } }"}'],
  [
    "a variable of another type",
    '{"query":"query ($t: String) { people(text: $t) { id } }","variables":{"t":{}}}',
  ],
  ["an unknown operation", '{"query":"query A { session { licence } }","operationName":"B"}'],
])("a malformed request is answered in words with a code: %s", async (_kind, body) => {
  const response = await request(server.app)
    .post("/graphql")
    .set("Content-Type", "application/json")
    .send(body);
  expect(response.status).toBe(400);
  const { code } = response.body.errors[0].extensions;
  expect(code).toMatch(/^(BAD_REQUEST|BAD_USER_INPUT|GRAPHQL_\w+|OPERATION_RESOLUTION_FAILURE)$/);
  expect(response.text).not.toMatch(/node_modules|\bat \S+ \(|stacktrace|\.ts\b|\.js\b/i);
});

it.each(["/%E0%A4%A", "/%00", "/..%2f..%2fetc%2fpasswd", "/api/..%2f..%2fpackage.json", "/.env"])(
  "an address that can't be a file tells nothing about files: %s",
  async (address) => {
    const response = await request(server.app).get(address);
    expect([200, 400, 403, 404]).toContain(response.status);
    if (response.status === 200) expect(response.text).toContain('<div id="root">');
    expect(response.text).not.toMatch(/root:|node_modules|\bat \S+ \(|ENOENT/);
  },
);

it("the log has one line a request, with its id and nothing a person typed", async () => {
  const { agent, user } = await server.signedIn();
  lines.length = 0;
  const response = await agent
    .post("/graphql?token=a-secret-token")
    .set("X-Request-Id", "chosen-by-the-caller")
    .set("User-Agent", "a-browser")
    .send({
      query: "mutation ($e: String!) { requestPasswordReset(email: $e) { __typename } }",
      variables: { e: user.email },
    });
  await new Promise((resolve) => setImmediate(resolve));
  expect(lines).toHaveLength(1);
  const line = JSON.parse(lines[0]!);
  expect(line).toMatchObject({
    id: response.headers["x-request-id"],
    req: { method: "POST", path: "/graphql" },
    res: { status: 200 },
  });
  expect(line.id).not.toBe("chosen-by-the-caller");
  expect(lines[0]).not.toMatch(/secret-token|@|fogline\.sid|a-browser|127\.0\.0\.1|::1/);
});

it("the log never holds an API token: not when it is made, used, refused or sent where it doesn't belong", async () => {
  const { agent } = await server.signedIn();
  const { ask, get, graphql, revoke } = tokenOperations(server);
  lines.length = 0;
  const { secret, token } = await ask(agent);
  const bearer = `Bearer ${secret}`;
  await graphql(bearer, "{ session { licence } }");
  await get(bearer, "/api/test/throws");
  await get(bearer, `/api/constraints.csv?access_token=${secret}`);
  await get(`Token ${secret}`, "/api/constraints.csv");
  await get(bearer, "/api/constraints.csv").set("Cookie", `token=${secret}`);
  await graphql(bearer, `{ people(text: "${secret}") { id } }`);
  await get(bearer, `/api/tables/${secret}.csv`);
  await get(bearer, `/${secret.toUpperCase()}`);
  await revoke(agent, token.id);
  await get(bearer, "/api/constraints.csv");
  await new Promise((resolve) => setImmediate(resolve));
  expect(lines.length).toBeGreaterThanOrEqual(11);
  expect(lines.join("\n")).not.toContain(secret.slice(4, 20));
  expect(lines.join("\n").toLowerCase()).not.toContain(secret.slice(-20));
  expect(lines.join("\n")).not.toMatch(/authorization|bearer/i);
});
