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
  let number: string;
  let quotable: string;
  beforeAll(async () => {
    server = await startTestServer();
    const { user } = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const { constraintId, ordinal } = await buildApproved(server.dataSource, user, editor.user);
    number = formatRecordNumber(constraintId);
    quotable = formatQuotable(constraintId, ordinal);
  });
  afterAll(() => server.stop());

  const report = async (variables: object, agent: Agent = server.agent()) => {
    const { data, errors } = await server.graphql(
      agent,
      `mutation ($number: String!, $text: String!, $email: String) {
        reportError(number: $number, text: $text, email: $email) {
          __typename ... on Done { message } ... on Refusal { code message field } } }`,
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

  it("says so when there is no maintainer who could read it, and keeps nothing", async () => {
    expect(await report({})).toMatchObject({ __typename: "Refusal", code: "NOBODY" });
    expect(await reported()).toEqual([]);
  });

  it("mails every maintainer, for anybody without an account, in plain words", async () => {
    const maintainers = [
      await server.signedIn(["maintainer"]),
      await server.signedIn(["maintainer"]),
    ];
    const other = await server.signedIn(["editor"]);
    const text = "It reads <b>0.31</b>.\r\nYours,\u0000 a reader\u202e";
    expect(await report({ text, email: " Reader@Example.org " })).toEqual({
      __typename: "Done",
      message: "Thank you. The maintainers have your report.",
    });
    for (const { user } of maintainers) {
      const [mail, ...more] = await server.mailsTo(user.email);
      expect(more).toEqual([]);
      expect(mail?.subject).toBe(`An error is reported in ${quotable}`);
      expect(mail?.text).toContain("> It reads <b>0.31</b>.\n> Yours,  a reader\n");
      expect(mail?.text).toContain("reader@example.org; nobody has confirmed");
      expect(mail?.text).toContain(`http://fogline.test/constraints/${number}`);
    }
    expect(await server.mailsTo(other.user.email)).toEqual([]);

    // The log, which is never cleared, holds neither the words nor the reader's address.
    const [event] = await reported();
    expect(event).toMatchObject({ subject: quotable, actorId: null });
    expect(JSON.stringify(event)).not.toMatch(/reader|0\.31/i);
    expect((await verifyChain(server.dataSource.manager)).intact).toBe(true);
  });

  it("names the person in the log when somebody is signed in", async () => {
    const { agent, user } = await server.signedIn([]);
    expect(await report({}, agent)).toMatchObject({ __typename: "Done" });
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
    expect(await report({ text: "0123456789" })).toMatchObject({ __typename: "Done" });
    // Outside the basic plane a character is two code units; it counts once.
    expect(await report({ text: "𝒙".repeat(2000) })).toMatchObject({ __typename: "Done" });
  });

  it("doesn't tell whether a draft of that number exists", async () => {
    const { user } = await server.signedIn(["contributor"]);
    const draft = await buildDraft(server.dataSource, user);
    const drafted = await report({ number: formatRecordNumber(draft.constraintId) });
    expect(drafted).toEqual(await report({ number: "FL-9999" }));
  });

  it("keeps the words from a maintainer who is reading that record blind", async () => {
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
    expect(mail?.text).toContain(TEXT);
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
