import { CompiledTable } from "~shared/likelihood/compile";
import { sigmasOfLevel } from "~shared/numerics/special";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import { emptyFields } from "~shared/statement/fields";
import { specOf, withRows, type TableLikelihood } from "~shared/table/tableLikelihood";

const used = (value: string): AsUsed =>
  asUsed({
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    zRole: "point",
    z: "7",
    kind: "twoSided",
    value,
    plus: "0.10",
    minus: "0.10",
    level: "oneSigma",
    estimator: "mean",
  })!;

/** A printed one sigma is 68.27 %, so a sigma is minus / k with k a little above 1 (common practice). */
const K2 = sigmasOfLevel(0.6827) ** 2;

const row = (number: string, value: string): TableLikelihood["rows"][number] => ({
  number,
  quotable: `${number}.1`,
  label: "Invented 2026",
  citationKey: number,
  families: ["dampingWing"],
  used: used(value),
  options: {},
});

const TABLE: TableLikelihood = {
  rows: [row("FL-0001", "0.50"), row("FL-0002", "0.40"), row("FL-0003", "0.30")],
  mixtures: [],
  sets: [
    {
      id: "FLS-0001",
      label: "Three bins",
      members: ["FL-0003", "FL-0001", "FL-0002"],
      rho: [
        [1, 0.1, 0.2],
        [0.1, 1, 0.6],
        [0.2, 0.6, 1],
      ],
    },
  ],
};

it("a part of a correlated set keeps the rows and columns of its members: the exact marginal", () => {
  const part = withRows(TABLE, ({ number }) => number !== "FL-0003");
  expect(part.sets).toEqual([
    {
      id: "FLS-0001",
      label: "Three bins",
      members: ["FL-0001", "FL-0002"],
      rho: [
        [1, 0.6],
        [0.6, 1],
      ],
    },
  ]);
  // One history has one x at z = 7: at 0.6 the residuals are +1 and +2 sigma, and χ² of a pair with ρ = 0.6 is
  // (1 − 2·0.6·2 + 4)/(1 − 0.36), closed form.
  const compiled = new CompiledTable(specOf(part));
  expect(compiled.evaluate(Float64Array.of(0.6))).toBeCloseTo((K2 * (1 - 2.4 + 4)) / 0.64, 12);
});

it("what has one member left stands for itself", () => {
  const part = withRows(TABLE, ({ number }) => number === "FL-0001");
  expect(part.sets).toEqual([]);
  // ((0.6 − 0.5)/0.1)² = 1, closed form.
  expect(new CompiledTable(specOf(part)).evaluate(Float64Array.of(0.6))).toBeCloseTo(K2, 12);
});

it("a mixture is named by its first member with a plus, and shrinks to what is left", () => {
  const mixed = { ...TABLE, sets: [], mixtures: [{ label: "m", members: ["FL-0001", "FL-0003"] }] };
  expect(specOf(mixed).mixtures).toEqual([{ id: "FL-0001+", members: ["FL-0001", "FL-0003"] }]);
  expect(withRows(mixed, ({ number }) => number !== "FL-0003").mixtures).toEqual([]);
});
