import type { User } from "~server/account/user.entity";
import { reviseSubmission, saveDraft } from "~server/constraint/draft.service";
import { sweep } from "~server/database/housekeeping";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { claim, storeReading } from "~server/review/review.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted, send } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const TEXT = "Table 3 prints 0.31 here, not 0.43.";
const EMAIL = "reporter@lanternmoor.example";
const DAY_MS = 86_400_000;

const WHOLE = `id version state outcome correctedBy mailed barredBecause entries { by text }`;
const REPORTER = "state outcome correctedBy mayReply text entries { by text }";

let server: TestServer;
let contributor: { agent: Agent; user: User };
let editor: { agent: Agent; user: User };
let maintainer: { agent: Agent; user: User };
beforeAll(async () => {
  server = await startTestServer();
  contributor = await server.signedIn(["contributor", "editor"]);
  editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
  maintainer = await server.signedIn(["maintainer"]);
});
afterAll(() => server.stop());

// eslint-disable-next-line @typescript-eslint/no-explicit-any
async function one(agent: Agent, query: string, variables: object = {}): Promise<any> {
  const body = await server.graphql(agent, query, variables);
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return Object.values(body.data)[0];
}

/** A report of a record of its own. */
async function reported(text = TEXT, email: string | null = EMAIL) {
  const revision = await buildApproved(server.dataSource, contributor.user, editor.user);
  const { token } = await one(
    server.agent(),
    `mutation ($number: String!, $text: String!, $email: String) {
      reportError(number: $number, text: $text, email: $email) { ... on ErrorReported { token } } }`,
    { number: formatRecordNumber(revision.constraintId), text, email },
  );
  const report = await server.dataSource.manager.findOneByOrFail(ErrorReport, {
    revisionId: revision.id,
  });
  return { revision, token, id: report.id, number: formatRecordNumber(revision.constraintId) };
}

const answer = (agent: Agent, id: string, version: number, text = "Thank you, we look at it.") =>
  one(
    agent,
    `mutation ($id: ID!, $version: Int!, $text: String!) {
      answerErrorReport(id: $id, version: $version, text: $text) {
        __typename ... on ErrorReport { ${WHOLE} } ... on Refusal { code field message } } }`,
    { id, version, text },
  );
const close = (agent: Agent, input: object) =>
  one(
    agent,
    `mutation ($input: CloseReportInput!) {
      closeErrorReport(input: $input) {
        __typename ... on ErrorReport { ${WHOLE} } ... on Refusal { code field message } } }`,
    { input },
  );
const reply = (token: string, text: string, agent = server.agent()) =>
  one(
    agent,
    `mutation ($token: String!, $text: String!) { replyToReport(token: $token, text: $text) {
      __typename ... on ReportedError { ${REPORTER} } ... on Refusal { code } } }`,
    { token, text },
  );
const seen = (token: string, agent = server.agent()) =>
  one(agent, `query ($token: String!) { reportedError(token: $token) { ${REPORTER} } }`, { token });
const atDesk = (agent: Agent, id: string) =>
  one(agent, `query ($id: ID!) { errorReport(id: $id) { ${WHOLE} } }`, { id });
const listed = async (agent: Agent, variables: object = {}): Promise<string[]> =>
  (
    await one(
      agent,
      "query ($text: String, $state: ReportState) { errorReports(text: $text, state: $state) { id } }",
      variables,
    )
  ).map(({ id }: { id: string }) => id);

it("a report goes through answer, one reply and a decision, and the reporter sees each", async () => {
  const { id, token, revision } = await reported();
  expect(await seen(token)).toEqual({
    state: "open",
    outcome: null,
    correctedBy: null,
    mayReply: false,
    text: TEXT,
    entries: [],
  });
  expect(await answer(editor.agent, id, 1, "Which version of the paper?")).toMatchObject({
    state: "answered",
    version: 2,
    entries: [{ by: "Brisa Kelm", text: "Which version of the paper?" }],
  });
  const mail = (await server.mailsTo(EMAIL)).at(-1);
  expect(mail?.text).toContain("> Which version of the paper?");
  expect(mail?.text).toContain(`/report/${token}`);

  expect(await seen(token)).toMatchObject({ state: "answered", mayReply: true });
  expect(await reply(token, "The published one.")).toMatchObject({
    state: "open",
    mayReply: false,
    entries: [{ by: "Brisa Kelm" }, { by: null, text: "The published one." }],
  });
  expect(await reply(token, "And another thing.")).toMatchObject({ code: "REPLIED" });

  const version = 3;
  expect(
    await close(maintainer.agent, { id, version, outcome: "noError", text: "It prints 0.43." }),
  ).toMatchObject({ state: "closed", outcome: "noError" });
  expect(await seen(token)).toMatchObject({ state: "closed", outcome: "noError" });

  const events = await server.dataSource.manager.findBy(EventRecord, {
    subject: formatQuotable(revision.constraintId, revision.ordinal),
  });
  expect(events.slice(-4).map(({ kind, actorId }) => [kind, actorId])).toEqual([
    ["record.errorReported", null],
    ["report.answered", editor.user.id],
    ["report.replied", null],
    ["report.closed", maintainer.user.id],
  ]);
  expect(JSON.stringify(events)).not.toMatch(/0\.31|lanternmoor|published one/);
  expect((await verifyChain(server.dataSource.manager)).intact).toBe(true);
});

it("of two who answer at once one is told that the other was first", async () => {
  const { id } = await reported();
  const outcomes = await Promise.all([
    answer(editor.agent, id, 1, "One answer."),
    answer(maintainer.agent, id, 1, "Another answer."),
  ]);
  expect(outcomes.map((outcome) => outcome.code ?? outcome.__typename).sort()).toEqual([
    "ErrorReport",
    "STALE",
  ]);
  expect((await atDesk(editor.agent, id)).entries).toHaveLength(1);
});

it("of two replies sent at once one is kept", async () => {
  const { id, token } = await reported();
  await answer(editor.agent, id, 1);
  const outcomes = await Promise.all([reply(token, "First reply."), reply(token, "Second reply.")]);
  expect(outcomes.map((outcome) => outcome.code ?? outcome.__typename).sort()).toEqual([
    "REPLIED",
    "ReportedError",
  ]);
});

it("nobody replies before an answer, nor with a link of their own making", async () => {
  const { id, token } = await reported();
  expect(await reply(token, "Hello?")).toMatchObject({ code: "NOT_ANSWERED" });
  const forged = `${id}.${"A".repeat(43)}`;
  for (const made of [forged, id, "", "x".repeat(10_000), `${token}x`]) {
    expect(await seen(made)).toBeNull();
    expect(await reply(made, "Hello?")).toMatchObject({ code: "NOT_FOUND" });
  }
  // Signed for one report, a token opens no other.
  const other = await reported();
  expect(await seen(`${other.id}.${token.split(".")[1]}`)).toBeNull();
});

it("'corrected' names an approved revision that is newer than the reported one", async () => {
  const { id, revision, number } = await reported();
  const closing = { id, version: 1, outcome: "corrected", text: "You are right, thank you." };
  for (const correctedBy of [null, "", number, `${number}.1`, `${number}.2`, "FL-9999.1"]) {
    expect(await close(editor.agent, { ...closing, correctedBy })).toMatchObject({
      code: "CORRECTED_BY",
      field: "correctedBy",
    });
  }
  const hers = actingAs(server.dataSource, contributor.user);
  const draft = granted(await reviseSubmission(hers, revision.id));
  const next = await send(server.dataSource, contributor.user, {
    ...draft,
    fields: { ...draft.fields, remark: "Place corrected." },
  });
  await approveAs(server.dataSource, editor.user, next);
  const correctedBy = `fl-${revision.constraintId}.2`;
  expect(await close(editor.agent, { ...closing, correctedBy })).toMatchObject({
    outcome: "corrected",
    correctedBy: `${number}.2`,
  });
  expect((await server.mailsTo(EMAIL)).at(-1)?.text).toContain(`Corrected by ${number}.2.`);
});

it("a report isn't closed without a word to the reporter", async () => {
  const { id } = await reported();
  const closing = { id, version: 1, outcome: "passedToAuthors" };
  expect(await close(editor.agent, { ...closing, text: " " })).toMatchObject({
    code: "TEXT_MISSING",
    field: "text",
  });
  await answer(editor.agent, id, 1);
  expect(await close(editor.agent, { ...closing, version: 2 })).toMatchObject({ state: "closed" });
});

it("who brought the record reads its reports but never answers them", async () => {
  const { id } = await reported();
  expect(await atDesk(contributor.agent, id)).toMatchObject({
    state: "open",
    barredBecause: expect.stringContaining("You brought this record yourself."),
  });
  expect(await answer(contributor.agent, id, 1)).toMatchObject({ code: "BARRED" });
  expect(await close(contributor.agent, { id, version: 1, outcome: "noError" })).toMatchObject({
    code: "BARRED",
  });
  const stranger = await server.signedIn(["contributor"]);
  expect(await atDesk(stranger.agent, id)).toBeNull();
});

it("the desk lists open reports first, the oldest on top, and finds by words and by number", async () => {
  const first = await reported("A slanted 100%_sure remark");
  const second = await reported("Another remark entirely");
  const third = await reported("A third remark of them");
  await answer(editor.agent, first.id, 1);
  const all = await listed(editor.agent);
  expect(all.indexOf(second.id)).toBeLessThan(all.indexOf(third.id));
  expect(all.indexOf(third.id)).toBeLessThan(all.indexOf(first.id));
  expect(await listed(maintainer.agent, { text: "100%_sure slanted" })).toEqual([first.id]);
  expect(await listed(editor.agent, { text: "100x_sure" })).toEqual([]);
  expect(await listed(editor.agent, { text: third.number.toLowerCase() })).toEqual([third.id]);
  expect(await listed(editor.agent, { state: "answered" })).toContain(first.id);
  expect(await listed(editor.agent, { state: "open" })).not.toContain(first.id);
});

it("the public sees how many reports a record has, not what they say", async () => {
  const { id, number } = await reported();
  const ask = () =>
    server.graphql(
      server.agent(),
      "query ($number: String!) { constraint(number: $number) { errorReports { open answered } } }",
      { number },
    );
  expect((await ask()).data.constraint.errorReports).toEqual({ open: 1, answered: 0 });
  await answer(editor.agent, id, 1);
  expect((await ask()).data.constraint.errorReports).toEqual({ open: 0, answered: 1 });
});

it("an editor who is reading the record blind sees no report of it until the reading is stored", async () => {
  const reader = await server.signedIn(["editor", "maintainer"]);
  const { id, token, revision, number } = await reported("It should read 0.5167 there.");
  const hers = actingAs(server.dataSource, contributor.user);
  const draft = granted(await reviseSubmission(hers, revision.id));
  const fields = { ...draft.fields, remark: "Place corrected." };
  granted(await saveDraft(hers, { id: draft.id, version: draft.version, fields }));
  const next = await send(server.dataSource, contributor.user, { ...draft, fields, version: 2 });
  expect(await atDesk(reader.agent, id)).not.toBeNull();

  const his = actingAs(server.dataSource, reader.user);
  granted(await claim(his, next.id));
  expect(await atDesk(reader.agent, id)).toBeNull();
  expect(await seen(token, reader.agent)).toBeNull();
  expect(await reply(token, "Hello?", reader.agent)).toMatchObject({ code: "NOT_FOUND" });
  expect(await listed(reader.agent, { text: number })).toEqual([]);
  expect(await listed(reader.agent, { text: "0.5167" })).toEqual([]);
  expect(await answer(reader.agent, id, 1)).toMatchObject({ code: "NOT_FOUND" });
  expect(await listed(editor.agent, { text: "0.5167" })).toEqual([id]);

  granted(await storeReading(his, next.id, fields));
  expect(await atDesk(reader.agent, id)).not.toBeNull();
  expect(await listed(reader.agent, { text: "0.5167" })).toEqual([id]);
});

it("the reporter's address is shown to nobody and forgotten 90 days after the report is closed", async () => {
  const { id } = await reported(TEXT, "forgetful@lanternmoor.example");
  const { manager } = server.dataSource;
  const address = async () => (await manager.findOneByOrFail(ErrorReport, { id })).reporterEmail;
  expect(JSON.stringify(await atDesk(editor.agent, id))).not.toContain("lanternmoor");
  await sweep(manager, new Date(Date.now() + 400 * DAY_MS));
  expect(await address()).toBe("forgetful@lanternmoor.example");
  await close(editor.agent, { id, version: 1, outcome: "noError", text: "It stands so." });
  await sweep(manager, new Date(Date.now() + 89 * DAY_MS));
  expect(await address()).toBe("forgetful@lanternmoor.example");
  await sweep(manager, new Date(Date.now() + 91 * DAY_MS));
  expect(await address()).toBeNull();
  expect(await atDesk(editor.agent, id)).toMatchObject({ mailed: false });
});

it("deleting the account takes the person's address out of their reports", async () => {
  const reader = await server.signedIn();
  const { number } = await reported();
  await one(
    reader.agent,
    `mutation ($number: String!, $text: String!, $email: String) {
      reportError(number: $number, text: $text, email: $email) { __typename } }`,
    { number, text: TEXT, email: reader.user.email },
  );
  const { manager } = server.dataSource;
  const mine = await manager.findOneByOrFail(ErrorReport, { reporterId: reader.user.id });
  await one(
    reader.agent,
    `mutation { deleteAccount(password: "a foggy morning 7", credit: named) { __typename } }`,
  );
  expect(await manager.findOneByOrFail(ErrorReport, { id: mine.id })).toMatchObject({
    reporterId: null,
    reporterEmail: null,
    text: TEXT,
  });
});
