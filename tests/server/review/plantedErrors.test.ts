import { compareReading } from "~shared/review/reading";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildApproved, buildCitation, buildFields } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";
import {
  HONEST,
  PAPERS,
  PLANTED,
  REFUSED_AT_SUBMISSION,
  type Changes,
  type Honest,
  type Paper,
} from "./plantedErrors";

// Fifty papers go through the desk, on a machine that may be busy.
jest.setTimeout(120_000);

interface Compared {
  field: string;
  agrees: boolean;
}
interface Sent {
  __typename: string;
  code: string;
  message: string;
  findings: { code: string; grade: string }[];
}

describe("errors of copying", () => {
  let server: TestServer;
  let hers: ReturnType<typeof deskOf>;
  let his: ReturnType<typeof deskOf>;
  let contributor: Awaited<ReturnType<TestServer["signedIn"]>>;

  beforeAll(async () => {
    server = await startTestServer();
    contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    hers = deskOf(server, contributor.agent);
    his = deskOf(server, editor.agent);
    // What the registry holds: two widths of the method, to compare with.
    for (const [z, plus, minus] of [
      ["6.60", "0.13", "0.14"],
      ["7.60", "0.12", "0.13"],
    ]) {
      await buildApproved(server.dataSource, contributor.user, editor.user, {
        ...{ z, plus, minus, level: "percent68", value: "0.55", dataUsed: [`Sightline ${z}`] },
      });
    }
  });
  afterAll(() => server.stop());

  const printed = (paper: Paper): ConstraintFields => buildFields(PAPERS[paper]);

  /** Enters and submits content, with an answer to whatever must be answered. */
  async function enter(
    content: ConstraintFields,
  ): Promise<{ id: string; sent: Sent; caught: string[] }> {
    const { id: paper } = await buildCitation(server.dataSource, contributor.user);
    const draft = await hers.start(paper);
    const saved = await hers.save(draft.id, 1, content);
    const asked: Sent["findings"] = saved.findings.filter(
      ({ grade, code }: { grade: string; code: string }) =>
        grade !== "note" && !code.startsWith("nearDuplicate"),
    );
    const answers = saved.findings
      .filter(({ grade }: { grade: string }) => grade === "mustAnswer")
      .map(({ code }: { code: string }) => ({ code, answer: "So it stands in the paper." }));
    const again = await hers.save(draft.id, saved.version, content, { answers });
    const sent = await hers.submit(draft.id, again.version);
    return { id: draft.id, sent, caught: asked.map(({ code }) => code) };
  }

  /** What an editor reads in the paper, before anything of the submission is shown. */
  async function read(id: string, reading: Changes | Honest["read"]) {
    const claimed = await his.claim(id);
    expect(claimed).toMatchObject({ submission: null, comparison: [] });
    const review = await his.read(id, reading);
    for (const { code } of review.answers) await his.accept(id, code);
    const { item, comparison } = await his.review(id);
    const differing: string[] = comparison
      .filter(({ agrees }: Compared) => !agrees)
      .map(({ field }: Compared) => field);
    return { differing, version: item.version };
  }

  it("are fifty-two, beside twenty-three honest pairs", () => {
    expect(PLANTED).toHaveLength(52);
    expect(HONEST).toHaveLength(23);
  });

  it.each(PLANTED.map((planted, index) => [index + 1, planted.kind, planted] as const))(
    "stop %i: %s",
    async (number, _, { paper, entered, caught: expected }) => {
      const truth = printed(paper);
      const { id, sent, caught } = await enter({ ...truth, ...entered });
      expect(caught).toEqual(expected);
      if (REFUSED_AT_SUBMISSION.includes(number)) {
        expect(sent).toMatchObject({ __typename: "Refusal", code: "findings" });
        return;
      }
      expect(sent.__typename).toBe("Submission");
      const { differing, version } = await read(id, truth);
      // Every field that was entered otherwise is named, and no other; a curve is read by its facts.
      const changed = Object.keys(entered).filter((name) => name !== "printedText");
      expect([...differing].sort()).toEqual(
        changed
          .flatMap((name) => (name === "curveTable" ? ["curvePeak", "curveRows"] : name))
          .sort(),
      );
      expect(await his.approve(id, version)).toMatchObject({
        __typename: "Refusal",
        code: "blocked",
      });
      await his.release(id);
    },
  );

  it.each(HONEST.map((honest, index) => [`${index + 1}: ${honest.paper}`, honest] as const))(
    "are none where two people write one number in two ways, %s",
    async (_, { paper, read: written }) => {
      const truth = printed(paper);
      const { id, sent } = await enter(truth);
      expect(sent).toMatchObject({ __typename: "Submission" });
      const { differing, version } = await read(id, { ...truth, ...written });
      expect(differing).toEqual([]);
      expect(await his.approve(id, version)).toMatchObject({ __typename: "Done" });
    },
  );

  it("are stopped by the comparison, also those that a rule refuses before it", () => {
    for (const { kind, paper, entered } of PLANTED) {
      const truth = printed(paper);
      const compared = compareReading(truth, { ...truth, ...entered });
      expect([kind, compared.some(({ agrees }) => !agrees)]).toEqual([kind, true]);
    }
  });

  it("are asked about before the reading where the record contradicts itself or its neighbours", () => {
    const kinds = [...new Set(PLANTED.map(({ kind }) => kind))];
    const caught = kinds.map((kind) => {
      const all = PLANTED.filter((planted) => planted.kind === kind);
      return [kind, `${all.filter((one) => one.caught.length > 0).length} of ${all.length}`];
    });
    expect(Object.fromEntries(caught)).toEqual({
      "68 % as 95 %": "2 of 2",
      "68 % as one sigma": "1 of 1",
      "95 % as 68 %": "1 of 2",
      "a curve's row left out": "0 of 1",
      "base and sigma swapped": "0 of 1",
      "bound for width": "1 of 1",
      "decimal point shifted": "3 of 4",
      "digit doubled": "1 of 1",
      "digit dropped": "2 of 4",
      "digit misread": "4 of 5",
      "digits swapped": "5 of 8",
      "full width for half": "1 of 1",
      "helium left out": "0 of 1",
      "ionized for electrons": "0 of 1",
      "ionized for neutral": "0 of 1",
      "level left out": "1 of 1",
      "limit flipped": "0 of 2",
      "ends of another band": "0 of 1",
      "linear for log10": "1 of 1",
      "log10 for linear": "1 of 1",
      "neutral for ionized": "0 of 2",
      "one width for both": "0 of 1",
      "plus and minus swapped": "0 of 4",
      "range of another row": "0 of 1",
      "redshift of another row": "0 of 2",
      "value of another row": "0 of 1",
      "volume for mass": "0 of 1",
    });
  });
});
