/**
 * The start of a series under differencing: which observations settle the unknown values before the first, and how.
 *
 * Exact diffuse initialization, one observation at a time: Koopman, "Exact initial Kalman filtering and smoothing for
 * nonstationary time series models", Journal of the American Statistical Association 92 (1997); Durbin & Koopman,
 * "Time Series Analysis by State Space Methods", 2nd ed. 2012, section 5.2. The diffuse part of the covariance depends
 * only on the differences taken and on where figures are missing, not on any coefficient, so it is computed once.
 */

export const MISSING = 0;
export const ORDINARY = 1;
export const DIFFUSE = 2;

export interface DiffuseStart {
  /** For every period MISSING, ORDINARY, or DIFFUSE: observed, and used up on what was unknown at the start. */
  readonly kind: Uint8Array;
  /** For each diffuse step in order: F∞, the diffuse variance of the prediction. */
  readonly spread: readonly number[];
  /** For each diffuse step in order: M∞ = P∞Z', on the lag block. */
  readonly direction: readonly Float64Array[];
  /** Number of ordinary steps: the errors that count in the likelihood. */
  readonly ordinary: number;
  /** False where the figures leave a value that forecasts need unknown to the end. */
  readonly settled: boolean;
}

const NOTHING = 1e-9;

/** The start of a series whose first s figures are all known: these settle everything, and no error of theirs counts. */
export function knownStart(series: Float64Array, s: number): DiffuseStart {
  const kind = Uint8Array.from(series, (y, t) => (t < s ? DIFFUSE : Number.isNaN(y) ? MISSING : ORDINARY));
  const ordinary = kind.reduce((count, each) => count + (each === ORDINARY ? 1 : 0), 0);
  return { kind, spread: [], direction: [], ordinary, settled: true };
}

/** `delta`: yₜ = uₜ + Σ delta[k−1] yₜ₋ₖ. */
export function diffuseStart(series: Float64Array, delta: Float64Array): DiffuseStart {
  const n = series.length;
  const s = delta.length;
  const kind = new Uint8Array(n);
  const spread: number[] = [];
  const direction: Float64Array[] = [];
  let ordinary = 0;
  let P = new Float64Array(s * s);
  for (let i = 0; i < s; i++) P[i * s + i] = 1;
  let unsettled = s > 0;
  for (let t = 0; t < n; t++) {
    const observed = !Number.isNaN(series[t]);
    const M = new Float64Array(s);
    let F = 0;
    if (unsettled) {
      for (let i = 0; i < s; i++) for (let j = 0; j < s; j++) M[i] += P[i * s + j] * delta[j];
      for (let i = 0; i < s; i++) F += delta[i] * M[i];
    }
    const informs = observed && F > NOTHING;
    kind[t] = observed ? (informs ? DIFFUSE : ORDINARY) : MISSING;
    if (observed && !informs) ordinary++;
    if (!unsettled) continue;
    if (informs) {
      spread.push(F);
      direction.push(M);
      for (let i = 0; i < s; i++) for (let j = 0; j < s; j++) P[i * s + j] -= (M[i] * M[j]) / F;
    }
    // The newest lag is yₜ itself: known where observed, as uncertain as its prediction where not.
    const next = new Float64Array(s * s);
    for (let i = 1; i < s; i++) for (let j = 1; j < s; j++) next[i * s + j] = P[(i - 1) * s + j - 1];
    if (!observed) {
      next[0] = F;
      for (let i = 1; i < s; i++) next[i] = next[i * s] = M[i - 1];
    }
    P = next;
    unsettled = false;
    for (let i = 0; i < s; i++) if (P[i * s + i] > NOTHING) unsettled = true;
  }
  return { kind, spread, direction, ordinary, settled: !unsettled };
}
