import fc from "fast-check";

import { background } from "~shared/cosmology/background";
import {
  CancelledError,
  DEFAULT_PRIORS,
  type FitFamily,
  FitProblem,
  freeFormFamily,
  gridPosterior,
  leaveOneOut,
  maximumLikelihood,
  powerLawFamily,
  type Progress,
  runTask,
  runTaskInSlices,
  sampledEvidence,
  sampleEnsemble,
  samplePosterior,
  tanhFamily,
  tension,
} from "~shared/inference";
import { autocorrelationTime, chainDiagnostics } from "~shared/inference/diagnostics";
import { densityMarginal, SpreadHistogram } from "~shared/inference/marginal";
import { historyPredictor } from "~shared/inference/predictor";
import { CompiledTable, type ModelRequests, type ReadyRow } from "~shared/likelihood/compile";
import { gaussian, hardStep } from "~shared/likelihood/forms";
import type { ModelRequest } from "~shared/likelihood/modelRequest";
import { RandomStream } from "~shared/numerics/random";
import { Surface } from "~shared/numerics/surface";

jest.setTimeout(120_000);
const cosmology = background();
const row = (id: string, m: number, sigma: number, request: ModelRequest): ReadyRow => ({
  id,
  shape: gaussian(m, sigma),
  evaluatedIn: "linear",
  quantity: "redshiftAtFraction",
  request,
});
const midpoint = (m = 7.5, sigma = 0.2) =>
  row("midpoint", m, sigma, { kind: "redshiftAtFraction", f: 0.5 });
const problemOf = (rows: ReadyRow[], family: FitFamily = tanhFamily()) =>
  new FitProblem(new CompiledTable({ rows }), family, cosmology);

/** One of each kind of request. */
const REQUESTS: ModelRequests = {
  points: Float64Array.of(4.5, 6, 7.3, 9, 14, 21),
  binLows: Float64Array.of(5, 6.8, 3, 19),
  binHighs: Float64Array.of(7.5, 7.1, 4.5, 23),
  depthLows: Float64Array.of(0, 15, 5),
  depthHighs: Float64Array.of(50, 30, 9),
  fractions: Float64Array.of(0.5, 0.1),
  durations: [
    { f1: 0.75, f2: 0.25, myr: false },
    { f1: 0.9, f2: 0.1, myr: true },
  ],
  size: 6 + 4 + 3 + 2 + 2,
};

describe("predictors of the families", () => {
  const unit = fc.double({ min: 0, max: 1, noNaN: true });
  it.each<[string, FitFamily]>([
    ["tanh", tanhFamily()],
    ["tanh at a fixed width", tanhFamily({ deltaZ: 0.5 })],
    ["power law", powerLawFamily()],
    ["power law with z_early free", powerLawFamily({ zEarly: { highest: 30 } })],
    ["free form", freeFormFamily([5.5, 6.5, 7.5, 9])],
    ["free form of one", freeFormFamily([7])],
  ])("%s answers as its histories do", (_, family) => {
    const fast = family.predictor(REQUESTS, cosmology);
    const slow = historyPredictor(REQUESTS, cosmology, family.history);
    const a = new Float64Array(REQUESTS.size);
    const b = new Float64Array(REQUESTS.size);
    fc.assert(
      fc.property(fc.array(unit, { minLength: 4, maxLength: 4 }), (places) => {
        let theta = family.parameters.map(({ low, high }, i) => low + places[i]! * (high - low));
        if (family.kind === "freeForm") theta = theta.sort((p, q) => p - q);
        if (family.logPrior(theta) === -Infinity) return;
        fast(theta, a);
        slow(theta, b);
        // Points and bins to 1e-10, depths to 1e-9 of the largest, redshifts to 1e-9.
        a.forEach((value, i) => {
          if (Number.isNaN(b[i]!)) expect(value).toBeNaN();
          else
            expect(Math.abs(value - b[i]!)).toBeLessThan(i < 10 ? 1.01e-10 : i < 13 ? 2e-10 : 1e-7);
        });
      }),
      { numRuns: 150, seed: 41 },
    );
  });

  it("have normalized priors that they put in words", () => {
    expect(tanhFamily().logPrior([7, 1])).toBeCloseTo(-Math.log(7 * 2.9), 14);
    expect(tanhFamily().prior).toBe("Flat in zRe from 5 to 12, deltaZ from 0.1 to 3.");
    expect(powerLawFamily().prior).toContain("zEarly fixed to 20");
    const free = powerLawFamily({ zEarly: { highest: 30 } });
    expect(free.logPrior([6, 4, 6.5])).toBe(-Infinity);
    expect(free.logPrior([6, 4, 10])).toBeCloseTo(-Math.log(5 * 11.5 * 23), 12);
    const form = freeFormFamily([6, 7, 8]);
    expect(form.logPrior([0.1, 0.5, 0.9])).toBeCloseTo(Math.log(6), 12);
    expect(form.logPrior([0.5, 0.1, 0.9])).toBe(-Infinity);
    expect(DEFAULT_PRIORS.zRe).toEqual([5, 12]);
  });

  it.each<[string, () => unknown]>([
    ["zRe", () => tanhFamily({ zRe: [9, 5] })],
    ["zEarly", () => powerLawFamily({ zEarly: 8 })],
    ["zEarly", () => powerLawFamily({ zEarly: { highest: 9.5 } })],
    ["redshifts", () => freeFormFamily([])],
    ["redshifts", () => freeFormFamily([7, 6])],
    ["redshifts", () => freeFormFamily([3, 6])],
  ])("reject priors out of order, naming %s", (name, make) => {
    expect(make).toThrow(name);
  });
});

describe("grid posterior", () => {
  it("of one Gaussian in one parameter is that Gaussian", () => {
    // z(x = 0.5) is z_re itself: posterior 7.5 ± 0.2, Z = 0.2 √(2π)/7.
    const posterior = runTask(gridPosterior(problemOf([midpoint()], tanhFamily({ deltaZ: 0.5 }))));
    const zRe = posterior.parameters["zRe"]!;
    expect(zRe.mean).toBeCloseTo(7.5, 5);
    expect(zRe.sd).toBeCloseTo(0.2, 4);
    // 68.27 and 95.45 %: 1.00002 and 2.00000 sigma.
    expect(zRe.interval68[0]).toBeCloseTo(7.3, 4);
    expect(zRe.interval95[1]).toBeCloseTo(7.9, 3);
    expect(posterior.logEvidence).toBeCloseTo(Math.log((0.2 * Math.sqrt(2 * Math.PI)) / 7), 4);
    expect(posterior.derived.midpoint!.mean).toBeCloseTo(7.5, 4);
    expect(posterior.quantile("zRe", 0.5)).toBeCloseTo(7.5, 5);
    expect(posterior.quantile("nothing", 0.5)).toBeNull();
    expect(posterior.converged).toBe(true);
  });

  it("of no rows is the prior, with an evidence of 1", () => {
    const posterior = runTask(gridPosterior(problemOf([]), { withoutDerived: true }));
    expect(posterior.logEvidence).toBeCloseTo(0, 8);
    expect(posterior.parameters["zRe"]!.mean).toBeCloseTo(8.5, 8);
    expect(posterior.parameters["deltaZ"]!.sd).toBeCloseTo(2.9 / Math.sqrt(12), 5);
    expect(posterior.best.degenerate).toBe(true);
    expect(posterior.derived.tau).toBeNull();
  });

  it("finds a posterior far narrower than the first grid", () => {
    const narrow = [
      midpoint(7.123, 0.001),
      row("width", 1, 0.001, { kind: "duration", f1: 0.75, f2: 0.25, unit: "redshift" }),
    ];
    const posterior = runTask(gridPosterior(problemOf(narrow)));
    expect(posterior.parameters["zRe"]!.mean).toBeCloseTo(7.123, 5);
    expect(posterior.parameters["zRe"]!.sd).toBeCloseTo(0.001, 6);
  });

  it("works for the power law as well", () => {
    const posterior = runTask(gridPosterior(problemOf([midpoint()], powerLawFamily())));
    expect(posterior.derived.midpoint!.mean).toBeGreaterThan(7.2);
    expect(posterior.converged).toBe(true);
  });

  it("leaves more than two parameters to the sampler, and says so when nothing is allowed", () => {
    expect(() => runTask(gridPosterior(problemOf([], freeFormFamily([5, 6, 7]))))).toThrow(
      "dimension",
    );
    const wall: ReadyRow = { ...midpoint(), shape: hardStep("lower", 20) };
    expect(() => runTask(maximumLikelihood(problemOf([wall])))).toThrow("rows must be");
  });
});

describe("maximum likelihood", () => {
  it("finds a minimum inside, at an edge, and says where it is degenerate", () => {
    const inside = runTask(
      maximumLikelihood(
        problemOf([
          midpoint(),
          row("width", 1, 0.1, { kind: "duration", f1: 0.75, f2: 0.25, unit: "redshift" }),
        ]),
      ),
    );
    expect(inside).toMatchObject({ atEdge: [], degenerate: false });
    expect(inside.theta[0]).toBeCloseTo(7.5, 5);
    expect(inside.minus2LnL).toBeLessThan(1e-9);
    const outside = runTask(
      maximumLikelihood(problemOf([midpoint(13, 0.1)], tanhFamily({ deltaZ: 0.5 }))),
    );
    expect(outside.atEdge).toEqual(["zRe"]);
    expect(outside.theta[0]).toBe(12);
    expect(outside.minus2LnL).toBeCloseTo(100, 6);
    expect(runTask(maximumLikelihood(problemOf([midpoint()]))).degenerate).toBe(true);
  });
});

describe("ensemble sampler", () => {
  const gaussian2 = (theta: Float64Array) => -0.5 * (theta[0]! ** 2 + ((theta[1]! - 1) / 3) ** 2);
  const start = (seed: number) => {
    const random = new RandomStream(seed);
    return Float64Array.from({ length: 64 }, () => random.normal());
  };
  const sample = (seed: number, steps = 2000) =>
    runTask(
      sampleEnsemble(gaussian2, start(seed), 2, {
        random: new RandomStream(seed),
        steps,
        burn: 200,
      }),
    );

  it("gives the same chain for the same seed and another for another", () => {
    const [a, b, c] = [sample(5, 200), sample(5, 200), sample(6, 200)];
    expect(b.draws).toEqual(a.draws);
    expect(c.draws).not.toEqual(a.draws);
    expect(a.draws).toHaveLength(200 * 32 * 2);
  });

  it("has the moments of a Gaussian within four Monte-Carlo errors", () => {
    const chains = [1, 2, 3, 4].map((seed) => sample(seed));
    const column = (d: number) =>
      chains.map(({ draws }) =>
        Float64Array.from({ length: draws.length / 2 }, (_, k) => draws[2 * k + d]!),
      );
    [0, 1].forEach((d) => {
      const { standardError, rHat, effectiveSize } = chainDiagnostics(column(d), 2000, 32);
      const all = column(d).flatMap((chain) => [...chain]);
      const mean = all.reduce((sum, value) => sum + value, 0) / all.length;
      expect(Math.abs(mean - d)).toBeLessThan(4 * standardError);
      expect(standardError).toBeCloseTo((d === 0 ? 1 : 3) / Math.sqrt(effectiveSize), 2);
      expect(rHat).toBeLessThan(1.01);
    });
    expect(chains[0]!.acceptance).toBeGreaterThan(0.5);
  });

  it("shows ensembles that disagree in R̂", () => {
    const flat = (mean: number) => {
      const random = new RandomStream(mean + 1);
      return Float64Array.from({ length: 3200 }, () => mean + random.normal());
    };
    expect(chainDiagnostics([flat(0), flat(0), flat(0), flat(2)], 100, 32).rHat).toBeGreaterThan(
      1.2,
    );
  });

  it("measures the autocorrelation of an AR(1) process: (1 + a)/(1 − a)", () => {
    const random = new RandomStream(3);
    const walkers = 20;
    const steps = 8000;
    const draws = new Float64Array(steps * walkers);
    for (let s = 1; s < steps; s++) {
      for (let w = 0; w < walkers; w++) {
        draws[s * walkers + w] = 0.8 * draws[(s - 1) * walkers + w]! + random.normal();
      }
    }
    // 9 for a = 0.8; 160,000 draws know it to a few percent.
    expect(autocorrelationTime(draws, steps, walkers) / 9).toBeCloseTo(1, 1);
  });

  it("rejects ensembles it can't run, naming what is wrong", () => {
    const run = (places: Float64Array) =>
      runTask(
        sampleEnsemble(gaussian2, places, 2, { random: new RandomStream(1), steps: 1, burn: 0 }),
      );
    expect(() => run(new Float64Array(6))).toThrow("walkers");
    expect(() =>
      runTask(
        sampleEnsemble(() => -Infinity, start(1), 2, {
          random: new RandomStream(1),
          steps: 1,
          burn: 0,
        }),
      ),
    ).toThrow("start of walker 0");
    expect(() => runTask(samplePosterior(problemOf([]), { seed: 1, ensembles: 2 }))).toThrow(
      "ensembles",
    );
  });

  it("samples the free form within its order, and knows its evidence", () => {
    // Flat likelihood: the evidence is 1 and the values are order statistics of three uniforms.
    const problem = problemOf([], freeFormFamily([6, 7, 8]));
    const posterior = runTask(samplePosterior(problem, { seed: 8, steps: 2500 }));
    const { parameters, diagnostics, chains } = posterior;
    [0.25, 0.5, 0.75].forEach((mean, i) => {
      const name = problem.names[i]!;
      expect(Math.abs(parameters[name]!.mean - mean)).toBeLessThan(
        4 * diagnostics[name]!.standardError,
      );
    });
    const { draws } = chains[0]!;
    for (let k = 0; k < draws.length; k += 3) {
      expect(draws[k]! <= draws[k + 1]! && draws[k + 1]! <= draws[k + 2]!).toBe(true);
    }
    const evidence = runTask(sampledEvidence(problem, posterior, 9));
    expect(Math.abs(evidence.logEvidence)).toBeLessThan(4 * evidence.error);
    expect(evidence.error).toBeLessThan(0.05);
  });
});

describe("what one row does, and what two sets do to each other", () => {
  const a = midpoint(7.2, 0.2);
  const b = { ...midpoint(7.8, 0.3), id: "other" };
  const family = tanhFamily({ deltaZ: 0.5 });

  it("shifts the mean by what leaving it out undoes", () => {
    const spec = { rows: [a, b] };
    const problem = new FitProblem(new CompiledTable(spec), family, cosmology);
    const full = runTask(gridPosterior(problem));
    const [first, second] = runTask(leaveOneOut(problem, full, spec));
    // Closed form of two Gaussians: weights 1/σ².
    const width = 1 / Math.sqrt(1 / 0.04 + 1 / 0.09);
    const mean = (7.2 / 0.04 + 7.8 / 0.09) * width ** 2;
    expect(full.parameters["zRe"]!.mean).toBeCloseTo(mean, 4);
    expect(first!.shift["zRe"]).toBeCloseTo((7.8 - mean) / width, 1);
    expect(second!.shift["zRe"]).toBeCloseTo((7.2 - mean) / width, 1);
    expect(first!.pull).toBeCloseTo((mean - 7.2) / 0.2, 4);
    expect(second!.pull).toBeCloseTo((mean - 7.8) / 0.3, 4);
    expect(first!.minus2LnL).toBeCloseTo(((mean - 7.2) / 0.2) ** 2, 4);
  });

  it("has the tension of two Gaussians in closed form", () => {
    const result = runTask(tension({ rows: [a] }, { rows: [b] }, family, cosmology));
    expect(result.parameters["zRe"]).toBeCloseTo(-0.6 / Math.hypot(0.2, 0.3), 3);
    // ln Z_AB − ln Z_A − ln Z_B with Z of a Gaussian √(2π)σ/7 and e^(−½ d²/(σ_A²+σ_B²)) for both.
    const width = 1 / Math.sqrt(1 / 0.04 + 1 / 0.09);
    const z = (sigma: number) => Math.log((Math.sqrt(2 * Math.PI) * sigma) / 7);
    const expected = z(width) - (0.5 * 0.36) / 0.13 - z(0.2) - z(0.3);
    expect(result.logEvidenceRatio).toBeCloseTo(expected, 3);
    expect(result.logEvidenceError).toBe(0);
  });

  describe("of three parameters, by the sampler", () => {
    // Two values at one node: x(7) alone feels them, and the others keep their order.
    const nodes = freeFormFamily([6, 7, 8]);
    const point = (id: string, m: number, sigma: number): ReadyRow =>
      row(id, m, sigma, { kind: "point", z: 7 });
    const low = point("low", 0.45, 0.02);
    const high = point("high", 0.55, 0.03);
    const sampler = { seed: 3, steps: 700 };

    it("shifts a mean as two Gaussians do", () => {
      const spec = { rows: [low, high] };
      const problem = problemOf([low, high], nodes);
      const full = runTask(samplePosterior(problem, sampler));
      const [first, second] = runTask(leaveOneOut(problem, full, spec, { sampler }));
      // The prior of the middle of three ordered values, 6x(1 − x), is flat to 1 % here: its slope moves
      // means by σ² d ln p/dx, 0.1 σ at most.
      const width = 1 / Math.sqrt(1 / 0.02 ** 2 + 1 / 0.03 ** 2);
      const mean = (0.45 / 0.02 ** 2 + 0.55 / 0.03 ** 2) * width ** 2;
      expect(Math.abs(first!.shift["x(7)"]! - (0.55 - mean) / width)).toBeLessThan(0.25);
      expect(Math.abs(second!.shift["x(7)"]! - (0.45 - mean) / width)).toBeLessThan(0.25);
      expect(Math.sign(first!.pull!)).toBe(1);
      expect(Math.sign(second!.pull!)).toBe(-1);
    });

    it("has their tension and evidence ratio, with its error", () => {
      const result = runTask(
        tension({ rows: [low] }, { rows: [high] }, nodes, cosmology, { sampler }),
      );
      expect(Math.abs(result.parameters["x(7)"]! + 0.1 / Math.hypot(0.02, 0.03))).toBeLessThan(0.1);
      // Z of a Gaussian under the prior 6x(1 − x), and of their product at its own mean.
      const prior = (x: number) => 6 * x * (1 - x);
      const width = 1 / Math.sqrt(1 / 0.02 ** 2 + 1 / 0.03 ** 2);
      const mean = (0.45 / 0.02 ** 2 + 0.55 / 0.03 ** 2) * width ** 2;
      const z = (m: number, sigma: number) => Math.log(Math.sqrt(2 * Math.PI) * sigma * prior(m));
      const expected =
        z(mean, width) - (0.5 * 0.01) / (0.02 ** 2 + 0.03 ** 2) - z(0.45, 0.02) - z(0.55, 0.03);
      expect(result.logEvidenceError).toBeGreaterThan(0);
      expect(result.logEvidenceError).toBeLessThan(0.1);
      // 6x(1 − x) bends by 12 σ²/(2 × 1.5) over a width: below 0.01 in each ln Z.
      expect(Math.abs(result.logEvidenceRatio - expected)).toBeLessThan(
        4 * result.logEvidenceError + 0.01,
      );
    });

    it("is refused without a sampler, by name", () => {
      const problem = problemOf([low], nodes);
      const full = { best: { theta: [0.2, 0.45, 0.8] }, parameters: {} };
      expect(() => runTask(leaveOneOut(problem, full, { rows: [low] }))).toThrow(
        "sampler must be given for 3 parameters",
      );
      expect(() => runTask(tension({ rows: [low] }, { rows: [high] }, nodes, cosmology))).toThrow(
        "sampler must be given for 3 parameters",
      );
    });
  });
});

describe("tasks", () => {
  function* counting() {
    for (let i = 1; i <= 4; i++) yield { stage: "counting", fraction: i / 4 };
    return 42;
  }
  it("report progress and give their result", async () => {
    const seen: Progress[] = [];
    expect(runTask(counting(), { onProgress: (p) => seen.push(p) })).toBe(42);
    expect(seen.map(({ fraction }) => fraction)).toEqual([0.25, 0.5, 0.75, 1]);
    let breaths = 0;
    const breathe = async () => {
      breaths++;
    };
    expect(await runTaskInSlices(counting(), breathe)).toBe(42);
    expect(breaths).toBe(4);
  });
  it("stop when told to", async () => {
    expect(() => runTask(counting(), { cancelled: () => true })).toThrow(CancelledError);
    await expect(
      runTaskInSlices(counting(), async () => undefined, { cancelled: () => true }),
    ).rejects.toThrow(CancelledError);
    let asked = 0;
    const problem = problemOf([midpoint()]);
    expect(() => runTask(gridPosterior(problem), { cancelled: () => ++asked > 3 })).toThrow(
      CancelledError,
    );
  });
});

describe("marginals", () => {
  it("of a straight density have closed-form quantiles", () => {
    // p = 2x on [0, 1]: quantile √p, mean 2/3, variance 1/18.
    const marginal = densityMarginal(
      0,
      1,
      Float64Array.from({ length: 201 }, (_, i) => i / 200),
    );
    expect(marginal.quantile(0.25)).toBeCloseTo(0.5, 10);
    expect(marginal.summary.mean).toBeCloseTo(2 / 3, 10);
    expect(marginal.summary.sd).toBeCloseTo(Math.sqrt(1 / 18), 10);
  });
  it("of spread masses add up", () => {
    const histogram = new SpreadHistogram(0, 4);
    histogram.add(0, 2, 1);
    histogram.add(4, 2, 3);
    const { summary, quantile } = histogram.marginal()!;
    expect(quantile(0.25)).toBeCloseTo(2, 3);
    expect(quantile(0.625)).toBeCloseTo(3, 3);
    expect(summary.mean).toBeCloseTo(2.5, 12);
    expect(summary.sd).toBeCloseTo(Math.sqrt((4 / 3 + 3 * (28 / 3)) / 4 - 6.25), 12);
    expect(new SpreadHistogram(0, 1).marginal()).toBeNull();
  });
});

describe("surface", () => {
  it("interpolates a smooth function, and gives up on one that is not", () => {
    const box = { low: [0, 1], high: [2, 3] } as const;
    const f = (a: number, b: number) => Math.exp(-a) * Math.sin(b);
    const surface = Surface.of(f, box, 1e-9)!;
    for (const [a, b] of [
      [0, 1],
      [2, 3],
      [0.37, 2.91],
      [1.999, 1.001],
    ] as const) {
      expect(Math.abs(surface.value(a, b) - f(a, b))).toBeLessThan(1e-9);
    }
    expect(Surface.of((a) => Math.abs(a - 0.7), box, 1e-9)).toBeNull();
    expect(Surface.of(f, { low: [1, 1], high: [1, 2] }, 1e-9)).toBeNull();
  });
});

describe("random stream", () => {
  it("repeats for a seed and differs for another", () => {
    const draw = (seed: number) => {
      const random = new RandomStream(seed);
      return [random.uniform(), random.normal(), random.normal(), random.below(1000)];
    };
    expect(draw(7)).toEqual(draw(7));
    expect(draw(7)).not.toEqual(draw(8));
    expect(draw(7)).not.toEqual(draw(7 + 2 ** 32));
  });
  it("is uniform and normal to the accuracy of its number", () => {
    const random = new RandomStream(20261201);
    const n = 200_000;
    let [u, u2, g, g2] = [0, 0, 0, 0];
    for (let i = 0; i < n; i++) {
      const a = random.uniform();
      const b = random.normal();
      u += a / n;
      u2 += (a * a) / n;
      g += b / n;
      g2 += (b * b) / n;
    }
    // Five standard errors of each mean.
    expect(Math.abs(u - 0.5)).toBeLessThan(5 / Math.sqrt(12 * n));
    expect(Math.abs(u2 - 1 / 3)).toBeLessThan(5 * Math.sqrt(4 / 45 / n));
    expect(Math.abs(g)).toBeLessThan(5 / Math.sqrt(n));
    expect(Math.abs(g2 - 1)).toBeLessThan(5 * Math.sqrt(2 / n));
  });
});
