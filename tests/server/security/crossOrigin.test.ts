import request from "supertest";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

let server: TestServer;
let agent: Agent;
beforeAll(async () => {
  server = await startTestServer({ config: { publicUrl: "https://fogline.test" } });
  agent = server.agent();
});
afterAll(() => server.stop());

/** Code of a refusal, in GraphQL's form or flat. */
const codeOf = ({ body }: request.Response): unknown =>
  body.code ?? body.errors?.[0]?.extensions.code;

const BODY = { query: "mutation { signOut { message } }" };

describe.each(["/graphql", "/api/uploads"])("a state-changing request to %s", (address) => {
  it.each([
    ["Origin", "https://elsewhere.test"],
    ["Origin", "http://fogline.test"],
    ["Origin", "https://fogline.test.elsewhere.test"],
    ["Origin", "https://fogline.test:8443"],
    ["Origin", "null"],
    ["Sec-Fetch-Site", "cross-site"],
    ["Sec-Fetch-Site", "same-site"],
  ])("from a page of another origin is refused: %s %s", async (name, value) => {
    const response = await agent.post(address).set(name, value).send(BODY);
    expect(response.status).toBe(403);
    expect(codeOf(response)).toBe("CROSS_ORIGIN");
  });

  it.each([
    ["Origin", "https://fogline.test"],
    ["Sec-Fetch-Site", "same-origin"],
    ["Sec-Fetch-Site", "none"],
    ["User-Agent", "a program that names no page"],
  ])("from our own page, or from no page, is answered: %s %s", async (name, value) => {
    const response = await agent.post(address).set(name, value).send(BODY);
    expect(codeOf(response)).not.toBe("CROSS_ORIGIN");
    expect(response.status).not.toBe(403);
  });
});

it("a page reached under another name than PUBLIC_URL's may talk to the server it came from", async () => {
  const response = await agent
    .post("/graphql")
    .set("Host", "fogline.local:4600")
    .set("Origin", "https://fogline.local:4600")
    .send(BODY);
  expect(response.status).toBe(200);
});

it("behind TLS a page of the same name without TLS is another origin", async () => {
  const response = await agent
    .post("/graphql")
    .set("Host", "fogline.test")
    .set("Origin", "http://fogline.test")
    .send(BODY);
  expect(codeOf(response)).toBe("CROSS_ORIGIN");
});

it.each(["text/plain", "application/x-www-form-urlencoded", "multipart/form-data; boundary=x"])(
  "GraphQL takes no body that a form can send: %s",
  async (type) => {
    const response = await request(server.app)
      .post("/graphql")
      .set("Content-Type", type)
      .send('{"query":"mutation { signOut { message } }"}');
    expect(response.status).toBe(400);
    expect(response.body.errors[0].extensions.code).toBe("BAD_REQUEST");
  },
);

it("nothing is changed, or answered, by GET", async () => {
  const response = await request(server.app)
    .get("/graphql")
    .query({ query: "mutation { signOut { message } }" });
  expect(response.status).toBe(405);
  expect(response.headers.allow).toBe("POST");
});

it("no other origin is let in by CORS", async () => {
  const response = await request(server.app)
    .options("/graphql")
    .set("Origin", "https://elsewhere.test")
    .set("Access-Control-Request-Method", "POST");
  expect(response.headers["access-control-allow-origin"]).toBeUndefined();
});
