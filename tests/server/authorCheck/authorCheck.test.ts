import { AuthorCheck } from "~server/authorCheck/authorCheck.entity";
import { EventRecord } from "~server/event/event.entity";
import { sweep } from "~server/database/housekeeping";
import { claim, storeReading } from "~server/review/review.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, buildApproved, buildSubmission, granted } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const DESK = `__typename
  ... on AuthorCheck { id version state verdict authorName authorEmail quotable lines { by verdict text } }
  ... on Refusal { code message field }`;
const PAGE = `standing version quotable approved authorName authorEmail verdict fields { value z } lines { by verdict text }`;

describe("an author's check", () => {
  let server: TestServer;
  let asked = 0;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  const call = async (agent: Agent, query: string, variables: object) => {
    const { data, errors } = await server.graphql(agent, query, variables);
    if (errors) throw new Error(errors.map(({ message }) => message).join("; "));
    // A test names what it expects of the answer; a type would only say it a second time.
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return Object.values(data as Record<string, unknown>)[0] as any;
  };
  const sendTo = (agent: Agent, quotable: string, email: string, name = "Wen Author") =>
    call(
      agent,
      `mutation ($input: SendAuthorCheckInput!) { sendAuthorCheck(input: $input) { ${DESK} } }`,
      { input: { quotable, name, email } },
    );
  const open = (token: string, agent = server.agent()) =>
    call(agent, `query ($token: String!) { authorCheckByLink(token: $token) { ${PAGE} } }`, {
      token,
    });
  const answer = (
    token: string,
    version: number,
    verdict: string,
    text: string | null = null,
    agent = server.agent(),
  ) =>
    call(
      agent,
      `mutation ($token: String!, $version: Int!, $verdict: CheckVerdict!, $text: String) {
        answerAuthorCheck(token: $token, version: $version, verdict: $verdict, text: $text) {
          __typename ... on AuthorCheckPage { ${PAGE} } ... on Refusal { code message } } }`,
      { token, version, verdict, text },
    );
  const act = (agent: Agent, name: string, id: string, version: number, text?: string) =>
    call(
      agent,
      `mutation ($id: ID!, $version: Int! ${text === undefined ? "" : "$text: String"}) {
        ${name}(id: $id, version: $version ${text === undefined ? "" : "text: $text"}) { ${DESK} } }`,
      { id, version, text },
    );
  const listed = (agent: Agent) => call(agent, "query { authorChecks { id quotable state } }", {});
  const tokenTo = async (email: string): Promise<string> => {
    const mails = await server.mailsTo(email);
    return /\/check\/(\S+)/.exec(mails.at(-1)?.text ?? "")?.[1] ?? "";
  };

  /** An approved record, an editor who did not read it, and a link sent to its author. */
  async function sent() {
    const contributor = await server.signedIn(["contributor"]);
    const reader = await server.signedIn(["editor"]);
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const z = (5 + (asked += 1) / 100).toFixed(2);
    const revision = await buildApproved(server.dataSource, contributor.user, reader.user, { z });
    const quotable = formatQuotable(revision.constraintId, 1);
    const email = `author${asked}@lantern.example`;
    const check = await sendTo(editor.agent, quotable, email);
    return { contributor, editor, revision, quotable, email, check, token: await tokenTo(email) };
  }

  it("shows the record without an account, takes 'correct' and stands on the record's page", async () => {
    const { quotable, token, revision, email, check } = await sent();
    expect(check).toMatchObject({ __typename: "AuthorCheck", state: "sent", quotable });
    const [mail] = await server.mailsTo(email);
    expect(mail?.text).not.toContain(revision.fields.value);
    const page = await open(token);
    expect(page).toMatchObject({
      standing: "open",
      authorEmail: email,
      fields: { value: "0.43", z: revision.fields.z },
    });
    expect(await answer(token, page.version, "correct")).toMatchObject({
      standing: "answered",
      verdict: "correct",
    });
    const record = await call(
      server.agent(),
      "query ($n: String!) { constraint(number: $n) { authorChecks { ordinal verdict closed } } }",
      { n: formatRecordNumber(revision.constraintId) },
    );
    expect(record.authorChecks).toEqual([{ ordinal: 1, verdict: "correct", closed: false }]);
  });

  it("stores of the link only its digest", async () => {
    const { token, check } = await sent();
    const stored = await server.dataSource.manager.findOneByOrFail(AuthorCheck, { id: check.id });
    expect(stored.tokenHash).toMatch(/^[0-9a-f]{64}$/);
    expect(JSON.stringify(stored)).not.toContain(token.slice(0, 20));
    expect(stored.expiresAt.getTime() - stored.sentAt.getTime()).toBe(30 * 86_400_000);
  });

  it("may be corrected until an editor closes it in words, and keeps every answer", async () => {
    const { editor, token, email } = await sent();
    const first = await answer(token, 1, "correct");
    const second = await answer(token, first.version, "comments", "The level is 95 %, not 68 %.");
    expect(second.lines.map(({ verdict }: { verdict: string }) => verdict)).toEqual([
      "correct",
      "comments",
    ]);
    expect(await answer(token, first.version, "correct")).toMatchObject({ code: "STALE" });
    const [row] = await listed(editor.agent);
    expect(row).toMatchObject({ state: "answered" });
    expect(await act(editor.agent, "closeAuthorCheck", row.id, second.version)).toMatchObject({
      code: "TEXT_MISSING",
    });
    const closed = await act(
      editor.agent,
      "closeAuthorCheck",
      row.id,
      second.version,
      "Corrected in a new revision.",
    );
    expect(closed).toMatchObject({ state: "closed" });
    expect((await server.mailsTo(email)).at(-1)?.text).toContain("> Corrected in a new revision.");
    expect(await answer(token, closed.version, "correct")).toMatchObject({ code: "CLOSED" });
    expect(await open(token)).toMatchObject({ standing: "closed", fields: null });
    const kinds = (
      await server.dataSource.manager.find(EventRecord, { order: { sequence: "ASC" } })
    )
      .filter(({ detail }) => detail.check === row.id)
      .map(({ kind }) => kind);
    expect(kinds).toEqual([
      "authorCheck.sent",
      "authorCheck.answered",
      "authorCheck.answered",
      "authorCheck.closed",
    ]);
  });

  it("takes one of several answers sent at once", async () => {
    const { token } = await sent();
    const outcomes = await Promise.all(
      ["correct", "comments", "correct", "comments"].map((verdict) =>
        answer(token, 1, verdict, "Something about the table."),
      ),
    );
    expect(outcomes.filter((one) => one.__typename === "AuthorCheckPage")).toHaveLength(1);
    expect(outcomes.filter(({ code }) => code === "STALE")).toHaveLength(3);
  });

  it("opens nothing by a made-up, a run-out or a taken-back link", async () => {
    const { editor, token, check } = await sent();
    const other = `${token.slice(0, 5)}${token[5] === "A" ? "B" : "A"}${token.slice(6)}`;
    for (const made of ["", "x", other, token.slice(0, -1), `${token}A`]) {
      expect(await open(made)).toBeNull();
      expect(await answer(made, 1, "correct")).toMatchObject({ code: "UNKNOWN" });
    }
    await server.dataSource.query("UPDATE author_check SET expiresAt = ? WHERE id = ?", [
      new Date(Date.now() - 1000),
      check.id,
    ]);
    expect(await open(token)).toMatchObject({ standing: "expired", fields: null, lines: [] });
    expect(await answer(token, 1, "correct")).toMatchObject({ code: "CLOSED" });
    await act(editor.agent, "revokeAuthorCheck", check.id, 1);
    expect(await open(token)).toMatchObject({
      standing: "revoked",
      fields: null,
      authorEmail: null,
    });
  });

  it("is sent of an unread submission by nobody, and shows it to no editor who has not read it", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const reader = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const other = await server.signedIn(["editor"], { nameOnPapers: "Tove Arlund" });
    const submitted = await buildSubmission(server.dataSource, contributor.user, { z: "9.87" });
    const quotable = formatQuotable(submitted.constraintId, 1);
    const email = "author-of-unread@lantern.example";
    expect(await sendTo(other.agent, quotable, email)).toMatchObject({ code: "NOT_FOUND" });
    const who = actingAs(server.dataSource, reader.user);
    granted(await claim(who, submitted.id));
    expect(await sendTo(reader.agent, quotable, email)).toMatchObject({ code: "NOT_FOUND" });
    granted(await storeReading(who, submitted.id, submitted.fields));
    const check = await sendTo(reader.agent, quotable, email);
    expect(check).toMatchObject({ __typename: "AuthorCheck" });
    const token = await tokenTo(email);
    expect(await open(token)).toMatchObject({ standing: "open", fields: { z: "9.87" } });
    expect(await open(token, other.agent)).toMatchObject({ standing: "hidden", fields: null });
    await answer(token, 1, "comments", "The redshift is 9.87 in the table, 9.78 in the text.");
    const hidden = await call(
      other.agent,
      "query ($id: ID!) { authorChecks { id } authorCheck(id: $id) { id } }",
      { id: check.id },
    );
    expect(hidden.map(({ id }: { id: string }) => id)).not.toContain(check.id);
    expect((await listed(reader.agent)).map(({ id }: { id: string }) => id)).toContain(check.id);
    // Of a revision that is not approved the public learns nothing.
    const record = await call(
      server.agent(),
      "query ($n: String!) { constraint(number: $n) { authorChecks { id } } }",
      { n: formatRecordNumber(submitted.constraintId) },
    );
    expect(record).toBeNull();
  });

  it("is asked and answered by nobody in a case of their own", async () => {
    const { contributor, editor, quotable, token, revision } = await sent();
    expect(await sendTo(editor.agent, quotable, editor.user.email)).toMatchObject({
      code: "OWN_ADDRESS",
    });
    expect(await sendTo(editor.agent, quotable, "no address")).toMatchObject({ field: "email" });
    expect(await answer(token, 1, "correct", null, contributor.agent)).toMatchObject({
      code: "NOT_THE_AUTHOR",
    });
    const author = await server.signedIn(["editor"], {
      nameOnPapers: revision.citation?.authors[0] ?? "",
    });
    expect(await sendTo(author.agent, quotable, "another@lantern.example")).toMatchObject({
      code: "BARRED",
    });
  });

  it("forgets name and address long after its end", async () => {
    const { token, check } = await sent();
    await answer(token, 1, "correct");
    const { manager } = server.dataSource;
    const day = 86_400_000;
    await sweep(manager, new Date(Date.now() + 119 * day));
    expect((await manager.findOneByOrFail(AuthorCheck, { id: check.id })).authorEmail).toBeTruthy();
    await sweep(manager, new Date(Date.now() + 121 * day));
    expect(await manager.findOneByOrFail(AuthorCheck, { id: check.id })).toMatchObject({
      authorName: null,
      authorEmail: null,
      verdict: "correct",
    });
  });
});

describe("the limits of author checks", () => {
  it("allow so many links per record and per address each day", async () => {
    const server = await startTestServer({ limits: { checksPerRecord: 2, checksPerAddress: 100 } });
    try {
      const contributor = await server.signedIn(["contributor"]);
      const reader = await server.signedIn(["editor"]);
      const revision = await buildApproved(server.dataSource, contributor.user, reader.user);
      const quotable = formatQuotable(revision.constraintId, 1);
      const codes: unknown[] = [];
      for (const n of [1, 2, 3]) {
        const { data } = await server.graphql(
          reader.agent,
          `mutation ($input: SendAuthorCheckInput!) { sendAuthorCheck(input: $input) { ... on Refusal { code } } }`,
          { input: { quotable, name: "Wen Author", email: `a${n}@lantern.example` } },
        );
        codes.push(data?.sendAuthorCheck.code);
      }
      expect(codes).toEqual([undefined, undefined, "TOO_MANY_REQUESTS"]);
    } finally {
      await server.stop();
    }
  });
});
