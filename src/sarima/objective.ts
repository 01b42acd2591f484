/**
 * The likelihood as a function of the polynomials alone: the regressors' effects and the innovation variance are
 * concentrated out, the effects by generalized least squares on the filtered columns.
 */
import type { Innovations } from './likelihood.js';

export interface ConcentratedSpace {
  /** V'V, k by k, then its Cholesky factor in the lower triangle. */
  readonly gram: Float64Array;
  /** Effects of the regressors, in the columns' own scaling. */
  readonly effects: Float64Array;
  /** The ridge on each regressor's effect, in units of the innovation variance; 0 for none. */
  readonly ridge: Float64Array;
  /** Errors with the effects taken off, then one √ridge·effect for each regressor that has a ridge. */
  readonly residuals: Float64Array;
  /** Sum of squares of `residuals`. */
  sumOfSquares: number;
}

export function createConcentrated(count: number, regressors: number, ridge: Float64Array): ConcentratedSpace {
  const ridged = ridge.reduce((total, value) => total + (value > 0 ? 1 : 0), 0);
  return {
    gram: new Float64Array(regressors * regressors),
    effects: new Float64Array(regressors),
    ridge,
    residuals: new Float64Array(count + ridged),
    sumOfSquares: 0,
  };
}

/** Fills effects, residuals and their sum of squares. False where the regressors' columns are not independent. */
export function concentrate(space: ConcentratedSpace, innovations: Innovations): boolean {
  const { gram, effects, ridge, residuals } = space;
  const { columns, count } = innovations;
  const k = effects.length;
  const errors = columns[0];
  if (k > 0) {
    for (let i = 0; i < k; i++) {
      const a = columns[i + 1];
      for (let j = 0; j <= i; j++) {
        const b = columns[j + 1];
        let sum = i === j ? ridge[i] : 0;
        for (let t = 0; t < count; t++) sum += a[t] * b[t];
        gram[i * k + j] = sum;
      }
      let sum = 0;
      for (let t = 0; t < count; t++) sum += a[t] * errors[t];
      effects[i] = sum;
    }
    if (!factorize(gram, k)) return false;
    solveFactored(gram, k, effects);
  }
  let sumOfSquares = 0;
  if (k === 0)
    for (let t = 0; t < count; t++) {
      const e = errors[t];
      residuals[t] = e;
      sumOfSquares += e * e;
    }
  else {
    for (let t = 0; t < count; t++) {
      let e = errors[t];
      for (let i = 0; i < k; i++) e -= effects[i] * columns[i + 1][t];
      residuals[t] = e;
      sumOfSquares += e * e;
    }
    let row = count;
    for (let i = 0; i < k; i++)
      if (ridge[i] > 0) {
        const e = Math.sqrt(ridge[i]) * effects[i];
        residuals[row++] = e;
        sumOfSquares += e * e;
      }
  }
  space.sumOfSquares = sumOfSquares;
  return Number.isFinite(sumOfSquares);
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

/** Minus the log-likelihood, effects and variance at their best: n/2·(log 2π + 1 + log S/n) + ½ Σ log f. */
export function minusLogLikelihood(innovations: Innovations, sumOfSquares: number): number {
  const n = innovations.count;
  return 0.5 * (n * (Math.log(2 * Math.PI) + 1 + Math.log(sumOfSquares / n)) + innovations.logDeterminant);
}
