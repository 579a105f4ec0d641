import reference from "../../fixtures/checks/reference.json";
import { averagedMinus2LnL } from "~shared/likelihood/averaged";
import {
  band,
  bandTailSigma,
  bandWideTails,
  boundedHalfGaussianWidth,
  flatThenGaussian,
  type Form,
  gaussian,
  halfGaussianUnbounded,
  quantileMatched,
  quantileMatchedCdf,
  quantileMatchedDensity,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { sigmasOfLevel } from "~shared/numerics/special";

/** scipy, each case computed by two independent paths unless its id holds x or b: README of the fixtures. */
interface Case {
  id: string;
  function: string;
  inputs: Record<string, number> & { statement: Statement; z: number[]; x_linear: number[] };
  value: number | "+inf";
  pdf: number;
  cdf: number;
  peak_at: number;
  tail_sigma: number;
  bin_average_lnL: number;
  uncertain_lnL: number;
}
interface Statement {
  type: string;
  form?: string;
  m: number;
  minus: number;
  plus: number;
  CL: number;
  u: number;
  l: number;
  s: number;
  lo: number;
  hi: number;
  sigma: number;
  x: number[];
  p: number[];
}
const cases = reference.cases as unknown as Case[];
const of = (name: string) => cases.filter((c) => c.function === name);

/** PHYSICS.md section 2: relative 1e-8 or absolute 1e-10, +∞ exactly. */
function expectMinus2LnL(actual: number, expected: number | "+inf"): void {
  if (expected === "+inf") expect(actual).toBe(Infinity);
  else {
    const allowed = Math.max(1e-10, 1e-8 * Math.abs(expected));
    expect(Math.abs(actual - expected)).toBeLessThanOrEqual(allowed);
  }
}

function formOf(s: Statement): Form {
  const k = s.CL === undefined ? Number.NaN : sigmasOfLevel(s.CL);
  const side = s.type === "upper_limit" ? "upper" : "lower";
  const limit = s.type === "upper_limit" ? s.u : s.l;
  switch (s.form ?? s.type) {
    case "split_normal":
      return twoPiece(s.m, s.minus / k, s.plus / k);
    case "variable_width":
      return variableWidth(s.m, s.minus, s.plus, k);
    case "half_gaussian":
      return halfGaussianUnbounded(side, limit, k);
    case "flat_tail":
      return flatThenGaussian(side, limit, s.s);
    case "smoothed_step":
      return smoothedStep(side, limit, s.s);
    case "interval":
      return bandWideTails(s.lo, s.hi, k);
    case "gaussian":
      return gaussian(s.m, s.sigma);
    case "tabulated":
      return tabulated(s.x, s.p);
    default:
      throw new Error(`no such form in the check file: ${s.form ?? s.type}`);
  }
}

describe("likelihood forms against independent code", () => {
  it.each(of("m2lnL"))("$id", ({ inputs, value }) => {
    expectMinus2LnL(formOf(inputs.statement).minus2LnL(inputs.x!), value);
  });

  it.each(of("half_gaussian_bounded_width"))("width of $id", ({ inputs, value }) => {
    const width = boundedHalfGaussianWidth(inputs.limit!, inputs.level!);
    expect(Math.abs(width - (value as number))).toBeLessThanOrEqual(1e-10);
  });

  it.each(of("quantile_matched"))("$id", ({ inputs, value, pdf, cdf, peak_at }) => {
    const k = sigmasOfLevel(inputs.level!);
    const matched = quantileMatched(inputs.median!, inputs.minus! / k, inputs.plus! / k, k);
    expectMinus2LnL(matched.minus2LnL(inputs.x!), value);
    expect(Math.abs(quantileMatchedDensity(matched, inputs.x!) / pdf - 1)).toBeLessThan(1e-8);
    expect(Math.abs(quantileMatchedCdf(matched, inputs.x!) - cdf)).toBeLessThan(1e-10);
    // The reference found its peak by a bounded search, which knows a place to ~1e-8 only.
    expect(Math.abs(matched.peak - peak_at)).toBeLessThan(1e-7);
  });

  it.each(of("band_self_consistent"))("$id", ({ inputs, value, tail_sigma }) => {
    expectMinus2LnL(band(inputs.lo!, inputs.hi!, inputs.level!).minus2LnL(inputs.x!), value);
    const sigma = bandTailSigma(inputs.lo!, inputs.hi!, inputs.level!);
    expect(Math.abs(sigma / tail_sigma - 1)).toBeLessThan(1e-12);
  });

  it.each(of("z_role"))("$id: bin average and uncertain redshift", (c) => {
    const [zLow, zHigh] = c.inputs.z as [number, number];
    const [xLow, xHigh] = c.inputs.x_linear as [number, number];
    const row = twoPiece(c.inputs.value!, c.inputs.sigma!, c.inputs.sigma!);
    const mean = 0.5 * (xLow + xHigh);
    expectMinus2LnL(row.minus2LnL(mean), -2 * c.bin_average_lnL);
    const x = (z: number) => xLow + ((xHigh - xLow) * (z - zLow)) / (zHigh - zLow);
    const averaged = averagedMinus2LnL(row.minus2LnL, { x, breaks: [] }, zLow, zHigh);
    expectMinus2LnL(averaged, -2 * c.uncertain_lnL);
  });
});
