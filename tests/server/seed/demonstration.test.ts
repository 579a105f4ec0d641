import { AuthorCheck } from "~server/authorCheck/authorCheck.entity";
import { Citation } from "~server/citation/citation.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { findApproved } from "~server/constraint/constraint.query";
import { Revision } from "~server/constraint/revision.entity";
import { CorrelatedSet } from "~server/correlatedSet/correlatedSet.entity";
import { isDemonstration } from "~server/database/settings";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { kindOf } from "~server/evidence/content";
import { Evidence } from "~server/evidence/evidence.entity";
import { EventRecord } from "~server/event/event.entity";
import { verifyChain } from "~server/event/eventLog";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { NamedData, NamedDataAlias, NamedDataRelation } from "~server/namedData/namedData.entity";
import { RecordNotice } from "~server/recordLife/recordNotice.entity";
import { Release } from "~server/release/release.entity";
import { Recusal } from "~server/review/recusal.entity";
import { Reading } from "~server/review/reading.entity";
import { seedDemonstration } from "~server/seed";
import { EVIDENCE } from "~server/seed/files";
import { DEMONSTRATION_PASSWORD, PEOPLE } from "~server/seed/people";
import { Refusal } from "~server/common/outcomes";
import { candidatesOf } from "~server/table/candidates";
import { presentSurroundings, surroundingsOf } from "~server/table/surroundings";
import { SavedTable } from "~server/table/table.entity";
import { TableVersionRow } from "~server/table/tableVersion.entity";
import { chooseRows, overlapClusters } from "~shared/table/overlapClusters";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { METHOD_FAMILIES } from "~shared/methods/vocabulary";
import { NOTICE_KINDS } from "~shared/review/notice";
import { RECORD_STATES, REVISION_STATES } from "~shared/review/states";
import { asUsed } from "~shared/statement/asUsed";
import { hasErrors } from "~shared/statement/rules";
import { QUANTITIES, STATEMENT_KINDS, VERSIONS_READ } from "~shared/statement/fields";

import { TEST_PASSWORD_COST } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";

// Some hundred changes of state, each with its event; a busy machine takes its time.
jest.setTimeout(180_000);

describe("the demonstration", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
    expect(await seedDemonstration(server.dataSource, TEST_PASSWORD_COST)).toBe(true);
  });
  afterAll(() => server.stop());

  const approved = () => findApproved({ database: server.dataSource, viewer: null }, {});

  it("does nothing a second time, nor beside a record of somebody's own", async () => {
    const before = await server.dataSource.manager.count(EventRecord);
    expect(await seedDemonstration(server.dataSource, TEST_PASSWORD_COST)).toBe(false);
    expect(await server.dataSource.manager.count(EventRecord)).toBe(before);
    expect(await isDemonstration(server.dataSource.manager)).toBe(true);
  });

  it("shows about sixty records, and revisions and records in every state of life", async () => {
    const { manager } = server.dataSource;
    const revisions = await manager.find(Revision);
    const states = new Set(revisions.map((revision) => revision.state));
    expect([...states].sort()).toEqual([...REVISION_STATES].sort());
    const records = await manager.find(Constraint);
    expect(records.length).toBeGreaterThanOrEqual(60);
    expect(new Set(records.map(({ state }) => state))).toEqual(new Set(RECORD_STATES));
    expect((await approved()).length).toBeGreaterThanOrEqual(50);
    const notices = await manager.find(RecordNotice);
    expect(new Set(notices.map(({ kind }) => kind))).toEqual(new Set(NOTICE_KINDS));
    // Dates are the story's, in 2026.
    for (const revision of revisions) expect(revision.createdAt.getUTCFullYear()).toBe(2026);
  });

  it("holds every method family, quantity and kind of statement", async () => {
    const rows = await approved();
    const families = new Set(
      rows.flatMap(({ revision }) => revision.families.split(",").filter(Boolean)),
    );
    expect([...families].sort()).toEqual([...METHOD_FAMILIES].sort());
    expect(new Set(rows.map(({ revision }) => revision.quantity))).toEqual(new Set(QUANTITIES));
    expect(new Set(rows.map(({ revision }) => revision.kind))).toEqual(new Set(STATEMENT_KINDS));
    const fields = rows.map(({ revision }) => revision.fields);
    expect(fields.some((one) => one.level === "notStated")).toBe(true);
    expect(fields.some((one) => one.level === "percent95")).toBe(true);
    expect(fields.some((one) => one.species === "ionized")).toBe(true);
    expect(fields.some((one) => one.species === "electron")).toBe(true);
    expect(fields.some((one) => one.limitSigma !== null)).toBe(true);
    expect(fields.some((one) => one.scale === "log10")).toBe(true);
    expect(new Set(fields.map((one) => one.versionRead))).toEqual(new Set(VERSIONS_READ));
    const relations = ["supersedes", "erratumOf", "reanalysisOf", "subsetOf"] as const;
    for (const relation of relations) {
      expect(fields.some((one) => one[relation].length > 0)).toBe(true);
    }
    const groups = fields.map((one) => one.alternativesGroup).filter((label) => label !== null);
    expect(groups.filter((label) => label === "dust law")).toHaveLength(3);
    expect(groups.filter((label) => label === "intrinsic evolution")).toHaveLength(2);
    expect(fields.filter((one) => one.dataUsed.includes("QV 0719+31")).length).toBeGreaterThan(2);
  });

  it("shows the traps of this literature, each with an answer that an editor accepted", async () => {
    const rows = await approved();
    const answered = rows.flatMap(({ revision }) =>
      revision.findings.filter(({ grade }) => grade === "mustAnswer").map(({ code }) => code),
    );
    for (const trap of [
      "widthRatio",
      "endBeyondRange",
      "levelUnlikePrinted",
      "printedWithoutNumbers",
      "flatLimit",
      "nearDuplicate",
      "oneSightline",
    ]) {
      expect(answered.filter((code) => code.startsWith(trap))).not.toEqual([]);
    }
  });

  it("follows a chain of conditions over three records", async () => {
    const rows = await approved();
    const byNumber = new Map(
      rows.map(({ constraint, revision }) => [formatRecordNumber(constraint.id), revision.fields]),
    );
    const ways = [...byNumber].flatMap(([number, { conditionedOn }]) =>
      conditionedOn
        .filter((one) => byNumber.has(one))
        .flatMap((one) =>
          (byNumber.get(one)?.conditionedOn ?? [])
            .filter((last) => byNumber.has(last))
            .map((last) => [number, one, last]),
        ),
    );
    expect(ways).not.toEqual([]);
  });

  it("has a correlated pair in use at ρ 0.6, one returned, and three records that wait", async () => {
    const { data } = await server.graphql(server.agent(), "{ correlatedSets { usedRho } }");
    expect(data.correlatedSets).toEqual([
      {
        usedRho: [
          [1, 0.6],
          [0.6, 1],
        ],
      },
    ]);
    const sets = await server.dataSource.manager.find(CorrelatedSet);
    expect(sets.map(({ state }) => state).sort()).toEqual(["approved", "returned", "submitted"]);
    expect(sets.find(({ state }) => state === "submitted")?.members).toHaveLength(3);
  });

  it("has an error report with its answer, and one that waits", async () => {
    const reports = await server.dataSource.manager.find(ErrorReport);
    expect(reports.map(({ state }) => state).sort()).toEqual(["closed", "open"]);
  });

  it("has authors who answered, one who has not yet, and an editor who left a paper to others", async () => {
    const { manager } = server.dataSource;
    const checks = await manager.find(AuthorCheck);
    expect(checks.map(({ state }) => state).sort()).toEqual(["closed", "closed", "sent"]);
    expect(new Set(checks.flatMap(({ verdict }) => verdict ?? []))).toEqual(
      new Set(["correct", "comments"]),
    );
    expect(await manager.count(Recusal)).toBe(1);
  });

  it("attaches files that are what they say", async () => {
    const files = Object.values(EVIDENCE).flat();
    expect(new Set(files.map(({ kind }) => kind))).toEqual(new Set(["csv", "pdf", "png"]));
    for (const { kind, bytes } of files) expect(kindOf(bytes)).toEqual({ kind });
    expect(await server.dataSource.manager.count(Evidence)).toBe(files.length);
  });

  it("says what its named data are: coordinates, other names, parts of one another", async () => {
    const { manager } = server.dataSource;
    const things = await manager.find(NamedData);
    expect(things.filter(({ ra }) => ra !== null).length).toBeGreaterThanOrEqual(5);
    expect(new Set(things.map(({ kind }) => kind))).toEqual(
      new Set(["sightline", "field", "sample", "unknown"]),
    );
    expect(await manager.count(NamedDataAlias)).toBeGreaterThan(things.length);
    expect(await manager.count(NamedDataRelation)).toBe(3);
  });

  it("approves nothing with an error, and everything but the qualitative can be used", async () => {
    for (const { revision } of await approved()) {
      expect(hasErrors(revision.findings)).toBe(false);
      if (revision.kind !== "qualitative") expect(asUsed(revision.fields)).not.toBeNull();
    }
  });

  it("has answers to look at: accepted ones in use, and one that waits for an editor", async () => {
    const revisions = await server.dataSource.manager.find(Revision);
    const open = (state: string) =>
      revisions
        .filter((revision) => revision.state === state)
        .flatMap(({ findings, answers }) =>
          findings
            .filter(({ grade }) => grade === "mustAnswer")
            .map(({ code }) => answers.find((answer) => answer.code === code)?.accepted),
        );
    expect(new Set(open("approved"))).toEqual(new Set([true]));
    expect(open("submitted")).toContain(false);
    const corrected = await server.dataSource.manager.find(Reading);
    expect(corrected.some(({ corrections }) => corrections.length === 1)).toBe(true);
  });

  it("names only papers under the prefix reserved for examples", async () => {
    for (const citation of await server.dataSource.manager.find(Citation)) {
      expect(citation.doi ?? "10.5555/none").toMatch(/^10\.5555\//);
      expect(citation.arxiv).toBeNull();
      expect(citation.bibcode).toBeNull();
    }
  });

  it("has a real event log and sends no mail", async () => {
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
    const events = await server.dataSource.manager.find(EventRecord, {
      order: { sequence: "ASC" },
    });
    const times = events.map((event) => event.at.getTime());
    expect(times).toEqual([...times].sort((a, b) => a - b));
    expect(await server.dataSource.manager.count(OutboxMail)).toBe(0);
  });

  it("saves a table in which alternatives, shared sightlines and unstated levels are settled", async () => {
    const tables = await server.dataSource.manager.find(SavedTable);
    expect(tables.map(({ visibility }) => visibility).sort()).toEqual([
      "private",
      "public",
      "public",
      "public",
    ]);
    const table = tables.find(({ name }) => name === "Damping wings, 6 to 8");
    const rows = await server.dataSource.manager.findBy(TableVersionRow, { slug: table?.slug });
    expect(rows.some(({ included }) => included)).toBe(true);
    const out = rows.filter(({ included }) => !included);
    expect(out.map(({ content }) => JSON.parse(content).reason)).toEqual(
      expect.arrayContaining([expect.stringMatching(/^Shares QV /)]),
    );
  });

  it("cut two releases of growing size", async () => {
    const releases = await server.dataSource.manager.find(Release, { order: { number: "ASC" } });
    expect(releases.map(({ number }) => number)).toEqual([1, 2]);
    expect(releases[1]!.records).toBeGreaterThan(releases[0]!.records);
    expect(releases[0]!.records).toBeGreaterThan(20);
  });

  it("has clusters of shared data in which the chooser finds what looking at every subset finds", async () => {
    const { manager } = server.dataSource;
    const found = await candidatesOf(manager, null, { release: null, filter: {} });
    if (found instanceof Refusal) throw new Error(found.message);
    const { records } = found;
    const { overlaps } = surroundingsOf(await presentSurroundings(manager), records);
    const clusters = overlapClusters(overlaps).filter(({ rows }) => rows.length <= 20);
    expect(clusters.length).toBeGreaterThanOrEqual(3);
    for (const cluster of clusters) {
      const rows = cluster.rows.map((number) => {
        const record = records.find((one) => one.number === number);
        if (!record) throw new Error(`${number} is no candidate`);
        const published = record.fields.versionRead !== "preprint";
        return { number, published, year: record.citation.year };
      });
      // By counting in binary, apart from the search: the size of a largest set, and its published rows.
      let best: [size: number, published: number] = [0, 0];
      for (let mask = 1; mask < 1 << rows.length; mask += 1) {
        const set = rows.filter((_, index) => (mask >> index) & 1);
        const published = set.filter((row) => row.published).length;
        if (set.length < best[0] || (set.length === best[0] && published <= best[1])) continue;
        const held = new Set(set.map(({ number }) => number));
        if (!cluster.overlaps.some(({ a, b }) => held.has(a) && held.has(b))) {
          best = [set.length, published];
        }
      }
      const { kept } = chooseRows(cluster, rows);
      const published = rows.filter((row) => row.published && kept.includes(row.number)).length;
      expect([cluster.rows, kept.length, published]).toEqual([cluster.rows, ...best]);
      const held = new Set(kept);
      expect(cluster.overlaps.filter(({ a, b }) => held.has(a) && held.has(b))).toEqual([]);
    }
  });

  it("lets each of its people sign in", async () => {
    for (const person of Object.values(PEOPLE)) {
      const { data } = await server.graphql(
        server.agent(),
        `mutation ($email: String!, $password: String!) {
          signIn(email: $email, password: $password) { __typename ... on Viewer { roles } } }`,
        { email: person.email, password: DEMONSTRATION_PASSWORD },
      );
      expect(data.signIn.__typename).toBe("Viewer");
      expect([...data.signIn.roles].sort()).toEqual([...person.roles].sort());
    }
  });
});
