import { createHash } from "node:crypto";

import canonicalize from "canonicalize";
import Papa from "papaparse";

import { reviseSubmission, saveDraft, submitDraft } from "~server/constraint/draft.service";
import type { Revision } from "~server/constraint/revision.entity";
import { EventRecord } from "~server/event/event.entity";
import { Release } from "~server/release/release.entity";
import { cutRelease } from "~server/release/release.service";
import { claim, releaseClaim } from "~server/review/review.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const FIELDS = `number digest records notes cutBy licence lastEvent { sequence digest }
  citation { bibtex csl cff }`;

describe("releases", () => {
  let server: TestServer;
  let maintainer: Awaited<ReturnType<TestServer["signedIn"]>>;
  let contributor: typeof maintainer;
  let editor: typeof maintainer;
  let stranger: Agent;
  /** In release 2, approved. */
  let known: Revision;

  beforeAll(async () => {
    server = await startTestServer();
    maintainer = await server.signedIn(["maintainer"], { nameOnPapers: "Wim Vloedgraaf" });
    contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    stranger = server.agent();
  });
  afterAll(() => server.stop());

  const cut = async (notes = "What is in it.", agent = maintainer.agent) =>
    (
      await server.graphql(
        agent,
        `mutation ($notes: String!) { cutRelease(notes: $notes) {
          __typename ... on Refusal { code message } ... on Release { ${FIELDS} } } }`,
        { notes },
      )
    ).data?.cutRelease;
  const approved = (z: string, value: string) =>
    buildApproved(server.dataSource, contributor.user, editor.user, {
      z,
      value,
      dataUsed: [`sightline ${z}`],
    });
  const file = (name: string, agent = stranger) => agent.get(`/api/releases/${name}`);

  /** The record with another value, submitted and not yet read. */
  async function revised(revision: Revision, value: string): Promise<Revision> {
    const who = actingAs(server.dataSource, contributor.user);
    const draft = granted(await reviseSubmission(who, revision.id));
    const fields = {
      ...draft.fields,
      value,
      printedText: `x = ${value} +0.12 -0.15, z = ${draft.fields.z}`,
    };
    const saved = granted(await saveDraft(who, { id: draft.id, version: draft.version, fields }));
    return granted(await submitDraft(who, saved.id, saved.version, true));
  }

  it("hold all approved records, never change, and differ by records, with notes and a digest of their own", async () => {
    expect(await cut()).toMatchObject({ __typename: "Refusal", code: "notReady" });

    const first = await approved("6.11", "0.22");
    await approved("7.22", "0.51");
    const one = await cut("The first two.");
    expect(one).toMatchObject({
      __typename: "Release",
      number: 1,
      records: 2,
      notes: "The first two.",
      cutBy: "Wim Vloedgraaf",
      licence: "CC BY 4.0",
    });
    const { body, text } = await file("1.json").expect(200);
    expect(body).toMatchObject({
      format: "fogline-release/1",
      release: 1,
      digest: `sha256:${one.digest}`,
    });
    expect(
      createHash("sha256")
        .update(canonicalize(body.content) ?? "")
        .digest("hex"),
    ).toBe(one.digest);
    expect(body.content.records.map((record: { number: string }) => record.number)).toEqual([
      formatRecordNumber(first.constraintId),
      formatRecordNumber(first.constraintId + 1),
    ]);

    expect(await cut()).toMatchObject({
      code: "unchanged",
      message: "Nothing has changed since release 1.",
    });

    const change = await revised(first, "0.24");
    known = await approveAs(server.dataSource, editor.user, change);
    await approved("8.33", "0.66");
    const two = await cut("A third, and a correction.");
    expect(two).toMatchObject({ number: 2, records: 3 });
    expect((await file("1.json").expect(200)).text).toBe(text);

    const { data } = await server.graphql(
      stranger,
      `{ releaseDifference(from: 1, to: 2) { added { number quotable } removed { number }
          changed { number before quotable changes { field before after } } } }`,
    );
    const number = formatRecordNumber(first.constraintId);
    expect(data.releaseDifference.added).toHaveLength(1);
    expect(data.releaseDifference.removed).toEqual([]);
    expect(data.releaseDifference.changed).toEqual([
      {
        number,
        before: `${number}.1`,
        quotable: `${number}.2`,
        changes: expect.arrayContaining([{ field: "value", before: "0.22", after: "0.24" }]),
      },
    ]);
  });

  it("wait while an editor reads a new revision of an approved record", async () => {
    await approved("6.66", "0.33");
    const change = await revised(known, "0.35");
    const reader = actingAs(server.dataSource, editor.user);
    granted(await claim(reader, change.id));
    const number = formatRecordNumber(known.constraintId);
    expect(await cut()).toMatchObject({
      code: "notReady",
      message: `An editor is reading a new revision of ${number}. Wait for the decision.`,
    });
    const { data } = await server.graphql(
      maintainer.agent,
      `{ releaseReadiness { blockers records latest } }`,
    );
    expect(data.releaseReadiness).toMatchObject({ records: 4, latest: 2 });
    expect(data.releaseReadiness.blockers).toHaveLength(1);

    // The editor reads the record blind: no release that holds it opens meanwhile.
    expect((await file("2.json", editor.agent).expect(403)).body.code).toBe("READING");
    await file("2.json").expect(200);
    granted(await releaseClaim(reader, change.id));
    await file("2.json", editor.agent).expect(200);
  });

  it("are cut by one maintainer at a time, each number once", async () => {
    await approved("9.11", "0.77");
    const who = actingAs(server.dataSource, maintainer.user);
    const outcomes = await Promise.all(Array.from({ length: 6 }, () => cutRelease(who, "At once")));
    expect(outcomes.filter((outcome) => outcome instanceof Release)).toHaveLength(1);
    const cuts = await server.dataSource.manager.findBy(EventRecord, { kind: "release.cut" });
    expect(cuts.map(({ subject }) => subject)).toEqual(["release:1", "release:2", "release:3"]);
  });

  it("come in every format with the same numbers, streamed, and answer 304 to who has them", async () => {
    const table = (await file("2.csv").expect(200)).text.replace(/^#.*\r\n/gm, "");
    const { data, errors } = Papa.parse<Record<string, string>>(table, {
      header: true,
      skipEmptyLines: true,
    });
    expect(errors).toEqual([]);
    expect(data.map((row) => row.used_value)).toEqual(["0.24", "0.51", "0.66"]);
    const numbers = data.map((row) => row.record);

    const ecsv = (await file("2.ecsv").expect(200)).text
      .split("\n")
      .filter((line) => /^FL-/.test(line));
    expect(ecsv.map((line) => line.split(",")[0])).toEqual(numbers);
    const votable = (await file("2.vot").buffer(true).parse(asText).expect(200)).body as string;
    expect(votable.match(/<TD>0\.(24|51|66)<\/TD>/g)).toHaveLength(6); // used and printed
    expect(
      (await file("2.txt").expect(200)).text.split("\n").filter((line) => /^FL-/.test(line)),
    ).toHaveLength(3);
    const bib = (await file("2.bib").buffer(true).parse(asText).expect(200)).body as string;
    expect(bib.match(/^@article\{/gm)).toHaveLength(3);

    const { headers } = await file("2.csv").expect(200);
    expect(headers["content-disposition"]).toBe('attachment; filename="fogline-release-2.csv"');
    await file("2.csv").set("If-None-Match", String(headers.etag)).expect(304);
    await file("2.exe").expect(404);
    await file("99.json").expect(404);
    await file("constructor").expect(404);
  });

  it("have a citation of their own", async () => {
    const { data } = await server.graphql(
      stranger,
      `{ release(number: 1) { ${FIELDS} } releases { number } }`,
    );
    expect(data.releases.map((release: { number: number }) => release.number)).toEqual([3, 2, 1]);
    const { bibtex, csl, cff } = data.release.citation;
    expect(bibtex).toMatch(/^@misc\{FoglineRelease1,/);
    expect(bibtex).toContain(data.release.digest);
    expect(JSON.parse(csl)).toMatchObject([
      { id: "FoglineRelease1", type: "dataset", version: "1" },
    ]);
    expect(cff).toContain('version: "1"\n');
    expect((await file("1.cff").expect(200)).text).toBe(cff);
  });

  it("are not for people without the role", async () => {
    const { errors } = await server.graphql(
      editor.agent,
      `mutation { cutRelease(notes: "x") { __typename } }`,
    );
    expect(errors?.[0]?.extensions.code).toBe("FORBIDDEN");
  });
});

/** Superagent leaves what it does not know as bytes. */
function asText(res: NodeJS.EventEmitter, done: (error: Error | null, text: string) => void): void {
  let text = "";
  res.on("data", (part: Buffer) => (text += part.toString("utf8")));
  res.on("end", () => done(null, text));
}
