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

it("the process is up and, once migrated, ready", async () => {
  expect((await server.agent().get("/healthz")).status).toBe(200);
  expect((await server.agent().get("/readyz")).body).toEqual({ status: "ready" });
});
