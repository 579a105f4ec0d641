import { OutboxMail } from "~server/mail/outboxMail.entity";
import type { Revision } from "~server/constraint/revision.entity";
import { reviseSubmission, saveDraft } from "~server/constraint/draft.service";
import { verifyChain } from "~server/event/eventLog";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted, send } from "../../factories/constraint";
import { buildTable } from "../../factories/table";
import { startTestServer, type TestServer } from "../support/harness";

const LIFE = `__typename ... on Refusal { code message field }
  ... on RecordLife { constraint { number state supersededBy }
    notices { id kind reason by replacedBy endedAt endedBy endedReason } }`;

describe("the life of a record", () => {
  let server: TestServer;
  type Person = Awaited<ReturnType<TestServer["signedIn"]>>;
  let owner: Person;
  let editor: Person;
  let maintainer: Person;
  let place = 0;
  beforeAll(async () => {
    server = await startTestServer();
    owner = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    editor = await server.signedIn(["editor"]);
    maintainer = await server.signedIn(["maintainer"], { nameOnPapers: "Maren Holt" });
  });
  afterAll(() => server.stop());

  const number = (revision: Revision): string => formatRecordNumber(revision.constraintId);
  const approved = (): Promise<Revision> => {
    place += 1;
    return buildApproved(server.dataSource, owner.user, editor.user, {
      z: (5 + place * 0.3).toFixed(2),
      dataUsed: [`Field ${place}`],
    });
  };
  const call = async (query: string, variables: object, person: Person | null = maintainer) => {
    const { data, errors } = await server.graphql(
      person?.agent ?? server.agent(),
      query,
      variables,
    );
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return errors ? errors[0]?.extensions.code : (Object.values(data)[0] as any);
  };
  const withdraw = (of: string, reason = "The authors withdrew the paper.", person?: Person) =>
    call(
      `mutation ($number: String!, $reason: String!) { withdrawRecord(number: $number, reason: $reason) { ${LIFE} } }`,
      { number: of, reason },
      person,
    );
  const supersede = (of: string, by: string) =>
    call(
      `mutation ($number: String!, $by: String!) { supersedeRecord(number: $number, replacedBy: $by, reason: "A later version was printed.") { ${LIFE} } }`,
      { number: of, by },
    );
  const lift = (notice: string, reason = "Recorded at the wrong record.") =>
    call(
      `mutation ($notice: ID!, $reason: String!) { liftNotice(notice: $notice, reason: $reason) { ${LIFE} } }`,
      { notice, reason },
    );
  const listed = async (filter: object = {}): Promise<string[]> => {
    const page = await call(
      `query ($filter: ConstraintFilter) { constraints(filter: $filter) { constraints { number } } }`,
      { filter },
      null,
    );
    return page.constraints.map((one: { number: string }) => one.number);
  };

  it("withdraws with a reason: readable at its address, out of lists and files, back when undone", async () => {
    const record = await approved();
    expect(await withdraw(number(record), "short")).toMatchObject({
      code: "reason",
      field: "reason",
    });
    expect(await withdraw("FL-9999")).toMatchObject({ code: "notFound", field: "number" });
    const gone = await withdraw(number(record));
    expect(gone).toMatchObject({
      constraint: { number: number(record), state: "withdrawn" },
      notices: [{ kind: "withdrawn", by: "Maren Holt", reason: "The authors withdrew the paper." }],
    });
    expect(await withdraw(number(record))).toMatchObject({ code: "state" });

    expect(await listed()).not.toContain(number(record));
    expect(await listed({ states: ["withdrawn"] })).toContain(number(record));
    const csv = await server.agent().get("/api/constraints.csv");
    expect(csv.text).not.toContain(number(record));
    const page = await call(
      "query ($number: String!) { constraint(number: $number) { number state fields { value } } }",
      { number: number(record) },
      null,
    );
    expect(page).toEqual({ number: number(record), state: "withdrawn", fields: { value: "0.43" } });

    const [notice] = gone.notices;
    expect(await lift(notice.id)).toMatchObject({
      constraint: { state: "current" },
      notices: [{ endedBy: "Maren Holt", endedReason: "Recorded at the wrong record." }],
    });
    expect(await lift(notice.id)).toMatchObject({ code: "stale" });
    expect(await listed()).toContain(number(record));
  });

  it("supersedes by another record: listed with its state, a filter for it, no circle", async () => {
    const [old, fresh] = [await approved(), await approved()];
    expect(await supersede(number(old), number(old))).toMatchObject({ code: "replacedBy" });
    expect(await supersede(number(old), number(fresh))).toMatchObject({
      constraint: { state: "superseded", supersededBy: number(fresh) },
    });
    expect(await supersede(number(old), number(fresh))).toMatchObject({
      code: "state",
      message: `${number(old)} is superseded by ${number(fresh)} already.`,
    });
    expect(await supersede(number(fresh), number(old))).toMatchObject({
      code: "circle",
      message:
        `This would close a circle: ${number(old)} supersedes ${number(fresh)}, which is superseded by it.`.replace(
          "which is superseded by it",
          `which supersedes ${number(old)}`,
        ),
    });
    expect(await listed()).toContain(number(old));
    expect(await listed({ states: ["current"] })).not.toContain(number(old));
    expect(await listed({ states: ["superseded"] })).toEqual([number(old)]);
    const withdrawn = await withdraw(number(old));
    expect(withdrawn.constraint.state).toBe("withdrawn");
    // Taking the withdrawal back leaves what held before it.
    expect((await lift(withdrawn.notices[0].id)).constraint.state).toBe("superseded");
  });

  it("keeps one of two who supersede each way at once", async () => {
    for (let round = 0; round < 3; round += 1) {
      const [one, two] = [await approved(), await approved()];
      const outcomes = await Promise.all([
        supersede(number(one), number(two)),
        supersede(number(two), number(one)),
      ]);
      const words = outcomes.map((outcome) => outcome.__typename).sort();
      expect(words).toEqual(["RecordLife", "Refusal"]);
    }
  });

  it("leaves a record with an erratum current until a new revision corrects it", async () => {
    const record = await approved();
    const noted = await call(
      `mutation ($number: String!) { recordErratum(number: $number, reason: "The printed sign is wrong, says the journal.") { ${LIFE} } }`,
      { number: number(record) },
    );
    expect(noted).toMatchObject({
      constraint: { state: "current" },
      notices: [{ kind: "erratum", endedAt: null }],
    });
    const who = actingAs(server.dataSource, owner.user);
    const draft = granted(await reviseSubmission(who, record.id));
    const fields = {
      ...draft.fields,
      value: "0.41",
      printedText: `z = ${draft.fields.z}, 0.41, 0.12, 0.15`,
    };
    const saved = granted(await saveDraft(who, { id: draft.id, version: draft.version, fields }));
    await approveAs(
      server.dataSource,
      editor.user,
      await send(server.dataSource, owner.user, saved),
    );
    const after = await call(
      `query ($number: String!) { recordLife(number: $number) { ${LIFE.slice(LIFE.indexOf("constraint {"), -1)} } }`,
      { number: number(record) },
      null,
    );
    expect(after.notices).toMatchObject([
      { kind: "erratum", endedReason: `Corrected by ${number(record)}.2.` },
    ]);
  });

  it("is for maintainers only", async () => {
    const record = await approved();
    for (const person of [owner, editor]) {
      expect(await withdraw(number(record), "A reason long enough.", person)).toBe("FORBIDDEN");
    }
  });

  it("tells the owner and who keeps the record in a table; the table's bytes stay, its page says so", async () => {
    const [row, stays, fresh] = [await approved(), await approved(), await approved()];
    const theorist = await server.signedIn([]);
    const table = await buildTable(server.dataSource, theorist.user, {
      name: "Mine",
      filter: {},
      out: (await listed())
        .filter((one) => ![number(row), number(stays)].includes(one))
        .map((one) => ({ number: one, reason: "Not wanted here" })),
    });
    const files = async () => {
      const csv = await server.agent().get(`/api/tables/${table.slug}.csv`);
      const json = await server.agent().get(`/api/tables/${table.slug}.json`);
      return [csv.text, json.text];
    };
    const before = await files();
    await server.dataSource.manager.clear(OutboxMail);
    await supersede(number(row), number(fresh));

    const mails = await server.dataSource.manager.find(OutboxMail);
    expect(mails.map(({ to }) => to).sort()).toEqual(
      [owner.user.email, theorist.user.email].sort(),
    );
    for (const { subject, text } of mails) {
      expect(subject).toBe(`${number(row)} was superseded by ${number(fresh)}`);
      // The reason may quote numbers: it stands on the page only.
      expect(text).not.toContain("A later version was printed.");
      expect(text).toContain(`/constraints/${number(row)}`);
    }
    expect(mails.find(({ to }) => to === theorist.user.email)?.text).toContain(`Mine: http://`);
    expect(await files()).toEqual(before);
    const page = await call(
      `query ($slug: ID!) { fittingTable(slug: $slug) { rowsSince { number state newerRevision notices { kind replacedBy } } } }`,
      { slug: table.slug },
      null,
    );
    expect(page.rowsSince).toEqual([
      {
        number: number(row),
        state: "superseded",
        newerRevision: null,
        notices: [{ kind: "superseded", replacedBy: number(fresh) }],
      },
    ]);
  });

  it("leaves a whole chain of events, none of which holds a reason's words", async () => {
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
    const events: { detail: unknown }[] = await server.dataSource.query(
      "SELECT detail FROM event WHERE kind LIKE 'record.%'",
    );
    expect(events.length).toBeGreaterThan(5);
    expect(JSON.stringify(events)).not.toContain("printed");
  });
});
