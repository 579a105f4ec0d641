import fs from "node:fs";
import { backgroundIn, objectIn, rowsOfSet, type JsonObject } from "./checkFiles";
import { CompiledTable } from "~shared/likelihood/compile";
import { FitProblem } from "~shared/inference/problem";
import { tanhFamily } from "~shared/inference/families";
import { gridPosterior } from "~shared/inference/gridPosterior";
import { runTask } from "~shared/inference/task";
const file = JSON.parse(fs.readFileSync("tests/fixtures/checks/fit.json", "utf8")) as JsonObject;
const bg = backgroundIn(objectIn(file, "cosmology"));
for (const [set, r] of Object.entries(objectIn(file, "results")) as [string, any][]) {
  const t0 = process.hrtime.bigint();
  const p = new FitProblem(new CompiledTable({ rows: rowsOfSet(file, set) }), tanhFamily(), bg);
  const g = runTask(gridPosterior(p));
  const ms = Number(process.hrtime.bigint() - t0) / 1e6;
  const map: any = { z_re: "zRe", Dz: "deltaZ", tau: "tau", "duration_0.75_to_0.25": "duration" };
  let worst = 0,
    which = "";
  for (const [k, n] of Object.entries(map) as [string, string][]) {
    const e = r.posterior[k];
    const s: any = (g.parameters as any)[n] ?? (g.derived as any)[n];
    const diffs: any = {
      mean: s.mean - e.mean,
      sd: s.sd - e.sd,
      median: s.median - e.median,
      a: g.quantile(n, 0.16)! - e.interval_68[0],
      b: g.quantile(n, 0.84)! - e.interval_68[1],
      lo: g.quantile(n, 0.158655)! - e["interval_68.27"][0],
      hi: g.quantile(n, 0.841345)! - e["interval_68.27"][1],
      l2: g.quantile(n, 0.025)! - e.interval_95[0],
      h2: g.quantile(n, 0.975)! - e.interval_95[1],
    };
    for (const [w, d] of Object.entries(diffs) as [string, number][])
      if (Math.abs(d) / e.sd > worst) {
        worst = Math.abs(d) / e.sd;
        which = n + " " + w;
      }
  }
  console.log(
    set.padEnd(20),
    "lnZ",
    (g.logEvidence - r.posterior.ln_evidence).toExponential(2),
    "min",
    (g.best.minus2LnL - r.max_likelihood.m2lnL_min).toExponential(2),
    "deg",
    g.best.degenerate,
    r.max_likelihood.unique,
    g.best.atEdge,
    r.max_likelihood.at_prior_edge,
    "worst",
    worst.toExponential(2),
    which,
    "n",
    g.points,
    g.converged,
    g.lastChange.toExponential(1),
    ms.toFixed(0) + "ms",
    [...g.best.theta].map((v) => v.toFixed(6)),
    r.max_likelihood.z_re.toFixed(6),
    r.max_likelihood.Dz.toFixed(6),
  );
}
