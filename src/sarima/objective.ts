/**
 * The likelihood as a function of the polynomials alone: the regressors' effects and the innovation variance are
 * concentrated out, the effects by generalized least squares on the filtered columns.
 *
 * The first of the regressors may be unknown figures: columns that are 1 in one period and 0 in all others, V their
 * filtered form. An unknown figure has a flat prior and is integrated out, which leaves its least squares estimate and
 * ½ log |V'V| (de Jong, "The diffuse Kalman filter", Annals of Statistics 19, 1991). The result differs from the
 * diffuse filter's by a number that depends on the gaps' places alone, and costs a fraction of it where gaps are few.
 */
import type { Innovations } from './likelihood.js';

export interface ConcentratedSpace {
  /** How many of the regressors, at the front, are unknown figures. */
  readonly unknowns: number;
  /** V'V, k by k, then its Cholesky factor in the lower triangle. */
  readonly gram: Float64Array;
  /** Effects of the regressors, in the columns' own scaling. */
  readonly effects: Float64Array;
  /** The ridge on each regressor's effect, in units of the innovation variance; 0 for none. */
  readonly ridge: Float64Array;
  /**
   * Errors with the effects taken off, then one √ridge·effect for each regressor that has a ridge, then the errors of
   * the columns after the regressors: directions in which the series itself is spread.
   */
  readonly residuals: Float64Array;
  /** Sum of squares of `residuals`. */
  sumOfSquares: number;
  /** log |V'V| of the unknown figures. */
  logInformation: number;
}

export function createConcentrated(count: number, ridge: Float64Array, unknowns = 0, spreads = 0): ConcentratedSpace {
  const k = ridge.length;
  const ridged = ridge.reduce((total, value) => total + (value > 0 ? 1 : 0), 0);
  return {
    unknowns,
    gram: new Float64Array(k * k),
    effects: new Float64Array(k),
    ridge,
    residuals: new Float64Array(count + ridged + spreads * count),
    sumOfSquares: 0,
    logInformation: 0,
  };
}

/** Fills effects, residuals and their sum of squares. False where the regressors' columns are not independent. */
export function concentrate(space: ConcentratedSpace, innovations: Innovations): boolean {
  const { gram, effects, ridge, residuals, unknowns } = space;
  const { columns, starts, count } = innovations;
  const k = effects.length;
  residuals.set(columns[0]);
  for (let c = k + 1; c < columns.length; c++)
    residuals.set(columns[c], residuals.length - (columns.length - c) * count);
  if (k > 0) {
    for (let i = 0; i < k; i++) {
      const a = columns[i + 1];
      for (let j = 0; j <= i; j++) {
        const sum = product(a, columns[j + 1], Math.max(starts[i + 1], starts[j + 1]), count);
        gram[i * k + j] = i === j ? sum + ridge[i] : sum;
      }
      effects[i] = product(a, columns[0], starts[i + 1], count);
    }
    if (!factorize(gram, k)) return false;
    solveFactored(gram, k, effects);
    let row = count;
    for (let i = 0; i < k; i++) {
      const column = columns[i + 1];
      const effect = effects[i];
      for (let t = starts[i + 1]; t < count; t++) residuals[t] -= effect * column[t];
      if (ridge[i] > 0) residuals[row++] = Math.sqrt(ridge[i]) * effect;
    }
    space.logInformation = 0;
    for (let i = 0; i < unknowns; i++) space.logInformation += 2 * Math.log(gram[i * k + i]);
  }
  space.sumOfSquares = product(residuals, residuals, 0, residuals.length);
  return Number.isFinite(space.sumOfSquares);
}

/** Σ aₜbₜ over from ≤ t < to. */
export function product(a: Float64Array, b: Float64Array, from: number, to: number): number {
  let sum = 0;
  for (let t = from; t < to; t++) sum += a[t] * b[t];
  return sum;
}

/** Cholesky factor of a symmetric k by k matrix, in place in the lower triangle. False where it is not positive. */
export function factorize(matrix: Float64Array, k: number): boolean {
  for (let i = 0; i < k; i++)
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * k + j];
      for (let l = 0; l < j; l++) sum -= matrix[i * k + l] * matrix[j * k + l];
      if (i > j) matrix[i * k + j] = sum / matrix[j * k + j];
      else if (sum > 1e-13 * Math.abs(matrix[i * k + i])) matrix[i * k + i] = Math.sqrt(sum);
      else return false;
    }
  return true;
}

/** Solves L L'x = b for a factor made by `factorize`, in place. */
export function solveFactored(factor: Float64Array, k: number, b: Float64Array): void {
  for (let i = 0; i < k; i++) {
    let sum = b[i];
    for (let j = 0; j < i; j++) sum -= factor[i * k + j] * b[j];
    b[i] = sum / factor[i * k + i];
  }
  for (let i = k - 1; i >= 0; i--) {
    let sum = b[i];
    for (let j = i + 1; j < k; j++) sum -= factor[j * k + i] * b[j];
    b[i] = sum / factor[i * k + i];
  }
}

/**
 * Minus the log-likelihood, effects and variance at their best: n/2·(log 2π + 1 + log S/n) + ½ Σ log f, n the errors
 * less the unknown figures.
 */
export function minusLogLikelihood(innovations: Innovations, space: ConcentratedSpace): number {
  const n = innovations.count - space.unknowns;
  const logDeterminant = innovations.logDeterminant + space.logInformation;
  return 0.5 * (n * (Math.log(2 * Math.PI) + 1 + Math.log(space.sumOfSquares / n)) + logDeterminant);
}

/** The log-likelihood at effects and variance as they stand, which a ridge has moved off their best. */
export function logLikelihoodAt(innovations: Innovations, space: ConcentratedSpace): number {
  const { count } = innovations;
  const { residuals, sumOfSquares } = space;
  const ridged = product(residuals, residuals, count, residuals.length);
  return -minusLogLikelihood(innovations, space) + (0.5 * (count - space.unknowns) * ridged) / sumOfSquares;
}

/** The effects' covariance with the polynomials held fixed, for the regressors that are no unknown figures. */
export function effectsCovariance(space: ConcentratedSpace, observations: number): Float64Array {
  const { gram, effects, unknowns, sumOfSquares } = space;
  const k = effects.length;
  const asked = k - unknowns;
  const covariance = new Float64Array(asked * asked);
  const unit = new Float64Array(k);
  for (let j = 0; j < asked; j++) {
    unit.fill(0);
    unit[unknowns + j] = sumOfSquares / observations;
    solveFactored(gram, k, unit);
    covariance.set(unit.subarray(unknowns), j * asked);
  }
  return covariance;
}
