import request from "supertest";

import { startTestServer, type TestServer } from "../support/harness";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

const get = (address: string) => request(server.app).get(address);
const SCRIPT = "/_expo/static/entry-0a1b2c.js";

it.each(["/", "/constraints/FL-0042", "/tables/new", "/account/confirm?token=x", "/no/such/page"])(
  "every address of the client answers with its page and survives a reload: %s",
  async (address) => {
    const response = await get(address).set("Accept", "text/html,*/*;q=0.8");
    expect(response.status).toBe(200);
    expect(response.text).toContain('<div id="root">');
    expect(response.headers["cache-control"]).toBe("no-cache");
  },
);

it.each(["/_expo/static/gone.js", "/assets/gone.png", "/api/gone", "/fonts/gone.woff2"])(
  "what is no page and is not there is a 404 in words: %s",
  async (address) => {
    const response = await get(address).set("Accept", "text/html,*/*;q=0.8");
    expect(response.status).toBe(404);
    expect(response.body).toEqual({
      code: "NOT_FOUND",
      message: "There is nothing at this address.",
      requestId: response.headers["x-request-id"],
    });
  },
);

it("only reading answers with the page", async () => {
  expect((await request(server.app).post("/constraints")).status).toBe(404);
});

it("files whose name carries a digest are kept for ever, the page is asked for again", async () => {
  const script = await get(SCRIPT);
  expect(script.headers["cache-control"]).toBe("public, max-age=31536000, immutable");
  expect(script.headers["content-type"]).toMatch(/javascript/);
});

it.each([
  ["gzip, deflate, br", "br"],
  ["gzip", "gzip"],
])("the export's compressed files are sent to who takes them: %s", async (accepted, encoding) => {
  const response = await get(SCRIPT).set("Accept-Encoding", accepted).buffer(false);
  expect(response.headers["content-encoding"]).toBe(encoding);
  expect(response.headers["content-type"]).toMatch(/javascript/);
  expect(response.headers["cache-control"]).toContain("immutable");
});

it("the page lets no script in but the server's own, and nobody frame it", async () => {
  const policy = String((await get("/")).headers["content-security-policy"]);
  const directives = Object.fromEntries(
    policy.split(";").map((directive) => {
      const [name, ...sources] = directive.trim().split(" ");
      return [name, sources.join(" ")];
    }),
  );
  expect(directives).toMatchObject({
    "default-src": "'self'",
    "script-src": "'self'",
    "connect-src": "'self'",
    "worker-src": "'self'",
    "font-src": "'self'",
    "style-src": "'self' 'unsafe-inline'",
    "img-src": "'self' data: blob:",
    "object-src": "'none'",
    "frame-ancestors": "'none'",
    "base-uri": "'self'",
    "form-action": "'self'",
  });
});

it.each(["/", "/healthz", "/graphql", "/api/gone"])(
  "every answer carries the guards and its id, and not what it runs on: %s",
  async (address) => {
    const { headers } = await get(address);
    expect(headers).toMatchObject({
      "x-content-type-options": "nosniff",
      "referrer-policy": "no-referrer",
      "x-frame-options": "DENY",
      "x-request-id": expect.stringMatching(/^[0-9a-f-]{36}$/),
    });
    expect(headers["x-powered-by"]).toBeUndefined();
  },
);

it("answers of the API are kept by nobody", async () => {
  const response = await request(server.app)
    .post("/graphql")
    .send({ query: "{ session { licence } }" });
  expect(response.headers["cache-control"]).toBe("no-store");
});

it("pages behind a mailed link are kept out of search engines, the others are not", async () => {
  const html = "text/html,*/*;q=0.8";
  for (const address of ["/check/abc.def", "/report/abc.def"]) {
    const response = await get(address).set("Accept", html);
    expect(response.text).toContain('<div id="root">');
    expect(response.headers["x-robots-tag"]).toBe("noindex, nofollow");
  }
  const record = await get("/constraints/FL-0042").set("Accept", html);
  expect(record.headers["x-robots-tag"]).toBeUndefined();
});
