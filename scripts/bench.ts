/**
 * Times the engine beside the same work in Debian's python3 with numpy, scipy and emcee, in one run:
 * `npm run bench`. Prints a table and JSON lines. Python's packages are installed with apt where that is
 * allowed; what can't be compared is skipped loudly. Moves of a slider on History are timed in a headless
 * Chromium.
 */
import { spawnSync } from "node:child_process";
import { readFileSync } from "node:fs";
import path from "node:path";

import { background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import { FitProblem, runTask, sampleEnsemble, tanhFamily } from "~shared/inference";
import { CompiledTable, type ReadyRow } from "~shared/likelihood/compile";
import { RandomStream } from "~shared/numerics/random";
import { type SliderTiming, timeSlider } from "./bench/slider";
import { type JsonObject, rowsOfSet } from "./checkFiles";

const FIT = path.join("tests", "fixtures", "checks", "fit.json");
const PYTHON = "/usr/bin/python3";
const PACKAGES = ["python3-numpy", "python3-scipy", "python3-emcee"];

interface Timing {
  readonly name: string;
  readonly what: string;
  readonly ms: number;
}

function milliseconds(): number {
  return Number(process.hrtime.bigint()) / 1e6;
}

/** Best of a few runs, per piece of work; one run first to warm up. */
function time(name: string, what: string, work: () => void, { runs = 5, per = 1 } = {}): Timing {
  work();
  let best = Infinity;
  for (let i = 0; i < runs; i++) {
    const start = milliseconds();
    work();
    best = Math.min(best, (milliseconds() - start) / per);
  }
  return { name, what, ms: best };
}

function ours(): Timing[] {
  const file = JSON.parse(readFileSync(FIT, "utf8")) as JsonObject;
  const cosmology = background();
  const rows = rowsOfSet(file, "all_rows_plus_tau");
  const problemOf = (of: readonly ReadyRow[]): FitProblem =>
    new FitProblem(new CompiledTable({ rows: of }), tanhFamily(), cosmology);
  const problem = problemOf(rows);
  const many = problemOf(
    Array.from({ length: 200 }, (_, i) => ({
      ...rows[i === 199 ? 14 : i % 14]!,
      id: `row ${i}`,
    })),
  );
  const history = tanhHistory({ zRe: 7.67 });
  const theta = Float64Array.of(7.3, 0.9);
  let kept = 0;

  const widths = Float64Array.from({ length: 200 }, (_, j) => 0.1 + (2.9 * j) / 199);
  const values = new Float64Array(200 * 200);
  const grid = (of: FitProblem): void => {
    const along = of.alongSecond(widths);
    for (let i = 0; i < 200; i++) {
      along(5 + (7 * i) / 199, values.subarray(200 * i, 200 * i + 200));
    }
    kept += values[20_100]!;
  };
  const sampler = (): void => {
    const random = new RandomStream(1);
    const start = Float64Array.from(
      { length: 64 },
      (_, k) => (k % 2 === 0 ? 7.3 : 0.9) + 0.05 * random.normal(),
    );
    const task = sampleEnsemble((at) => problem.logPosterior(at), start, 2, {
      random,
      steps: 2000,
      burn: 0,
    });
    kept += runTask(task).acceptance;
  };
  const repeat =
    (n: number, work: (i: number) => number): (() => void) =>
    () => {
      for (let i = 0; i < n; i++) kept += work(i);
    };
  const timings = [
    time(
      "tau",
      "optical depth, one call",
      repeat(5000, (i) => tanhHistory({ zRe: 7 + (i % 100) / 100 }).opticalDepth(cosmology)),
      { per: 5000 },
    ),
    time(
      "x",
      "x(z), one call",
      repeat(100000, (i) => history.x(6 + (i % 100) / 50)),
      { per: 100000 },
    ),
    time(
      "rows15",
      "15 rows, one evaluation",
      repeat(20000, (i) => {
        theta[0] = 7 + (i % 100) / 200;
        theta[1] = 0.9;
        return problem.minus2LnL(theta);
      }),
      { per: 20000 },
    ),
    time(
      "rows200",
      "200 rows, one evaluation",
      repeat(2000, (i) => {
        theta[0] = 7 + (i % 100) / 200;
        theta[1] = 0.9;
        return many.minus2LnL(theta);
      }),
      { per: 2000 },
    ),
    time("grid", "200 × 200 grid, table compiled", () => grid(problem), { runs: 25 }),
    time("gridWithBuild", "200 × 200 grid, table compiled anew", () => grid(problemOf(rows)), {
      runs: 25,
    }),
    time("sampler", "sampler 32 × 2000", sampler, { runs: 8 }),
  ];
  if (!Number.isFinite(kept)) throw new Error("a benchmark computed nothing");
  return timings;
}

function pythonReady(): boolean {
  return spawnSync(PYTHON, ["-c", "import numpy, scipy, emcee"]).status === 0;
}

function theirs(): Map<string, number> | null {
  if (!pythonReady() && process.getuid?.() === 0) {
    process.stdout.write(`Installing ${PACKAGES.join(", ")} …\n`);
    spawnSync("apt-get", ["install", "-y", "--no-install-recommends", ...PACKAGES], {
      stdio: "ignore",
      env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" },
    });
  }
  if (!pythonReady()) return null;
  const script = path.join("scripts", "bench", "practitioner.py");
  const run = spawnSync(PYTHON, [script, FIT], { encoding: "utf8", maxBuffer: 1 << 24 });
  if (run.status !== 0) throw new Error(`python failed:\n${run.stderr}`);
  return new Map(
    run.stdout
      .trim()
      .split("\n")
      .map((line) => JSON.parse(line) as { name: string; ms?: number })
      .flatMap(({ name, ms }) => (ms === undefined ? [] : [[name, ms] as const])),
  );
}

/** Which of our timings is held against which of theirs. */
const PAIRS: readonly (readonly [mine: string, other: string, what: string])[] = [
  ["tau", "tau", "scipy quad"],
  ["tau", "tauSimpson", "numpy Simpson"],
  ["x", "x", "numpy"],
  ["rows15", "rows15", "numpy, τ from a spline"],
  ["rows200", "rows200", "numpy, τ from a spline"],
  ["grid", "gridIntegrating", "numpy, every τ integrated"],
  ["grid", "gridSpline", "numpy, τ from a ready spline"],
  ["gridWithBuild", "gridSplineWithBuild", "numpy, spline made anew"],
  ["sampler", "samplerPlain", "emcee, plain"],
  ["sampler", "samplerVectorised", "emcee, vectorised"],
];

function shown(ms: number): string {
  return ms < 1e-3
    ? `${(1e6 * ms).toFixed(0)} ns`
    : ms < 1
      ? `${(1e3 * ms).toFixed(2)} µs`
      : `${ms.toFixed(1)} ms`;
}

/** What a move of a slider on History may cost, milliseconds. */
const SLIDER_LIMIT_MS = 4;

function sliderWords(slider: SliderTiming | null): string {
  const title = "A slider move on History in headless Chromium";
  if (slider === null) return `\nSKIPPED: ${title}; chromium is missing.\n`;
  const { median, p95, mean, first, moves, scored } = slider;
  const ms = (value: number): string => `${value.toFixed(2)} ms`;
  return (
    `\n${title}\n  two histories, ${scored} rows, τ, durations, −2 ln L, curves; ${moves} moves:` +
    ` median ${ms(median)}, mean ${ms(mean)}, 95 % below ${ms(p95)} (limit ${SLIDER_LIMIT_MS} ms);` +
    ` the page's first, which fills every table, ${ms(first)}\n`
  );
}

async function main(): Promise<void> {
  const mine = ours();
  const other = theirs();
  const slider = await timeSlider();
  process.stdout.write("\nEngine on this machine\n");
  for (const { what, ms } of mine) {
    process.stdout.write(`  ${what.padEnd(40)} ${shown(ms).padStart(12)}\n`);
  }
  if (other === null) {
    process.stdout.write(
      `\nSKIPPED: no comparison. ${PYTHON} has no numpy, scipy and emcee and they could not be installed (${PACKAGES.join(", ")}).\n\n`,
    );
  } else {
    process.stdout.write("\nAgainst Debian's python3 in the same run\n");
    for (const [name, theirName, what] of PAIRS) {
      const ours = mine.find((timing) => timing.name === name)!;
      const ms = other.get(theirName);
      if (ms === undefined) {
        process.stdout.write(`  ${ours.what.padEnd(40)} SKIPPED: ${what}\n`);
        continue;
      }
      process.stdout.write(
        `  ${ours.what.padEnd(40)} ${shown(ms).padStart(12)}  ${what.padEnd(30)} ${(ms / ours.ms).toFixed(1).padStart(8)} ×\n`,
      );
    }
  }
  process.stdout.write(`${sliderWords(slider)}\n`);
  for (const timing of mine) {
    const ratios = PAIRS.filter(([name]) => name === timing.name).flatMap(([, theirName]) => {
      const ms = other?.get(theirName);
      return ms === undefined ? [] : [[theirName, ms / timing.ms] as const];
    });
    process.stdout.write(
      `${JSON.stringify({ name: timing.name, ms: timing.ms, ratios: Object.fromEntries(ratios) })}\n`,
    );
  }
  if (slider !== null) process.stdout.write(`${JSON.stringify({ name: "slider", ...slider })}\n`);
}

void main();
