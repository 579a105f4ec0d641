import type { User } from "~server/account/user.entity";
import { reviseSubmission } from "~server/constraint/draft.service";
import { claim, storeReading } from "~server/review/review.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import {
  actingAs,
  approveAs,
  buildApproved,
  buildDraft,
  buildSubmission,
  granted,
  send,
} from "../../factories/constraint";
import { TEST_PASSWORD } from "../../factories/user";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

// Of ORCID's own documentation, of a fictitious person.
const ORCID = "0000-0002-1825-0097";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

const people = async () => ({
  contributor: await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn", orcid: ORCID }),
  editor: await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" }),
});

// eslint-disable-next-line @typescript-eslint/no-explicit-any
async function page({ id }: User, agent: Agent = server.agent()): Promise<any> {
  const body = await server.graphql(
    agent,
    `query ($id: ID!) { personCredit(id: $id) {
      id nameOnPapers orcid since former enteredTotal readTotal
      entered { number } read { number } } }`,
    { id },
  );
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return body.data.personCredit;
}

it("a person's page credits what was entered and what was read, to anybody", async () => {
  const { contributor, editor } = await people();
  const record = await buildApproved(server.dataSource, contributor.user, editor.user);
  const number = formatRecordNumber(record.constraintId);
  await buildDraft(server.dataSource, contributor.user);
  await buildSubmission(server.dataSource, contributor.user, { z: "6.66" });
  expect(await page(contributor.user)).toEqual({
    id: contributor.user.id,
    nameOnPapers: "Ottla Firn",
    orcid: ORCID,
    since: record.decidedAt?.toISOString(),
    former: false,
    enteredTotal: 1,
    entered: [{ number }],
    readTotal: 0,
    read: [],
  });
  expect(await page(editor.user)).toMatchObject({
    nameOnPapers: "Brisa Kelm",
    enteredTotal: 0,
    readTotal: 1,
    read: [{ number }],
  });
});

it("a record names who entered and who read each of its revisions, with the way to their pages", async () => {
  const { contributor, editor } = await people();
  const second = await server.signedIn(["editor"], { nameOnPapers: "Tove Aldrin" });
  const record = await buildApproved(server.dataSource, contributor.user, editor.user);
  const hers = actingAs(server.dataSource, contributor.user);
  const draft = granted(await reviseSubmission(hers, record.id));
  const next = await send(server.dataSource, contributor.user, {
    ...draft,
    fields: { ...draft.fields, remark: "Place corrected." },
  });
  await approveAs(server.dataSource, second.user, next);
  const body = await server.graphql(
    server.agent(),
    `query ($number: String!) { constraint(number: $number) { revisions {
      ordinal enteredBy { name personId } readBy { name personId } } } }`,
    { number: formatRecordNumber(record.constraintId) },
  );
  const enteredBy = { name: "Ottla Firn", personId: contributor.user.id };
  expect(body.data.constraint.revisions).toEqual([
    { ordinal: 1, enteredBy, readBy: { name: "Brisa Kelm", personId: editor.user.id } },
    { ordinal: 2, enteredBy, readBy: { name: "Tove Aldrin", personId: second.user.id } },
  ]);
  // Who read an earlier revision keeps the credit for it.
  expect(await page(editor.user)).toMatchObject({ readTotal: 1 });
});

it("who has brought nothing that is approved has no page, and neither has a stranger's guess", async () => {
  const { user } = await server.signedIn(["contributor", "editor", "maintainer"]);
  await buildSubmission(server.dataSource, user);
  expect(await page(user)).toBeNull();
  expect(await page({ id: "no-such-person" } as User)).toBeNull();
});

it("a named former member keeps the page, an anonymous one has none and no link leads there", async () => {
  for (const credit of ["named", "anonymous"]) {
    const { contributor, editor } = await people();
    const record = await buildApproved(server.dataSource, contributor.user, editor.user);
    await server.graphql(
      contributor.agent,
      `mutation ($password: String!, $credit: CreditAfterwards!) {
        deleteAccount(password: $password, credit: $credit) { __typename } }`,
      { password: TEST_PASSWORD, credit },
    );
    const shown = await page(contributor.user);
    const body = await server.graphql(
      server.agent(),
      `query ($number: String!) { constraint(number: $number) {
        revisions { enteredBy { name personId } } } }`,
      { number: formatRecordNumber(record.constraintId) },
    );
    const [{ enteredBy }] = body.data.constraint.revisions;
    if (credit === "named") {
      expect(shown).toMatchObject({ nameOnPapers: "Ottla Firn", orcid: ORCID, former: true });
      expect(enteredBy).toEqual({ name: "Ottla Firn", personId: contributor.user.id });
    } else {
      expect(shown).toBeNull();
      expect(enteredBy).toEqual({ name: "a former member", personId: null });
    }
  }
});

it("neither count nor list holds a record that the viewer is reading blind", async () => {
  const { contributor, editor } = await people();
  const reader = await server.signedIn(["editor"]);
  const record = await buildApproved(server.dataSource, contributor.user, editor.user);
  await buildApproved(server.dataSource, contributor.user, editor.user, { z: "8.3" });
  const hers = actingAs(server.dataSource, contributor.user);
  const draft = granted(await reviseSubmission(hers, record.id));
  const fields = { ...draft.fields, remark: "Place corrected." };
  const next = await send(server.dataSource, contributor.user, { ...draft, fields });
  const his = actingAs(server.dataSource, reader.user);
  granted(await claim(his, next.id));
  expect(await page(contributor.user, reader.agent)).toMatchObject({ enteredTotal: 1 });
  expect(await page(editor.user, reader.agent)).toMatchObject({ readTotal: 1 });
  expect(await page(contributor.user)).toMatchObject({ enteredTotal: 2 });
  granted(await storeReading(his, next.id, fields));
  expect(await page(contributor.user, reader.agent)).toMatchObject({ enteredTotal: 2 });
});
