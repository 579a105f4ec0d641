import { User } from "~server/account/user.entity";
import { Revision } from "~server/constraint/revision.entity";
import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { claim, returnSubmission, storeReading } from "~server/review/review.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import {
  actingAs,
  buildApproved,
  buildDraft,
  buildSubmission,
  granted,
} from "../../factories/constraint";
import { buildTable } from "../../factories/table";
import { TEST_PASSWORD } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";
import { accountOperations } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

const ORCID = "0000-0002-1825-0097";
const rowOf = ({ id }: User) => server.dataSource.manager.findOneByOrFail(User, { id });
const credited = async (number: string) =>
  (
    await server.graphql(
      server.agent(),
      "query ($number: String!) { constraint(number: $number) { submittedBy readBy } }",
      { number },
    )
  ).data.constraint;

it("a named account is gone, its name and ORCID stay with what it brought", async () => {
  const { agent, user } = await server.signedIn(["contributor"], {
    nameOnPapers: "Ottla Firn",
    furtherNames: ["O. Quell"],
    orcid: ORCID,
  });
  const editor = await server.signedIn(["editor"]);
  const record = await buildApproved(server.dataSource, user, editor.user);
  const elsewhere = server.agent();
  await account.signIn(elsewhere, user.email, TEST_PASSWORD);

  expect(await account.deleteAccount(agent, TEST_PASSWORD, "named")).toMatchObject({
    __typename: "Done",
  });
  expect(await account.viewer(agent)).toBeNull();
  expect(await account.viewer(elsewhere)).toBeNull();
  expect(await account.signIn(server.agent(), user.email, TEST_PASSWORD)).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
  const left = await rowOf(user);
  expect(left).toMatchObject({ nameOnPapers: "Ottla Firn", orcid: ORCID, furtherNames: [] });
  expect(left.email).not.toContain("@");
  expect(left.passwordHash).not.toBe(user.passwordHash);
  const number = formatRecordNumber(record.constraintId);
  expect(await credited(number)).toMatchObject({ submittedBy: "Ottla Firn" });
});

it("an anonymous account leaves no name, ORCID, address or mail behind, and its records stay", async () => {
  const { agent, user } = await server.signedIn(["contributor", "editor"], {
    nameOnPapers: "Wendeline Sorrow",
    orcid: ORCID,
  });
  const other = await server.signedIn(["editor", "contributor"]);
  const entered = await buildApproved(server.dataSource, user, other.user, { z: "6.21" });
  const read = await buildApproved(server.dataSource, other.user, user, { z: "8.04" });
  const number = formatRecordNumber(entered.constraintId);
  const { slug } = await buildTable(server.dataSource, user, {
    name: "Mine",
    filter: { text: number },
  });

  await account.deleteAccount(agent, TEST_PASSWORD, "anonymous");
  expect(await credited(number)).toMatchObject({ submittedBy: "a former member" });
  expect(await credited(formatRecordNumber(read.constraintId))).toMatchObject({
    readBy: "a former member",
  });
  // The bytes of a saved table never change, so it stays at its address.
  const table = await server.graphql(
    server.agent(),
    "query ($slug: ID!) { fittingTable(slug: $slug) { name } }",
    { slug },
  );
  expect(table.data.fittingTable).toEqual({ name: "Mine" });
  expect(await rowOf(user)).toMatchObject({ nameOnPapers: "a former member", orcid: null });

  const mails = await server.dataSource.manager.findBy(OutboxMail, { to: user.email });
  expect(mails.map(({ subject }) => subject)).toEqual(["Your account is deleted"]);
  const events = await server.dataSource.manager.find(EventRecord);
  expect(JSON.stringify(events)).not.toMatch(/Wendeline|@/);
  expect(events.at(-1)).toMatchObject({
    kind: "account.deleted",
    actorId: user.id,
    detail: { credit: "anonymous" },
  });
  expect((await verifyChain(server.dataSource.manager)).intact).toBe(true);
});

it("open claims go back to the queue and drafts are discarded, while submissions stay in it", async () => {
  const { agent, user } = await server.signedIn(["contributor", "editor"]);
  const other = await server.signedIn(["contributor", "editor"]);
  const draft = await buildDraft(server.dataSource, user);
  const waiting = await buildSubmission(server.dataSource, user, { z: "7.77" });
  const claimed = await buildSubmission(server.dataSource, other.user, { z: "9.11" });
  granted(await claim(actingAs(server.dataSource, user), claimed.id));

  await account.deleteAccount(agent, TEST_PASSWORD, "named");
  const now = async ({ id }: Revision) =>
    server.dataSource.manager.findOneByOrFail(Revision, { id });
  expect(await now(draft)).toMatchObject({ state: "discarded" });
  expect(await now(waiting)).toMatchObject({ state: "submitted" });
  expect(await now(claimed)).toMatchObject({
    state: "submitted",
    claimedById: null,
    claimedUntil: null,
  });
  const kinds = (await server.dataSource.manager.findBy(EventRecord, { actorId: user.id })).map(
    ({ kind, subject }) => `${kind} ${subject}`,
  );
  expect(kinds).toEqual(
    expect.arrayContaining([
      `revision.discarded ${formatQuotable(draft.constraintId, draft.ordinal)}`,
      `claim.released ${formatQuotable(claimed.constraintId, claimed.ordinal)}`,
    ]),
  );

  // Deciding what a former member sent mails nobody, and fails nowhere.
  const his = actingAs(server.dataSource, other.user);
  granted(await claim(his, waiting.id));
  const readNow = granted(await storeReading(his, waiting.id, waiting.fields));
  const comments = [{ field: "value", text: "It is another number." }];
  granted(await returnSubmission(his, waiting.id, readNow.version, comments, null));
  const mails = await server.dataSource.manager.find(OutboxMail);
  expect(mails.filter(({ to }) => !to.includes("@"))).toEqual([]);
});

it("a wrong password deletes nothing", async () => {
  const { agent, user } = await server.signedIn();
  expect(await account.deleteAccount(agent, "not the password", "named")).toMatchObject({
    code: "PASSWORD_WRONG",
    field: "password",
  });
  expect(await rowOf(user)).toMatchObject({ email: user.email, formerAt: null });
});

it("the last maintainer can't leave, one of two can", async () => {
  const only = await server.signedIn(["maintainer"]);
  expect(await account.deleteAccount(only.agent, TEST_PASSWORD, "named")).toMatchObject({
    code: "LAST_MAINTAINER",
  });
  await server.signedIn(["maintainer"]);
  expect(await account.deleteAccount(only.agent, TEST_PASSWORD, "named")).toMatchObject({
    __typename: "Done",
  });
});

it("two maintainers who leave at once don't leave the registry without one", async () => {
  const { manager } = server.dataSource;
  await manager.query("DELETE FROM role_grant WHERE role = 'maintainer'");
  const pair = [await server.signedIn(["maintainer"]), await server.signedIn(["maintainer"])];
  const outcomes = await Promise.all(
    pair.map(({ agent }) => account.deleteAccount(agent, TEST_PASSWORD, "named")),
  );
  expect(outcomes.map(({ __typename }) => __typename).sort()).toEqual(["Done", "Refusal"]);
  const [{ left }] = await manager.query(
    "SELECT COUNT(*) AS `left` FROM role_grant WHERE role = 'maintainer'",
  );
  expect(Number(left)).toBe(1);
});

it("the address can be registered again, and is another account", async () => {
  const { agent, user } = await server.signedIn();
  await account.deleteAccount(agent, TEST_PASSWORD, "anonymous");
  await account.register(server.agent(), { email: user.email });
  const again = await server.dataSource.manager.findOneByOrFail(User, { email: user.email });
  expect(again.id).not.toBe(user.id);
});

it("a former member is no person to find or to give a role to", async () => {
  const maintainer = await server.signedIn(["maintainer"]);
  const { agent, user } = await server.signedIn([], { nameOnPapers: "Gone Afterwards" });
  await account.deleteAccount(agent, TEST_PASSWORD, "named");
  const found = await server.graphql(
    maintainer.agent,
    '{ people(text: "Gone Afterwards") { id } }',
  );
  expect(found.data.people).toEqual([]);
  const given = await account.changeRole(maintainer.agent, "grantRole", user.id, "editor");
  expect(given.data.result).toMatchObject({ code: "NOT_FOUND" });
});

it("nobody can register or sign in with what stands in place of the address", async () => {
  const { agent, user } = await server.signedIn();
  await account.deleteAccount(agent, TEST_PASSWORD, "named");
  const { email } = await rowOf(user);
  expect(await account.register(server.agent(), { email })).toMatchObject({
    code: "EMAIL_INVALID",
  });
  expect(await account.signIn(server.agent(), email, TEST_PASSWORD)).toMatchObject({
    code: "SIGN_IN_WRONG",
  });
});
