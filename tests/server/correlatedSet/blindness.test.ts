import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { EventRecord } from "~server/event/event.entity";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { cutRelease } from "~server/release/release.service";
import { claim } from "~server/review/review.service";
import { saveRecipe } from "~server/table/version.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import { actingAs, buildApproved, buildCitation, granted } from "../../factories/constraint";
import { numbersIn, walkEverything } from "../review/walk";
import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { setsOf } from "./sets";

/** Entries that occur nowhere but in the matrix: one of them anywhere is a leak. */
const MATRIX = [["0.0092163"], ["0.0051847", "0.0092416"]];
const SECRETS = MATRIX.flat();
/** Its correlation, 0.0051847 / √(0.0092163 · 0.0092416), as a table or a release would hold it. */
const RHO = /0\.56178/;
const COMMENT = "Not 0.0051847 but something else";

// A walk asks some hundred questions; a busy machine takes its time over them.
jest.setTimeout(300_000);

describe("blindness of correlated sets", () => {
  let server: TestServer;
  beforeEach(async () => {
    server = await startTestServer();
  });
  afterEach(() => server.stop());

  async function story() {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    // Every role at once: none of them may give more sight of numbers.
    const editor = await server.signedIn(["contributor", "editor", "maintainer"], {
      nameOnPapers: "Brisa Kelm",
    });
    const other = await server.signedIn(["editor"], { nameOnPapers: "Tove Aldrin" });
    const paper = await buildCitation(server.dataSource, contributor.user);
    const revisions = [];
    for (const z of ["6.6", "7.2"]) {
      revisions.push(
        await buildApproved(
          server.dataSource,
          contributor.user,
          other.user,
          { z, value: "0.4", plus: "0.096", minus: "0.096" },
          paper,
        ),
      );
    }
    const members = revisions.map(({ constraintId }) => formatRecordNumber(constraintId));
    const hers = setsOf(server, contributor.agent);
    const content = {
      label: "Two bins",
      note: `the text says ${SECRETS.join(" and ")}`,
      members,
      matrixKind: "covariance" as const,
      triangle: MATRIX,
      place: "Table 5",
    };
    const saved = await hers.save(await hers.start(paper.id, members), content);
    const { number } = await hers.submit(saved.number, saved.version);
    return { contributor, editor, other, paper, revisions, members, hers, content, number };
  }

  /** Where a person finds the matrix, asking everything there is. */
  async function leaks(agent: Agent): Promise<string[]> {
    const rows = async (sql: string): Promise<string[]> =>
      ((await server.dataSource.query(sql)) as { v: unknown }[]).map(({ v }) => String(v));
    const records = (await rows("SELECT id v FROM constraint_record")).map(Number);
    const sets = (await rows("SELECT id v FROM correlated_set")).map(Number);
    const slugs = await rows("SELECT slug v FROM fitting_table");
    const releases = await rows("SELECT number v FROM registry_release");
    const files = [
      ...slugs.flatMap((slug) => ["csv", "json", "bib"].map((end) => `/api/tables/${slug}.${end}`)),
      ...releases.map((number) => `/api/releases/${number}.json`),
    ];
    const answers = await walkEverything(
      server,
      agent,
      {
        ids: [
          ...(await rows("SELECT id v FROM citation")),
          ...(await rows("SELECT id v FROM set_reading")),
          ...slugs,
        ],
        guesses: ["FLS-", "0.0051847"],
        contents: [],
        numbers: [...records.map(formatRecordNumber), ...sets.map(formatSetNumber)],
      },
      ["/api/constraints.csv", "/api/constraints.bib", ...files],
    );
    return answers.flatMap(({ asked, text }) => [
      ...numbersIn(text, SECRETS)
        .filter((number) => !numbersIn(asked, [number]).length)
        .map((number) => `${number} in ${asked}`),
      ...(text.includes("something else") ? [`comment in ${asked}`] : []),
      ...(RHO.test(text) ? [`ρ in ${asked}`] : []),
    ]);
  }

  async function mailsAndEvents(): Promise<string> {
    const mails = await server.dataSource.manager.find(OutboxMail);
    const events = await server.dataSource.manager.find(EventRecord);
    return JSON.stringify([mails, events]);
  }

  it("keeps a matrix from an editor until their reading is stored", async () => {
    const { contributor, editor, other, number } = await story();
    const own = await leaks(contributor.agent);
    for (const secret of SECRETS) {
      expect(own.some((leak) => leak.startsWith(`${secret} in mySets`))).toBe(true);
      expect(own.some((leak) => leak.startsWith(`${secret} in correlatedSet `))).toBe(true);
    }
    expect(await leaks(editor.agent)).toEqual([]);
    const his = setsOf(server, editor.agent);
    const { item } = await his.claim(number);
    expect(await leaks(editor.agent)).toEqual([]);
    const refusals = [
      await his.read(number, [["0.01"], ["", ""]], "covariance"),
      await his.correct(number, { row: 1, column: 0, text: "1", why: "so" }),
      await his.approve(number, item.version),
      await his.giveBack(number, item.version, ""),
      await his.revise(number),
      await his.discard(number, item.version),
      await his.withdraw(number, item.version, "so"),
    ];
    expect(refusals.map(({ __typename }) => __typename)).toEqual(refusals.map(() => "Refusal"));
    expect(numbersIn(JSON.stringify(refusals), SECRETS)).toEqual([]);
    expect(numbersIn(await mailsAndEvents(), SECRETS)).toEqual([]);

    await his.read(number, MATRIX, "covariance");
    const after = await leaks(editor.agent);
    for (const secret of SECRETS) {
      expect(after.some((leak) => leak.startsWith(`${secret} in setReview`))).toBe(true);
    }
    expect(await leaks(other.agent)).toEqual([]);
    expect(await leaks(server.agent())).toEqual([]);
    expect(numbersIn(await mailsAndEvents(), SECRETS)).toEqual([]);
  });

  it("closes a read and returned set again while its answer waits unread", async () => {
    const { editor, hers, content, number } = await story();
    const his = setsOf(server, editor.agent);
    await his.claim(number);
    const read = await his.read(number, [["0.0092163"], ["0.0051", "0.0092416"]], "covariance");
    await his.giveBack(number, read.item.version, COMMENT);
    expect((await leaks(editor.agent)).some((leak) => leak.includes("in setReview"))).toBe(true);

    const next = await hers.revise(number);
    const saved = await hers.save(next, content);
    await hers.submit(next.number, saved.version);
    expect(await leaks(editor.agent)).toEqual([]);
    await his.claim(next.number);
    expect(await leaks(editor.agent)).toEqual([]);
    await his.read(next.number, MATRIX, "covariance");
    expect((await leaks(editor.agent)).some((leak) => leak.startsWith("comment in"))).toBe(true);
  });

  it("hides an approved set from the editor who reads one of its records blind", async () => {
    const { contributor, editor, other, revisions, number } = await story();
    const theirs = setsOf(server, other.agent);
    await theirs.claim(number);
    const { item } = await theirs.read(number, MATRIX, "covariance");
    await theirs.approve(number, item.version);
    const seen = await leaks(editor.agent);
    expect(seen.some((leak) => leak.includes("in correlatedSets"))).toBe(true);

    const her = actingAs(server.dataSource, contributor.user);
    const draft = granted(await reviseSubmission(her, revisions[0]!.id));
    const saved = granted(
      await saveDraft(her, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, remark: "Another page." },
        answers: draft.answers.map(({ code, answer }) => ({ code, answer })),
      }),
    );
    granted(await submitDraft(her, draft.id, saved.version, true));
    granted(await claim(actingAs(server.dataSource, editor.user), draft.id));
    // A variance is an error squared.
    expect(await leaks(editor.agent)).toEqual([]);
    expect((await leaks(other.agent)).some((leak) => leak.includes("in correlatedSets"))).toBe(
      true,
    );
  });

  it("hides an approved set from the editor who reads the one that follows it", async () => {
    const { contributor, editor, other, hers, content, number } = await story();
    const theirs = setsOf(server, other.agent);
    await theirs.claim(number);
    const { item } = await theirs.read(number, MATRIX, "covariance");
    await theirs.approve(number, item.version);
    // A saved table and a release that hold it.
    const all = { filter: {} };
    const proposal = await hers.propose(all);
    const taken = proposal.decisions.map(({ id, proposed }: { id: string; proposed: string }) => ({
      id,
      option: proposed,
      byDefault: true,
    }));
    const name = "Both bins";
    const recipe = { ...all, decisions: taken };
    granted(
      await saveRecipe(actingAs(server.dataSource, contributor.user), {
        name,
        visibility: "public",
        recipe,
      }),
    );
    const keeper = await server.signedIn(["maintainer"]);
    granted(await cutRelease(actingAs(server.dataSource, keeper.user), "The first one."));
    const next = await hers.revise(number);
    const saved = await hers.save(next, content);
    await hers.submit(next.number, saved.version);
    // Unclaimed: the approved one is public, alone and in what holds it.
    const open = await leaks(editor.agent);
    for (const place of [
      "correlatedSets",
      "tableProposal",
      "fittingTable ",
      "/api/tables/",
      "/api/releases/",
    ]) {
      expect(open.some((leak) => leak.includes(`in ${place}`))).toBe(true);
    }
    await setsOf(server, editor.agent).claim(next.number);
    expect(await leaks(editor.agent)).toEqual([]);
    expect((await leaks(contributor.agent)).some((leak) => leak.includes("in mySets"))).toBe(true);
  });
});
