import { User } from "~server/account/user.entity";
import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";

import { buildUser, TEST_PASSWORD } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";
import { accountOperations, tokenIn } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

let counter = 0;
const freshAddress = (): string => `moved-${++counter}@lanternmoor.example`;
const emailOf = async ({ id }: User): Promise<string> =>
  (await server.dataSource.manager.findOneByOrFail(User, { id })).email;

it("an address changes when the link sent to the new one is used, and not before", async () => {
  const { agent, user } = await server.signedIn();
  const next = freshAddress();
  const asked = await account.requestAddressChange(
    agent,
    `  ${next.toUpperCase()} `,
    TEST_PASSWORD,
  );
  expect(asked).toMatchObject({ __typename: "Done" });
  expect(await emailOf(user)).toBe(user.email);

  const token = await tokenIn(server, next);
  // Whoever opens it need not be signed in: the mailbox is the proof.
  const stranger = server.agent();
  expect(await account.confirmAddressChange(stranger, token)).toMatchObject({ __typename: "Done" });
  expect(await emailOf(user)).toBe(next);
  expect(await account.confirmAddressChange(stranger, token)).toMatchObject({
    code: "LINK_INVALID",
  });
  expect(await account.signIn(server.agent(), next, TEST_PASSWORD)).toMatchObject({ id: user.id });
  expect(await account.signIn(server.agent(), user.email, TEST_PASSWORD)).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
});

it("the log says that an address changed, not which", async () => {
  const { agent, user } = await server.signedIn();
  const next = freshAddress();
  await account.requestAddressChange(agent, next, TEST_PASSWORD);
  await account.confirmAddressChange(agent, await tokenIn(server, next));
  const events = await server.dataSource.manager.findBy(EventRecord, {
    subject: `user:${user.id}`,
  });
  expect(events).toMatchObject([{ kind: "account.addressChanged", actorId: user.id }]);
  expect(JSON.stringify(events)).not.toContain("@");
  expect((await verifyChain(server.dataSource.manager)).intact).toBe(true);
});

it.each([
  [
    "a wrong password",
    (): string => freshAddress(),
    "not the password",
    "PASSWORD_WRONG",
    "password",
  ],
  ["what is no address", (): string => "moved@", TEST_PASSWORD, "EMAIL_INVALID", "email"],
])(
  "%s is refused at its field, and nothing is mailed",
  async (_, address, password, code, field) => {
    const { agent, user } = await server.signedIn();
    const next = address();
    expect(await account.requestAddressChange(agent, next, password)).toMatchObject({
      code,
      field,
    });
    expect(await server.mailsTo(next)).toEqual([]);
    expect(await server.mailsTo(user.email)).toEqual([]);
  },
);

it("the present address is refused as the new one", async () => {
  const { agent, user } = await server.signedIn();
  expect(await account.requestAddressChange(agent, user.email, TEST_PASSWORD)).toMatchObject({
    code: "ADDRESS_SAME",
    field: "email",
  });
});

it("nothing in the answer says whether the new address has an account; its owner is told", async () => {
  const { agent, user } = await server.signedIn();
  const other = await buildUser(server.dataSource.manager);
  const free = freshAddress();
  const same = (answer: { message: string }, address: string) =>
    answer.message.replace(address, "ADDRESS");
  const taken = await account.requestAddressChange(agent, other.email, TEST_PASSWORD);
  const open = await account.requestAddressChange(agent, free, TEST_PASSWORD);
  expect(same(taken, other.email)).toBe(same(open, free));

  const [told] = await server.mailsTo(other.email);
  expect(told?.subject).toBe("This address has an account already");
  expect(told?.text).not.toMatch(/token=/);
  // The notices to the present address are alike, too.
  const notices = await server.mailsTo(user.email);
  expect(notices.map(({ subject }) => subject)).toEqual([
    "A change of your address was asked for",
    "A change of your address was asked for",
  ]);
});

it("an address that somebody confirmed meanwhile is not taken over", async () => {
  const { agent, user } = await server.signedIn();
  const next = freshAddress();
  await account.requestAddressChange(agent, next, TEST_PASSWORD);
  const token = await tokenIn(server, next);
  await buildUser(server.dataSource.manager, [], { email: next });
  expect(await account.confirmAddressChange(agent, token)).toMatchObject({ code: "LINK_INVALID" });
  expect(await emailOf(user)).toBe(user.email);
});

it("a registration nobody confirmed does not keep its owner from moving there", async () => {
  const { agent, user } = await server.signedIn();
  const next = freshAddress();
  await account.register(server.agent(), { email: next });
  await account.requestAddressChange(agent, next, TEST_PASSWORD);
  await account.confirmAddressChange(agent, await tokenIn(server, next));
  expect(await emailOf(user)).toBe(next);
});

it("objecting before the change stops it, ends every session and asks for a new password", async () => {
  const { agent, user } = await server.signedIn();
  const next = freshAddress();
  await account.requestAddressChange(agent, next, TEST_PASSWORD);
  const confirm = await tokenIn(server, next);
  const objection = await tokenIn(server, user.email);
  expect(await account.objectToAddressChange(server.agent(), objection)).toMatchObject({
    __typename: "Done",
  });
  expect(await account.viewer(agent)).toBeNull();
  expect(await account.confirmAddressChange(agent, confirm)).toMatchObject({
    code: "LINK_INVALID",
  });
  const reset = await tokenIn(server, user.email);
  const fresh = "a lantern on the moor 9";
  expect(await account.reset(server.agent(), reset, fresh)).toMatchObject({ __typename: "Done" });
  expect(await account.signIn(server.agent(), user.email, fresh)).toMatchObject({ id: user.id });
});

it("objecting after the change brings the account back, whatever was done at the new address", async () => {
  const { agent, user } = await server.signedIn();
  const [first, second] = [freshAddress(), freshAddress()];
  await account.requestAddressChange(agent, first, TEST_PASSWORD);
  const objection = await tokenIn(server, user.email);
  await account.confirmAddressChange(agent, await tokenIn(server, first));
  // Whoever took it moves on, and sets a password of their own.
  await account.requestAddressChange(agent, second, TEST_PASSWORD);
  await account.confirmAddressChange(agent, await tokenIn(server, second));
  await account.requestReset(server.agent(), second);
  await account.reset(server.agent(), await tokenIn(server, second), "the thief's own word 1");

  expect(await account.objectToAddressChange(server.agent(), objection)).toMatchObject({
    __typename: "Done",
  });
  expect(await emailOf(user)).toBe(user.email);
  expect(await account.signIn(server.agent(), second, "the thief's own word 1")).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
  expect(await account.objectToAddressChange(server.agent(), objection)).toMatchObject({
    code: "LINK_INVALID",
  });
  expect((await server.mailsTo(user.email)).at(-1)?.subject).toBe("Set a new password");
});

it("a made-up link does nothing", async () => {
  for (const token of ["", "x", "y".repeat(5000)]) {
    expect(await account.confirmAddressChange(server.agent(), token)).toMatchObject({
      code: "LINK_INVALID",
    });
    expect(await account.objectToAddressChange(server.agent(), token)).toMatchObject({
      code: "LINK_INVALID",
    });
  }
});

it("signing out everywhere ends every session, this one too, and nobody else's", async () => {
  const { agent, user } = await server.signedIn();
  const elsewhere = server.agent();
  await account.signIn(elsewhere, user.email, TEST_PASSWORD);
  const other = await server.signedIn();
  expect(await account.signOutEverywhere(agent)).toEqual({
    message: "You are signed out on every device.",
  });
  expect(await account.viewer(agent)).toBeNull();
  expect(await account.viewer(elsewhere)).toBeNull();
  expect(await account.viewer(other.agent)).toMatchObject({ id: other.user.id });
});
