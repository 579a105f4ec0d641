import { CholeskyDecomposition, Matrix } from "ml-matrix";

import type { SampledPosterior } from "~shared/inference/ensembleSampler";
import type { FitProblem } from "~shared/inference/problem";
import type { Task } from "~shared/inference/task";
import { RandomStream } from "~shared/numerics/random";

/** ln evidence by importance sampling, with how far to trust it. */
export interface SampledEvidence {
  readonly logEvidence: number;
  /** Standard error of ln Z. */
  readonly error: number;
  /** Effective number of draws, (Σw)²/Σw². */
  readonly effectiveSize: number;
}

/** Degrees of freedom of the proposal: tails heavier than any posterior in a box. */
const FREEDOM = 5;

/**
 * ln evidence for three or more parameters: importance sampling from a multivariate Student t with the mean
 * and covariance of the chain, mixed with the prior's box so that no corner is missed.
 *
 * @param draws - Number of proposals, default 20,000.
 */
export function* sampledEvidence(
  problem: FitProblem,
  posterior: SampledPosterior,
  seed: number,
  draws = 20000,
): Task<SampledEvidence> {
  const { dimension, lows, highs } = problem;
  const { mean, covariance } = moments(posterior, dimension);
  const matrix = new Matrix(covariance);
  const factor = new CholeskyDecomposition(matrix).lowerTriangularMatrix.to2DArray();
  const logDeterminant = factor.reduce((sum, row, i) => sum + Math.log(row[i]!), 0);
  const logT =
    logGammaHalf(FREEDOM + dimension) -
    logGammaHalf(FREEDOM) -
    0.5 * dimension * Math.log(FREEDOM * Math.PI) -
    logDeterminant;
  const logBox = -lows.reduce((sum, low, d) => sum + Math.log(highs[d]! - low), 0);
  const boxShare = 0.05;
  const random = new RandomStream(seed);
  const theta = new Float64Array(dimension);
  const normal = new Float64Array(dimension);
  const logWeights = new Float64Array(draws);
  for (let k = 0; k < draws; k++) {
    if (random.uniform() < boxShare) {
      for (let d = 0; d < dimension; d++) {
        theta[d] = lows[d]! + random.uniform() * (highs[d]! - lows[d]!);
      }
    } else {
      let chi = 0;
      for (let i = 0; i < FREEDOM; i++) chi += random.normal() ** 2;
      const scale = Math.sqrt(FREEDOM / chi);
      for (let d = 0; d < dimension; d++) normal[d] = random.normal();
      for (let d = 0; d < dimension; d++) {
        let sum = 0;
        for (let j = 0; j <= d; j++) sum += factor[d]![j]! * normal[j]!;
        theta[d] = mean[d]! + scale * sum;
      }
    }
    const height = problem.logPosterior(theta);
    if (height === -Infinity) {
      logWeights[k] = -Infinity;
      continue;
    }
    const student = logT - 0.5 * (FREEDOM + dimension) * Math.log1p(distance(theta) / FREEDOM);
    logWeights[k] =
      height - Math.log((1 - boxShare) * Math.exp(student) + boxShare * Math.exp(logBox));
    if (k % 1024 === 1023) yield { stage: "evidence", fraction: k / draws };
  }
  const top = logWeights.reduce((most, value) => Math.max(most, value), -Infinity);
  let sum = 0;
  let squares = 0;
  for (const value of logWeights) {
    const weight = Math.exp(value - top);
    sum += weight;
    squares += weight * weight;
  }
  const effectiveSize = (sum * sum) / squares;
  return {
    logEvidence: top + Math.log(sum / draws),
    error: Math.sqrt(Math.max(0, 1 / effectiveSize - 1 / draws)),
    effectiveSize,
  };

  /** Squared distance from the mean in units of the covariance, by forward substitution. */
  function distance(at: Float64Array): number {
    let total = 0;
    const solved = normal;
    for (let d = 0; d < dimension; d++) {
      let value = at[d]! - mean[d]!;
      for (let j = 0; j < d; j++) value -= factor[d]![j]! * solved[j]!;
      solved[d] = value / factor[d]![d]!;
      total += solved[d]! ** 2;
    }
    return total;
  }
}

function moments(
  posterior: SampledPosterior,
  dimension: number,
): { mean: Float64Array; covariance: number[][] } {
  const mean = new Float64Array(dimension);
  let count = 0;
  for (const { draws } of posterior.chains) {
    count += draws.length / dimension;
    for (let k = 0; k < draws.length; k++) mean[k % dimension]! += draws[k]!;
  }
  for (let d = 0; d < dimension; d++) mean[d]! /= count;
  const covariance = Array.from({ length: dimension }, () => new Array<number>(dimension).fill(0));
  for (const { draws } of posterior.chains) {
    for (let k = 0; k < draws.length; k += dimension) {
      for (let i = 0; i < dimension; i++) {
        for (let j = 0; j < dimension; j++) {
          covariance[i]![j]! +=
            ((draws[k + i]! - mean[i]!) * (draws[k + j]! - mean[j]!)) / (count - 1);
        }
      }
    }
  }
  return { mean, covariance };
}

/** ln Γ(n/2) for whole n ≥ 1, by its recurrence. */
function logGammaHalf(n: number): number {
  let value = n % 2 === 0 ? 0 : 0.5 * Math.log(Math.PI);
  for (let m = n % 2 === 0 ? 2 : 1; m < n; m += 2) value += Math.log(m / 2);
  return value;
}
