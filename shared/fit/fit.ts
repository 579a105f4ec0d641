import { pullOf, type Task } from "~shared/inference";
import { specOf } from "~shared/table/tableLikelihood";

import { bandRedshifts, historyAt, historyBand } from "./band";
import { drawCloud } from "./cloud";
import { densityCurve, type Drawn, jointDensity, picturesOf } from "./densities";
import { priorDraws } from "./family";
import { HISTORY_WORDS, inSymbols } from "./historyWords";
import {
  fitPosterior,
  type FitPosterior,
  type FitSetting,
  problemOf,
  quantitiesOf,
} from "./posterior";
import { summaryOfDraws } from "./priorSummary";
import type { DensityCurve, FitResult, FittedRow, JointDensity, QuantitySummary } from "./request";
import { warningsOf } from "./warnings";

/** Bins along a side of a joint density, by the number of parameters: all of them together stay small. */
function sideOf(dimension: number): number {
  return dimension <= 2 ? 64 : dimension <= 4 ? 40 : 28;
}
/** Independent draws that stand for a prior beside a sampled posterior. */
const PRIOR_DRAWS = 20_000;
/** A density at the end of a prior above this part of its largest is cut by that end. */
const CUT = 0.1;

/** Fits a table and gathers everything that is shown and kept of it. */
export function* fit(setting: FitSetting): Task<FitResult> {
  const { request, family, background } = setting;
  const posterior = yield* fitPosterior(setting, request.table);
  const cloud = posterior.cloud();
  const quantities = quantitiesOf(posterior);
  yield { stage: "densities", fraction: 0 };
  const pictures = picturesOf(posterior.problem, cloud, quantities);
  const densities = pictures.map((picture) => densityCurve(cloud, picture));
  const joint: JointDensity[] = [];
  for (const [x, y] of pairsOf(posterior, pictures)) {
    joint.push(jointDensity(cloud, x, y, sideOf(posterior.problem.dimension)));
    yield { stage: "densities", fraction: 0.5 };
  }
  const z = bandRedshifts(request.family);
  const band = historyBand(family, background, z, cloud);
  yield { stage: "the prior alone", fraction: 0 };
  const prior = yield* priorOf(setting, posterior, quantities, densities);
  const rows = rowsOf(posterior, setting);
  const { best, method } = posterior;
  const derived = new Float64Array(4);
  posterior.problem.derived(best.theta, derived);
  const how = method === "grid" ? "Posterior on a grid." : samplerWords(setting);
  return {
    prior: `${HISTORY_WORDS[request.family.kind]}. ${inSymbols(family.prior)} ${how}`,
    parameterNames: posterior.problem.names,
    method,
    best: {
      parameters: Array.from(best.theta),
      minus2LnL: best.minus2LnL,
      atEdge: best.atEdge,
      degenerate: best.degenerate,
      derived: Array.from(derived, orNull),
      x: historyAt(family, background, z, best.theta),
    },
    rows,
    quantities,
    densities,
    joint,
    band,
    priorQuantities: prior.quantities,
    priorDensities: prior.densities,
    logEvidence: posterior.logEvidence,
    convergence: posterior.convergence,
    grid: posterior.grid,
    sound: posterior.sound,
    warnings: warningsOf(setting, posterior, cutBy(posterior, densities)),
  };
}

function orNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}

function samplerWords({ request }: FitSetting): string {
  const { seed, walkers, steps } = request.sampler;
  return `Posterior by four ensembles of ${walkers} walkers and ${steps} steps each, seed ${seed}.`;
}

/** All pairs of parameters, then optical depth and midpoint; none for a family of one parameter, which is a line. */
function pairsOf({ problem }: FitPosterior, pictures: readonly Drawn[]): [Drawn, Drawn][] {
  if (problem.dimension < 2) return [];
  const parameters = pictures.filter(({ name }) => problem.names.includes(name));
  const pairs = parameters.flatMap((x, i) =>
    parameters.slice(i + 1).map((y): [Drawn, Drawn] => [x, y]),
  );
  const tau = pictures.find(({ name }) => name === "tau");
  const midpoint = pictures.find(({ name }) => name === "midpoint");
  return tau && midpoint ? [...pairs, [tau, midpoint]] : pairs;
}

/** Parameters whose density is still high at an end of their prior. */
function cutBy({ problem }: FitPosterior, densities: readonly DensityCurve[]): string[] {
  if (problem.table.terms.length === 0) return [];
  return problem.names.filter((name, d) => {
    const curve = densities.find((one) => one.name === name);
    if (!curve) return false;
    const { x, density } = curve;
    const step = x[1]! - x[0]!;
    const atLow = x[0]! - step < problem.lows[d]! && density[0]! > CUT;
    const atHigh =
      x[x.length - 1]! + step > problem.highs[d]! && density[density.length - 1]! > CUT;
    return atLow || atHigh;
  });
}

/** The prior's own distributions: by the grid without rows, or from independent draws. */
function* priorOf(
  setting: FitSetting,
  posterior: FitPosterior,
  quantities: readonly QuantitySummary[],
  densities: readonly DensityCurve[],
): Task<{ quantities: readonly QuantitySummary[]; densities: readonly DensityCurve[] }> {
  const empty = { rows: [], mixtures: [], sets: [] };
  if (posterior.method === "grid") {
    if (setting.request.table.rows.length === 0) return { quantities, densities };
    const prior = yield* fitPosterior(setting, empty, { coarse: true });
    const cloud = prior.cloud();
    const own = quantitiesOf(prior);
    return {
      quantities: own,
      densities: picturesOf(prior.problem, cloud, own).map((picture) =>
        densityCurve(cloud, picture),
      ),
    };
  }
  const problem = problemOf(setting, empty);
  // Not the chain's own stream: the two must be independent.
  const theta = priorDraws(setting.family, PRIOR_DRAWS, setting.request.sampler.seed + 1);
  const cloud = drawCloud(problem, theta, PRIOR_DRAWS);
  const own = [...cloud.columns].flatMap(([name, values]) => summaryOfDraws(name, values));
  return {
    quantities: own,
    densities: picturesOf(problem, cloud, own).map((picture) => densityCurve(cloud, picture)),
  };
}

/** Terms at the best point, in the table's order. */
function rowsOf({ problem, best }: FitPosterior, { request }: FitSetting): FittedRow[] {
  const spec = specOf(request.table);
  const values = problem.termValues(best.theta);
  const models = problem.modelValues(best.theta);
  const modelOf = new Map(problem.table.rowIds.map((id, i) => [id, orNull(models[i]!)]));
  const total = values.reduce((sum, value) => sum + Math.max(0, value), 0);
  const place = new Map(request.table.rows.map(({ number }, i) => [number, i]));
  return problem.table.terms
    .map(({ id, kind, members }, t) => {
      const minus2LnL = values[t]!;
      const model = modelOf.get(id) ?? null;
      return {
        term: id,
        members,
        minus2LnL,
        share: total > 0 ? Math.max(0, minus2LnL) / total : 0,
        pull: kind === "row" && model !== null ? pullOf(spec, id, model, minus2LnL) : null,
        models: members.map((member) => modelOf.get(member) ?? null),
      };
    })
    .sort((a, b) => (place.get(a.members[0]!) ?? 0) - (place.get(b.members[0]!) ?? 0));
}
