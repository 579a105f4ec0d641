import type { Revision } from "~server/constraint/revision.entity";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { correlatedSet } from "~shared/likelihood/correlatedSet";
import type { ConstraintFields } from "~shared/statement/fields";

import {
  approveAs,
  buildApproved,
  buildCitation,
  buildSubmission,
} from "../../factories/constraint";
import { pairReading, setsOf } from "../correlatedSet/sets";
import { deskOf } from "../review/desk";
import { startTestServer, type TestServer } from "../support/harness";

type Signed = Awaited<ReturnType<TestServer["signedIn"]>>;

/** Records that hang together, through the API, as PHYSICS.md and PRODUCT.md say. */
describe("records that hang together", () => {
  let server: TestServer;
  let contributor: Signed;
  let editor: Signed;
  beforeAll(async () => {
    server = await startTestServer();
    contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
  });
  afterAll(() => server.stop());

  const approve = async (
    overrides: Partial<ConstraintFields>,
    paper?: Awaited<ReturnType<typeof buildCitation>>,
  ) => buildApproved(server.dataSource, contributor.user, editor.user, overrides, paper);

  /** What a fitting table over these words proposes, asked by nobody in particular. */
  const propose = async (text: string, out: { number: string; reason: string }[] = []) => {
    const { data, errors } = await server.graphql(
      server.agent(),
      `query ($recipe: TableInput!) { tableProposal(recipe: $recipe) { __typename
        ... on TableProposal { open rows { number included set weight mixture form }
          decisions { kind rows words proposed options { code words } }
          mixtures { members standardDeviation } sets { id members rho whole } } } }`,
      { recipe: { filter: { text }, out } },
    );
    expect(errors).toBeUndefined();
    return data.tableProposal;
  };

  describe("a chain of conditions over three records", () => {
    let first: { id: string; number: string };
    let second: { number: string };
    let third: { number: string };

    beforeAll(async () => {
      const depth = await approve({
        quantity: "opticalDepth",
        species: null,
        scale: null,
        weighting: null,
        zRole: null,
        z: null,
        value: "0.0613",
        plus: "0.0058",
        minus: "0.0058",
        methodTags: ["cmbPolarization"],
        dataUsed: ["Chainlink sky"],
      });
      first = { id: depth.id, number: formatRecordNumber(depth.constraintId) };
      const counts = await approve({
        dataUsed: ["Chainlink field"],
        conditionedOn: [first.number],
      });
      second = { number: formatRecordNumber(counts.constraintId) };
      const joint = await approve({
        z: "7.6",
        dataUsed: ["Chainlink sightline"],
        conditionedOn: [second.number],
      });
      third = { number: formatRecordNumber(joint.constraintId) };
    });

    it("is followed from the last to the first", async () => {
      const { data } = await server.graphql(
        server.agent(),
        "query ($number: String!) { recordLife(number: $number) { conditionChains { through on } } }",
        { number: third.number },
      );
      expect(data.recordLife.conditionChains).toEqual([
        { through: [third.number, second.number], on: first.number },
      ]);
    });

    it("asks a table that holds both its ends to decide, though the middle is out", async () => {
      const out = [{ number: second.number, reason: "Its field is another table's." }];
      const proposal = await propose("Chainlink", out);
      const decision = proposal.decisions.find(
        ({ kind, rows }: { kind: string; rows: string[] }) =>
          kind === "conditioned" && rows.includes(third.number),
      );
      expect(decision.rows).toContain(first.number);
      expect(decision.words).toContain(second.number);
    });

    it("can't be closed to a circle", async () => {
      const desk = deskOf(server, contributor.agent);
      const draft = await desk.revise(first.id);
      const saved = await desk.save(draft.id, draft.version, {
        ...draft.fields,
        conditionedOn: [third.number],
      });
      expect(saved.__typename).toBe("Submission");
      const refused = await desk.submit(draft.id, saved.version);
      expect(refused).toMatchObject({
        __typename: "Refusal",
        code: "circle",
        field: "conditionedOn",
        message: expect.stringContaining("would close a circle"),
      });
      for (const { number } of [first, second, third]) expect(refused.message).toContain(number);
      // Nothing came of it.
      expect((await desk.submission(draft.id)).state).toBe("draft");
    });
  });

  describe("an alternatives group of three", () => {
    const VALUES = ["0.45", "0.55", "0.65"];
    let numbers: string[];

    beforeAll(async () => {
      const paper = await buildCitation(server.dataSource, contributor.user, {
        title: "Threeways",
      });
      numbers = [];
      for (const [at, value] of VALUES.entries()) {
        const { constraintId } = await approve(
          {
            z: "7.1",
            value,
            plus: "0.10",
            minus: "0.10",
            estimator: "mean",
            dataUsed: ["Threeways field"],
            alternativesGroup: "dust",
            alternativesPreferred: at === 1,
          },
          paper,
        );
        numbers.push(formatRecordNumber(constraintId));
      }
    });

    it("names the one its authors prefer on each of its records", async () => {
      const { data } = await server.graphql(
        server.agent(),
        "query ($number: String!) { constraint(number: $number) { alternatives { number preferred } } }",
        { number: numbers[0] },
      );
      expect(data.constraint.alternatives).toEqual(
        numbers.map((number, at) => ({ number, preferred: at === 1 })),
      );
    });

    it("takes no second preferred one", async () => {
      const desk = deskOf(server, contributor.agent);
      const mine: { id: string; number: string }[] = await desk.mine();
      const third = mine.find(({ number }) => number === numbers[2])!;
      const draft = await desk.revise(third.id);
      const saved = await desk.save(draft.id, draft.version, {
        ...draft.fields,
        alternativesPreferred: true,
      });
      expect(await desk.submit(draft.id, saved.version)).toMatchObject({
        code: "findings",
        message: expect.stringContaining(`${numbers[1]} is the preferred answer`),
      });
    });

    it("takes no second preferred one that was submitted beside the first, either", async () => {
      const paper = await buildCitation(server.dataSource, contributor.user, { title: "Sidelong" });
      const pair: Revision[] = [];
      for (const value of ["0.31", "0.47"]) {
        const fields = {
          value,
          dataUsed: ["Sidelong field"],
          alternativesGroup: "side",
          alternativesPreferred: true,
        };
        pair.push(await buildSubmission(server.dataSource, contributor.user, fields, paper));
      }
      await approveAs(server.dataSource, editor.user, pair[0]!);
      await expect(approveAs(server.dataSource, editor.user, pair[1]!)).rejects.toThrow(
        /^preferredTwice: FL-\d+ is the preferred answer of this group/,
      );
    });

    it("enters a table by one of them or as their equal mixture, never multiplied", async () => {
      const proposal = await propose("Threeways");
      const [decision] = proposal.decisions;
      expect(decision).toMatchObject({ kind: "alternatives", rows: numbers });
      const codes: string[] = decision.options.map(({ code }: { code: string }) => code);
      expect(codes).toContain("mixture");
      for (const number of numbers) expect(codes.some((code) => code.includes(number))).toBe(true);
      // One of them, the mixture, or none: no option keeps two side by side.
      expect(codes.filter((code) => !["mixture", "out"].includes(code))).toHaveLength(3);
      expect(decision.proposed).toContain(numbers[1]);
    });
  });

  it("two bins with ρ 0.6 enter a table together: χ² is 1.25 where both lie one sigma off", async () => {
    const paper = await buildCitation(server.dataSource, contributor.user, { title: "Pairmoor" });
    const members: string[] = [];
    for (const z of ["6.2", "6.5"]) {
      const { constraintId } = await approve(
        { z, value: "0.30", plus: "0.10", minus: "0.10", dataUsed: ["Pairmoor sample"] },
        paper,
      );
      members.push(formatRecordNumber(constraintId));
    }
    const hers = setsOf(server, contributor.agent);
    const his = setsOf(server, editor.agent);
    const saved = await hers.save(await hers.start(paper.id, members), {
      label: "Pair",
      members,
      matrixKind: "correlation",
      triangle: [["1"], ["0.60", "1"]],
      place: "Table 5",
    });
    await hers.submit(saved.number, saved.version);
    await his.claim(saved.number);
    const { item } = await his.read(saved.number, pairReading("0.6"));
    await his.approve(saved.number, item.version);

    const proposal = await propose("Pairmoor");
    expect(proposal.rows.map((row: { included: boolean; set: string }) => row)).toEqual(
      members.map((number) =>
        expect.objectContaining({ number, included: true, set: saved.number }),
      ),
    );
    const [set] = proposal.sets;
    expect(set).toMatchObject({ id: saved.number, members, whole: true });
    // PHYSICS.md, worked values: correlated pair ρ 0.6, both +1σ: χ² = 1.25; by themselves 2.
    expect(correlatedSet(set.rho).chiSquared([1, 1])).toBeCloseTo(1.25, 12);

    // A part is the exact marginal: one bin by itself, which weighs as it would alone.
    const part = await propose(`Pairmoor ${members[0]}`);
    expect(part.rows).toHaveLength(1);
    expect(part.decisions.map(({ kind }: { kind: string }) => kind)).toContain("correlatedSet");
  });
});
