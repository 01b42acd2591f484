/**
 * What the model says of the past once everything is known: figures in the gaps, and the surprise of every period.
 *
 * The disturbance smoother, run backwards over the filter's trace: de Jong, "Smoothing and interpolation with the
 * state-space model", Journal of the American Statistical Association 84 (1989); Koopman, "Disturbance smoother for
 * state space models", Biometrika 80 (1993); diffuse steps after Durbin & Koopman, "Time Series Analysis by State Space
 * Methods", 2nd ed. 2012, section 5.3.
 */
import { DIFFUSE, MISSING } from './diffuse.js';
import { type FilterSpace, stationaryCovariance } from './filter.js';
import type { Fit } from './fit.js';
import { effectsOf, filtered } from './predict.js';

export interface Smoothed {
  /** On the model's scale, effects included; a gap, and a period that sold out, holds its mean given all figures. */
  readonly values: Float64Array;
  /** The mean of εₜ given all figures, for every period. */
  readonly surprises: Float64Array;
  /**
   * The same two for periods before the first figure, the latest last: as many as the difference equation of the next
   * period reaches back to, which is none but for a very short series. Effects are not included here.
   */
  readonly earlier: { readonly values: Float64Array; readonly surprises: Float64Array };
}

export function smooth(fit: Fit): Smoothed {
  const { p, d, q, P, D, Q, m } = fit.form;
  const n = fit.values.length;
  const reach = Math.max(p + m * P + d + m * D, q + m * Q);
  const before = Math.max(0, reach - n);
  const known = effectsOf(fit, n);
  const filter = filtered(fit, known, { traced: true, before });
  const { values, surprises } = smoothed(filter);
  return {
    values: values.slice(before).map((value, t) => value + known[t]),
    surprises: surprises.slice(before),
    earlier: { values: values.slice(0, before), surprises: surprises.slice(0, before) },
  };
}

function smoothed(filter: FilterSpace): { values: Float64Array; surprises: Float64Array } {
  const { n, r0, r1, surprises } = backwards(filter);
  const { arma, size, s, delta, deltaLags, data } = filter;
  const { r, ar, ma, arLags } = arma;
  const series = data[0];

  // The first state given everything, then forwards with the surprises: α̂₁ = P₁ r₀ + P∞ r⁽¹⁾₀, P∞ being 1 on the lags.
  const start = firstCovariance(filter);
  const a = new Float64Array(size);
  for (let i = 0; i < r; i++) for (let j = 0; j < r; j++) a[i] += start[i * r + j] * r0[j];
  for (let k = 0; k < s; k++) a[r + k] = r1[r + k];
  const values = new Float64Array(n);
  for (let t = 0; t < n; t++) {
    let y = a[0];
    for (let l = 0; l < deltaLags.length; l++) y += delta[deltaLags[l]] * a[r + deltaLags[l]];
    if (!Number.isNaN(series[t])) y = series[t];
    values[t] = y;
    const u = a[0];
    for (let i = 0; i < r - 1; i++) a[i] = a[i + 1];
    a[r - 1] = 0;
    for (let l = 0; l < arLags.length; l++) a[arLags[l] - 1] += ar[arLags[l] - 1] * u;
    if (t + 1 < n) {
      a[0] += surprises[t + 1];
      for (let i = 1; i < r; i++) a[i] += ma[i - 1] * surprises[t + 1];
    }
    for (let k = size - 1; k > r; k--) a[k] = a[k - 1];
    if (s > 0) a[r] = y;
  }
  return { values, surprises };
}

/** Durbin & Koopman's r⁽⁰⁾ and r⁽¹⁾ before the first period, and R'r on the way. */
function backwards(filter: FilterSpace): {
  n: number;
  r0: Float64Array;
  r1: Float64Array;
  surprises: Float64Array;
} {
  const { arma, n, size, s, delta, deltaLags, diffuse, trace } = filter;
  if (trace === null) throw new Error('the smoother needs a traced filter');
  const { r, ar, ma } = arma;
  const surprises = new Float64Array(n);
  let r0: Float64Array = new Float64Array(size);
  let r1: Float64Array = new Float64Array(size);

  /** T'x. */
  const transposed = (x: Float64Array) => {
    const result = new Float64Array(size);
    for (let i = 0; i < r; i++) result[0] += ar[i] * x[i];
    for (let i = 0; i < r - 1; i++) result[i + 1] += x[i];
    if (s > 0) {
      result[0] += x[r];
      for (let l = 0; l < deltaLags.length; l++) result[r + deltaLags[l]] += delta[deltaLags[l]] * x[r];
      for (let k = 0; k < s - 1; k++) result[r + k] += x[r + k + 1];
    }
    return result;
  };
  /** x + Z'·amount. */
  const addReading = (x: Float64Array, amount: number) => {
    x[0] += amount;
    for (let l = 0; l < deltaLags.length; l++) x[r + deltaLags[l]] += delta[deltaLags[l]] * amount;
    return x;
  };

  let step = diffuse.spread.length;
  for (let t = n - 1; t >= 0; t--) {
    const below0 = transposed(r0);
    const below1 = transposed(r1);
    const M = trace.M.subarray(t * size, (t + 1) * size);
    const F = trace.F[t];
    const v = trace.v[t];
    if (diffuse.kind[t] === DIFFUSE) {
      step--;
      const spread = diffuse.spread[step];
      const direction = diffuse.direction[step];
      let along0 = 0;
      let along1 = 0;
      for (let k = 0; k < s; k++) {
        along0 += direction[k] * below0[r + k];
        along1 += direction[k] * below1[r + k];
      }
      let finite = 0;
      for (let i = 0; i < size; i++) finite += M[i] * below0[i];
      r1 = addReading(below1, (v - along1 - finite) / spread + (along0 * F) / (spread * spread));
      r0 = addReading(below0, -along0 / spread);
    } else if (diffuse.kind[t] === MISSING) {
      r0 = below0;
      r1 = below1;
    } else {
      let along = 0;
      for (let i = 0; i < size; i++) along += M[i] * below0[i];
      r0 = addReading(below0, (v - along) / F);
      r1 = below1;
    }
    let surprise = r0[0];
    for (let i = 1; i < r; i++) surprise += ma[i - 1] * r0[i];
    surprises[t] = surprise;
  }
  return { n, r0, r1, surprises };
}

/** The stationary covariance of u's state, r by r, both triangles. */
function firstCovariance(filter: FilterSpace): Float64Array {
  const { arma } = filter;
  const { r } = arma;
  const full = new Float64Array(r * r);
  stationaryCovariance({ arma, P: full, size: r, covariances: filter.covariances, top: filter.top });
  for (let i = 0; i < r; i++) for (let j = 0; j < i; j++) full[i * r + j] = full[j * r + i];
  return full;
}
