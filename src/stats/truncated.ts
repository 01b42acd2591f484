/**
 * A joint normal distribution of which some values are known to lie at or above a bound.
 *
 * Expectation propagation: each bound is replaced by a normal factor that gives the same mean and variance beside all
 * the others. Exact for one bound; for several Cunningham, Hennig & Lacoste-Julien, "Gaussian probabilities and
 * expectation propagation", arXiv:1111.6832 (2011), after Minka, "Expectation propagation for approximate Bayesian
 * inference", Uncertainty in Artificial Intelligence 17 (2001).
 */
import { normalProbability } from './normal.js';

export interface Truncated {
  readonly mean: Float64Array;
  /** k by k, row by row. */
  readonly covariance: Float64Array;
  /** Log of the probability that every value lies at or above its bound. */
  readonly logProbability: number;
}

const MOST_ROUNDS = 200;
const ENOUGH = 1e-12;

/**
 * `mean` k values, `covariance` k by k and positive definite, `bounds` k values, −Infinity where there is none.
 */
export function truncateBelow(mean: Float64Array, covariance: Float64Array, bounds: Float64Array): Truncated {
  const k = mean.length;
  const bounded = [...bounds.keys()].filter((i) => bounds[i] > Number.NEGATIVE_INFINITY);
  const S = Float64Array.from(covariance);
  const m = Float64Array.from(mean);
  const precision = new Float64Array(k);
  const shift = new Float64Array(k);
  const site = (i: number) => {
    const rest = 1 / S[i * k + i] - precision[i];
    const variance = 1 / rest;
    const centre = variance * (m[i] / S[i * k + i] - shift[i]);
    const spread = Math.sqrt(variance);
    return { variance, centre, spread, ...aboveBound((centre - bounds[i]) / spread) };
  };
  for (let round = 0; round < MOST_ROUNDS; round++) {
    let moved = 0;
    for (const i of bounded) {
      const { variance, centre, spread, hazard, shrink } = site(i);
      const added = shrink / (variance * (1 - shrink)) - precision[i];
      const target = (centre + spread * hazard) / (variance * (1 - shrink)) - centre / variance;
      const pushed = target - shift[i];
      precision[i] += added;
      shift[i] = target;
      // The rank-one change of the covariance that the site's new precision makes, and the mean that follows.
      const column = Float64Array.from({ length: k }, (_, j) => S[j * k + i]);
      const share = added / (1 + added * column[i]);
      const step = pushed - share * (m[i] + column[i] * pushed);
      for (let j = 0; j < k; j++) {
        m[j] += column[j] * step;
        for (let l = 0; l < k; l++) S[j * k + l] -= share * column[j] * column[l];
      }
      moved = Math.max(moved, Math.abs(column[i] * step) / Math.sqrt(column[i]), Math.abs(added) * column[i]);
    }
    if (moved < ENOUGH) break;
  }

  // The probability: every site's own normalization, then that of the joint normal with all sites.
  let logProbability = 0;
  for (const i of bounded) {
    const { variance, centre, logShare } = site(i);
    const total = 1 + precision[i] * variance;
    const tilted = (centre / variance + shift[i]) ** 2 / (1 / variance + precision[i]) - centre ** 2 / variance;
    logProbability += logShare + 0.5 * Math.log(total) - 0.5 * tilted;
  }
  return {
    mean: m,
    covariance: S,
    logProbability: logProbability + logJoint(mean, covariance, bounded, precision, shift),
  };
}

/** log ∫ N(y; mean, covariance) Π exp(−½ pᵢyᵢ² + sᵢyᵢ) dy, one site after the other. */
function logJoint(
  mean: Float64Array,
  covariance: Float64Array,
  bounded: readonly number[],
  precision: Float64Array,
  shift: Float64Array,
): number {
  const k = mean.length;
  const S = Float64Array.from(covariance);
  const m = Float64Array.from(mean);
  let sum = 0;
  for (const i of bounded) {
    const variance = S[i * k + i];
    const p = precision[i];
    const s = shift[i];
    const total = 1 + p * variance;
    sum += -0.5 * Math.log(total) + (s * m[i] + 0.5 * s * s * variance - 0.5 * p * m[i] * m[i]) / total;
    const column = Float64Array.from({ length: k }, (_, j) => S[j * k + i]);
    const step = (s - p * m[i]) / total;
    for (let j = 0; j < k; j++) {
      m[j] += column[j] * step;
      for (let l = 0; l < k; l++) S[j * k + l] -= (p / total) * column[j] * column[l];
    }
  }
  return sum;
}

/**
 * A standard normal value known to exceed −z: the log of that chance, its mean (the hazard φ/Φ), and by how much its
 * variance falls below 1.
 */
function aboveBound(z: number): { logShare: number; hazard: number; shrink: number } {
  const logDensity = -0.5 * (z * z + Math.log(2 * Math.PI));
  if (z > -6) {
    const share = normalProbability(z);
    const hazard = Math.exp(logDensity) / share;
    return { logShare: Math.log(share), hazard, shrink: hazard * (hazard + z) };
  }
  // Mills' ratio by its continued fraction, where the chance itself is too small to divide by: hazard = x + 1/(x + 2/(x + …)).
  const x = -z;
  let fraction = 0;
  for (let j = 100; j >= 2; j--) fraction = j / (x + fraction);
  const excess = 1 / (x + fraction);
  const hazard = x + excess;
  return { logShare: logDensity - Math.log(hazard), hazard, shrink: hazard * excess };
}
