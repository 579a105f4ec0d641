import { getIntrospectionQuery } from "graphql";

import { MAX_ALIASES, MAX_DEPTH, MAX_TOKENS } from "~server/security/graphqlGuards";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

let server: TestServer;
let agent: Agent;
beforeAll(async () => {
  server = await startTestServer();
  agent = server.agent();
});
afterAll(() => server.stop());

const send = (query: unknown) => agent.post("/graphql").send({ query } as object);

it("the API describes itself to anybody", async () => {
  const { status, body } = await send(getIntrospectionQuery());
  expect(status).toBe(200);
  expect(body.data.__schema.queryType.name).toBe("Query");
});

it("a query nested too deep is refused before it runs", async () => {
  const deep = "{ ".repeat(MAX_DEPTH + 1).replace(/\{/g, "{ session") + " }".repeat(MAX_DEPTH + 1);
  const { status, body } = await send(deep);
  expect(status).toBe(400);
  expect(body.errors.map((e: { message: string }) => e.message).join()).toMatch(/depth limit/i);
  expect(body.data).toBeUndefined();
});

it("depth hidden in fragments counts too", async () => {
  const parts = Array.from(
    { length: MAX_DEPTH },
    (_, i) => `fragment F${i} on Session { session { ...F${i + 1} } }`,
  );
  const { status, body } = await send(
    `{ session { ...F0 } } ${parts.join(" ")} fragment F${MAX_DEPTH} on Session { licence }`,
  );
  expect(status).toBe(400);
  expect(body.errors.map((e: { message: string }) => e.message).join()).toMatch(/depth limit/i);
});

it("a fragment that names itself is refused", async () => {
  const { status, body } = await send("{ session { ...F } } fragment F on Session { ...F }");
  expect(status).toBe(400);
  expect(body.data).toBeUndefined();
});

it("as many aliases as allowed pass, one more is refused", async () => {
  const query = (n: number): string =>
    `{ ${Array.from({ length: n }, (_, i) => `a${i}: session { licence }`).join(" ")} }`;
  expect((await send(query(MAX_ALIASES))).status).toBe(200);
  const { status, body } = await send(query(MAX_ALIASES + 1));
  expect(status).toBe(400);
  expect(body.errors[0].message).toMatch(/alias/i);
});

it("a document of too many tokens is refused while it is read", async () => {
  const { status, body } = await send(`{ ${"__typename ".repeat(MAX_TOKENS)} }`);
  expect(status).toBe(400);
  expect(body.errors[0].extensions.code).toBe("GRAPHQL_PARSE_FAILED");
});

it("a query that asks for too many rows at once is refused with its cost", async () => {
  const { status, body } = await send(
    `{ constraints(limit: 1000000000) { constraints { number citation { title authors } } } }`,
  );
  expect(status).toBe(400);
  expect(body.errors[0].extensions.code).toBe("QUERY_TOO_COSTLY");
});

it("several operations in one request are refused", async () => {
  const { status, body } = await agent
    .post("/graphql")
    .send([{ query: "{ session { licence } }" }, { query: "{ session { licence } }" }]);
  expect(status).toBe(400);
  expect(body.errors[0].extensions.code).toBe("BAD_REQUEST");
});

it("a body over 256 kB is refused with 413, one just below is read", async () => {
  const padded = (size: number): object => ({
    query: `{ session { licence } } #${"x".repeat(size)}`,
  });
  expect((await agent.post("/graphql").send(padded(250_000))).status).toBe(200);
  const { status, body } = await agent.post("/graphql").send(padded(270_000));
  expect(status).toBe(413);
  expect(body).toEqual({
    errors: [
      {
        message: "That is too large to be taken.",
        extensions: { code: "TOO_LARGE", requestId: expect.any(String) },
      },
    ],
  });
});
