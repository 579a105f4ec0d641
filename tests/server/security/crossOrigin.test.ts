import request from "supertest";

import { buildUser } from "../../factories/user";
import { plantToken } from "../apiToken/operations";
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

const ELSEWHERE = "https://elsewhere.test";
/** Any cookie at all: what it opens is asked later. */
const COOKIE = "fogline.sid=s%3Aborrowed.signature";
const READ = { query: "{ session { licence viewer { id } } }" };

describe("a page of another origin", () => {
  const preflight = (address: string, method: string) =>
    request(server.app)
      .options(address)
      .set("Origin", ELSEWHERE)
      .set("Access-Control-Request-Method", method)
      .set("Access-Control-Request-Headers", "authorization,content-type");

  it("may ask GraphQL as nobody, and changes nothing", async () => {
    const read = await request(server.app).post("/graphql").set("Origin", ELSEWHERE).send(READ);
    expect(read.status).toBe(200);
    expect(read.body.data.session.viewer).toBeNull();
    expect(read.headers["access-control-allow-origin"]).toBe("*");
    for (const query of [
      "mutation { signOut { message } }",
      `mutation { signIn(email: "a@b.example", password: "x") { __typename } }`,
      `mutation { register(email: "a@b.example", nameOnPapers: "A", password: "x") { __typename } }`,
    ]) {
      const changing = await request(server.app)
        .post("/graphql")
        .set("Origin", ELSEWHERE)
        .send({ query });
      expect([changing.status, codeOf(changing)]).toEqual([403, "CROSS_ORIGIN"]);
      expect(changing.body.data).toBeUndefined();
      expect(changing.headers["set-cookie"]).toBeUndefined();
    }
  });

  it("may ask as the person behind an API token", async () => {
    const holder = await buildUser(server.dataSource.manager);
    const secret = await plantToken(server, holder.id);
    const ask = (query: string) =>
      request(server.app)
        .post("/graphql")
        .set("Origin", ELSEWHERE)
        .set("Sec-Fetch-Site", "cross-site")
        .set("Authorization", `Bearer ${secret}`)
        .send({ query });
    const { status, body, headers } = await ask(READ.query);
    expect([status, body.data.session.viewer.id]).toEqual([200, holder.id]);
    expect(headers["access-control-allow-origin"]).toBe("*");
  });

  it("is refused with a cookie, reading too, and gets no permission to read the refusal", async () => {
    for (const body of [READ, BODY]) {
      const response = await agent
        .post("/graphql")
        .set("Origin", ELSEWHERE)
        .set("Cookie", COOKIE)
        .send(body);
      expect([response.status, codeOf(response)]).toEqual([403, "CROSS_ORIGIN"]);
      expect(response.headers["access-control-allow-origin"]).toBeUndefined();
    }
  });

  it("downloads as nobody, and reads no answer to a cookie", async () => {
    const anonymous = await request(server.app)
      .get("/api/constraints.csv")
      .set("Origin", ELSEWHERE);
    expect(anonymous.headers["access-control-allow-origin"]).toBe("*");
    const exposed = String(anonymous.headers["access-control-expose-headers"]).split(",");
    expect(exposed).toEqual(
      expect.arrayContaining(["ETag", "Content-Location", "RateLimit", "Retry-After"]),
    );
    const withCookie = await agent
      .get("/api/constraints.csv")
      .set("Origin", ELSEWHERE)
      .set("Cookie", COOKIE);
    expect(withCookie.headers["access-control-allow-origin"]).toBeUndefined();
  });

  it("reads a refusal, so that a program in a browser can say what is wrong", async () => {
    for (const address of ["/api/tables/none.csv", "/api/log.csv"]) {
      const { status, headers } = await request(server.app).get(address).set("Origin", ELSEWHERE);
      expect(status).toBeGreaterThanOrEqual(400);
      expect(headers["access-control-allow-origin"]).toBe("*");
    }
  });

  it.each([
    ["/graphql", "POST", "POST"],
    ["/api/tables/some@1.csv", "GET", "GET,HEAD"],
    // Nothing but reading is offered below /api.
    ["/api/uploads", "POST", "GET,HEAD"],
  ])("is told beforehand what it may do at %s", async (address, method, allowed) => {
    const { status, headers } = await preflight(address, method);
    expect(status).toBe(204);
    expect(headers["access-control-allow-origin"]).toBe("*");
    expect(headers["access-control-allow-methods"]).toBe(allowed);
    expect(headers["access-control-allow-headers"]).toMatch(/Authorization/);
  });

  it.each(["/graphql", "/api/releases/1.json", "/healthz", "/"])(
    "is never let in with credentials: %s",
    async (address) => {
      for (const { headers } of [
        await preflight(address, "POST"),
        await preflight(address, "GET"),
      ]) {
        expect(headers["access-control-allow-credentials"]).toBeUndefined();
        expect(headers["access-control-allow-origin"]).not.toBe(ELSEWHERE);
      }
    },
  );
});

it("a token needs no origin, and a cookie beside it is ignored", async () => {
  const holder = await buildUser(server.dataSource.manager);
  const response = await agent
    .post("/graphql")
    .set("Origin", ELSEWHERE)
    .set("Cookie", COOKIE)
    .set("Authorization", `Bearer ${await plantToken(server, holder.id)}`)
    .send(READ);
  expect(response.body.data.session.viewer.id).toBe(holder.id);
});
