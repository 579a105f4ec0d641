import { RevisionLink } from "~server/constraint/revisionLink.entity";
import type { Revision } from "~server/constraint/revision.entity";
import { Refusal } from "~server/common/outcomes";
import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { approve, claim, storeReading } from "~server/review/review.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { ConstraintFields } from "~shared/statement/fields";

import {
  actingAs,
  approveAs,
  buildApproved,
  buildDraft,
  buildSubmission,
  granted,
  send,
  tickAll,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

describe("relations between records", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  type Person = Awaited<ReturnType<TestServer["signedIn"]>>;
  let owner: Person;
  let editor: Person;
  let row = 0;
  beforeAll(async () => {
    owner = await server.signedIn(["contributor"]);
    editor = await server.signedIn(["editor"]);
  });

  const number = (revision: Revision): string => formatRecordNumber(revision.constraintId);
  /** Statements far enough apart that no finding speaks of another. */
  const apart = (fields: Partial<ConstraintFields>): Partial<ConstraintFields> => {
    row += 1;
    return { z: (5 + row * 0.3).toFixed(2), dataUsed: [`Sightline ${row}`], ...fields };
  };
  const approved = (fields: Partial<ConstraintFields> = {}): Promise<Revision> =>
    buildApproved(server.dataSource, owner.user, editor.user, apart(fields));

  /** A later revision of an approved record with other fields, as its owner sends it. */
  async function revised(revision: Revision, fields: Partial<ConstraintFields>): Promise<Revision> {
    const who = actingAs(server.dataSource, owner.user);
    const draft = granted(await reviseSubmission(who, revision.id));
    const content = { ...draft.fields, ...fields };
    const saved = granted(
      await saveDraft(who, { id: draft.id, version: draft.version, fields: content }),
    );
    return send(server.dataSource, owner.user, saved);
  }

  /** The editor reads it and tries to approve it. */
  async function decide(submitted: Revision): Promise<string> {
    const who = actingAs(server.dataSource, editor.user);
    granted(await claim(who, submitted.id));
    const read = granted(await storeReading(who, submitted.id, submitted.fields));
    await tickAll(who, read);
    const outcome = await approve(who, submitted.id, read.version, null);
    return outcome instanceof Refusal ? outcome.message : "approved";
  }

  async function submitRefusal(
    fields: Partial<ConstraintFields>,
  ): Promise<[string, string | null]> {
    const draft = await buildDraft(server.dataSource, owner.user, apart(fields));
    const outcome = await submitDraft(
      actingAs(server.dataSource, owner.user),
      draft.id,
      draft.version,
      true,
    );
    return outcome instanceof Refusal ? [outcome.message, outcome.field] : ["submitted", null];
  }

  const life = async (of: string, person: Person | null = null) => {
    const { data } = await server.graphql(
      person?.agent ?? server.agent(),
      `query ($number: String!) { recordLife(number: $number) {
        constraint { number state supersededBy }
        notices { kind reason by replacedBy endedAt endedReason }
        relations { relation inverse number state }
        conditionChains { through on }
        happened { kind subject replacedBy } } }`,
      { number: of },
    );
    return data.recordLife;
  };

  it("refuses numbers that are none, of no approved record, and the record's own", async () => {
    expect(await submitRefusal({ supersedes: ["the older one"] })).toEqual([
      "Supersedes: “the older one” is no record number. Write it as FL-0042.",
      "supersedes",
    ]);
    expect(await submitRefusal({ subsetOf: ["FL-8888"] })).toEqual([
      "FL-8888 is no approved record.",
      "subsetOf",
    ]);
    const draft = await buildDraft(server.dataSource, owner.user, apart({}));
    const who = actingAs(server.dataSource, owner.user);
    const saved = granted(
      await saveDraft(who, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, reanalysisOf: [number(draft)] },
      }),
    );
    expect(await submitDraft(who, saved.id, saved.version, true)).toMatchObject({
      message: "A record has no relation to itself.",
      field: "reanalysisOf",
    });
  });

  it("keeps links as a table, in the one spelling of each", async () => {
    const older = await approved();
    const spelled = `fl-${older.constraintId}`;
    const newer = await approved({
      reanalysisOf: [spelled, number(older)],
      conditionedOn: ["cmb"],
    });
    const links = await server.dataSource.manager.findBy(RevisionLink, { revisionId: newer.id });
    expect(links.map(({ relation, targetId, kind }) => [relation, targetId, kind])).toEqual([
      ["reanalysisOf", older.constraintId, null],
      ["conditionedOn", null, "cmb"],
    ]);
    expect((await life(number(older))).relations).toEqual([
      { relation: "reanalysisOf", inverse: true, number: number(newer), state: "current" },
    ]);
  });

  it("follows a chain of three to its kind of data, and refuses the circle with its words", async () => {
    const first = await approved({ conditionedOn: ["cmb"] });
    const second = await approved({ conditionedOn: [number(first)] });
    const third = await approved({ conditionedOn: [number(second)] });
    expect((await life(number(third))).conditionChains).toEqual([
      { through: [number(third), number(second), number(first)], on: "cmb" },
    ]);
    const who = actingAs(server.dataSource, owner.user);
    const draft = granted(await reviseSubmission(who, first.id));
    const saved = granted(
      await saveDraft(who, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, conditionedOn: ["cmb", number(third)] },
      }),
    );
    expect(await submitDraft(who, saved.id, saved.version, true)).toMatchObject({
      code: "circle",
      field: "conditionedOn",
      message: `This would close a circle: ${number(first)} is conditioned on ${number(third)}, which is conditioned on ${number(second)}, which is conditioned on ${number(first)}.`,
    });
  });

  it("finds a circle over several relations", async () => {
    const one = await approved();
    const two = await approved({ subsetOf: [number(one)] });
    const circle = await reviseRefusal(one, { reanalysisOf: [number(two)] });
    expect(circle).toBe(
      `This would close a circle: ${number(one)} is a re-analysis of ${number(two)}, which is a subset of ${number(one)}.`,
    );
  });

  async function reviseRefusal(
    revision: Revision,
    fields: Partial<ConstraintFields>,
  ): Promise<string> {
    return revised(revision, fields).then(
      () => "submitted",
      (error: Error) => error.message.replace(/^\w+: /, ""),
    );
  }

  it("lets one of two approvals that close a circle together through, whichever comes first", async () => {
    const other = await server.signedIn(["contributor"]);
    const secondEditor = await server.signedIn(["editor"]);
    for (let round = 0; round < 3; round += 1) {
      const one = await approved();
      const two = await buildApproved(server.dataSource, other.user, editor.user, apart({}));
      const ofOne = await revised(one, { conditionedOn: [number(two)] });
      // Of another owner, who sees nothing of the first one's unread revision.
      const who = actingAs(server.dataSource, other.user);
      const draft = granted(await reviseSubmission(who, two.id));
      const saved = granted(
        await saveDraft(who, {
          id: draft.id,
          version: draft.version,
          fields: { ...draft.fields, conditionedOn: [number(one)] },
        }),
      );
      const ofTwo = await send(server.dataSource, other.user, saved);

      const readers = [
        { who: actingAs(server.dataSource, editor.user), submitted: ofOne },
        { who: actingAs(server.dataSource, secondEditor.user), submitted: ofTwo },
      ];
      const read: Revision[] = [];
      for (const reader of readers) {
        granted(await claim(reader.who, reader.submitted.id));
        const stored = granted(
          await storeReading(reader.who, reader.submitted.id, reader.submitted.fields),
        );
        await tickAll(reader.who, stored);
        read.push(stored);
      }
      const outcomes = await Promise.all(
        readers.map((reader, index) =>
          approve(reader.who, reader.submitted.id, read[index]?.version ?? 0, null),
        ),
      );
      const refused = outcomes.filter((outcome) => outcome instanceof Refusal);
      expect(refused).toHaveLength(1);
      expect(refused[0]).toMatchObject({ code: "circle" });
    }
  });

  it("asks that a record named be decided first", async () => {
    const waiting = await buildSubmission(server.dataSource, owner.user, apart({}));
    const naming = await buildSubmission(
      server.dataSource,
      owner.user,
      apart({ conditionedOn: [number(waiting)] }),
    );
    expect(await decide(naming)).toBe(
      `It names ${number(waiting)}, which is not approved yet: decide that one first.`,
    );
  });

  it("supersedes what an approved revision takes the place of, and brings it back when it no longer does", async () => {
    const older = await approved();
    const newer = await approved({ supersedes: [number(older)] });
    expect(await life(number(older))).toMatchObject({
      constraint: { state: "superseded", supersededBy: number(newer) },
      notices: [
        {
          kind: "superseded",
          replacedBy: number(newer),
          reason: `${number(newer)} takes its place, as its paper says.`,
          endedAt: null,
        },
      ],
      happened: [
        { kind: "record.superseded", replacedBy: number(newer) },
        { kind: "revision.approved", subject: `${number(older)}.1` },
      ],
    });
    // A record in another's place can't be superseded by that one.
    expect(await reviseRefusal(older, { supersedes: [number(newer)] })).toMatch(
      /^This would close/,
    );

    const again = await revised(newer, { supersedes: [], remark: "The two stand side by side." });
    await approveAs(server.dataSource, editor.user, again);
    expect(await life(number(older))).toMatchObject({
      constraint: { state: "current", supersededBy: null },
      notices: [{ endedReason: `${number(newer)}.2 doesn't take its place any more.` }],
    });
  });

  it("names no record of a circle that the contributor is reading blind themself", async () => {
    const both = await server.signedIn(["contributor", "editor"]);
    const base = await buildApproved(server.dataSource, both.user, editor.user, apart({}));
    const through = await approved({ conditionedOn: [number(base)] });
    const change = await revised(through, { remark: "Nothing else." });
    granted(await claim(actingAs(server.dataSource, both.user), change.id));

    const who = actingAs(server.dataSource, both.user);
    const draft = granted(await reviseSubmission(who, base.id));
    const saved = granted(
      await saveDraft(who, {
        id: draft.id,
        version: draft.version,
        fields: { ...draft.fields, conditionedOn: [number(through)] },
      }),
    );
    expect(await submitDraft(who, saved.id, saved.version, true)).toMatchObject({
      code: "circle",
      message:
        "This would close a circle through a record that you are reading yourself. Store that reading first.",
    });
    // While they read it they see no link of it either.
    expect(await life(number(through), both)).toBeNull();
    expect((await life(number(base), both)).relations).toEqual([]);
    expect((await life(number(base))).relations).toHaveLength(1);
  });
});
