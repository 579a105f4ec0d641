import { CompiledTable } from "~shared/likelihood/compile";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";
import {
  NO_CHOICES,
  takeProposal,
  type ConditionPath,
  type Decision,
  type TableChoices,
  type TableRecord,
  type TableSurroundings,
} from "~shared/table/decision";
import { settleTable, tableSpecOf, type SettledTable } from "~shared/table/settleTable";

let next = 0;

beforeEach(() => {
  next = 0;
});

function record(
  fields: Partial<ConstraintFields> = {},
  more: Partial<TableRecord> = {},
): TableRecord {
  next += 1;
  return {
    number: `FL-${String(next).padStart(4, "0")}`,
    citation: `paper ${next}`,
    shortName: `Author ${next} 2024`,
    year: 2024,
    state: "current",
    supersededBy: null,
    ...more,
    fields: {
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      weighting: "volume",
      zRole: "point",
      z: "7",
      kind: "twoSided",
      value: "0.50",
      plus: "0.10",
      minus: "0.10",
      level: "oneSigma",
      estimator: "mean",
      methodTags: ["quasarDampingWing"],
      dataUsed: [`sightline ${next}`],
      dataKnown: true,
      versionRead: "published",
      ...fields,
    },
  };
}

function settle(
  records: readonly TableRecord[],
  surroundings: Partial<TableSurroundings> = {},
  choices: Partial<TableChoices> = {},
): SettledTable {
  return settleTable(
    records,
    { overlaps: [], conditions: new Map(), sets: [], ...surroundings },
    { ...NO_CHOICES, ...choices },
  );
}

/** The only decision, of this kind. */
function only(table: SettledTable, kind: Decision["kind"]): Decision {
  expect(table.decisions.map((decision) => decision.kind)).toEqual([kind]);
  return table.decisions[0] as Decision;
}

const person = (decision: Decision, option: string, reason: string | null = "known to us") =>
  ({ id: decision.id, option, by: "person", reason }) as const;

const included = (table: SettledTable): string[] =>
  table.rows.filter((row) => row.included).map((row) => row.number);

/** −2 ln L of the rows in at these values of x, in the order of their redshifts. */
function minus2LnL(table: SettledTable, x: readonly number[]): number {
  return new CompiledTable(tableSpecOf(table)).evaluate(Float64Array.from(x));
}

describe("a table without questions", () => {
  it("takes every row with its default form and is complete", () => {
    const table = settle([
      record(),
      record({ kind: "upperLimit", value: "0.8", level: "percent95" }),
    ]);
    expect(table.decisions).toEqual([]);
    expect(table.open).toBe(0);
    expect(table.rows.map(({ likelihood }) => "form" in likelihood && likelihood.form)).toEqual([
      "twoPiece",
      "halfGaussianBounded",
    ]);
  });

  it("leaves qualitative, incomplete and withdrawn records and those taken out by hand out, with the reason", () => {
    const records = [
      record({ kind: "qualitative" }),
      record({ value: null }),
      record({}, { state: "withdrawn" }),
      record(),
      record(),
    ];
    const table = settle(
      records,
      {},
      { out: [{ number: "FL-0004", reason: "bin shared with 5.88" }] },
    );
    expect(table.rows.map((row) => row.reason)).toEqual([
      "Qualitative: shown, never fitted",
      "Not complete enough to use",
      "Withdrawn",
      "Taken out: bin shared with 5.88",
      null,
    ]);
  });
});

describe("alternatives", () => {
  const three = (more: Partial<ConstraintFields> = {}): TableRecord[] =>
    ["0.45", "0.55", "0.65"].map((value) =>
      record({ value, alternativesGroup: "model", ...more }, { citation: "one paper" }),
    );

  it("enter as an equal mixture of standard deviation 0.129 with a third each, never as a product", () => {
    const table = settle(three());
    const decision = only(table, "alternatives");
    expect(decision.options.map(({ code }) => code)).toEqual([
      "mixture",
      "one:FL-0001",
      "one:FL-0002",
      "one:FL-0003",
    ]);
    expect(decision.proposed).toBe("mixture");
    expect(table.rows.map(({ weight }) => weight)).toEqual([1 / 3, 1 / 3, 1 / 3]);
    const [mixture] = table.mixtures;
    expect(mixture).toMatchObject({ label: "model", members: ["FL-0001", "FL-0002", "FL-0003"] });
    // PHYSICS.md, section 6 (independent code): 0.1290994449 at a sigma of 0.10; one sigma as printed is
    // 68.27 %, which is 1.0000217 sigma.
    const sigma = table.rows[0]?.used?.sigmaPlus ?? 0;
    expect((mixture?.standardDeviation ?? 0) ** 2 - sigma ** 2).toBeCloseTo(
      0.1290994449 ** 2 - 0.01,
      10,
    );
    expect(mixture?.standardDeviation?.toFixed(3)).toBe("0.129");
    const compiled = new CompiledTable(tableSpecOf(table));
    expect(compiled.terms.map(({ kind, members }) => [kind, members.length])).toEqual([
      ["mixture", 3],
    ]);
  });

  it("propose the one that the authors prefer", () => {
    const [one, two, last] = three() as [TableRecord, TableRecord, TableRecord];
    const preferred = { ...two, fields: { ...two.fields, alternativesPreferred: true } };
    const decision = only(settle([one, preferred, last]), "alternatives");
    const table = settle([one, preferred, last], {}, { decisions: [takeProposal(decision)] });
    expect(table.open).toBe(0);
    expect(included(table)).toEqual(["FL-0002"]);
    expect(table.rows[0]?.reason).toBe("Alternative answer to the same question as FL-0002");
  });
});

describe("overlapping data", () => {
  const overlaps = [
    { a: "FL-0001", b: "FL-0002", via: "QV 0001+01" },
    { a: "FL-0001", b: "FL-0003", via: "stack of QV 0001+01" },
    { a: "FL-0002", b: "FL-0003", via: "stack of QV 0001+01" },
  ];

  it("of two analyses of one sightline and a stack containing it make one cluster of which one row is kept", () => {
    const records = [record(), record({}, { year: 2025 }), record({}, { year: 2020 }), record()];
    const table = settle(records, { overlaps });
    const decision = only(table, "overlap");
    expect(decision.rows).toEqual(["FL-0001", "FL-0002", "FL-0003"]);
    expect(decision.proposed).toBe("keep:FL-0002");
    expect(included(table)).toEqual(["FL-0002", "FL-0004"]);
    expect(table.rows[0]?.reason).toBe("Shares QV 0001+01 with FL-0002");
  });

  it("stay together only with a reason", () => {
    const records = [record(), record(), record()];
    const decision = only(settle(records, { overlaps }), "overlap");
    const silent = settle(records, { overlaps }, { decisions: [person(decision, "all", " ")] });
    expect(silent.open).toBe(1);
    const said = settle(records, { overlaps }, { decisions: [person(decision, "all")] });
    expect(said.open).toBe(0);
    expect(included(said)).toHaveLength(3);
  });

  it("are settled anew when another row joins the cluster", () => {
    const records = [record(), record(), record()];
    const two = settle(records.slice(0, 2), { overlaps });
    const taken = [takeProposal(only(two, "overlap"))];
    expect(settle(records.slice(0, 2), { overlaps }, { decisions: taken }).open).toBe(0);
    expect(settle(records, { overlaps }, { decisions: taken }).open).toBe(1);
  });

  it("take a mixture as one", () => {
    const group = { alternativesGroup: "A" };
    const records = [
      record(group, { citation: "p" }),
      record(group, { citation: "p" }),
      record({}, { year: 2026 }),
    ];
    const table = settle(records, {
      overlaps: [
        { a: "FL-0001", b: "FL-0002", via: "field" },
        { a: "FL-0002", b: "FL-0003", via: "field" },
      ],
    });
    expect(table.decisions.map(({ kind, proposed }) => [kind, proposed])).toEqual([
      ["alternatives", "mixture"],
      ["overlap", "keep:FL-0003"],
    ]);
    expect(included(table)).toEqual(["FL-0003"]);
  });
});

describe("conditioned rows", () => {
  const path: ConditionPath = { through: ["FL-0001", "FL-0009"], on: "cmb" };
  const conditions = new Map([["FL-0001", [path]]]);
  const records = (): TableRecord[] => [
    record(),
    record({
      quantity: "opticalDepth",
      value: "0.054",
      plus: "0.007",
      minus: "0.007",
      z: null,
      zRole: null,
      methodTags: ["cmbPolarization"],
    }),
  ];

  it("are blocked by the optical depth that they contain, with the way shown", () => {
    const table = settle(records(), { conditions });
    const decision = only(table, "conditioned");
    expect(decision.words).toBe(
      "FL-0001 is conditioned on FL-0009, which is conditioned on CMB; in the table: FL-0002 (Author 2 2024).",
    );
    expect(table.open).toBe(1);
    expect(included(table)).toEqual(["FL-0002"]);
  });

  it("stay beside it only with a reason, which the table keeps", () => {
    const decision = only(settle(records(), { conditions }), "conditioned");
    next = 0;
    expect(
      settle(records(), { conditions }, { decisions: [person(decision, "keep", null)] }).open,
    ).toBe(1);
    next = 0;
    const table = settle(
      records(),
      { conditions },
      { decisions: [person(decision, "keep", "The prior is far wider than the row.")] },
    );
    expect(table.open).toBe(0);
    expect(included(table)).toEqual(["FL-0001", "FL-0002"]);
    expect(table.decisions[0]?.taken?.reason).toBe("The prior is far wider than the row.");
  });
});

describe("correlated sets", () => {
  const set = {
    id: "s1",
    label: "two bins",
    members: ["FL-0001", "FL-0002"],
    rho: [
      [1, 0.6],
      [0.6, 1],
    ],
  };

  it("of rho 0.6 with both residuals at one sigma have chi squared 1.25, not 2", () => {
    const table = settle([record({ z: "6" }), record({ z: "8" })], {
      sets: [set],
      overlaps: [{ a: "FL-0001", b: "FL-0002", via: "field" }],
    });
    expect(table.decisions).toEqual([]);
    // PHYSICS.md, section 6: chi squared 1.25.
    const above = 0.5 + (table.rows[0]?.used?.sigmaPlus ?? 0);
    expect(minus2LnL(table, [above, above])).toBeCloseTo(1.25, 12);
  });

  it("ask before a part is taken, and then use its exact marginal", () => {
    const three = {
      id: "s2",
      label: "three bins",
      members: ["FL-0001", "FL-0002", "FL-0003"],
      rho: [
        [1, 0.6, 0.2],
        [0.6, 1, 0.3],
        [0.2, 0.3, 1],
      ],
    };
    const table = settle([record({ z: "6" }), record({ z: "7" })], { sets: [three] });
    expect(only(table, "correlatedSet").proposed).toBe("marginal");
    expect(table.sets).toEqual([
      {
        id: "s2",
        label: "three bins",
        members: ["FL-0001", "FL-0002"],
        rho: [
          [1, 0.6],
          [0.6, 1],
        ],
        whole: false,
      },
    ]);
    const one = settle(
      [record()].map((row) => ({ ...row, number: "FL-0001" })),
      { sets: [three] },
    );
    expect(one.sets).toEqual([]);
    expect(minus2LnL(one, [0.5 + (one.rows[0]?.used?.sigmaPlus ?? 0)])).toBeCloseTo(1, 12);
  });
});

describe("single rows that need a decision", () => {
  it("without a level stay out until one is chosen, and take it then", () => {
    const rows = [record({ level: "notStated" })];
    const open = settle(rows);
    const decision = only(open, "levelNotStated");
    expect(open.rows[0]?.reason).toBe("Level not stated");
    const read = settle(rows, {}, { decisions: [takeProposal(decision)] });
    expect(read.rows[0]).toMatchObject({ included: true, options: { level: 0.6827 } });
    const wide = settle(rows, {}, { decisions: [person(decision, "level:0.95")] });
    // 0.10 at 95 % is 0.10 / 1.959963985 at one sigma (normal quantile, published tables).
    expect(minus2LnL(wide, [0.6])).toBeCloseTo(1.959963985 ** 2, 8);
  });

  it("ask about superseded, preprint, figure, mass-weighted and unbounded rows, each with what is proposed", () => {
    const table = settle([
      record({}, { state: "superseded", supersededBy: "FL-0099" }),
      record({ versionRead: "preprint" }),
      record({ readOffFigure: true, digitizingError: "0.01" }),
      record({ weighting: "mass" }),
      record({
        quantity: "redshiftAtFraction",
        fraction: "0.5",
        kind: "lowerLimit",
        value: "7",
        plus: null,
        minus: null,
        z: null,
        zRole: null,
        level: "percent95",
      }),
      record({ methodTags: ["jointInference"] }),
    ]);
    expect(table.decisions.map(({ kind, proposed }) => [kind, proposed])).toEqual([
      ["superseded", "out"],
      ["preprintOnly", "take"],
      ["readOffFigure", "take"],
      ["massWeighted", "out"],
      ["limitForm", "hardStep"],
      ["jointInference", "out"],
    ]);
    expect(included(table)).toEqual(["FL-0002", "FL-0003", "FL-0005"]);
    expect(table.rows[0]?.reason).toBe("Superseded by FL-0099");
    const taken = settle(
      [record({ weighting: "mass" }, { number: "FL-0004" })],
      {},
      { decisions: [person(table.decisions[3] as Decision, "asVolume")] },
    );
    expect(included(taken)).toEqual(["FL-0004"]);
  });

  it("take a chosen form with its reason", () => {
    const table = settle(
      [record()],
      {},
      {
        forms: [
          { number: "FL-0001", options: { form: "variableWidth" }, reason: "as in our last paper" },
        ],
      },
    );
    expect(table.rows[0]).toMatchObject({
      formReason: "as in our last paper",
      likelihood: { form: "variableWidth" },
    });
  });
});

describe("what is stored of a choice", () => {
  it("settles nothing that does not fit: another option, a proposal gone, an override as a default", () => {
    const rows = [record({}, { state: "superseded", supersededBy: null })];
    const decision = only(settle(rows), "superseded");
    for (const taken of [
      { ...takeProposal(decision), option: "nonsense" },
      { ...takeProposal(decision), option: "keep" },
      person(decision, "keep", "x".repeat(501)),
    ]) {
      expect(settle(rows, {}, { decisions: [taken] }).open).toBe(1);
    }
    expect(settle(rows, {}, { decisions: [person(decision, "keep")] }).open).toBe(0);
  });
});

it("cautions about a method that is never independent, which one row may come from all the same", () => {
  const table = settle([record({ methodTags: ["sourceBudget"] }), record()]);
  expect(table.rows.map(({ included, cautions }) => [included, cautions])).toEqual([
    [true, ["Source budget: never independent of other constraints"]],
    [true, []],
  ]);
});
