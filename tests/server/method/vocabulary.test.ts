import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { EventRecord } from "~server/event/event.entity";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";

import {
  actingAs,
  buildApproved,
  buildDraft,
  buildSubmission,
  granted,
  send,
} from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const PARTS = `tag family name definition caution aliases neverIndependent position retiredInto
  version constraintCount`;
const RESULT = `__typename ... on Refusal { code message field } ... on MethodTag { ${PARTS} }`;

interface Method {
  tag: string;
  family: string;
  name: string;
  retiredInto: string | null;
  version: number;
  constraintCount: number;
}

describe("the method vocabulary", () => {
  let server: TestServer;
  type Person = Awaited<ReturnType<TestServer["signedIn"]>>;
  let maintainer: Person;
  let contributor: Person;
  let editor: Person;
  let stranger: Agent;
  let place = 0;

  beforeAll(async () => {
    server = await startTestServer();
    maintainer = await server.signedIn(["maintainer"], { nameOnPapers: "Wim Vloedgraaf" });
    contributor = await server.signedIn(["contributor"]);
    editor = await server.signedIn(["editor"]);
    stranger = server.agent();
  });
  afterAll(() => server.stop());

  const call = async (query: string, variables: object, agent = maintainer.agent) => {
    const { data, errors } = await server.graphql(agent, query, variables);
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return errors ? errors[0]?.extensions.code : (Object.values(data)[0] as any);
  };
  const all = (): Promise<Method[]> => call(`{ methodVocabulary { ${PARTS} } }`, {}, stranger);
  const one = async (tag: string): Promise<Method> => {
    const found = (await all()).find((method) => method.tag === tag);
    if (!found) throw new Error(`there is no ${tag}`);
    return found;
  };
  const add = (input: object) =>
    call(`mutation ($input: MethodTagInput!) { addMethodTag(input: $input) { ${RESULT} } }`, {
      input: { aliases: [], neverIndependent: false, position: 500, ...input },
    });
  const edit = async (tag: string, input: object, version?: number) => {
    const { retiredInto: _into, version: now, constraintCount: _count, ...words } = await one(tag);
    return call(
      `mutation ($input: MethodTagInput!, $version: Int!) {
        changeMethodTag(input: $input, version: $version) { ${RESULT} } }`,
      { input: { ...words, ...input }, version: version ?? now },
    );
  };
  const retire = async (tag: string, into: string, version?: number) =>
    call(
      `mutation ($tag: ID!, $version: Int!, $into: ID!) {
        retireMethodTag(tag: $tag, version: $version, into: $into) { ${RESULT} } }`,
      { tag, into, version: version ?? (await one(tag)).version },
    );
  /** Fields that no other record of this test comes near. */
  const next = (methodTags: string[]) => {
    place += 1;
    return { z: (5 + place * 0.3).toFixed(1), dataUsed: [`Field ${place}`], methodTags };
  };
  const approved = (...methodTags: string[]): Promise<Revision> =>
    buildApproved(server.dataSource, contributor.user, editor.user, next(methodTags));
  const numberOf = (revision: Revision): string => formatRecordNumber(revision.constraintId);
  const found = async (filter: object): Promise<string[]> => {
    const page = await call(
      `query ($filter: ConstraintFilter) {
        constraints(filter: $filter) { constraints { number } } }`,
      { filter },
      stranger,
    );
    return page.constraints.map(({ number }: { number: string }) => number);
  };
  const text = async (address: string): Promise<string> => {
    const { status, text: body } = await stranger.get(address);
    expect(status).toBe(200);
    return body;
  };
  const events = async (kind: string) =>
    (
      await server.dataSource.manager.find(EventRecord, {
        where: { kind },
        order: { sequence: "ASC" },
      })
    ).map(({ subject, detail, actorId }) => ({ subject, detail, actorId }));

  it("starts with the trade's methods, two of them never independent", async () => {
    const methods = await all();
    expect(methods.map(({ tag }) => tag)).toEqual(START_VOCABULARY.map(({ tag }) => tag));
    expect(
      methods
        .filter((method) => (method as { neverIndependent?: boolean }).neverIndependent)
        .map(({ tag }) => tag),
    ).toEqual(["sourceBudget", "jointInference"]);
  });

  it("takes a method that a maintainer adds, by which records are then named and found", async () => {
    const words = {
      tag: "metalLines",
      family: "forestOpacity",
      name: "  Metal   lines ",
      definition: "Ratios of low to high ions\nin absorption.",
      caution: "Depends on the enrichment.",
      aliases: ["oxygen lines", "Oxygen-lines", "metal lines"],
    };
    const before = await buildDraft(server.dataSource, contributor.user, next(["metalLines"]));
    const owner = actingAs(server.dataSource, contributor.user);
    expect(await submitDraft(owner, before.id, before.version, true)).toMatchObject({
      code: "findings",
      message: '"metalLines" is not in the method vocabulary.',
    });

    expect(await add(words)).toMatchObject({
      __typename: "MethodTag",
      name: "Metal lines",
      definition: "Ratios of low to high ions in absorption.",
      aliases: ["oxygen lines"],
      version: 1,
      constraintCount: 0,
    });
    const record = await approved("metalLines");
    expect(await found({ tags: ["metalLines"] })).toEqual([numberOf(record)]);
    expect((await one("metalLines")).constraintCount).toBe(1);
    expect(await text("/api/constraints.csv?tag=metalLines")).toContain(numberOf(record));
    expect(await events("method.added")).toEqual([
      {
        subject: "method:metalLines",
        detail: { family: "forestOpacity", name: "Metal lines" },
        actorId: maintainer.user.id,
      },
    ]);
  });

  it.each([
    ["a tag that is no word", { tag: "Dark gaps" }, "tag", /camelCase/],
    ["a tag that is taken", { tag: "darkPixels" }, "tag", /word for Dark pixels already/],
    ["a name that is another's alias", { name: "KSZ" }, "name", /word for Kinetic SZ power/],
    ["an alias that is another's name", { aliases: ["near-zones"] }, "aliases", /Near zones/],
    ["no name", { name: " " }, "name", /1 to 60 characters/],
    ["a name without a letter", { name: "?!" }, "name", /a letter or a digit/],
    ["no definition", { definition: "" }, "definition", /1 to 200 characters/],
    ["a caution that is too long", { caution: "x".repeat(201) }, "caution", /1 to 200/],
    ["a place below zero", { position: -1 }, "position", /whole number/],
    [
      "too many aliases",
      { aliases: Array.from({ length: 41 }, (_, index) => `spelling ${index}`) },
      "aliases",
      /At most 40/,
    ],
  ])("refuses %s", async (_, input, field, message) => {
    const count = (await all()).length;
    expect(
      await add({
        tag: "another",
        family: "other",
        name: "Another",
        definition: "A definition.",
        caution: "A caution.",
        ...input,
      }),
    ).toMatchObject({
      __typename: "Refusal",
      code: "words",
      field,
      message: expect.stringMatching(message),
    });
    expect(await all()).toHaveLength(count);
  });

  it("changes words at once, and refuses a change of an older state", async () => {
    const { version } = await one("nearZones");
    expect(await edit("nearZones", { name: "Near zones of quasars" })).toMatchObject({
      name: "Near zones of quasars",
      version: version + 1,
    });
    expect(await edit("nearZones", { name: "Too late" }, version)).toMatchObject({ code: "stale" });
    expect((await one("nearZones")).name).toBe("Near zones of quasars");
    expect((await events("method.changed")).at(-1)).toEqual({
      subject: "method:nearZones",
      detail: { fields: ["name"], name: "Near zones of quasars" },
      actorId: maintainer.user.id,
    });
  });

  it("moves a method's records to its new family, also those that are still unread", async () => {
    const record = await approved("meanFreePath");
    const submitted = await buildSubmission(
      server.dataSource,
      contributor.user,
      next(["meanFreePath", "cmbPolarization"]),
    );
    expect(await found({ families: ["forestOpacity"] })).toContain(numberOf(record));
    await edit("meanFreePath", { family: "other" });
    expect(await found({ families: ["forestOpacity"] })).not.toContain(numberOf(record));
    expect(await found({ families: ["other"] })).toContain(numberOf(record));
    expect(
      await server.dataSource.manager.findOneByOrFail(Revision, { id: submitted.id }),
    ).toMatchObject({ families: ",cmb,other,", tags: ",cmbPolarization,meanFreePath," });
    expect((await events("method.changed")).at(-1)).toMatchObject({
      detail: { fields: ["family"], familyBefore: "forestOpacity", family: "other" },
    });
  });

  it("shows and finds the records of a retired method under the one that took it over", async () => {
    const old = await approved("twentyOneCmGlobal");
    const both = await approved("twentyOneCmForest", "twentyOneCmGlobal");
    expect(await found({ tags: ["twentyOneCmForest"] })).toEqual([numberOf(both)]);
    expect(await retire("twentyOneCmGlobal", "twentyOneCmForest")).toMatchObject({
      __typename: "MethodTag",
      tag: "twentyOneCmForest",
      constraintCount: 2,
    });
    const numbers = [numberOf(old), numberOf(both)];
    expect(await found({ tags: ["twentyOneCmForest"] })).toEqual(numbers);
    // Old addresses keep working.
    expect(await found({ tags: ["twentyOneCmGlobal"] })).toEqual(numbers);
    expect(await one("twentyOneCmGlobal")).toMatchObject({
      retiredInto: "twentyOneCmForest",
      constraintCount: 0,
    });
    const csv = await text("/api/constraints.csv?tag=twentyOneCmGlobal");
    for (const number of numbers) expect(csv).toContain(number);
    expect(csv).not.toMatch(/^FL.*twentyOneCmGlobal/m);

    // What the revision says is not rewritten.
    const kept = await server.dataSource.manager.findOneByOrFail(Revision, { id: both.id });
    expect(kept.fields.methodTags).toEqual(["twentyOneCmForest", "twentyOneCmGlobal"]);
    expect(kept).toMatchObject({ tags: ",twentyOneCmForest,", version: both.version });
    expect((await events("method.retired")).at(-1)).toEqual({
      subject: "method:twentyOneCmGlobal",
      detail: { into: "method:twentyOneCmForest", name: "21-cm sky average" },
      actorId: maintainer.user.id,
    });
  });

  it("takes a draft that still carries a retired method, as the one that took it over", async () => {
    await retire("lineProfile", "equivalentWidths");
    const draft = await buildDraft(server.dataSource, contributor.user, next(["lineProfile"]));
    const submitted = await send(server.dataSource, contributor.user, draft);
    expect(submitted).toMatchObject({
      state: "submitted",
      families: ",lineStrength,",
      tags: ",equivalentWidths,",
    });
  });

  it("follows a method through two retirements", async () => {
    const record = await approved("thermalHistory");
    await retire("thermalHistory", "sourceBudget");
    await retire("sourceBudget", "jointInference");
    expect(await found({ tags: ["thermalHistory"] })).toContain(numberOf(record));
    expect(await found({ tags: ["jointInference"] })).toContain(numberOf(record));
  });

  it("retires nothing into itself, into a retired method or twice, and changes no retired one", async () => {
    expect(await retire("darkGaps", "darkGaps")).toMatchObject({ field: "into" });
    expect(await retire("darkGaps", "lineProfile")).toMatchObject({
      message: "Lyα line profile is retired itself.",
    });
    expect(await retire("darkGaps", "nothing")).toMatchObject({ field: "into" });
    expect(await retire("lineProfile", "darkGaps")).toMatchObject({ code: "retired" });
    expect(await edit("lineProfile", { name: "Again" })).toMatchObject({ code: "retired" });
    const { version } = await one("darkGaps");
    expect(await retire("darkGaps", "nearZones", version + 1)).toMatchObject({ code: "stale" });
    expect((await one("darkGaps")).retiredInto).toBeNull();
  });

  it("lets two maintainers who take one word at the same time not both have it", async () => {
    const words = { family: "other", definition: "A definition.", caution: "A caution." };
    const outcomes = await Promise.all(
      ["firstOfTwo", "secondOfTwo"].map((tag, index) =>
        add({ ...words, tag, name: `Two ${index}`, aliases: ["one and the same"] }),
      ),
    );
    expect(outcomes.map(({ __typename }) => __typename).sort()).toEqual(["MethodTag", "Refusal"]);
  });

  it("hears of what another process has changed", async () => {
    const record = await approved("kineticSz");
    const { manager } = server.dataSource;
    // As another process leaves the database: a changed method, and one change more.
    await manager.query("UPDATE method_tag SET family = 'other' WHERE tag = 'kineticSz'");
    await manager.query("UPDATE setting SET value = value + 1 WHERE name = 'vocabularyChanges'");
    const csv = await text(`/api/constraints.csv?q=${numberOf(record)}`);
    expect(csv).toMatch(new RegExp(`^${numberOf(record)}.*other.*kineticSz`, "m"));
  });

  it("changes no byte of a release or of a saved table", async () => {
    const record = await approved("darkPixels");
    const filter = { text: numberOf(record) };
    const release = (
      await call(`mutation { cutRelease(notes: "Before") { ... on Release { number } } }`, {})
    ).number;
    const { slug } = await call(
      `mutation ($input: SaveRecipeInput!) { saveRecipe(input: $input) {
        ... on Refusal { message } ... on FittingTable { slug } } }`,
      { input: { name: "Kept", visibility: "public", recipe: { filter, release } } },
    );
    const addresses = [
      ...["json", "csv", "ecsv", "txt"].map((kind) => `/api/releases/${release}.${kind}`),
      ...["csv", "json", "ecsv"].map((kind) => `/api/tables/${slug}.${kind}`),
    ];
    const before = await Promise.all(addresses.map(text));
    const proposal = () =>
      call(
        `query ($recipe: TableInput!) { tableProposal(recipe: $recipe) {
          ... on TableProposal { rows { number included } } } }`,
        { recipe: { filter: { families: ["darkPixels"] }, release } },
      );
    const [rows] = [await proposal()];
    expect(rows.rows).toHaveLength(1);

    await retire("darkPixels", "forestOpacity");
    expect(await found({ families: ["darkPixels"] })).toEqual([]);
    expect(await Promise.all(addresses.map(text))).toEqual(before);
    // A recipe over the release is followed in the words of the release.
    expect(await proposal()).toEqual(rows);
  });

  it("asks nobody for a new answer because a method was retired meanwhile", async () => {
    const record = await approved("emitterClustering");
    await retire("emitterClustering", "ionizedRegionSizes");
    const owner = actingAs(server.dataSource, contributor.user);
    const draft = granted(await reviseSubmission(owner, record.id));
    const fields = { ...draft.fields, methodTags: ["ionizedRegionSizes"] };
    const saved = granted(
      await saveDraft(owner, { id: draft.id, version: draft.version, fields, answers: [] }),
    );
    // The only difference is the word: there is nothing to send.
    expect(await submitDraft(owner, draft.id, saved.version, true)).toMatchObject({
      code: "unchanged",
    });
  });
});
