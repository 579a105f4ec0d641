import { wrapWords } from "@/charts/figureFile";
import { figureCitations, figureSvg } from "@/features/history/exportFigure";
import { domainOf } from "@/features/history/HistoryScreen";
import {
  DEFAULT_MODELS,
  modelNames,
  modelsToParam,
  newModel,
  paramToModels,
} from "@/features/history/models";
import { readoutOf, shownNumber } from "@/features/history/readouts";
import { stripGroups } from "@/features/history/QuantityStrip";
import { decideByDefault, NO_SURROUNDINGS, scoreHistory } from "@/features/history/scoring";
import { background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import { buildRow } from "./rows";

describe("models in the address", () => {
  it("come back as they were", () => {
    const text = "tanh_7.35_0.95,powerLaw_6_8.6_off";
    expect(modelsToParam(paramToModels(text))).toBe(text);
  });
  it("keep an empty list apart from an open one", () => {
    expect(paramToModels("none")).toEqual([]);
    expect(paramToModels(undefined)).toBe(DEFAULT_MODELS);
  });
  it("hold mistyped numbers inside their sliders", () => {
    const [model] = paramToModels("tanh_99_wide");
    expect(model?.values).toEqual({ zRe: 12, deltaZ: 0.5 });
  });
  it("never bring more than three", () => {
    expect(paramToModels("tanh_7_1,tanh_7_1,tanh_7_1,tanh_7_1")).toHaveLength(3);
  });
  it("tell several of one family apart", () => {
    expect(
      modelNames([newModel("tanh", "a"), newModel("powerLaw", "b"), newModel("tanh", "c")]),
    ).toEqual(["tanh", "power law", "tanh 2"]);
  });
});

describe("readouts", () => {
  it("are the engine's for the conventional tanh", () => {
    // PHYSICS, worked values: τ(tanh 7.67, Δz 0.5) = 0.0541970146; duration 0.75 → 0.25 is 0.5494.
    const readout = readoutOf(tanhHistory({ zRe: 7.67 }), background());
    expect(readout.opticalDepth).toBeCloseTo(0.0541970146, 9);
    expect(shownNumber(readout.duration, 4)).toBe("0.5494");
    expect(readout.midpoint).toBeCloseTo(7.67, 10);
  });
  it("say when a number rounds to nothing or does not exist", () => {
    expect(shownNumber(1e-9, 4)).toBe("< 0.0001");
    expect(shownNumber(null, 2)).toBe("none");
    expect(shownNumber(Infinity, 1)).toBe("infinite");
    expect(shownNumber(-0.5, 1)).toBe("−0.5");
  });
});

describe("default decisions", () => {
  it("count one of several alternatives: the preferred one", () => {
    const decided = decideByDefault([
      buildRow("FL-0001", { alternativesGroup: "prior" }),
      buildRow("FL-0002", { alternativesGroup: "prior", alternativesPreferred: true }),
      buildRow("FL-0003", {}),
    ]);
    expect(decided.rows.map(({ id }) => id)).toEqual(["FL-0002", "FL-0003"]);
    expect(decided.before[0]).toMatchObject({ id: "FL-0001" });
    expect(decided.before[0]?.reason).toContain("FL-0002");
  });
  it("keep equal group names of two papers apart", () => {
    const other = buildRow("FL-0002", { alternativesGroup: "prior" }, { key: "other2025" });
    const decided = decideByDefault([buildRow("FL-0001", { alternativesGroup: "prior" }), other]);
    expect(decided.rows).toHaveLength(2);
  });
  it("leave a row without a level out, as a new table proposes", () => {
    const decided = decideByDefault([
      buildRow("FL-0001", { level: "notStated", estimator: "mode" }),
      buildRow("FL-0002", {}),
    ]);
    expect(decided.rows.map(({ id }) => id)).toEqual(["FL-0002"]);
    expect(decided.before).toEqual([{ id: "FL-0001", reason: "Level not stated." }]);
  });
  it("count one of two papers on the same sightline, the later one", () => {
    const decided = decideByDefault(
      [
        buildRow("FL-0001", { dataUsed: ["QV 0719+31"] }, { key: "early2021", year: 2021 }),
        buildRow("FL-0002", { dataUsed: ["QV 0719+31"] }, { key: "late2025", year: 2025 }),
      ],
      { ...NO_SURROUNDINGS, overlaps: [{ a: "FL-0001", b: "FL-0002", via: "QV 0719+31" }] },
    );
    expect(decided.rows.map(({ id }) => id)).toEqual(["FL-0002"]);
    expect(decided.before[0]?.reason).toBe("Shares QV 0719+31 with FL-0002.");
  });
  it("still say what a model has at a row that does not count", () => {
    const decided = decideByDefault([
      buildRow("FL-0001", { alternativesGroup: "prior", z: "7" }),
      buildRow("FL-0002", { alternativesGroup: "prior", alternativesPreferred: true }),
    ]);
    const history = tanhHistory({ zRe: 7 });
    const score = scoreHistory(decided, history, background());
    expect(score.rows.map(({ id }) => id)).toEqual(["FL-0002"]);
    // At its midpoint a tanh history is half neutral (closed form).
    expect(score.at("FL-0001")?.model).toBeCloseTo(0.5, 12);
  });
  it("count the rows of a correlated set together, by χ² = tᵀ ρ⁻¹ t", () => {
    // Both bins one sigma below a history that is half neutral at 7: x(7) = 0.5 (closed form).
    const bin = { z: "7", value: "0.40", plus: "0.10", minus: "0.10", dataUsed: ["Fen field"] };
    const rows = [buildRow("FL-0001", bin), buildRow("FL-0002", bin), buildRow("FL-0003", bin)];
    const set = {
      id: "FLS-0001",
      members: ["FL-0001", "FL-0002"],
      rho: [
        [1, 0.6],
        [0.6, 1],
      ],
    };
    const via = "Fen field";
    const overlaps = [
      { a: "FL-0001", b: "FL-0002", via },
      { a: "FL-0001", b: "FL-0003", via },
      { a: "FL-0002", b: "FL-0003", via },
    ];
    const decided = decideByDefault(rows, { ...NO_SURROUNDINGS, overlaps, sets: [set] });
    // The third shares the field without a matrix that would say how much.
    expect(decided.before.map(({ id }) => id)).toEqual(["FL-0003"]);
    const score = scoreHistory(decided, tanhHistory({ zRe: 7 }), background());
    expect(score.sets[0]).toMatchObject({ members: ["FL-0001", "FL-0002"], whole: true });
    // PHYSICS.md, worked values: χ² = 1.25 for +1σ, +1σ at ρ 0.6; by themselves they would sum to 2.
    // One sigma is kept as 68.27 %, which is 1.00002 sigma: hence four digits.
    expect(score.minus2LnL).toBeCloseTo(1.25, 3);
    expect(score.scored).toBe(2);
    expect(score.at("FL-0001")?.minus2LnL).toBeCloseTo(1, 3);

    // A part is the exact marginal: one bin by itself.
    const part = decideByDefault(rows.slice(0, 1), { ...NO_SURROUNDINGS, sets: [set] });
    expect(part.sets).toEqual([]);
    expect(scoreHistory(part, tanhHistory({ zRe: 7 }), background()).minus2LnL).toBeCloseTo(1, 3);
  });
  it("name every row they leave out", () => {
    const decided = decideByDefault([
      buildRow("FL-0001", {}),
      buildRow("FL-0002", { kind: "qualitative", value: null, plus: null, minus: null }),
      buildRow("FL-0003", { weighting: "mass" }),
    ]);
    const score = scoreHistory(decided, tanhHistory({ zRe: 7 }), background());
    expect(score.scored).toBe(1);
    expect(score.reasons.map(({ id }) => id)).toEqual(["FL-0002", "FL-0003"]);
    for (const { reason } of score.reasons) expect(reason).not.toBe("");
  });
});

describe("stripGroups", () => {
  it("puts optical depths and durations on axes of their own and leaves fractions to the chart", () => {
    const depth = {
      quantity: "opticalDepth",
      value: "0.057",
      plus: "0.011",
      minus: "0.011",
    } as const;
    const groups = stripGroups([
      buildRow("FL-0001", {}),
      buildRow("FL-0002", depth),
      buildRow("FL-0003", depth),
      buildRow("FL-0004", {
        ...depth,
        quantity: "opticalDepthRange",
        rangeLow: "15",
        rangeHigh: "30",
      }),
    ]);
    expect(groups.map(({ title, rows }) => [title, rows.length])).toEqual([
      ["Optical depth, total", 2],
      ["Optical depth, z 15 to 30", 1],
    ]);
  });
});

describe("domainOf", () => {
  it("is 5 to 11 unless the filter asks for other redshifts", () => {
    expect(domainOf({})).toEqual([5, 11]);
    expect(domainOf({ zFrom: 6, zTo: 7.5 })).toEqual([6, 8]);
    expect(domainOf({ zFrom: 12 })).toEqual([12, 18]);
  });
});

describe("figure", () => {
  const row = buildRow("FL-0001", {});
  it("cites every paper once, with its key", () => {
    expect(figureCitations([row, buildRow("FL-0002", {})])).toEqual(["Vask 2024 [vask2024]"]);
  });
  it("wraps its words without losing any", () => {
    const text = "one two three four five six seven";
    const lines = wrapWords(text, 9);
    expect(lines.join(" ")).toBe(text);
    expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(9);
  });
  it("is well-formed XML that holds legend, citation and the demonstration label", () => {
    const text = figureSvg({
      drawing: "<svg/>",
      rows: [buildRow("FL-0001", {}, { shortName: "Vask & Osuwande 2024" })],
      overlays: [],
      source: "Fogline registry, to event 3.",
      demonstration: true,
      faces: "",
    });
    const parsed = new DOMParser().parseFromString(text, "image/svg+xml");
    expect(parsed.querySelector("parsererror")).toBeNull();
    const words = parsed.documentElement.textContent ?? "";
    for (const part of [
      "Damping wing",
      "Vask & Osuwande 2024 [vask2024]",
      "Invented demonstration data",
    ]) {
      expect(words).toContain(part);
    }
  });
});
