import { EventRecord } from "~server/event/event.entity";
import { loadTableFile } from "~server/table/table.service";
import { SavedTable } from "~server/table/table.entity";
import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const TABLE = `slug name owner ownedByMe digest rowsIn rowsOut filter lastEvent { sequence digest }
  rows { number included reason proposed }
  constraints { number ordinal quotable submittedBy readBy fields { value } citation { key title bibtex } }`;

describe("fitting tables", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  const save = async (agent: Agent, input: object) => {
    const { data, errors } = await server.graphql(
      agent,
      `mutation ($input: SaveTableInput!) { saveTable(input: $input) {
        __typename ... on Refusal { code message field } ... on FittingTable { ${TABLE} } } }`,
      { input },
    );
    if (errors) throw new Error(errors[0]?.message);
    return data.saveTable;
  };
  const load = async (agent: Agent, slug: string) =>
    (
      await server.graphql(agent, `query ($slug: ID!) { fittingTable(slug: $slug) { ${TABLE} } }`, {
        slug,
      })
    ).data.fittingTable;

  async function two() {
    const contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    const editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    const tag = `Sample ${contributor.user.id}`;
    const revisions = [];
    for (const [z, value] of [
      ["6.2", "0.21"],
      ["7.4", "0.52"],
    ] as const) {
      revisions.push(
        await buildApproved(server.dataSource, contributor.user, editor.user, {
          z,
          value,
          dataUsed: [`${tag} ${z}`],
        }),
      );
    }
    const [first, second] = revisions.map((revision) => formatRecordNumber(revision.constraintId));
    if (!first || !second) throw new Error("two records were expected");
    return { contributor, editor, revisions, first, second, filter: { text: contributor.user.id } };
  }

  it("are saved by any signed-in person and read by everybody, in the order of redshift", async () => {
    const { first, second, filter } = await two();
    const reader = await server.signedIn([], { nameOnPapers: "Sefa Lornhill" });
    const saved = await save(reader.agent, {
      name: "  My   table ",
      filter,
      rows: [
        { number: second, included: false, reason: "I trust it less" },
        { number: first, included: true, reason: "ignored" },
      ],
    });
    expect(saved).toMatchObject({
      __typename: "FittingTable",
      name: "My table",
      owner: "Sefa Lornhill",
      ownedByMe: true,
      rowsIn: 1,
      rowsOut: 1,
      rows: [
        { number: first, included: true, reason: null, proposed: true },
        { number: second, included: false, reason: "I trust it less", proposed: false },
      ],
      constraints: [
        {
          number: first,
          submittedBy: "Ottla Firn",
          readBy: "Brisa Kelm",
          fields: { value: "0.21" },
        },
        { number: second, fields: { value: "0.52" } },
      ],
    });
    expect(saved.slug).toMatch(/^[a-z0-9]{12}$/);
    const seen = await load(server.agent(), saved.slug);
    expect({ ...seen, ownedByMe: true }).toEqual({ ...saved, __typename: undefined });
    expect(seen.ownedByMe).toBe(false);
  });

  it("refuse a row without a reason, none at all, a strange and a missing one, and a bad name", async () => {
    const { contributor, first, second, filter } = await two();
    const rows = [
      { number: first, included: true },
      { number: second, included: true },
    ];
    const base = { name: "Table", filter, rows };
    const refused = async (changes: object) =>
      (await save(contributor.agent, { ...base, ...changes })).code;
    expect(
      await refused({ rows: [rows[0], { number: second, included: false, reason: " " }] }),
    ).toBe("reason");
    expect(await refused({ rows: [] })).toBe("rows");
    expect(await refused({ rows: [rows[0], rows[0], rows[1]] })).toBe("rows");
    expect(await refused({ rows: [...rows, { number: "XX-1", included: true }] })).toBe("rows");
    expect(await refused({ rows: [...rows, { number: "FL-9999", included: true }] })).toBe("stale");
    expect(await refused({ rows: [rows[0]] })).toBe("stale");
    expect(await refused({ name: "  " })).toBe("name");
    expect(await refused({ name: "x".repeat(121) })).toBe("name");
    expect(
      await server.dataSource.manager.countBy(SavedTable, { ownerId: contributor.user.id }),
    ).toBe(0);
  });

  it("stay as they were saved when a record is revised", async () => {
    const { contributor, editor, revisions, first, second, filter } = await two();
    const rows = [
      { number: first, included: true },
      { number: second, included: true },
    ];
    const saved = await save(contributor.agent, { name: "Kept", filter, rows });
    const [old] = revisions;
    if (!old) throw new Error("a record was expected");
    const hers = actingAs(server.dataSource, contributor.user);
    const draft = granted(await reviseSubmission(hers, old.id));
    const fields = { ...draft.fields, value: "0.22", printedText: "0.22 +0.12 -0.15 at 6.2" };
    const kept = granted(await saveDraft(hers, { id: draft.id, version: 1, fields }));
    const submitted = granted(await submitDraft(hers, draft.id, kept.version, true));
    await approveAs(server.dataSource, editor.user, submitted);

    expect(await load(contributor.agent, saved.slug)).toEqual({ ...saved, __typename: undefined });
    const again = await save(contributor.agent, { name: "Newer", filter, rows });
    expect(again.constraints[0]).toMatchObject({ ordinal: 2, fields: { value: "0.22" } });
    expect(again.digest).not.toBe(saved.digest);
  });

  it("have a digest over what they say: the same choices give the same one, whoever saves them when", async () => {
    const { contributor, editor, first, second, filter } = await two();
    const rows = [
      { number: first, included: true },
      { number: second, included: false, reason: "too dim" },
    ];
    const one = await save(contributor.agent, { name: "One", filter, rows });
    const other = await save(editor.agent, { name: "Other", filter, rows: [...rows].reverse() });
    expect(other.digest).toBe(one.digest);
    expect(other.slug).not.toBe(one.slug);
    const changed = await save(contributor.agent, {
      name: "One",
      filter,
      rows: [rows[0], { ...rows[1], reason: "too faint" }],
    });
    expect(changed.digest).not.toBe(one.digest);
  });

  it("keep the reason of a row taken in against the proposal, and refuse one without", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const word = `Shared ${contributor.user.id}`;
    const numbers: string[] = [];
    for (const z of ["6.2", "7.4"]) {
      const { constraintId } = await buildApproved(
        server.dataSource,
        contributor.user,
        editor.user,
        { z, dataUsed: [word] },
      );
      numbers.push(formatRecordNumber(constraintId));
    }
    const input = (reason: string | null) => ({
      name: "Both",
      filter: { text: word },
      rows: numbers.map((number) => ({ number, included: true, reason })),
    });
    for (const nothing of [null, "  "]) {
      expect(await save(contributor.agent, input(nothing))).toMatchObject({
        __typename: "Refusal",
        code: "reason",
        field: "rows",
        message: `${numbers[1]} is proposed to be left out: say why it is in all the same.`,
      });
    }
    const saved = await save(contributor.agent, input("Disjoint halves of it"));
    expect(saved.rows).toEqual([
      { number: numbers[0], included: true, reason: null, proposed: true },
      { number: numbers[1], included: true, reason: "Disjoint halves of it", proposed: false },
    ]);
  });

  it("never take a qualitative statement in", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const { constraintId } = await buildApproved(server.dataSource, contributor.user, editor.user, {
      kind: "qualitative",
      value: null,
      plus: null,
      minus: null,
      level: null,
      estimator: null,
      dataUsed: [`Words ${contributor.user.id}`],
    });
    const number = formatRecordNumber(constraintId);
    expect(
      await save(contributor.agent, {
        name: "Words",
        filter: { text: `Words ${contributor.user.id}` },
        rows: [{ number, included: true, reason: "I like it" }],
      }),
    ).toMatchObject({
      code: "qualitative",
      message: `${number} is qualitative: shown, never fitted.`,
    });
  });

  it("are deleted by their owner only; the address then says that it is gone", async () => {
    const { contributor, editor, first, second, filter } = await two();
    const rows = [
      { number: first, included: true },
      { number: second, included: true },
    ];
    const { slug } = await save(contributor.agent, { name: "Short-lived", filter, rows });
    const drop = async (agent: Agent) =>
      (
        await server.graphql(
          agent,
          "mutation ($slug: ID!) { deleteTable(slug: $slug) { __typename ... on Refusal { code } } }",
          { slug },
        )
      ).data.deleteTable;
    expect(await drop(editor.agent)).toMatchObject({ code: "notFound" });
    expect(await drop(contributor.agent)).toMatchObject({ __typename: "Done" });
    expect(await drop(contributor.agent)).toMatchObject({ code: "notFound" });
    expect(await load(contributor.agent, slug)).toBeNull();
    expect(await loadTableFile({ database: server.dataSource, viewer: null }, slug)).toEqual({
      found: "deleted",
    });
    expect(await loadTableFile({ database: server.dataSource, viewer: null }, "never")).toEqual({
      found: "nothing",
    });
    const kinds = (
      await server.dataSource.manager.findBy(EventRecord, { subject: `table:${slug}` })
    ).map((event) => event.kind);
    expect(kinds).toEqual(["table.saved", "table.deleted"]);
  });
});
