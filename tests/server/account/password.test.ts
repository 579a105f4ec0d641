import { MailToken } from "~server/account/mailToken.entity";

import { TEST_PASSWORD } from "../../factories/user";
import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { accountOperations, tokenIn } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

const NEXT = "lifting at last 9";

async function secondSession(email: string, password = TEST_PASSWORD): Promise<Agent> {
  const agent = server.agent();
  await account.signIn(agent, email, password);
  return agent;
}

it("changing the password keeps this session, ends the others, and the person is told", async () => {
  const { agent, user } = await server.signedIn();
  const other = await secondSession(user.email);
  expect(await account.changePassword(agent, TEST_PASSWORD, NEXT)).toMatchObject({
    __typename: "Done",
  });
  expect(await account.viewer(agent)).toMatchObject({ email: user.email });
  expect(await account.viewer(other)).toBeNull();
  const fresh = server.agent();
  expect(await account.signIn(fresh, user.email, TEST_PASSWORD)).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
  expect(await account.signIn(fresh, user.email, NEXT)).toMatchObject({ email: user.email });
  expect((await server.mailsTo(user.email)).map(({ subject }) => subject)).toEqual([
    "Your password was changed",
  ]);
});

it("a wrong present password changes nothing", async () => {
  const { agent, user } = await server.signedIn();
  expect(await account.changePassword(agent, "not the password", NEXT)).toMatchObject({
    code: "PASSWORD_WRONG",
    field: "current",
  });
  expect(await account.signIn(server.agent(), user.email, TEST_PASSWORD)).toMatchObject({
    email: user.email,
  });
});

it.each([
  ["PASSWORD_SHORT", "elevenchars"],
  ["PASSWORD_LONG", "x".repeat(129)],
  ["PASSWORD_SAME", TEST_PASSWORD],
])("a new password that is not acceptable is refused at its field: %s", async (code, next) => {
  const { agent } = await server.signedIn();
  expect(await account.changePassword(agent, TEST_PASSWORD, next)).toMatchObject({
    code,
    field: "next",
  });
});

it("nobody can't change a password", async () => {
  const body = await server.graphql(
    server.agent(),
    'mutation { changePassword(current: "a", next: "b") { __typename } }',
  );
  expect(body.errors?.[0]?.extensions.code).toBe("UNAUTHENTICATED");
});

it("a reset link sets a new password, ends every session, and works once", async () => {
  const { agent, user } = await server.signedIn();
  await account.requestReset(server.agent(), user.email);
  const token = await tokenIn(server, user.email);
  expect(await account.reset(server.agent(), token, NEXT)).toMatchObject({ __typename: "Done" });
  expect(await account.viewer(agent)).toBeNull();
  expect(await account.signIn(server.agent(), user.email, NEXT)).toMatchObject({
    email: user.email,
  });
  expect(await account.reset(server.agent(), token, "another password")).toMatchObject({
    code: "LINK_INVALID",
  });
});

it("of several who use a reset link at once, one sets the password", async () => {
  const { user } = await server.signedIn();
  await account.requestReset(server.agent(), user.email);
  const token = await tokenIn(server, user.email);
  const passwords = ["first of the three", "second of the three", "third of the three"];
  const answers = await Promise.all(
    passwords.map((next) => account.reset(server.agent(), token, next)),
  );
  const won = answers.flatMap((answer, i) => (answer.__typename === "Done" ? [i] : []));
  expect(won).toHaveLength(1);
  expect(await account.signIn(server.agent(), user.email, passwords[won[0]!]!)).toMatchObject({
    email: user.email,
  });
});

it("a password that is too short does not use the reset link up", async () => {
  const { user } = await server.signedIn();
  await account.requestReset(server.agent(), user.email);
  const token = await tokenIn(server, user.email);
  expect(await account.reset(server.agent(), token, "short")).toMatchObject({
    code: "PASSWORD_SHORT",
    field: "next",
  });
  expect(await account.reset(server.agent(), token, NEXT)).toMatchObject({ __typename: "Done" });
});

it("a reset link ends after one hour", async () => {
  const { user } = await server.signedIn();
  await account.requestReset(server.agent(), user.email);
  const token = await tokenIn(server, user.email);
  const row = await server.dataSource.manager.findOneByOrFail(MailToken, { userId: user.id });
  expect((row.expiresAt.getTime() - row.createdAt.getTime()) / 3_600_000).toBeCloseTo(1, 1);
  await server.dataSource.manager.update(
    MailToken,
    { userId: user.id },
    { expiresAt: new Date(Date.now() - 1) },
  );
  expect(await account.reset(server.agent(), token, NEXT)).toMatchObject({ code: "LINK_INVALID" });
});

it("a newer reset link, or a changed password, ends the older link", async () => {
  const { agent, user } = await server.signedIn();
  await account.requestReset(server.agent(), user.email);
  const first = await tokenIn(server, user.email);
  await account.requestReset(server.agent(), user.email);
  const second = await tokenIn(server, user.email);
  expect(await account.reset(server.agent(), first, NEXT)).toMatchObject({ code: "LINK_INVALID" });
  await account.changePassword(agent, TEST_PASSWORD, NEXT);
  expect(await account.reset(server.agent(), second, "another password")).toMatchObject({
    code: "LINK_INVALID",
  });
});

it("asking for a reset says nothing about who is registered", async () => {
  const { user } = await server.signedIn();
  const known = await account.requestReset(server.agent(), user.email);
  const unknown = await account.requestReset(server.agent(), "nobody@fogline.example");
  expect(known.message.replace(user.email, "X")).toBe(
    unknown.message.replace("nobody@fogline.example", "X"),
  );
  expect(await server.mailsTo("nobody@fogline.example")).toEqual([]);
});

it("a confirmation link resets nothing, a reset link confirms the address by setting a password", async () => {
  const email = "unconfirmed@fogline.example";
  const agent = server.agent();
  await account.register(agent, { email });
  const confirmation = await tokenIn(server, email);
  expect(await account.reset(agent, confirmation, NEXT)).toMatchObject({ code: "LINK_INVALID" });
  await account.requestReset(agent, email);
  const reset = await tokenIn(server, email);
  expect(await account.confirm(agent, reset)).toMatchObject({ code: "LINK_INVALID" });
  await account.reset(agent, reset, NEXT);
  expect(await account.signIn(agent, email, NEXT)).toMatchObject({ email });
});

it("a token of any length and content is refused in words", async () => {
  for (const token of ["", "x", "x".repeat(50_000), "' OR 1=1 --", "\u0000"]) {
    expect(await account.reset(server.agent(), token, NEXT)).toMatchObject({
      code: "LINK_INVALID",
    });
    expect(await account.confirm(server.agent(), token)).toMatchObject({ code: "LINK_INVALID" });
  }
});
