import type { FittingRow } from "~shared/formats/fittingRow";
import { methodsParagraph, type DescribedTable } from "~shared/formats/methodsParagraph";
import type { ConstraintFields } from "~shared/statement/fields";
import {
  NO_CHOICES,
  takeProposal,
  type TableChoices,
  type TakenDecision,
} from "~shared/table/decision";
import { settleTable } from "~shared/table/settleTable";

import { buildFields } from "../buildFields";

interface Given {
  fields?: Partial<ConstraintFields>;
  key?: string;
}

/** Records settled as one table, each read in a paper of its own. */
function settled(given: readonly Given[], choices: Partial<TableChoices> = {}) {
  const records = given.map(({ fields = {}, key }, i) => ({
    number: `FL-000${i + 1}`,
    fields: buildFields({ estimator: "mean", plus: "0.19", minus: "0.19", ...fields }),
    citation: key ?? `Tarrowin202${i}`,
    shortName: "Tarrowin 2025",
    year: 2025,
    state: "current" as const,
    supersededBy: null,
  }));
  const table = settleTable(
    records,
    { overlaps: [], conditions: new Map(), sets: [] },
    { ...NO_CHOICES, ...choices },
  );
  const rows = table.rows.map((row, i): FittingRow => {
    const { number, fields, citation, shortName, year, state } = records[i]!;
    return {
      record: {
        number,
        quotable: `${number}.1`,
        state,
        fields,
        citation: { key: citation, shortName, year, doi: null, arxiv: null, bibcode: null },
      },
      settled: row,
      setLabel: null,
    };
  });
  return { rows, decisions: table.decisions };
}

const described = (changes: Partial<DescribedTable> = {}): string =>
  methodsParagraph({
    registry: "Fogline",
    source: "release 2",
    sourceKey: "FoglineRelease2",
    address: "https://fogline.example/tables/wings_2",
    digest: "0123456789abcdef".repeat(4),
    filter: "Text 5 % & more",
    ...settled([{}]),
    ...changes,
  });

it("begins with how many, whence, by which filter and under which digest", () => {
  expect(described().split("\n")[0]).toBe(
    "We use one constraint from Fogline, release 2 \\citep{FoglineRelease2}, selected by: " +
      "Text 5 \\% \\& more (\\url{https://fogline.example/tables/wings_2}, SHA-256 \\texttt{0123456789ab}).",
  );
});

it("cites no release where the table is over the approved records", () => {
  const [first] = described({
    source: "the approved records up to event 411",
    sourceKey: null,
  }).split("\n");
  expect(first).toContain("Fogline, the approved records up to event 411, selected by");
  expect(first).not.toContain("\\citep");
});

it("ends by saying what is assumed, and with a line feed", () => {
  expect(described()).toMatch(
    /\nThe rows are multiplied as independent of one another, which is an assumption; the choices are ours, not the authors'\.\n$/,
  );
});

it("cites every work once for each family that it serves, in the vocabulary's order", () => {
  const rows = settled([
    { fields: { methodTags: ["darkGaps"], dataUsed: ["a"] }, key: "Kelm2024" },
    {
      fields: { methodTags: ["galaxyDampingWing"], z: "6.2", dataUsed: ["b"] },
      key: "Tarrowin2025",
    },
    {
      fields: { methodTags: ["quasarDampingWing"], z: "9.1", dataUsed: ["c"] },
      key: "Tarrowin2025",
    },
    {
      fields: { methodTags: ["galaxyDampingWing"], z: "8.3", dataUsed: ["d"] },
      key: "Arvensis2031",
    },
  ]);
  expect(described(rows)).toContain(
    "\nThey come from damping wing \\citep{Arvensis2031,Tarrowin2025} and forest opacity \\citep{Kelm2024}.\n",
  );
});

it("keeps the capitals of names", () => {
  const rows = settled([
    { fields: { methodTags: ["emitterLuminosityFunction"], dataUsed: ["a"] }, key: "Kelm2024" },
    { fields: { methodTags: ["kineticSz"], z: "6.2", dataUsed: ["b"] }, key: "Lornhill2026" },
  ]);
  expect(described(rows)).toContain(
    "\nThey come from Ly$\\alpha$ luminosity function \\citep{Kelm2024} and CMB \\citep{Lornhill2026}.\n",
  );
});

it("counts the likelihood forms of the rows in; Gauss keeps the capital", () => {
  const rows = settled(
    [
      { fields: { z: "6.2", dataUsed: ["a"] } },
      { fields: { z: "7.2", dataUsed: ["b"] } },
      {
        fields: { z: "8.2", dataUsed: ["c"], plus: "0.10", minus: "0.20", estimator: "median" },
      },
      { fields: { z: "9.2", dataUsed: ["d"] } },
    ],
    {
      forms: [
        { number: "FL-0004", options: { form: "gaussian" }, reason: "The width is the same" },
      ],
    },
  );
  expect(described(rows)).toContain(
    "\nAs likelihoods we take two-piece (2 rows), quantile-matched (one row) and Gaussian (one row).\n",
  );
});

it("tells how many were left out, only where some were", () => {
  expect(described()).not.toContain("left out");
  const given = [
    { fields: { z: "6.2", dataUsed: ["a"] } },
    { fields: { z: "7.2", dataUsed: ["b"] } },
    { fields: { z: "8.2", dataUsed: ["c"] } },
  ];
  const without = (...numbers: string[]) =>
    described(settled(given, { out: numbers.map((number) => ({ number, reason: "Not ours" })) }));
  expect(without("FL-0001")).toContain("We use 2 constraints");
  expect(without("FL-0001")).toContain("\nOne matching record was left out.\n");
  expect(without("FL-0001", "FL-0003")).toContain("\n2 matching records were left out.\n");
});

describe("decisions", () => {
  const given = [{ fields: { level: "notStated" as const } }];
  const open = settled(given).decisions;
  const [decision] = open;

  it("are not told while they are open", () => {
    expect(open.map(({ kind }) => kind)).toEqual(["levelNotStated"]);
    expect(described(settled(given))).not.toContain("Level not stated");
  });

  it("are told as proposed, or with the reason", () => {
    const taken = (choice: TakenDecision) => described(settled(given, { decisions: [choice] }));
    const words = (code: string) => decision!.options.find((option) => option.code === code)!.words;
    const byDefault = takeProposal(decision!);
    const escaped = (text: string) => text.replace(/[%&_]/g, "\\$&");
    expect(taken(byDefault)).toContain(
      `\nLevel not stated (FL-0001): ${escaped(words(byDefault.option))}, as proposed.\n`,
    );
    const other = decision!.options.find(({ code }) => code !== decision!.proposed)!.code;
    expect(
      taken({ id: decision!.id, option: other, by: "person", reason: "5 % is what they mean" }),
    ).toContain(`(FL-0001): ${escaped(words(other))}, since: 5 \\% is what they mean.\n`);
  });
});
