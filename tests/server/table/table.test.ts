import { EventRecord } from "~server/event/event.entity";
import { loadTableFile } from "~server/table/table.service";
import { SavedTable } from "~server/table/table.entity";
import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted } from "../../factories/constraint";
import { buildTable } from "../../factories/table";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const TABLE = `slug version name owner ownedByMe digest rowsIn rowsOut filter lastEvent { sequence digest }
  rows { number included reason proposed }
  constraints { number ordinal quotable submittedBy readBy fields { value } citation { key title bibtex } }`;

describe("fitting tables", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  const save = async (
    agent: Agent,
    {
      name,
      ...recipe
    }: { name: string; filter: object; release?: number; out?: object[]; decisions?: object[] },
  ) => {
    const { data, errors } = await server.graphql(
      agent,
      `mutation ($input: SaveRecipeInput!) { saveRecipe(input: $input) {
        __typename ... on Refusal { code message field } ... on FittingTable { ${TABLE} } } }`,
      { input: { name, visibility: "public", recipe } },
    );
    if (errors) throw new Error(errors[0]?.message);
    return data.saveRecipe;
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
      out: [{ number: second, reason: "I trust it less" }],
    });
    expect(saved).toMatchObject({
      __typename: "FittingTable",
      version: 1,
      name: "My table",
      owner: "Sefa Lornhill",
      ownedByMe: true,
      rowsIn: 1,
      rowsOut: 1,
      rows: [
        { number: first, included: true, reason: null, proposed: true },
        {
          number: second,
          included: false,
          reason: "Taken out: I trust it less",
          proposed: false,
        },
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

  it("refuse a row taken out without a reason or twice, none at all, a strange one, and a bad name", async () => {
    const { contributor, first, second, filter } = await two();
    const base = { name: "Table", filter };
    const refused = async (changes: object) =>
      (await save(contributor.agent, { ...base, ...changes })).code;
    const reason = "Not wanted";
    expect(await refused({ out: [{ number: second, reason: " " }] })).toBe("reason");
    expect(await refused({ out: [first, second].map((number) => ({ number, reason })) })).toBe(
      "rows",
    );
    expect(await refused({ out: [{ number: "XX-1", reason }] })).toBe("rows");
    expect(await refused({ name: "  " })).toBe("name");
    expect(await refused({ name: "x".repeat(121) })).toBe("name");
    expect(
      await server.dataSource.manager.countBy(SavedTable, { ownerId: contributor.user.id }),
    ).toBe(0);
  });

  it("stay as they were saved when a record is revised", async () => {
    const { contributor, editor, revisions, filter } = await two();
    const saved = await save(contributor.agent, { name: "Kept", filter });
    const [old] = revisions;
    if (!old) throw new Error("a record was expected");
    const hers = actingAs(server.dataSource, contributor.user);
    const draft = granted(await reviseSubmission(hers, old.id));
    const fields = { ...draft.fields, value: "0.22", printedText: "0.22 +0.12 -0.15 at 6.2" };
    const kept = granted(await saveDraft(hers, { id: draft.id, version: 1, fields }));
    const submitted = granted(await submitDraft(hers, draft.id, kept.version, true));
    await approveAs(server.dataSource, editor.user, submitted);

    expect(await load(contributor.agent, saved.slug)).toEqual({ ...saved, __typename: undefined });
    const again = await save(contributor.agent, { name: "Newer", filter });
    expect(again.constraints[0]).toMatchObject({ ordinal: 2, fields: { value: "0.22" } });
    expect(again.digest).not.toBe(saved.digest);
  });

  it("have a digest over what they say: the same choices give the same one, whoever saves them when", async () => {
    const { contributor, editor, second, filter } = await two();
    // A release holds still, while every saved table is an event of the log.
    const maintainer = await server.signedIn(["maintainer"]);
    const { data } = await server.graphql(
      maintainer.agent,
      'mutation { cutRelease(notes: "Fixed") { ... on Release { number } } }',
    );
    const release = data.cutRelease.number;
    const out = [{ number: second, reason: "too dim" }];
    const one = await save(contributor.agent, { name: "One", filter, release, out });
    const other = await save(editor.agent, { name: "Other", filter, release, out });
    expect(other.digest).toBe(one.digest);
    expect(other.slug).not.toBe(one.slug);
    const changed = await save(contributor.agent, {
      name: "One",
      filter,
      release,
      out: [{ number: second, reason: "too faint" }],
    });
    expect(changed.digest).not.toBe(one.digest);
  });

  it("keep a row that shares data with another out, and take it in with a reason only", async () => {
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
    const filter = { text: word };
    const { data } = await server.graphql(
      contributor.agent,
      "query ($recipe: TableInput!) { tableProposal(recipe: $recipe) { ... on TableProposal { decisions { id kind proposed options { code override } } } } }",
      { recipe: { filter } },
    );
    const [decision] = data.tableProposal.decisions;
    expect(decision).toMatchObject({ kind: "overlap", proposed: `keep:${numbers[0]}` });
    const override = decision.options.find((option: { override: boolean }) => option.override);
    const input = (reason: string) => ({
      name: "Both",
      filter,
      decisions: [{ id: decision.id, option: override.code, byDefault: false, reason }],
    });
    for (const nothing of ["", "  "]) {
      expect(await save(contributor.agent, input(nothing))).toMatchObject({
        __typename: "Refusal",
        code: "open",
      });
    }
    const saved = await save(contributor.agent, input("Disjoint halves of it"));
    expect(saved.rows).toEqual([
      { number: numbers[0], included: true, reason: null, proposed: false },
      { number: numbers[1], included: true, reason: null, proposed: false },
    ]);
  });

  it("never take a qualitative statement in", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const word = `Words ${contributor.user.id}`;
    const { constraintId } = await buildApproved(server.dataSource, contributor.user, editor.user, {
      kind: "qualitative",
      value: null,
      plus: null,
      minus: null,
      level: null,
      estimator: null,
      dataUsed: [word],
    });
    await buildApproved(server.dataSource, contributor.user, editor.user, {
      z: "6.9",
      dataUsed: [`${word} 2`],
    });
    const saved = await save(contributor.agent, { name: "Words", filter: { text: word } });
    expect(saved).toMatchObject({ rowsIn: 1, rowsOut: 1 });
    expect(saved.rows).toContainEqual(
      expect.objectContaining({
        number: formatRecordNumber(constraintId),
        included: false,
        reason: "Qualitative: shown, never fitted",
      }),
    );
  });

  it("say when weightings differ or an optical depth is among the rows", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const word = `Mixed ${contributor.user.id}`;
    const build = (z: string, more: object) =>
      buildApproved(server.dataSource, contributor.user, editor.user, {
        z,
        dataUsed: [`${word} ${z}`],
        ...more,
      });
    await build("6.1", {});
    await build("7.1", { weighting: "unknown" });
    const cautions = async (filter: object) => {
      const { slug } = await buildTable(server.dataSource, contributor.user, { filter });
      const { body } = await server.agent().get(`/api/tables/${slug}.json`);
      return (body.content.cautions as string[]).join(" ");
    };
    expect(await cautions({ text: word, zTo: 6.5 })).not.toMatch(/weightings|optical depth/);
    expect(await cautions({ text: word })).toContain("different weightings");
    await build("6.4", {
      ...{ quantity: "opticalDepth", species: null, scale: null, weighting: null, zRole: null },
      ...{ z: null, value: "0.061", plus: "0.008", minus: "0.008", estimator: "mean" },
      methodTags: ["cmbPolarization"],
    });
    expect(await cautions({ text: word })).toContain("came from a history family");
  });

  it("are deleted by their owner only; the address then says that it is gone", async () => {
    const { contributor, editor, filter } = await two();
    const { slug } = await save(contributor.agent, { name: "Short-lived", filter });
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
