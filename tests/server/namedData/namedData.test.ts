import type { Revision } from "~server/constraint/revision.entity";
import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { EventRecord } from "~server/event/event.entity";
import { claim } from "~server/review/review.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import {
  actingAs,
  approveAs,
  buildApproved,
  buildSubmission,
  granted,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

const PARTS = `slug name kind ra dec sexagesimal extent note version aliases constraintCount
  subsetOf { slug } contains { slug } overlaps { slug } constraints { number }`;
const RESULT = `__typename ... on Refusal { code message field } ... on NamedData { ${PARTS} }`;

describe("named data", () => {
  let server: TestServer;
  type Person = Awaited<ReturnType<TestServer["signedIn"]>>;
  let owner: Person;
  let editor: Person;
  let place = 0;
  beforeAll(async () => {
    server = await startTestServer();
    owner = await server.signedIn(["contributor"]);
    editor = await server.signedIn(["editor"]);
  });
  afterAll(() => server.stop());

  const number = (revision: Revision): string => formatRecordNumber(revision.constraintId);
  const next = (dataUsed: string[]) => {
    place += 1;
    return { z: (5 + place * 0.3).toFixed(2), dataUsed };
  };
  const using = (...dataUsed: string[]): Promise<Revision> =>
    buildApproved(server.dataSource, owner.user, editor.user, next(dataUsed));
  const call = async (query: string, variables: object, person: Person | null) => {
    const { data, errors } = await server.graphql(
      person?.agent ?? server.agent(),
      query,
      variables,
    );
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return errors ? errors[0]?.extensions.code : (Object.values(data)[0] as any);
  };
  const thing = (slug: string, person: Person | null = null) =>
    call(`query ($slug: ID!) { namedData(slug: $slug) { ${PARTS} } }`, { slug }, person);
  const names = async (text: string, person: Person | null = null): Promise<string[]> => {
    const found = await call(
      "query ($text: String) { namedDataList(text: $text) { name } }",
      { text },
      person,
    );
    return found.map((one: { name: string }) => one.name);
  };
  const edit = (input: object, person: Person | null = editor) =>
    call(
      `mutation ($input: NamedDataInput!) { editNamedData(input: $input) { ${RESULT} } }`,
      { input: { kind: "field", aliases: [], ...input } },
      person,
    );
  const merge = (slug: string, version: number, into: string) =>
    call(
      `mutation ($slug: ID!, $version: Int!, $into: ID!) {
        mergeNamedData(slug: $slug, version: $version, into: $into) { ${RESULT} } }`,
      { slug, version, into },
      editor,
    );
  const relate = (slug: string, relation: string, other: string) =>
    call(
      `mutation ($slug: ID!, $relation: DataRelation!, $other: ID!) {
        relateNamedData(slug: $slug, relation: $relation, other: $other) { ${RESULT} } }`,
      { slug, relation, other },
      editor,
    );
  const sharing = async (of: Revision) => {
    const record = await call(
      "query ($number: String!) { constraint(number: $number) { sharesDataWith { number via } } }",
      { number: number(of) },
      null,
    );
    return record.sharesDataWith;
  };

  it("makes things of names once a record that uses them is approved, not before", async () => {
    const submitted = await buildSubmission(
      server.dataSource,
      owner.user,
      next(["QF 0712+05", "Marram field"]),
    );
    expect(await names("marram")).toEqual([]);
    await approveAs(server.dataSource, editor.user, submitted);
    expect(await names("marram")).toEqual(["Marram field"]);
    expect(await thing("qf-0712-plus-05")).toMatchObject({
      name: "QF 0712+05",
      kind: "unknown",
      constraintCount: 1,
      constraints: [{ number: number(submitted) }],
    });
    // The same in another spelling is the same thing.
    const again = await using("qf0712+05");
    expect((await thing("qf-0712-plus-05")).constraintCount).toBe(2);
    expect(await sharing(again)).toEqual([{ number: number(submitted), via: "QF 0712+05" }]);
    const added = await server.dataSource.manager.findBy(EventRecord, { kind: "namedData.added" });
    expect(added.map(({ subject }) => subject)).toEqual([
      "data:qf-0712-plus-05",
      "data:marram-field",
    ]);
  });

  it("keeps what an editor says of a thing, with its place in both forms", async () => {
    await using("Sedge field");
    const { slug, version } = await thing("sedge-field");
    const kept = await edit({
      slug,
      version,
      name: "Sedge field",
      ra: "108.02",
      dec: "−5.5",
      extent: "1.2 square degrees",
      aliases: ["SF 1"],
    });
    expect(kept).toMatchObject({
      kind: "field",
      ra: "108.02",
      dec: "-5.5",
      sexagesimal: "07h12m04.80s −05°30′00.0″",
      aliases: ["SF 1"],
    });
    expect(await edit({ slug, version, name: "Sedge" })).toMatchObject({ code: "stale" });
    const wrong = (input: object) =>
      edit({ slug, version: kept.version, name: "Sedge field", ...input });
    expect(await wrong({ ra: "360", dec: "0" })).toMatchObject({
      code: "coordinates",
      field: "ra",
    });
    expect(await wrong({ ra: "12", dec: "90.5" })).toMatchObject({ field: "dec" });
    expect(await wrong({ ra: "12", dec: "" })).toMatchObject({ field: "dec" });
    expect(await wrong({ aliases: ["Marram FIELD"] })).toMatchObject({
      code: "taken",
      message: "“Marram field” is a name of Marram field already. Merge the two if they are one.",
    });
    expect(await edit({ slug, version: 1, name: "x" }, owner)).toBe("FORBIDDEN");
    expect(await edit({ slug, version: 1, name: "x" }, null)).toBe("UNAUTHENTICATED");
  });

  it("finds shared data through an alias, a part and a stated overlap, and says through which", async () => {
    const [whole, part, alias, other, apart] = [
      await using("Rush sample"),
      await using("QF 1415-22"),
      await using("Rush 9"),
      await using("Teasel field"),
      await using("Burdock field"),
    ];
    expect(await sharing(whole)).toEqual([]);
    const sightline = await thing("qf-1415-minus-22");
    const nine = await thing("rush-9");
    expect(await merge(nine.slug, nine.version, sightline.slug)).toMatchObject({
      name: "QF 1415-22",
      aliases: ["Rush 9"],
      constraintCount: 2,
    });
    expect(await relate(sightline.slug, "subsetOf", "rush-sample")).toMatchObject({
      subsetOf: [{ slug: "rush-sample" }],
    });
    expect(await relate("teasel-field", "overlaps", sightline.slug)).toMatchObject({
      overlaps: [{ slug: sightline.slug }],
    });
    expect(await sharing(whole)).toEqual([
      { number: number(part), via: "QF 1415-22, a part of Rush sample" },
      { number: number(alias), via: "QF 1415-22, a part of Rush sample" },
      { number: number(other), via: "QF 1415-22, which overlaps with Teasel field" },
    ]);
    expect(await sharing(apart)).toEqual([]);
    // The merged one's address leads to what it was merged into.
    expect((await thing("rush-9")).slug).toBe(sightline.slug);
    expect(await names("rush 9")).toEqual(["QF 1415-22"]);
  });

  it("takes a wrong merge back when the alias is taken out", async () => {
    const merged = await thing("qf-1415-minus-22");
    const { slug, version, name } = merged;
    await edit({ slug, version, name, kind: "sightline", aliases: [] });
    expect((await thing("rush-9")).name).toBe("Rush 9");
    expect((await thing("rush-9")).constraintCount).toBe(1);
    expect((await thing(slug)).constraintCount).toBe(1);
  });

  it("lets nothing be a part of itself, in words", async () => {
    await using("Inner", "Middle", "Outer");
    await relate("inner", "subsetOf", "middle");
    await relate("middle", "subsetOf", "outer");
    expect(await relate("outer", "subsetOf", "inner")).toMatchObject({
      code: "circle",
      message:
        "Nothing is a part of itself: Outer is a part of Inner, which is a part of Middle, which is a part of Outer.",
    });
    expect(await relate("middle", "overlaps", "inner")).toMatchObject({ code: "related" });
    expect(await relate("inner", "subsetOf", "inner")).toMatchObject({ code: "other" });
    const inner = await thing("inner");
    expect(await merge("inner", inner.version, "outer")).toMatchObject({ code: "circle" });
    const undone = await call(
      `mutation { unrelateNamedData(slug: "middle", other: "outer") { ${RESULT} } }`,
      {},
      editor,
    );
    expect(undone.subsetOf).toEqual([]);
  });

  it("keeps one of two relations stated at once that would close a circle", async () => {
    await using("Left", "Right");
    const outcomes = await Promise.all([
      relate("left", "subsetOf", "right"),
      relate("right", "subsetOf", "left"),
    ]);
    expect(outcomes.map((one) => one.__typename).sort()).toEqual(["NamedData", "Refusal"]);
  });

  it("hides from an editor what only a record tells that they are reading blind", async () => {
    const first = await using("Lone heath", "Marram field");
    const reader = await server.signedIn(["editor"]);
    expect(await names("lone heath", reader)).toEqual(["Lone heath"]);
    const who = actingAs(server.dataSource, owner.user);
    const draft = granted(await reviseSubmission(who, first.id));
    const saved = granted(
      await saveDraft(who, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, remark: "One more." },
      }),
    );
    granted(await submitDraft(who, saved.id, saved.version, true));
    granted(await claim(actingAs(server.dataSource, reader.user), draft.id));
    expect(await names("lone heath", reader)).toEqual([]);
    expect(await thing("lone-heath", reader)).toBeNull();
    expect((await thing("marram-field", reader)).constraintCount).toBe(1);
    expect((await thing("marram-field")).constraintCount).toBe(2);
  });
});
