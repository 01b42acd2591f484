/**
 * The Gaussian density of a differenced series, written down as it stands: the full covariance matrix, its Cholesky
 * factor, no recursion over time. Slow, and independent of everything in src/sarima.
 */
import type { Form } from '../../src/sarima/form.js';

export interface Coefficients {
  readonly phi: readonly number[];
  readonly theta: readonly number[];
  readonly Phi: readonly number[];
  readonly Theta: readonly number[];
}

/** Minus-sign convention for φ and Φ, plus for θ and Θ: the products with the seasonal factor, from lag 1. */
function expanded(plain: readonly number[], seasonal: readonly number[], m: number, sign: 1 | -1): number[] {
  const result = new Array<number>(plain.length + m * seasonal.length).fill(0);
  for (let i = 0; i <= plain.length; i++)
    for (let j = 0; j <= seasonal.length; j++) {
      if (i + j === 0) continue;
      const a = i === 0 ? 1 : sign * plain[i - 1];
      const b = j === 0 ? 1 : sign * seasonal[j - 1];
      result[i + m * j - 1] += sign * a * b;
    }
  return result;
}

function matrixProduct(a: number[][], b: number[][]): number[][] {
  return a.map((row) => b[0].map((_, j) => row.reduce((sum, x, k) => sum + x * b[k][j], 0)));
}

function transpose(a: number[][]): number[][] {
  return a[0].map((_, j) => a.map((row) => row[j]));
}

/** γ₀ … γ_count−1 for unit innovation variance: the state's covariance Σ TⁱRR'Tⁱ' by doubling the number of terms. */
export function denseAutocovariances(form: Form, at: Coefficients, count: number): number[] {
  const ar = expanded(at.phi, at.Phi, form.m, -1);
  const ma = expanded(at.theta, at.Theta, form.m, 1);
  const r = Math.max(ar.length, ma.length + 1);
  let T = Array.from({ length: r }, (_, i) =>
    Array.from({ length: r }, (_, j) => (j === 0 ? (ar[i] ?? 0) : 0) + (j === i + 1 ? 1 : 0)),
  );
  const R = [1, ...Array.from({ length: r - 1 }, (_, i) => ma[i] ?? 0)];
  const step = T;
  let P = R.map((a) => R.map((b) => a * b));
  for (let round = 0; round < 60; round++) {
    const added = matrixProduct(matrixProduct(T, P), transpose(T));
    P = P.map((row, i) => row.map((x, j) => x + added[i][j]));
    if (added.every((row, i) => row[i] <= 1e-18 * P[i][i])) break;
    T = matrixProduct(T, T);
  }
  let column = P.map((row) => [row[0]]);
  return Array.from({ length: count }, () => {
    const gamma = column[0][0];
    column = matrixProduct(step, column);
    return gamma;
  });
}

function cholesky(a: number[][]): number[][] {
  const n = a.length;
  const L = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  for (let i = 0; i < n; i++)
    for (let j = 0; j <= i; j++) {
      let sum = a[i][j];
      for (let k = 0; k < j; k++) sum -= L[i][k] * L[j][k];
      L[i][j] = i === j ? Math.sqrt(sum) : sum / L[j][j];
    }
  return L;
}

function forward(L: number[][], b: readonly number[]): number[] {
  const x: number[] = [];
  for (let i = 0; i < L.length; i++) {
    let sum = b[i];
    for (let k = 0; k < i; k++) sum -= L[i][k] * x[k];
    x.push(sum / L[i][i]);
  }
  return x;
}

function differenced(y: readonly number[], { d, D, m }: Form): number[] {
  let w = [...y];
  for (let i = 0; i < d; i++) w = w.slice(1).map((x, t) => x - w[t]);
  for (let i = 0; i < D; i++) w = w.slice(m).map((x, t) => x - w[t]);
  return w;
}

/**
 * Log-likelihood with the innovation variance and the regressors' effects at their best. Missing figures (NaN) are
 * integrated out over a flat prior: each is a dummy regressor, and ½ log of the determinant of their information is
 * taken off. That leaves a constant that depends on the gaps' places but on no coefficient.
 */
export function denseLogLikelihood(
  form: Form,
  at: Coefficients,
  y: readonly number[],
  regressors: readonly (readonly number[])[] = [],
): number {
  const missing = [...y.keys()].filter((t) => Number.isNaN(y[t]));
  const dummies = missing.map((t) => y.map((_, u) => (t === u ? 1 : 0)));
  const series = y.map((x) => (Number.isNaN(x) ? 0 : x));
  const w = differenced(series, form);
  const gamma = denseAutocovariances(form, at, w.length);
  const L = cholesky(w.map((_, i) => w.map((_, j) => gamma[Math.abs(i - j)])));
  const e = forward(L, w);
  const X = [...dummies, ...regressors].map((column) => forward(L, differenced(column, form)));
  const logDeterminant = 2 * L.reduce((sum, row, i) => sum + Math.log(row[i]), 0);

  // Least squares by orthogonalizing the columns in turn; the dummies' lengths on the way are their information.
  let information = 0;
  const basis: number[][] = [];
  const dot = (a: readonly number[], b: readonly number[]) => a.reduce((sum, x, i) => sum + x * b[i], 0);
  X.forEach((column, index) => {
    let rest = [...column];
    for (let pass = 0; pass < 2; pass++)
      for (const b of basis) {
        const along = dot(rest, b);
        rest = rest.map((x, i) => x - along * b[i]);
      }
    const length = Math.sqrt(dot(rest, rest));
    if (index < missing.length) information += 2 * Math.log(length);
    basis.push(rest.map((x) => x / length));
  });
  let rest = e;
  for (const b of basis) {
    const along = dot(rest, b);
    rest = rest.map((x, i) => x - along * b[i]);
  }
  const n = w.length - missing.length;
  const variance = dot(rest, rest) / n;
  return -0.5 * (n * (Math.log(2 * Math.PI) + 1 + Math.log(variance)) + logDeterminant + information);
}
