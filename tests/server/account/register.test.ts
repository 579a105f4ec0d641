import { User } from "~server/account/user.entity";
import { MailToken } from "~server/account/mailToken.entity";

import { startTestServer, type TestServer } from "../support/harness";
import { accountOperations, tokenIn } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

const findUser = (email: string): Promise<User | null> =>
  server.dataSource.manager.findOneBy(User, { email });

it("an account is made by registering, opening the link in the mail and signing in", async () => {
  const agent = server.agent();
  const email = "first@fogline.example";
  expect(await account.register(agent, { email })).toMatchObject({ __typename: "Done" });

  const early = await account.signIn(agent, email, "fog over the quay");
  expect(early).toMatchObject({ code: "NOT_CONFIRMED" });
  expect(await account.viewer(agent)).toBeNull();

  const [mail] = await server.mailsTo(email);
  expect(mail?.text).toContain(`${server.config.publicUrl}/account/confirm?token=`);
  expect(await account.confirm(agent, await tokenIn(server, email))).toMatchObject({
    __typename: "Done",
  });

  expect(await account.signIn(agent, email, "fog over the quay")).toMatchObject({
    __typename: "Viewer",
    email,
    nameOnPapers: "Oriel Vantongeren",
    roles: [],
  });
  expect(await account.viewer(agent)).toMatchObject({ email });
});

it("an address is one account, however its letters are written", async () => {
  const agent = server.agent();
  await account.register(agent, { email: " Capital.Letters@Fogline.EXAMPLE " });
  await account.confirm(agent, await tokenIn(server, "capital.letters@fogline.example"));
  expect(
    await account.signIn(agent, "CAPITAL.letters@fogline.example", "fog over the quay"),
  ).toMatchObject({ __typename: "Viewer", email: "capital.letters@fogline.example" });
});

it("registering a taken address answers the same, changes nothing, and its owner is told", async () => {
  const { user } = await server.signedIn([], { email: "taken@fogline.example" });
  const agent = server.agent();
  const free = await account.register(agent, { email: "free@fogline.example" });
  const taken = await account.register(agent, {
    email: "taken@fogline.example",
    nameOnPapers: "Somebody Else",
  });
  expect(taken).toEqual({
    __typename: "Done",
    message: free.message.replace("free@", "taken@"),
  });
  expect(await findUser("taken@fogline.example")).toMatchObject({
    id: user.id,
    nameOnPapers: user.nameOnPapers,
    passwordHash: user.passwordHash,
  });
  const mails = await server.mailsTo("taken@fogline.example");
  expect(mails.map(({ subject }) => subject)).toEqual(["You have an account already"]);
  expect(mails[0]?.text).not.toContain("token=");
});

it("two registrations of one address at once make one account and no error", async () => {
  const email = "twice@fogline.example";
  const answers = await Promise.all(
    [1, 2, 3, 4].map(() => account.register(server.agent(), { email })),
  );
  expect(answers.map(({ __typename }) => __typename)).toEqual(["Done", "Done", "Done", "Done"]);
  expect(await server.dataSource.manager.countBy(User, { email })).toBe(1);
});

it("a second registration before confirming ends the first one's link and password", async () => {
  // Somebody may have registered the address of another with a password of their own.
  const email = "later@fogline.example";
  const agent = server.agent();
  await account.register(agent, { email, password: "password of an intruder" });
  const firstToken = await tokenIn(server, email);
  await account.register(agent, { email, password: "password of the owner" });
  expect(await account.confirm(agent, firstToken)).toMatchObject({ code: "LINK_INVALID" });
  await account.confirm(agent, await tokenIn(server, email));
  expect(await account.signIn(agent, email, "password of an intruder")).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
  expect(await account.signIn(agent, email, "password of the owner")).toMatchObject({ email });
});

it("the database holds no password and no token that opens anything", async () => {
  const email = "hashed@fogline.example";
  await account.register(server.agent(), { email });
  const token = await tokenIn(server, email);
  const user = await findUser(email);
  expect(user?.passwordHash).toMatch(/^\$argon2id\$/);
  const row = await server.dataSource.manager.findOneByOrFail(MailToken, { userId: user?.id });
  expect(row.hash).not.toContain(token);
  expect(await account.confirm(server.agent(), row.hash)).toMatchObject({ code: "LINK_INVALID" });
});

it("a confirmation link works once, and of two who open it at once one is refused", async () => {
  const email = "once@fogline.example";
  await account.register(server.agent(), { email });
  const token = await tokenIn(server, email);
  const answers = await Promise.all([1, 2, 3].map(() => account.confirm(server.agent(), token)));
  expect(answers.map(({ __typename }) => __typename).sort()).toEqual([
    "Done",
    "Refusal",
    "Refusal",
  ]);
  expect(await account.confirm(server.agent(), token)).toMatchObject({ code: "LINK_INVALID" });
});

it("a confirmation link ends after 48 hours", async () => {
  const email = "expired@fogline.example";
  await account.register(server.agent(), { email });
  const token = await tokenIn(server, email);
  const user = await findUser(email);
  const { expiresAt, createdAt } = await server.dataSource.manager.findOneByOrFail(MailToken, {
    userId: user?.id,
  });
  const hours = (expiresAt.getTime() - createdAt.getTime()) / 3_600_000;
  expect(hours).toBeCloseTo(48, 1);
  await server.dataSource.manager.update(
    MailToken,
    { userId: user?.id },
    { expiresAt: new Date(Date.now() - 1) },
  );
  expect(await account.confirm(server.agent(), token)).toMatchObject({ code: "LINK_INVALID" });
  expect((await findUser(email))?.confirmedAt).toBeNull();
});

it("a new link can be asked for, ends the old one, and says nothing about who is registered", async () => {
  const email = "resend@fogline.example";
  const agent = server.agent();
  await account.register(agent, { email });
  const old = await tokenIn(server, email);
  const known = await account.resend(agent, email);
  const unknown = await account.resend(agent, "nobody@fogline.example");
  expect(known.message.replace(email, "X")).toBe(
    unknown.message.replace("nobody@fogline.example", "X"),
  );
  expect(await server.mailsTo("nobody@fogline.example")).toEqual([]);
  expect(await account.confirm(agent, old)).toMatchObject({ code: "LINK_INVALID" });
  const next = await tokenIn(server, email);
  expect(await account.confirm(agent, next)).toMatchObject({ __typename: "Done" });

  await account.resend(agent, email);
  expect(await server.mailsTo(email)).toHaveLength(2);
});

it.each([
  ["email", { email: "no-at-sign" }, "EMAIL_INVALID"],
  ["email", { email: "line@fogline.example\r\nBcc: all@fogline.example" }, "EMAIL_INVALID"],
  ["email", { email: `${"x".repeat(250)}@fogline.example` }, "EMAIL_INVALID"],
  ["email", { email: "fög@fogline.example" }, "EMAIL_INVALID"],
  ["nameOnPapers", { email: "a@fogline.example", nameOnPapers: "  " }, "NAME_MISSING"],
  ["nameOnPapers", { email: "a@fogline.example", nameOnPapers: "n".repeat(121) }, "NAME_TOO_LONG"],
  ["nameOnPapers", { email: "a@fogline.example", nameOnPapers: "A\nB" }, "NAME_INVALID"],
  ["password", { email: "a@fogline.example", password: "elevenchars" }, "PASSWORD_SHORT"],
  ["password", { email: "a@fogline.example", password: "x".repeat(129) }, "PASSWORD_LONG"],
  [
    "password",
    { email: "a@fogline.example", password: "A@Fogline.example" },
    "PASSWORD_IS_ADDRESS",
  ],
])("an input that is not acceptable is refused at its field: %s %#", async (field, input, code) => {
  const answer = await account.register(server.agent(), input);
  expect(answer).toMatchObject({ __typename: "Refusal", code, field });
  expect(await findUser("a@fogline.example")).toBeNull();
});

it("passwords of 12 and of 128 characters are taken, whatever the characters", async () => {
  for (const [email, password] of [
    ["twelve@fogline.example", "x".repeat(12)],
    ["long@fogline.example", "🌫".repeat(128)],
  ] as const) {
    const agent = server.agent();
    expect(await account.register(agent, { email, password })).toMatchObject({
      __typename: "Done",
    });
    await account.confirm(agent, await tokenIn(server, email));
    expect(await account.signIn(agent, email, password)).toMatchObject({ email });
  }
});
