import argon2 from "argon2";
import request from "supertest";

import { User } from "~server/account/user.entity";
import { SessionRow } from "~server/http/session.entity";

import { buildUser, TEST_PASSWORD, TEST_PASSWORD_COST } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";
import { accountOperations } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

const SIGN_IN = `mutation ($email: String!, $password: String!) {
  signIn(email: $email, password: $password) { __typename } }`;

/** Signs in and gives back the Set-Cookie line; with a cookie, sends that along. */
async function cookieOf(email: string, cookie?: string): Promise<string> {
  const post = request(server.app).post("/graphql");
  if (cookie !== undefined) post.set("Cookie", cookie);
  const response = await post.send({
    query: SIGN_IN,
    variables: { email, password: TEST_PASSWORD },
  });
  return String(response.headers["set-cookie"]?.[0] ?? "");
}

async function viewerBehind(cookie: string): Promise<unknown> {
  const response = await request(server.app)
    .post("/graphql")
    .set("Cookie", cookie)
    .send({ query: "{ session { viewer { email } } }" });
  return response.body.data.session.viewer;
}

const pair = (setCookie: string): string => setCookie.split(";", 1)[0] ?? "";

it("a wrong password and an unknown address get the same answer", async () => {
  const { user } = await server.signedIn();
  const wrong = await account.signIn(server.agent(), user.email, "not the password");
  const unknown = await account.signIn(
    server.agent(),
    "nobody@fogline.example",
    "not the password",
  );
  const endless = await account.signIn(server.agent(), user.email, "x".repeat(100_000));
  expect(wrong).toEqual({
    __typename: "Refusal",
    code: "SIGN_IN_WRONG",
    field: null,
    message: "The address or the password is wrong.",
  });
  expect(unknown).toEqual(wrong);
  expect(endless).toEqual(wrong);
});

it("an unknown address costs a check of a hash with the parameters of a known one", async () => {
  const { user } = await server.signedIn();
  const verify = jest.spyOn(argon2, "verify");
  try {
    await account.signIn(server.agent(), user.email, "not the password");
    await account.signIn(server.agent(), "nobody@fogline.example", "not the password");
    const parameters = verify.mock.calls.map(([hash]) => hash.split("$").slice(1, 4));
    expect(parameters).toHaveLength(2);
    expect(parameters[1]).toEqual(parameters[0]);
    expect(parameters[0]?.[0]).toBe("argon2id");
    expect(parameters[0]?.[2]?.split(",").sort()).toEqual([
      `m=${TEST_PASSWORD_COST.memoryKiB}`,
      "p=1",
      `t=${TEST_PASSWORD_COST.passes}`,
    ]);
  } finally {
    verify.mockRestore();
  }
});

it("an unconfirmed account is only told so to who knows its password", async () => {
  const email = "unconfirmed@fogline.example";
  await account.register(server.agent(), { email, password: "fog over the quay" });
  expect(await account.signIn(server.agent(), email, "another password")).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
  expect(await account.signIn(server.agent(), email, "fog over the quay")).toMatchObject({
    code: "NOT_CONFIRMED",
  });
});

it("the session cookie is HttpOnly and SameSite=Lax, and nobody gets one before signing in", async () => {
  const { user } = await server.signedIn();
  const cookie = await cookieOf(user.email);
  expect(cookie).toMatch(/^fogline\.sid=/);
  expect(cookie).toMatch(/; HttpOnly/);
  expect(cookie).toMatch(/; SameSite=Lax/);
  expect(cookie).toMatch(/; Path=\//);

  const stranger = await request(server.app)
    .post("/graphql")
    .send({ query: "{ session { licence } }" });
  expect(stranger.headers["set-cookie"]).toBeUndefined();
});

it("signing in gives a new session id and ends the old one, so that a fixed id is worth nothing", async () => {
  const { user } = await server.signedIn([], { email: "fixed@fogline.example" });
  const other = await server.signedIn([], { email: "intruder@fogline.example" });
  const planted = pair(await cookieOf(other.user.email));
  const fresh = pair(await cookieOf(user.email, planted));
  expect(fresh).not.toBe(planted);
  expect(await viewerBehind(fresh)).toEqual({ email: "fixed@fogline.example" });
  expect(await viewerBehind(planted)).toBeNull();
});

it("a session id that the server never gave out is not taken over", async () => {
  const { user } = await server.signedIn();
  const invented = "fogline.sid=s%3Ainvented.AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAA";
  const fresh = await cookieOf(user.email, invented);
  expect(fresh).not.toContain("invented");
  expect(await viewerBehind(invented)).toBeNull();
});

it("signing out ends the session on the server, not only in the browser", async () => {
  const { user } = await server.signedIn();
  const cookie = pair(await cookieOf(user.email));
  expect(await viewerBehind(cookie)).toEqual({ email: user.email });
  const out = await request(server.app)
    .post("/graphql")
    .set("Cookie", cookie)
    .send({ query: "mutation { signOut { message } }" });
  expect(out.body.data.signOut.message).toBe("You are signed out.");
  expect(out.headers["set-cookie"]?.[0]).toMatch(/^fogline\.sid=;.*Expires=Thu, 01 Jan 1970/);
  expect(await viewerBehind(cookie)).toBeNull();
});

it("signing out without being signed in is no error", async () => {
  expect(await account.signOut(server.agent())).toEqual({ message: "You are signed out." });
});

it("sessions are kept in the database and hold who, not what they may do", async () => {
  const { user } = await server.signedIn(["editor"]);
  const rows = await server.dataSource.manager.find(SessionRow);
  const own = rows.map((row) => JSON.parse(row.data ?? "{}")).find((s) => s.userId === user.id);
  expect(Object.keys(own).sort()).toEqual(["cookie", "epoch", "userId"]);
});

it("the session of a deleted account is nobody's", async () => {
  const { agent, user } = await server.signedIn();
  await server.dataSource.manager.delete(User, { id: user.id });
  expect(await account.viewer(agent)).toBeNull();
});

it("behind TLS the cookie is Secure, and plain http gets none", async () => {
  const tls = await startTestServer({
    config: { publicUrl: "https://fogline.test", trustProxy: "loopback" },
  });
  try {
    const user = await buildUser(tls.dataSource.manager);
    const send = (proto: string) =>
      request(tls.app)
        .post("/graphql")
        .set("X-Forwarded-Proto", proto)
        .send({ query: SIGN_IN, variables: { email: user.email, password: TEST_PASSWORD } });
    const secure = await send("https");
    expect(secure.headers["set-cookie"]?.[0]).toMatch(/; Secure/);
    expect(secure.headers["strict-transport-security"]).toMatch(/max-age=31536000/);
    expect((await send("http")).headers["set-cookie"]).toBeUndefined();
  } finally {
    await tls.stop();
  }
});
