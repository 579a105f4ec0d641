import request from "supertest";

import { startTestServer, type TestServer } from "../support/harness";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

it("a stranger has no viewer, a signed-in person is the viewer with the roles held", async () => {
  const query = "{ session { viewer { email roles } demonstration licence } }";
  const nobody = await server.graphql(server.agent(), query);
  expect(nobody).toEqual({
    data: { session: { viewer: null, demonstration: false, licence: "CC BY 4.0" } },
  });

  const { agent, user } = await server.signedIn(["editor", "contributor"]);
  const somebody = await server.graphql(agent, query);
  expect(somebody.data.session.viewer).toEqual({
    email: user.email,
    roles: ["contributor", "editor"],
  });
});

it("the session names the end of the event log", async () => {
  const query = "{ session { lastEvent { sequence digest at } } }";
  const maintainer = await server.signedIn(["maintainer"]);
  const person = await server.signedIn();
  await server.graphql(
    maintainer.agent,
    `mutation { grantRole(personId: "${person.user.id}", role: editor) { __typename } }`,
  );
  const { data } = await server.graphql(server.agent(), query);
  expect(data.session.lastEvent).toEqual({
    sequence: 1,
    digest: expect.stringMatching(/^[0-9a-f]{64}$/),
    at: expect.stringMatching(/^\d{4}-\d\d-\d\dT.*Z$/),
  });
});

it("the process is up and, once migrated, ready", async () => {
  expect((await request(server.app).get("/healthz")).body).toEqual({ status: "up" });
  expect((await request(server.app).get("/readyz")).body).toEqual({ status: "ready" });
});

it("a lost database is no reason to end: up, not ready, and in words", async () => {
  const lost = await startTestServer();
  try {
    await lost.dataSource.destroy();
    expect((await request(lost.app).get("/healthz")).status).toBe(200);
    const ready = await request(lost.app).get("/readyz");
    expect(ready.status).toBe(503);
    expect(ready.body).toEqual({ status: "not ready" });
    const { body } = await request(lost.app)
      .post("/graphql")
      .send({ query: "{ session { licence } }" });
    expect(body.errors[0].extensions.code).toBe("INTERNAL");
  } finally {
    await lost.dataSource.initialize();
    await lost.stop();
  }
});
