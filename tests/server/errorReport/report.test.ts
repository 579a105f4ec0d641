import type { User } from "~server/account/user.entity";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { claim } from "~server/review/review.service";
import { reviseSubmission } from "~server/constraint/draft.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, buildApproved, buildDraft, granted, send } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const TEXT = "Table 3 prints 0.31 here, not 0.43.";

describe("reportError", () => {
  let server: TestServer;
  let contributor: User;
  let approver: User;
  let number: string;
  let quotable: string;
  beforeAll(async () => {
    server = await startTestServer();
    ({ user: contributor } = await server.signedIn(["contributor"]));
    ({ user: approver } = await server.signedIn(["editor"]));
    const { constraintId, ordinal } = await buildApproved(server.dataSource, contributor, approver);
    number = formatRecordNumber(constraintId);
    quotable = formatQuotable(constraintId, ordinal);
  });
  afterAll(() => server.stop());

  const report = async (variables: object, agent: Agent = server.agent()) => {
    const { data, errors } = await server.graphql(
      agent,
      `mutation ($number: String!, $text: String!, $email: String) {
        reportError(number: $number, text: $text, email: $email) {
          __typename ... on ErrorReported { message token } ... on Refusal { code message field } } }`,
      { number, text: TEXT, ...variables },
    );
    if (errors) throw new Error(errors[0]?.message);
    return data.reportError;
  };
  const reported = () =>
    server.dataSource.manager.find(EventRecord, {
      where: { kind: "record.errorReported" },
      order: { sequence: "ASC" },
    });

  const kept = () => server.dataSource.manager.find(ErrorReport, { order: { createdAt: "ASC" } });

  it("keeps the report and tells the desk and the contributor, without the words", async () => {
    const maintainer = await server.signedIn(["maintainer"]);
    const both = await server.signedIn(["editor", "maintainer"]);
    const reader = await server.signedIn([]);
    const text = "It reads <b>0.31</b>.\r\nYours,\u0000 a reader\u202e";
    expect(await report({ text, email: " Reader@Example.org " })).toMatchObject({
      __typename: "ErrorReported",
      message: "Thank you. The editors have your report.",
    });
    expect(await kept()).toMatchObject([
      {
        text: "It reads <b>0.31</b>.\nYours,  a reader",
        reporterEmail: "reader@example.org",
        state: "open",
      },
    ]);
    for (const { user } of [maintainer, both, { user: contributor }, { user: approver }]) {
      const told = (await server.mailsTo(user.email)).filter(({ subject }) =>
        subject.includes("An error is reported"),
      );
      expect(told).toHaveLength(1);
      expect(told[0]?.subject).toBe(`An error is reported in ${quotable}`);
      expect(told[0]?.text).not.toMatch(/0\.31|example\.org/);
      expect(told[0]?.text).toMatch(/http:\/\/fogline\.test\/desk\/reports\/[0-9a-f-]{36}/);
    }
    expect(await server.mailsTo(reader.user.email)).toEqual([]);

    // The log, which is never cleared, holds neither the words nor the reader's address.
    const [event] = await reported();
    expect(event).toMatchObject({ subject: quotable, actorId: null });
    expect(JSON.stringify(event)).not.toMatch(/example|0\.31/i);
    expect((await verifyChain(server.dataSource.manager)).intact).toBe(true);
  });

  it("mails the reporter where the answer will stand, and nothing that was typed", async () => {
    const email = "someone-else@lanternmoor.example";
    const { token } = await report({ text: "Buy at https://elsewhere.example now", email });
    const [mail, ...more] = await server.mailsTo(email);
    expect(more).toEqual([]);
    expect(mail?.text).toContain(`http://fogline.test/report/${token}`);
    expect(mail?.text).not.toContain("elsewhere");
  });

  it("names the person in the log when somebody is signed in", async () => {
    const { agent, user } = await server.signedIn([]);
    expect(await report({}, agent)).toMatchObject({ __typename: "ErrorReported" });
    expect((await reported()).at(-1)).toMatchObject({ actorId: user.id });
  });

  it.each([
    ["too short a text", { text: "  wrong!   \n " }, "TEXT_LENGTH", "text"],
    ["too long a text", { text: "x".repeat(2001) }, "TEXT_LENGTH", "text"],
    ["what is no address", { email: "reader@" }, "EMAIL_INVALID", "email"],
    [
      "an address with a line break",
      { email: "a@example.org\nbcc: b@example.org" },
      "EMAIL_INVALID",
      "email",
    ],
    ["an unknown record", { number: "FL-9999" }, "NOT_FOUND", "number"],
    ["what is no number", { number: "FL-1' OR 1" }, "NOT_FOUND", "number"],
  ])("refuses %s at its field", async (_, variables, code, field) => {
    const mails = await server.dataSource.manager.count(OutboxMail);
    expect(await report(variables)).toMatchObject({ __typename: "Refusal", code, field });
    expect(await server.dataSource.manager.count(OutboxMail)).toBe(mails);
  });

  it("takes a text of exactly 10 and of exactly 2000 characters", async () => {
    expect(await report({ text: "0123456789" })).toMatchObject({
      __typename: "ErrorReported",
    });
    // Outside the basic plane a character is two code units; it counts once.
    expect(await report({ text: "𝒙".repeat(2000) })).toMatchObject({
      __typename: "ErrorReported",
    });
  });

  it("doesn't tell whether a draft of that number exists", async () => {
    const { user } = await server.signedIn(["contributor"]);
    const draft = await buildDraft(server.dataSource, user);
    const drafted = await report({ number: formatRecordNumber(draft.constraintId) });
    expect(drafted).toEqual(await report({ number: "FL-9999" }));
  });

  it("tells a maintainer who is reading that record blind only once the claim has ended", async () => {
    const { dataSource } = server;
    const owner = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const approved = await buildApproved(dataSource, owner.user, editor.user);
    const draft = granted(await reviseSubmission(actingAs(dataSource, owner.user), approved.id));
    const submitted = await send(dataSource, owner.user, {
      ...draft,
      fields: { ...draft.fields, remark: "Place corrected." },
    });
    const reader = await server.signedIn(["editor", "maintainer"]);
    const held = granted(await claim(actingAs(dataSource, reader.user), submitted.id));
    await report({ number: formatRecordNumber(approved.constraintId) });
    const [mail] = (await server.mailsTo(reader.user.email)).slice(-1);
    expect(mail?.subject).toContain(formatRecordNumber(approved.constraintId));
    expect(mail?.nextTryAt).toEqual(held.claimedUntil);
    expect(
      await report({ number: formatRecordNumber(approved.constraintId) }, reader.agent),
    ).toMatchObject({ code: "NOT_FOUND" });
  });

  it("allows a caller so many in an hour, whatever the record", async () => {
    const narrow = await startTestServer({ limits: { reportPerCaller: 2 } });
    try {
      const ask = async () =>
        (
          await narrow.graphql(
            narrow.agent(),
            `mutation ($text: String!) { reportError(number: "FL-0001", text: $text) {
              __typename ... on Refusal { code } } }`,
            { text: TEXT },
          )
        ).data.reportError.code;
      const owner = await narrow.signedIn(["contributor"]);
      const editor = await narrow.signedIn(["editor", "maintainer"]);
      // What is refused for another reason doesn't count.
      expect(await ask()).toBe("NOT_FOUND");
      await buildApproved(narrow.dataSource, owner.user, editor.user);
      expect([await ask(), await ask(), await ask()]).toEqual([
        undefined,
        undefined,
        "TOO_MANY_REQUESTS",
      ]);
    } finally {
      await narrow.stop();
    }
  });
});
