import type { Background } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import { samplePosterior, type SamplerOptions } from "~shared/inference/ensembleSampler";
import type { FitFamily } from "~shared/inference/families";
import { type GridOptions, gridPosterior } from "~shared/inference/gridPosterior";
import type { Summary } from "~shared/inference/marginal";
import { FitProblem } from "~shared/inference/problem";
import { sampledEvidence } from "~shared/inference/sampledEvidence";
import type { Task } from "~shared/inference/task";
import { CompiledTable, type TableSpec } from "~shared/likelihood/compile";

/** What one term of a table does to a fit. */
export interface TermInfluence {
  readonly id: string;
  readonly members: readonly string[];
  /** −2 ln L at the best point of all rows. */
  readonly minus2LnL: number;
  /** Signed root of it: positive where the model lies above the row's peak; null for a group. */
  readonly pull: number | null;
  /**
   * Shift of each mean without the term, in units of the full posterior's width: parameters, and the derived
   * quantities that `full` holds and the rest of the table as well.
   */
  readonly shift: Readonly<Record<string, number>>;
}

/** A posterior of the whole table, from the grid or from the sampler. */
export interface FullPosterior {
  readonly best: { readonly theta: ArrayLike<number> };
  readonly parameters: Readonly<Record<string, Summary>>;
  /** Derived quantities, where their shifts are wanted. */
  readonly derived?: Readonly<Record<string, Summary | null>>;
}

/** What a shift is measured with. */
type Refitted = Pick<FullPosterior, "parameters" | "derived">;

/** Accuracy enough for a shift shown to two digits. */
const COARSE: GridOptions = { tolerance: 5e-3 };

/**
 * −2 ln L, pull and leave-one-out shift of every term of a table.
 *
 * @param full - The posterior of all rows.
 * @param spec - The table; a mixture or correlated set is left out as a whole.
 * @param options - How to sample, for three or more parameters: each term costs a run, and its shift has
 *   the Monte-Carlo error of that run; one or two go by the grid. Or how the rest of the table is fitted, in
 *   place of both.
 * @returns One entry for each term of the table, in its order.
 * @throws {DomainError} For three or more parameters without a sampler.
 */
export function* leaveOneOut(
  problem: FitProblem,
  full: FullPosterior,
  spec: TableSpec,
  options: {
    readonly sampler?: SamplerOptions;
    readonly refit?: (rest: FitProblem) => Task<Refitted>;
  } = {},
): Task<TermInfluence[]> {
  const refit =
    options.refit ??
    ((rest: FitProblem) => posteriorWithout(rest, options.sampler, full.derived !== undefined));
  const values = problem.termValues(full.best.theta);
  const models = problem.modelValues(full.best.theta);
  const byRow = new Map(problem.table.rowIds.map((id, i) => [id, models[i]!]));
  const results: TermInfluence[] = [];
  for (let t = 0; t < problem.table.terms.length; t++) {
    const term = problem.table.terms[t]!;
    const dropped = new Set(term.members);
    const reduced: TableSpec = {
      rows: spec.rows.filter(({ id }) => !dropped.has(id)),
      mixtures: spec.mixtures?.filter(({ id }) => id !== term.id) ?? [],
      correlated: spec.correlated?.filter(({ id }) => id !== term.id) ?? [],
    };
    const without = new FitProblem(new CompiledTable(reduced), problem.family, problem.background);
    const posterior = yield* refit(without);
    const means: Record<string, Summary | null> = { ...posterior.derived, ...posterior.parameters };
    const shift = Object.fromEntries(
      Object.entries({ ...full.derived, ...full.parameters }).flatMap(([name, summary]) => {
        const other = means[name];
        return summary && other ? [[name, (other.mean - summary.mean) / summary.sd]] : [];
      }),
    );
    results.push({
      id: term.id,
      members: term.members,
      minus2LnL: values[t]!,
      pull: term.kind === "row" ? pullOf(spec, term.id, byRow.get(term.id)!, values[t]!) : null,
      shift,
    });
    yield { stage: "leave one out", fraction: (t + 1) / problem.table.terms.length };
  }
  return results;
}

function* posteriorWithout(
  problem: FitProblem,
  sampler: SamplerOptions | undefined,
  withDerived: boolean,
): Task<Refitted> {
  return problem.dimension <= 2
    ? yield* gridPosterior(problem, { ...COARSE, withoutDerived: !withDerived })
    : yield* samplePosterior(problem, samplerFor(problem.dimension, sampler));
}

function samplerFor(dimension: number, sampler: SamplerOptions | undefined): SamplerOptions {
  if (sampler) return sampler;
  throw new DomainError("sampler", "nothing", `given for ${dimension} parameters`);
}

/** Signed root of a row's −2 ln L, above zero where the model lies above the row's peak. */
export function pullOf(spec: TableSpec, id: string, model: number, minus2LnL: number): number {
  const row = spec.rows.find((candidate) => candidate.id === id)!;
  const x = row.evaluatedIn === "log10" ? Math.log10(model) : model;
  return Math.sign(x - row.shape.peak) * Math.sqrt(Math.max(0, minus2LnL));
}

/** How far two parts of a table pull apart. */
export interface Tension {
  /** (μ_A − μ_B)/√(σ_A² + σ_B²) of each parameter. */
  readonly parameters: Readonly<Record<string, number>>;
  /** ln Z_AB − ln Z_A − ln Z_B: above zero, the parts agree better than separate histories would. */
  readonly logEvidenceRatio: number;
  /** Its standard error from sampling; 0 where a grid gave the evidences. */
  readonly logEvidenceError: number;
}

interface Part {
  readonly parameters: Readonly<Record<string, Summary>>;
  readonly logEvidence: number;
  readonly error: number;
}

/** (μ_A − μ_B)/√(σ_A² + σ_B²). */
export function apart(a: Summary, b: Summary): number {
  return (a.mean - b.mean) / Math.hypot(a.sd, b.sd);
}

/**
 * Tension of two sets of rows under one family.
 *
 * @param a - Rows of the one method family.
 * @param b - Rows of the other; no row in both.
 * @param options - Of the grid, for one or two parameters; of the sampler, for more.
 * @throws {DomainError} For three or more parameters without a sampler.
 */
export function* tension(
  a: TableSpec,
  b: TableSpec,
  family: FitFamily,
  background: Background,
  options: GridOptions & { readonly sampler?: SamplerOptions } = {},
): Task<Tension> {
  const fit = function* (spec: TableSpec): Task<Part> {
    const problem = new FitProblem(new CompiledTable(spec), family, background);
    if (problem.dimension <= 2) {
      const grid = yield* gridPosterior(problem, { ...options, withoutDerived: true });
      return { parameters: grid.parameters, logEvidence: grid.logEvidence, error: 0 };
    }
    const sampler = samplerFor(problem.dimension, options.sampler);
    const sampled = yield* samplePosterior(problem, sampler);
    const evidence = yield* sampledEvidence(problem, sampled, sampler.seed);
    return { parameters: sampled.parameters, ...evidence };
  };
  const both: TableSpec = {
    rows: [...a.rows, ...b.rows],
    mixtures: [...(a.mixtures ?? []), ...(b.mixtures ?? [])],
    correlated: [...(a.correlated ?? []), ...(b.correlated ?? [])],
  };
  const ofA = yield* fit(a);
  const ofB = yield* fit(b);
  const ofBoth = yield* fit(both);
  return {
    parameters: Object.fromEntries(
      family.parameters.map(({ name }) => [
        name,
        apart(ofA.parameters[name]!, ofB.parameters[name]!),
      ]),
    ),
    logEvidenceRatio: ofBoth.logEvidence - ofA.logEvidence - ofB.logEvidence,
    logEvidenceError: Math.hypot(ofA.error, ofB.error, ofBoth.error),
  };
}
