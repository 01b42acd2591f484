/**
 * One-step prediction errors of a differenced series without gaps, exact from the first value on.
 *
 * The Chandrasekhar form of the Kalman filter: Morf, Sidhu & Kailath, "Some new algorithms for recursive estimation in
 * constant, linear, discrete-time systems", IEEE Transactions on Automatic Control 19 (1974); Pearlman, "An algorithm
 * for the exact likelihood of a high-order autoregressive-moving average process", Biometrika 67 (1980). The state's
 * covariance changes by one outer product a step, P_{t+1} − P_t = −Y_t Y_t'/F_t, so a step costs about 3r
 * multiplications instead of r².
 *
 * Here the gain is kept as H_t, the part of P_t's first column below its top, so that the transition is a mere shift:
 *
 *     g = Y₀/F,  Yᵢ ← Yᵢ₊₁ − g Hᵢ,  Hᵢ ← Hᵢ − g Yᵢ₊₁,  F ← F − g Y₀
 *     aᵢ ← aᵢ₊₁ + φᵢ₊₁ w + Hᵢ e/F,  e = w − a₀
 *
 * F falls towards 1; once it is there the errors follow from the difference equation alone.
 */
import type { Arma } from './arma.js';
import { type AutocovarianceSpace, createAutocovarianceSpace, firstColumn } from './autocovariance.js';

/** One-step prediction errors of a series and its regressors, all in units of their own predicted spread. */
export interface Innovations {
  /** Number of errors. */
  readonly count: number;
  /** Column 0 the series, then the regressors; each error divided by √f. */
  readonly columns: readonly Float64Array[];
  /** For each column the error before which all are zero. */
  readonly starts: Int32Array;
  /** √f of each error, for unit innovation variance. */
  readonly root: Float64Array;
  /** Σ log f. */
  logDeterminant: number;
}

export interface LikelihoodSpace extends Innovations {
  readonly arma: Arma;
  readonly data: readonly Float64Array[];
  readonly covariances: AutocovarianceSpace;
  readonly first: Float64Array;
  readonly H: Float64Array;
  readonly Y: Float64Array;
  readonly states: readonly Float64Array[];
}

/** F this close to its limit of 1 counts as there. */
const SETTLED = 1e-12;

/** Room for all that an evaluation needs. `data`: the differenced series, then the differenced regressors. */
export function createLikelihood(arma: Arma, data: readonly Float64Array[]): LikelihoodSpace {
  const count = data[0].length;
  const { r } = arma;
  return {
    arma,
    data,
    count,
    columns: data.map(() => new Float64Array(count)),
    starts: Int32Array.from(data, (column) => {
      const first = column.findIndex((x) => x !== 0);
      return first < 0 ? count : first;
    }),
    root: new Float64Array(count),
    logDeterminant: 0,
    covariances: createAutocovarianceSpace(r),
    first: new Float64Array(r),
    H: new Float64Array(r),
    Y: new Float64Array(r + 1),
    states: data.map(() => new Float64Array(r + 1)),
  };
}

/** Fills the errors for the polynomials in `space.arma`. False where they can't be computed. */
export function predictionErrors(space: LikelihoodSpace): boolean {
  const { arma, data, columns, starts, root, first, H, Y, states, count } = space;
  const { r, ar, arLags } = arma;
  if (!firstColumn(arma, space.covariances, first)) return false;
  let F = first[0];
  const last = r - 1;
  for (let i = 0; i < last; i++) {
    H[i] = first[i + 1];
    Y[i] = first[i + 1] + ar[i] * F;
  }
  H[last] = 0;
  Y[last] = ar[last] * F;
  Y[r] = 0;
  for (let c = 0; c < states.length; c++) states[c].fill(0);

  const series = data[0];
  const errors = columns[0];
  const state = states[0];
  let logSum = 0;
  let product = 1;
  let t = 0;
  for (; t < count && F - 1 > SETTLED; t++) {
    const rootF = Math.sqrt(F);
    root[t] = rootF;
    product *= F;
    if (product > 1e200) {
      logSum += Math.log(product);
      product = 1;
    }
    for (let c = 1; c < states.length; c++) {
      if (t < starts[c]) continue;
      const w = data[c][t];
      const a = states[c];
      const e = w - a[0];
      columns[c][t] = e / rootF;
      const scaled = e / F;
      for (let i = 0; i < r; i++) a[i] = a[i + 1] + H[i] * scaled;
      for (let l = 0; l < arLags.length; l++) a[arLags[l] - 1] += ar[arLags[l] - 1] * w;
    }
    const w = series[t];
    const e = w - state[0];
    errors[t] = e / rootF;
    const scaled = e / F;
    const y = Y[0];
    const g = y / F;
    for (let i = 0; i < r; i++) {
      const h = H[i];
      const below = Y[i + 1];
      state[i] = state[i + 1] + h * scaled;
      Y[i] = below - h * g;
      H[i] = h - below * g;
    }
    for (let l = 0; l < arLags.length; l++) state[arLags[l] - 1] += ar[arLags[l] - 1] * w;
    F -= g * y;
  }
  space.logDeterminant = logSum + Math.log(product);
  // Rounding can carry F a little below its limit; much below it the recursion has broken down.
  if (!(F > 0.5) || !Number.isFinite(space.logDeterminant)) return false;
  if (t < count) steadyErrors(space, t);
  return true;
}

/** From time `from` on F is 1 and the gain constant: the state runs out over r steps, then only the lags remain. */
function steadyErrors(space: LikelihoodSpace, from: number): void {
  const { arma, data, columns, starts, root, states, count } = space;
  const { p, q, r, ar, ma, arLags, maLags } = arma;
  root.fill(1, from);
  for (let c = 0; c < data.length; c++) {
    const series = data[c];
    const errors = columns[c];
    const a = states[c];
    // With nothing but zeros before, the state is empty.
    const direct = Math.max(starts[c] > from ? q : from + q, p);
    let t = Math.max(from, starts[c]);
    for (; t < count && t < direct; t++) {
      const w = series[t];
      const e = w - a[0];
      errors[t] = e;
      for (let i = 0; i < r; i++) a[i] = a[i + 1];
      for (let l = 0; l < maLags.length; l++) a[maLags[l] - 1] += ma[maLags[l] - 1] * e;
      for (let l = 0; l < arLags.length; l++) a[arLags[l] - 1] += ar[arLags[l] - 1] * w;
    }
    for (; t < count; t++) {
      let e = series[t];
      for (let l = 0; l < arLags.length; l++) e -= ar[arLags[l] - 1] * series[t - arLags[l]];
      for (let l = 0; l < maLags.length; l++) e -= ma[maLags[l] - 1] * errors[t - maLags[l]];
      errors[t] = e;
    }
  }
}
