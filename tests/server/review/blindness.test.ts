import { EventRecord } from "~server/event/event.entity";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { recordNotice } from "~server/recordLife/life.service";
import { claim, returnSubmission, storeReading } from "~server/review/review.service";
import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import {
  actingAs,
  approveAs,
  buildCitation,
  buildDraft,
  buildFields,
  buildSubmission,
  granted,
  send,
} from "../../factories/constraint";
import { buildTable } from "../../factories/table";
import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { deskOf } from "./desk";
import { numbersIn, walkEverything, type Known } from "./walk";

/**
 * Numbers that occur nowhere but in the submission, so that one of them anywhere is a leak. The
 * earlier revision has its own; what both share must not show either.
 */
const FIRST = { z: "7.3819", value: "0.41637", plus: "0.18253", minus: "0.15974" };
const SECOND = { z: "7.3819", value: "0.43291", plus: "0.18253", minus: "0.16183" };
const SECRETS = [...new Set([...Object.values(FIRST), ...Object.values(SECOND)])];
const COMMENT = "Not 0.15974 but something else";
const ANSWER = "You are right about 0.15974";
/** Derived numbers: 1 − value, and the ends of the interval. */
const DERIVED = ["0.58363", "0.56709", "0.59890", "0.25663", "0.61544", "0.27108"];

// A walk asks some hundred questions; a busy machine takes its time over them.
jest.setTimeout(300_000);

describe("blindness", () => {
  let server: TestServer;
  beforeEach(async () => {
    server = await startTestServer();
  });
  afterEach(() => server.stop());

  async function everybody() {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    // Every role at once: none of them may give more sight of numbers.
    const editor = await server.signedIn(["contributor", "editor", "maintainer"], {
      nameOnPapers: "Brisa Kelm",
    });
    const other = await server.signedIn(["editor"], { nameOnPapers: "Tove Aldrin" });
    return { contributor, editor, other };
  }

  async function known(): Promise<Known & { downloads: string[] }> {
    const rows = async (sql: string): Promise<string[]> =>
      ((await server.dataSource.query(sql)) as { v: unknown }[]).map(({ v }) => String(v));
    const ids = [
      ...(await rows("SELECT id v FROM revision")),
      ...(await rows("SELECT id v FROM reading LIMIT 1")),
      ...(await rows("SELECT id v FROM field_comment LIMIT 1")),
      ...(await rows("SELECT id v FROM citation")),
      ...(await rows("SELECT slug v FROM fitting_table")),
      ...(await rows("SELECT slug v FROM named_data")),
    ];
    const records = (await rows("SELECT id v FROM constraint_record")).map(Number);
    const slugs = await rows("SELECT slug v FROM fitting_table");
    return {
      ids,
      guesses: ["FL-", "mist", "0.4", SECRETS[1] ?? ""],
      contents: [buildFields({ z: "7.38", value: "0.42" }), buildFields(FIRST)],
      numbers: [
        ...records.map(formatRecordNumber),
        ...records.flatMap((id) => [1, 2, 3].map((ordinal) => formatQuotable(id, ordinal))),
      ],
      downloads: [
        "/api/constraints.csv",
        "/api/constraints.bib",
        `/api/constraints.csv?q=${FIRST.value}`,
        "/api/constraints.csv?z=7-8",
        "/api/log.csv",
        "/api/log.jsonl",
        ...records.map((id) => `/api/constraints/${formatRecordNumber(id)}.bib`),
        ...records.map((id) => `/api/constraints/${formatRecordNumber(id)}/curve.csv`),
        ...slugs.flatMap((slug) =>
          ["csv", "json", "bib"].map((end) => `/api/tables/${slug}.${end}`),
        ),
      ],
    };
  }

  /**
   * Where a person finds the secret numbers. An answer that repeats the question's own guess
   * tells nothing: a guess is left out of the answer to it.
   */
  async function leaks(agent: Agent): Promise<string[]> {
    const { downloads, ...rest } = await known();
    const answers = await walkEverything(server, agent, rest, downloads);
    const found = answers.flatMap(({ asked, text }) =>
      numbersIn(text, [...SECRETS, ...DERIVED])
        .filter((number) => !numbersIn(asked, [number]).length)
        .map((number) => `${number} in ${asked}`),
    );
    const comments = answers.filter(
      ({ text }) => text.includes("something else") || text.includes("You are right"),
    );
    return [...found, ...comments.map(({ asked }) => `comment in ${asked}`)];
  }

  /** A guess must not be confirmed: asking for a secret answers as asking for nonsense does. */
  async function confirms(agent: Agent): Promise<string[]> {
    const ask = async (text: string): Promise<string> =>
      JSON.stringify(
        await server.graphql(
          agent,
          "query ($text: String) { constraints(filter: { text: $text }) { total registryTotal } }",
          { text },
        ),
      );
    const nonsense = await ask("0.99999123");
    const confirmed: string[] = [];
    for (const secret of SECRETS) if ((await ask(secret)) !== nonsense) confirmed.push(secret);
    return confirmed;
  }

  async function mailsAndEvents(): Promise<string> {
    const mails = await server.dataSource.manager.find(OutboxMail);
    const events = await server.dataSource.manager.find(EventRecord);
    return JSON.stringify([mails, events]);
  }

  it("keeps a first submission's numbers from an editor until their reading is stored", async () => {
    const { contributor, editor, other } = await everybody();
    const submitted = await buildSubmission(server.dataSource, contributor.user, FIRST);
    // So that lists, downloads and tables aren't empty.
    const neighbour = await buildSubmission(server.dataSource, contributor.user, {
      z: "6.11",
      value: "0.22",
    });
    await approveAs(server.dataSource, other.user, neighbour);

    // The walk can find: the owner sees the numbers.
    const own = await leaks(contributor.agent);
    for (const secret of Object.values(FIRST)) {
      expect(own.some((leak) => leak.startsWith(`${secret} in mySubmissions`))).toBe(true);
      expect(own.some((leak) => leak.startsWith(`${secret} in submission`))).toBe(true);
    }

    expect(await leaks(editor.agent)).toEqual([]);
    granted(await claim(actingAs(server.dataSource, editor.user), submitted.id));
    expect(await leaks(editor.agent)).toEqual([]);
    expect(await confirms(editor.agent)).toEqual([]);
    expect(numbersIn(await mailsAndEvents(), SECRETS)).toEqual([]);

    // Refusals tell nothing either.
    const desk = deskOf(server, editor.agent);
    const version = (await desk.review(submitted.id)).item.version;
    const refusals = [
      await desk.read(submitted.id, { quantity: "neutralFraction", kind: "twoSided" }),
      await desk.correct(submitted.id, "value", { value: "1" }, "so"),
      await desk.accept(submitted.id, "sightlineAsMean"),
      await desk.approve(submitted.id, version),
      await desk.giveBack(submitted.id, version, []),
      await desk.submission(submitted.id),
      await desk.revise(submitted.id),
      await desk.start(null, submitted.id),
      await desk.save(submitted.id, version, {}),
    ];
    expect(refusals.filter((one) => one !== null && one.__typename !== "Refusal")).toEqual([]);
    expect(numbersIn(JSON.stringify(refusals), [...SECRETS, ...DERIVED])).toEqual([]);

    const who = actingAs(server.dataSource, editor.user);
    granted(await storeReading(who, submitted.id, submitted.fields));
    const after = await leaks(editor.agent);
    for (const secret of Object.values(FIRST)) {
      expect(after.some((leak) => leak.startsWith(`${secret} in review `))).toBe(true);
    }
    // The other editor has read nothing, and neither has anybody else.
    expect(await leaks(other.agent)).toEqual([]);
    expect(await leaks(server.agent())).toEqual([]);
    expect(numbersIn(await mailsAndEvents(), SECRETS)).toEqual([]);
  });

  it("closes a read and returned revision again while its answer waits unread", async () => {
    const { contributor, editor, other } = await everybody();
    const hers = actingAs(server.dataSource, contributor.user);
    const his = actingAs(server.dataSource, editor.user);
    const first = await buildSubmission(server.dataSource, contributor.user, FIRST);
    granted(await claim(his, first.id));
    const read = granted(await storeReading(his, first.id, { ...first.fields, minus: "0.16183" }));
    granted(
      await returnSubmission(
        his,
        first.id,
        read.version,
        [{ field: "minus", text: COMMENT }],
        null,
      ),
    );
    // Until the answer comes, the editor may look at what they read.
    expect((await leaks(editor.agent)).some((leak) => leak.includes("in review"))).toBe(true);

    const draft = granted(await reviseSubmission(hers, first.id));
    const [comment] = await server.dataSource.query("SELECT id FROM field_comment");
    const saved = granted(
      await saveDraft(hers, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, ...SECOND, printedText: Object.values(SECOND).join(" ") },
        commentAnswers: [{ commentId: comment.id, answer: ANSWER }],
      }),
    );
    granted(await submitDraft(hers, draft.id, saved.version, true));

    expect(await leaks(editor.agent)).toEqual([]);
    expect(await leaks(other.agent)).toEqual([]);
    granted(await claim(his, draft.id));
    expect(await leaks(editor.agent)).toEqual([]);
    expect(await confirms(editor.agent)).toEqual([]);

    granted(await storeReading(his, draft.id, { ...draft.fields, ...SECOND }));
    const after = await leaks(editor.agent);
    expect(after.some((leak) => leak.startsWith("0.43291 in review"))).toBe(true);
    expect(after.some((leak) => leak.startsWith("comment in review"))).toBe(true);
    expect(numbersIn(await mailsAndEvents(), SECRETS)).toEqual([]);
  });

  it("hides the approved revision, its lists, files and tables from the editor who reads the next one", async () => {
    const { contributor, editor, other } = await everybody();
    const paper = await buildCitation(server.dataSource, contributor.user);
    const hers = actingAs(server.dataSource, contributor.user);
    const first = await send(
      server.dataSource,
      contributor.user,
      await buildDraft(server.dataSource, contributor.user, FIRST, paper),
    );
    await approveAs(server.dataSource, other.user, first);
    const record = formatRecordNumber(first.constraintId);
    // An alternative of the same paper over the same data, so that links lead to the record.
    const sibling = await buildSubmission(
      server.dataSource,
      contributor.user,
      { z: "6.92", value: "0.33" },
      paper,
    );
    await approveAs(server.dataSource, other.user, sibling);
    await buildTable(server.dataSource, contributor.user, {
      name: "Both",
      filter: {},
      out: [{ number: formatRecordNumber(sibling.constraintId), reason: "same sightline" }],
    });
    // What became of a record may quote its numbers, too.
    granted(
      await recordNotice(actingAs(server.dataSource, editor.user), {
        number: record,
        kind: "erratum",
        reason: `The printed ${FIRST.value} has a misprint, says the journal.`,
      }),
    );
    // Approved: public, and the walk finds it.
    expect((await leaks(editor.agent)).some((leak) => leak.includes("in constraints "))).toBe(true);

    const inPublic = await leaks(server.agent());
    expect(inPublic.some((leak) => leak.includes("in fittingTable "))).toBe(true);
    const files = [
      /\/api\/constraints\.csv$/,
      /\/api\/tables\/\w+\.csv/,
      /\/api\/tables\/\w+\.json/,
    ];
    for (const file of files) expect(inPublic.some((leak) => file.test(leak))).toBe(true);

    const draft = granted(await reviseSubmission(hers, first.id));
    const saved = granted(
      await saveDraft(hers, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, ...SECOND, printedText: Object.values(SECOND).join(" ") },
      }),
    );
    granted(await submitDraft(hers, draft.id, saved.version, true));
    // Unclaimed: the approved revision is public, the new one is not.
    const before = await leaks(editor.agent);
    expect(before.some((leak) => leak.startsWith("0.43291"))).toBe(false);

    const his = actingAs(server.dataSource, editor.user);
    granted(await claim(his, draft.id));
    expect(await leaks(editor.agent)).toEqual([]);
    expect(await confirms(editor.agent)).toEqual([]);
    const links = await server.graphql(
      editor.agent,
      "{ constraints { constraints { sharesDataWith { number } } } fittingTables { rows { number reason } } }",
    );
    expect(JSON.stringify(links.data.constraints)).not.toContain(record);
    // The others go on seeing it.
    expect((await leaks(other.agent)).some((leak) => leak.startsWith("0.41637"))).toBe(true);

    granted(await storeReading(his, draft.id, { ...draft.fields, ...SECOND }));
    expect((await leaks(editor.agent)).some((leak) => leak.includes("in constraints "))).toBe(true);
  });

  it("gives no words about a record that the editor is reading in the findings of another", async () => {
    const { contributor, editor, other } = await everybody();
    const paper = await buildCitation(server.dataSource, contributor.user);
    const first = await buildSubmission(server.dataSource, contributor.user, FIRST, paper);
    await approveAs(server.dataSource, other.user, first);
    const record = formatRecordNumber(first.constraintId);
    const hers = actingAs(server.dataSource, contributor.user);
    const his = actingAs(server.dataSource, editor.user);
    // A near-duplicate, which must be answered and names the record.
    const twin = await buildSubmission(server.dataSource, contributor.user, FIRST, paper);
    expect(JSON.stringify(twin.findings)).toContain(record);
    const draft = granted(await reviseSubmission(hers, first.id));
    const saved = granted(
      await saveDraft(hers, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, ...SECOND, printedText: Object.values(SECOND).join(" ") },
        answers: twin.findings.map(({ code }) => ({ code, answer: "Yes." })),
      }),
    );
    const next = await submitDraft(hers, draft.id, saved.version, true);
    granted(next);
    granted(await claim(his, draft.id));
    granted(await claim(his, twin.id));
    granted(await storeReading(his, twin.id, twin.fields));

    const seen = await server.graphql(
      editor.agent,
      "query ($id: ID!) { review(id: $id) { findings { code message } } }",
      { id: twin.id },
    );
    const messages: string[] = seen.data.review.findings.map(
      ({ message }: { message: string }) => message,
    );
    expect(messages.join(" ")).not.toContain(record);
    expect(messages.some((message) => message.includes("reading yourself"))).toBe(true);

    // As a contributor this editor's own check compares with nothing of that record, either.
    const probe = await server.graphql(
      editor.agent,
      "query ($fields: ConstraintFieldsInput!, $citationId: ID) { checkFields(fields: $fields, citationId: $citationId) { message } }",
      { fields: first.fields, citationId: paper.id },
    );
    expect(probe.errors).toBeUndefined();
    expect(JSON.stringify(probe)).not.toContain(record);
    const open = await server.graphql(
      contributor.agent,
      "query ($fields: ConstraintFieldsInput!, $citationId: ID) { checkFields(fields: $fields, citationId: $citationId) { message } }",
      { fields: first.fields, citationId: paper.id },
    );
    expect(JSON.stringify(open)).toContain(record);
  });
});
