/**
 * Holds the engine against a check file: `npm run -s evaluate -- FILE [--sampler]`.
 * FILE has the schema of reference.json, boltzmann.json or fit.json in tests/fixtures/checks; the answer
 * is one JSON document that mirrors it. Anything unknown or malformed ends with exit code 2 and a
 * message that names the case.
 */
import { readFileSync } from "node:fs";

import { DomainError } from "~shared/errors/DomainError";
import {
  FitProblem,
  gridPosterior,
  maximumLikelihood,
  runTask,
  sampledEvidence,
  samplePosterior,
  tanhFamily,
} from "~shared/inference";
import { redshiftOf21cm } from "~shared/cosmology/line21cm";
import { averagedMinus2LnL } from "~shared/likelihood/averaged";
import { CompiledTable } from "~shared/likelihood/compile";
import { correlatedSet } from "~shared/likelihood/correlatedSet";
import {
  band,
  bandTailSigma,
  boundedHalfGaussianWidth,
  quantileMatched,
  quantileMatchedCdf,
  quantileMatchedDensity,
  twoPiece,
} from "~shared/likelihood/forms";
import { equalMixtureSd } from "~shared/likelihood/mixture";
import { sigmasOfLevel } from "~shared/numerics/special";
import {
  backgroundIn,
  CaseError,
  formIn,
  historyIn,
  type Json,
  type JsonObject,
  numberIn,
  numbersIn,
  objectIn,
  rowsOfSet,
  textIn,
} from "./checkFiles";

/** What each function of a check file answers, by the output keys of the file. */
const FUNCTIONS: Record<string, (inputs: JsonObject) => Record<string, number | null>> = {
  hubble: (i) => value(backgroundIn(objectIn(i, "cosmology")).hubble(numberIn(i, "z"))),
  efunc: (i) => value(backgroundIn(objectIn(i, "cosmology")).efunc(numberIn(i, "z"))),
  age: (i) => value(backgroundIn(objectIn(i, "cosmology")).age(numberIn(i, "z"))),
  n_H0: (i) => value(backgroundIn(objectIn(i, "cosmology")).nH0),
  f_He: (i) => value(backgroundIn(objectIn(i, "cosmology")).fHe),
  tau_prefactor: (i) => value(backgroundIn(objectIn(i, "cosmology")).tauPrefactor),
  tau_total: (i) =>
    value(historyIn(objectIn(i, "history")).opticalDepth(backgroundIn(objectIn(i, "cosmology")))),
  tau_range: (i) =>
    value(
      historyIn(objectIn(i, "history")).opticalDepth(
        backgroundIn(objectIn(i, "cosmology")),
        numberIn(i, "z1"),
        numberIn(i, "z2"),
      ),
    ),
  x_HI: (i) => value(historyIn(objectIn(i, "history")).x(numberIn(i, "z"))),
  f_e: (i) =>
    value(
      historyIn(objectIn(i, "history")).electronsPerHydrogen(
        backgroundIn(objectIn(i, "cosmology")),
        numberIn(i, "z"),
      ),
    ),
  z_at_fraction: (i) =>
    value(historyIn(objectIn(i, "history")).redshiftAtFraction(numberIn(i, "f"))),
  duration: (i) =>
    value(historyIn(objectIn(i, "history")).duration(numberIn(i, "f_hi"), numberIn(i, "f_lo"))),
  bin_mean: (i) =>
    value(historyIn(objectIn(i, "history")).binMean(numberIn(i, "z_lo"), numberIn(i, "z_hi"))),
  m2lnL: (i) => value(formIn(objectIn(i, "statement")).minus2LnL(numberIn(i, "x"))),
  half_gaussian_bounded_width: (i) =>
    value(boundedHalfGaussianWidth(numberIn(i, "limit"), numberIn(i, "level"))),
  quantile_matched: (i) => {
    const k = sigmasOfLevel(numberIn(i, "level"));
    const x = numberIn(i, "x");
    const matched = quantileMatched(
      numberIn(i, "median"),
      numberIn(i, "minus") / k,
      numberIn(i, "plus") / k,
      k,
    );
    return {
      value: matched.minus2LnL(x),
      pdf: quantileMatchedDensity(matched, x),
      cdf: quantileMatchedCdf(matched, x),
      peak_at: matched.peak,
    };
  },
  correlated_pair: (i) => {
    const rho = numberIn(i, "rho");
    const residuals = numbersIn(i, "residuals_in_sigma");
    if (residuals.length !== 2) throw new CaseError("“residuals_in_sigma” is not a pair");
    return value(
      correlatedSet([
        [1, rho],
        [rho, 1],
      ]).chiSquared(residuals),
    );
  },
  equal_mixture_sd: (i) => {
    const means = numbersIn(i, "means");
    const sigma = numberIn(i, "sigma");
    return value(
      equalMixtureSd(
        means,
        means.map(() => sigma),
      ),
    );
  },
  z_role: (i) => {
    const [zLow, zHigh] = pair(i, "z");
    const [xLow, xHigh] = pair(i, "x_linear");
    const row = twoPiece(numberIn(i, "value"), numberIn(i, "sigma"), numberIn(i, "sigma"));
    const x = (z: number): number => xLow + ((xHigh - xLow) * (z - zLow)) / (zHigh - zLow);
    return {
      bin_average_lnL: -0.5 * row.minus2LnL(0.5 * (xLow + xHigh)),
      uncertain_lnL: -0.5 * averagedMinus2LnL(row.minus2LnL, { x, breaks: [] }, zLow, zHigh),
    };
  },
  z_of_21cm_frequency: (i) => value(redshiftOf21cm(numberIn(i, "MHz"))),
  band_self_consistent: (i) => {
    const [low, high, level] = [numberIn(i, "lo"), numberIn(i, "hi"), numberIn(i, "level")];
    return {
      value: band(low, high, level).minus2LnL(numberIn(i, "x")),
      tail_sigma: bandTailSigma(low, high, level),
    };
  },
};

function value(result: number | null): Record<string, number | null> {
  return { value: result };
}

function pair(inputs: JsonObject, key: string): [number, number] {
  const [low, high, ...more] = numbersIn(inputs, key);
  if (low === undefined || high === undefined || more.length > 0 || !(high > low || key !== "z")) {
    throw new CaseError(`“${key}” is not a pair in order`);
  }
  return [low, high];
}

/** One case of a reference file, or of a file of optical depths from a Boltzmann code. */
function evaluateCase(entry: JsonObject): JsonObject {
  if (entry["function"] === undefined && entry["z_re"] !== undefined) {
    const background = backgroundIn({
      H0: 100 * numberIn(entry, "h"),
      ombh2: numberIn(entry, "omega_b"),
      omch2: numberIn(entry, "omega_c"),
      Y: numberIn(entry, "Y"),
    });
    const history = historyIn({
      type: "tanh",
      z_re: numberIn(entry, "z_re"),
      Dz: numberIn(entry, "Dz"),
    });
    return { id: textIn(entry, "id"), tau: history.opticalDepth(background) };
  }
  const name = textIn(entry, "function");
  if (!Object.hasOwn(FUNCTIONS, name)) throw new CaseError(`there is no function “${name}”`);
  const outputs = FUNCTIONS[name]!(objectIn(entry, "inputs"));
  return {
    id: textIn(entry, "id"),
    ...Object.fromEntries(Object.entries(outputs).map(([key, result]) => [key, encoded(result)])),
  };
}

/** JSON has no infinity: the check files write "+inf". */
function encoded(result: number | null): Json {
  if (result === null || Number.isFinite(result)) return result;
  return result > 0 ? "+inf" : result < 0 ? "-inf" : null;
}

const QUANTITIES = {
  z_re: "zRe",
  Dz: "deltaZ",
  tau: "tau",
  "duration_0.75_to_0.25": "duration",
} as const;
const SETS = ["all_rows_plus_tau", "all_rows_no_tau", "tau_only"];
const SAMPLER_SEED = 20261201;

function evaluateFit(file: JsonObject, bySampler: boolean): JsonObject {
  const background = backgroundIn(objectIn(file, "cosmology"));
  const priors = objectIn(file, "meta")["priors"] as JsonObject | undefined;
  const family = tanhFamily(
    priors ? { zRe: pairOf(priors, "z_re"), deltaZ: pairOf(priors, "Dz") } : {},
  );
  const wanted = file["results"] === undefined ? SETS : Object.keys(objectIn(file, "results"));
  const results: JsonObject = {};
  for (const set of wanted) {
    results[set] = naming(`results.${set}`, () => {
      const problem = new FitProblem(
        new CompiledTable({ rows: rowsOfSet(file, set) }),
        family,
        background,
      );
      const best = runTask(maximumLikelihood(problem));
      const history = family.history(best.theta);
      return {
        n_rows: problem.table.rowIds.length,
        max_likelihood: {
          z_re: best.theta[0]!,
          Dz: best.theta[1]!,
          m2lnL_min: best.minus2LnL,
          tau: history.opticalDepth(background),
          "duration_0.75_to_0.25": history.duration(),
          at_prior_edge: best.atEdge.map((name) => (name === "zRe" ? "z_re" : "Dz")),
          unique: !best.degenerate,
        },
        posterior: bySampler ? sampledKeys(problem) : gridKeys(problem),
      };
    });
  }
  return { results };
}

function pairOf(object: JsonObject, key: string): [number, number] {
  const [low, high] = numbersIn(object, key);
  if (low === undefined || high === undefined) throw new CaseError(`“${key}” is not a pair`);
  return [low, high];
}

interface Posterior {
  readonly parameters: Readonly<Record<string, { mean: number; sd: number; median: number }>>;
  readonly derived: Readonly<Record<string, { mean: number; sd: number; median: number } | null>>;
  quantile(name: string, p: number): number | null;
}

function quantityKeys(posterior: Posterior, name: string): JsonObject {
  const summary = posterior.parameters[name] ?? posterior.derived[name] ?? null;
  if (summary === null) return {};
  const ends = (level: number): Json[] => [
    posterior.quantile(name, 0.5 - level / 2),
    posterior.quantile(name, 0.5 + level / 2),
  ];
  return {
    mean: summary.mean,
    sd: summary.sd,
    median: summary.median,
    interval_68: ends(0.68),
    "interval_68.27": ends(0.68269),
    interval_95: ends(0.95),
  };
}

function gridKeys(problem: FitProblem): JsonObject {
  const posterior = runTask(gridPosterior(problem));
  return {
    ln_evidence: posterior.logEvidence,
    ...Object.fromEntries(
      Object.entries(QUANTITIES).map(([key, name]) => [key, quantityKeys(posterior, name)]),
    ),
  };
}

function sampledKeys(problem: FitProblem): JsonObject {
  const posterior = runTask(samplePosterior(problem, { seed: SAMPLER_SEED, steps: 5000 }));
  const evidence = runTask(sampledEvidence(problem, posterior, SAMPLER_SEED));
  return {
    ln_evidence: evidence.logEvidence,
    ln_evidence_error: evidence.error,
    ...Object.fromEntries(
      Object.entries(QUANTITIES).map(([key, name]) => {
        const { standardError, autocorrelationTime, rHat } = posterior.diagnostics[name]!;
        return [
          key,
          {
            ...quantityKeys(posterior, name),
            mcse_mean: standardError,
            autocorr_steps: autocorrelationTime,
            r_hat: rHat,
          },
        ];
      }),
    ),
  };
}

/** Runs one case; whatever is wrong with it is said with its name. */
function naming<T>(name: string, run: () => T): T {
  try {
    return run();
  } catch (error) {
    if (error instanceof CaseError || error instanceof DomainError) {
      throw new CaseError(`${name}: ${error.message}`);
    }
    throw error;
  }
}

function evaluate(file: JsonObject, bySampler: boolean): JsonObject {
  if (file["rows"] !== undefined) return naming("file", () => evaluateFit(file, bySampler));
  const cases = file["cases"];
  if (!Array.isArray(cases)) throw new CaseError("the file has neither “cases” nor “rows”");
  return {
    cases: cases.map((entry, index) => {
      const place = `cases[${index}]`;
      if (entry === null || typeof entry !== "object" || Array.isArray(entry)) {
        throw new CaseError(`${place}: not an object`);
      }
      const id = typeof entry["id"] === "string" ? entry["id"] : place;
      return naming(id, () => evaluateCase(entry));
    }),
  };
}

function main(): void {
  const names = process.argv.slice(2);
  const bySampler = names.includes("--sampler");
  const unknown = names.filter((name) => name.startsWith("--") && name !== "--sampler");
  const files = names.filter((name) => !name.startsWith("--"));
  const [path] = files;
  if (path === undefined || files.length > 1 || unknown.length > 0) {
    fail("usage: npm run -s evaluate -- FILE [--sampler]");
  }
  let file: Json;
  try {
    file = JSON.parse(readFileSync(path, "utf8")) as Json;
  } catch (error) {
    fail(
      `${path} can't be read as JSON: ${error instanceof Error ? error.message : String(error)}`,
    );
  }
  if (file === null || typeof file !== "object" || Array.isArray(file)) {
    fail(`${path} is not a JSON object`);
  }
  try {
    process.stdout.write(`${JSON.stringify(evaluate(file, bySampler), null, 1)}\n`);
  } catch (error) {
    if (error instanceof CaseError) fail(error.message);
    throw error;
  }
}

function fail(message: string): never {
  process.stderr.write(`evaluate: ${message}\n`);
  process.exit(2);
}

main();
