/**
 * One-step prediction errors of a series with gaps: the Kalman filter on the undifferenced state.
 *
 * The state is the ARMA process u (Harvey's form, r values) followed by the last s = d + mD figures:
 *
 *     yₜ = uₜ + Σ δₖ yₜ₋ₖ,   u's state shifts with φ and takes in εₜ with (1, θ₁, θ₂, …)
 *
 * Harvey, "Forecasting, structural time series models and the Kalman filter", 1989, section 3.4; Durbin & Koopman,
 * "Time Series Analysis by State Space Methods", 2nd ed. 2012, chapters 3 and 5; Jones (1980) on gaps. A missing figure
 * is stepped over. As long as the last s figures are known, their rows of the covariance are zero and are left out.
 */
import type { Arma } from './arma.js';
import { type AutocovarianceSpace, createAutocovarianceSpace, firstColumn } from './autocovariance.js';
import { DIFFUSE, type DiffuseStart, diffuseStart, knownStart, MISSING, ORDINARY } from './diffuse.js';
import type { Innovations } from './likelihood.js';
import { differenceWeights } from './polynomial.js';

export interface FilterSpace extends Innovations {
  readonly arma: Arma;
  /** The undifferenced series (NaN where missing), then the undifferenced regressors. */
  readonly data: readonly Float64Array[];
  readonly n: number;
  /** d + mD. */
  readonly s: number;
  /** r + s. */
  readonly size: number;
  readonly delta: Float64Array;
  readonly deltaLags: Int32Array;
  readonly diffuse: DiffuseStart;
  /** First period that is filtered: s where the first s figures are all known and nothing needs their errors. */
  readonly from: number;
  readonly covariances: AutocovarianceSpace;
  /** The state's covariance, size by size; the upper triangle counts. */
  readonly P: Float64Array;
  readonly M: Float64Array;
  readonly top: Float64Array;
  /** The states of all columns, as predicted for the next period. */
  readonly states: readonly Float64Array[];
  /** Whether P's rows for the lag block count, or are all zero. */
  lagsUncertain: boolean;
  /** What the smoother needs of every step, or null. */
  readonly trace: Trace | null;
}

export interface Trace {
  /** M = PZ' of every period, n by size. */
  readonly M: Float64Array;
  /** F of every period. */
  readonly F: Float64Array;
  /** The series' prediction error of every period, 0 where missing. */
  readonly v: Float64Array;
}

const SETTLED = 1e-12;

/** Room for a run of the filter. With `traced` every period from the first on is filtered and kept. */
export function createFilter(arma: Arma, data: readonly Float64Array[], traced = false): FilterSpace {
  const delta = differenceWeights(arma.form);
  const n = data[0].length;
  const s = delta.length;
  const size = arma.r + s;
  const from = traced || data[0].subarray(0, s).some(Number.isNaN) ? 0 : s;
  const diffuse = from === s ? knownStart(data[0], s) : diffuseStart(data[0], delta);
  return {
    arma,
    data,
    n,
    s,
    size,
    delta,
    deltaLags: Int32Array.from(delta.keys()).filter((i) => delta[i] !== 0),
    diffuse,
    from,
    count: diffuse.ordinary,
    columns: data.map(() => new Float64Array(diffuse.ordinary)),
    starts: new Int32Array(data.length),
    root: new Float64Array(diffuse.ordinary),
    logDeterminant: 0,
    covariances: createAutocovarianceSpace(arma.r),
    P: new Float64Array(size * size),
    M: new Float64Array(size),
    top: new Float64Array(size + 1),
    states: data.map(() => new Float64Array(size)),
    lagsUncertain: false,
    trace: traced ? { M: new Float64Array(n * size), F: new Float64Array(n), v: new Float64Array(n) } : null,
  };
}

/** Fills the errors for the polynomials in `space.arma`. False where they can't be computed. */
export function filterErrors(space: FilterSpace): boolean {
  const { arma, data, n, s, size, delta, deltaLags, diffuse, from, P, M, states, trace, columns, root } = space;
  const { r, ar, ma, arLags } = arma;
  if (!stationaryCovariance(space)) return false;
  for (let c = 0; c < states.length; c++) {
    const a = states[c];
    a.fill(0);
    if (from > 0) for (let k = 0; k < s; k++) a[r + k] = data[c][s - 1 - k];
  }
  let logSum = 0;
  let row = 0;
  let diffuseSteps = 0;
  let lastMissing = from > 0 ? -1 - s : -1;
  let steady = false;
  let settledSteps = 0;
  for (let t = from; t < n; t++) {
    const kind = diffuse.kind[t];
    const uncertain = lastMissing >= t - s;
    const used = uncertain ? size : r;

    // M = PZ', F = ZPZ'.
    let F = 1;
    if (steady) {
      M[0] = 1;
      for (let i = 1; i < r; i++) M[i] = ma[i - 1];
    } else {
      for (let i = 0; i < used; i++) M[i] = P[i];
      if (uncertain)
        for (let l = 0; l < deltaLags.length; l++) {
          const weight = delta[deltaLags[l]];
          const c = r + deltaLags[l];
          for (let i = 0; i <= c; i++) M[i] += weight * P[i * size + c];
          for (let i = c + 1; i < size; i++) M[i] += weight * P[c * size + i];
        }
      F = M[0];
      if (uncertain) for (let l = 0; l < deltaLags.length; l++) F += delta[deltaLags[l]] * M[r + deltaLags[l]];
    }
    if (!(F > 0)) return false;
    if (trace !== null) {
      for (let i = 0; i < used; i++) trace.M[t * size + i] = M[i];
      trace.F[t] = F;
    }

    // The update by what was observed, and the prediction, of every column's state.
    const step = diffuseSteps;
    for (let c = 0; c < states.length; c++) {
      const a = states[c];
      let y = a[0];
      for (let l = 0; l < deltaLags.length; l++) y += delta[deltaLags[l]] * a[r + deltaLags[l]];
      if (kind !== MISSING) {
        const e = data[c][t] - y;
        y = data[c][t];
        if (trace !== null && c === 0) trace.v[t] = e;
        if (kind === DIFFUSE) {
          const scaled = e / diffuse.spread[step];
          const direction = diffuse.direction[step];
          for (let k = 0; k < s; k++) a[r + k] += direction[k] * scaled;
        } else {
          columns[c][row] = e / Math.sqrt(F);
          const scaled = e / F;
          for (let i = 0; i < used; i++) a[i] += M[i] * scaled;
        }
      }
      const u = a[0];
      for (let i = 0; i < r - 1; i++) a[i] = a[i + 1];
      a[r - 1] = 0;
      for (let l = 0; l < arLags.length; l++) a[arLags[l] - 1] += ar[arLags[l] - 1] * u;
      if (s > 0) {
        for (let k = size - 1; k > r; k--) a[k] = a[k - 1];
        a[r] = y;
      }
    }

    // The same for the covariance.
    if (kind === ORDINARY) {
      root[row++] = Math.sqrt(F);
      logSum += Math.log(F);
      // A gap can still weigh on a later season: only r settled steps in a row say that nothing is left of it.
      settledSteps = !uncertain && F - 1 < SETTLED ? settledSteps + 1 : 0;
      if (settledSteps > r) steady = true;
      if (steady) continue;
      for (let i = 0; i < used; i++) {
        const scaled = M[i] / F;
        for (let j = i; j < used; j++) P[i * size + j] -= scaled * M[j];
      }
    } else if (kind === DIFFUSE) {
      updateDiffuse(space, F, diffuseSteps++);
    } else {
      lastMissing = t;
      settledSteps = 0;
      if (steady) {
        steady = false;
        for (let i = 0; i < r; i++) for (let j = i; j < r; j++) P[i * size + j] = M[i] * M[j];
      }
    }
    if (kind === MISSING && !uncertain) {
      M.fill(0, r);
      for (let i = 0; i < size; i++) P.fill(0, i * size + r, (i + 1) * size);
    }
    predictCovariance(space, kind !== MISSING, F, uncertain || kind === MISSING);
  }
  space.lagsUncertain = lastMissing >= n - s;
  if (steady) for (let i = 0; i < r; i++) for (let j = i; j < r; j++) P[i * size + j] = M[i] * M[j];
  space.logDeterminant = logSum;
  return Number.isFinite(logSum);
}

/** P of the first period: the stationary covariance of u's state; the lags' finite part is zero. */
export function stationaryCovariance(space: Pick<FilterSpace, 'arma' | 'P' | 'size' | 'covariances' | 'top'>): boolean {
  const { arma, P, size, covariances, top } = space;
  const { r, ar, ma } = arma;
  if (!firstColumn(arma, covariances, top)) return false;
  P.fill(0);
  // P = TPT' + RR', solved from its last element backwards, the first row being known.
  for (let i = r - 1; i >= 1; i--)
    for (let j = r - 1; j >= i; j--) {
      const below = j + 1 < r ? P[(i + 1) * size + j + 1] : 0;
      const right = j + 1 < r ? top[j + 1] : 0;
      const down = i + 1 < r ? top[i + 1] : 0;
      P[i * size + j] = below + ar[i] * right + ar[j] * down + ar[i] * ar[j] * top[0] + ma[i - 1] * ma[j - 1];
    }
  for (let j = 0; j < r; j++) P[j] = top[j];
  return true;
}

/** Durbin & Koopman's equations (5.17): an observation whose prediction has an infinite variance. */
function updateDiffuse(space: FilterSpace, F: number, step: number): void {
  const { arma, P, M, size, diffuse } = space;
  const { r } = arma;
  const spread = diffuse.spread[step];
  const direction = diffuse.direction[step];
  const ratio = F / (spread * spread);
  for (let i = 0; i < size; i++) {
    const di = i < r ? 0 : direction[i - r];
    for (let j = Math.max(i, r); j < size; j++) {
      const dj = direction[j - r];
      P[i * size + j] += di * dj * ratio - (M[i] * dj + di * M[j]) / spread;
    }
  }
}

/**
 * P ← TPT' + RR', in place on the upper triangle. `M` and `F` are PZ' and ZPZ' before the update; after an observation
 * both are zero.
 */
function predictCovariance(space: FilterSpace, observed: boolean, F: number, uncertain: boolean): void {
  const { arma, P, M, top, size, s } = space;
  const { r, ar, ma, arLags } = arma;
  const used = uncertain ? size : r;
  for (let j = 0; j < used; j++) top[j] = P[j];

  // u's own block: shifted up, with φ times the top row, and the new innovation.
  for (let i = 0; i < r - 1; i++) {
    const R = i === 0 ? 1 : ma[i - 1];
    const here = i * size;
    const below = here + size + 1;
    for (let j = i; j < r - 1; j++) P[here + j] = P[below + j] + R * (j === 0 ? 1 : ma[j - 1]);
    P[here + r - 1] = R * (r === 1 ? 1 : ma[r - 2]);
  }
  const corner = r === 1 ? 1 : ma[r - 2];
  P[(r - 1) * size + r - 1] = corner * corner;
  for (let l = 0; l < arLags.length; l++) {
    const i = arLags[l] - 1;
    const phi = ar[i];
    for (let j = 0; j < r; j++) {
      const value = phi * (j + 1 < r ? top[j + 1] : 0);
      if (j < i) P[j * size + i] += value;
      else if (j > i) P[i * size + j] += value;
      else P[i * size + i] += 2 * value;
    }
    for (let k = 0; k <= l; k++) {
      const j = arLags[k] - 1;
      P[j * size + i] += phi * ar[j] * top[0];
    }
  }
  if (!uncertain || s === 0) return;

  // u with the lags, then the lags with one another: each lag grows older by one.
  for (let j = size - 1; j > r; j--) {
    for (let i = 0; i < r - 1; i++) P[i * size + j] = P[(i + 1) * size + j - 1];
    P[(r - 1) * size + j] = 0;
    for (let l = 0; l < arLags.length; l++) {
      const i = arLags[l] - 1;
      P[i * size + j] += ar[i] * top[j - 1];
    }
  }
  for (let i = size - 1; i > r; i--) for (let j = size - 1; j >= i; j--) P[i * size + j] = P[(i - 1) * size + j - 1];
  for (let j = r; j < size; j++) P[r * size + j] = 0;
  for (let i = 0; i < r; i++) P[i * size + r] = 0;
  if (observed) return;
  P[r * size + r] = F;
  for (let j = r + 1; j < size; j++) P[r * size + j] = M[j - 1];
  for (let i = 0; i < r; i++) P[i * size + r] = (i + 1 < r ? M[i + 1] : 0) + ar[i] * M[0];
}
