/**
 * Ranges that keep their promise: a step's distribution, wider than the bare model's normal one by what that leaves out.
 *
 *   bare standard error
 *     × freedom: the estimates were fitted to the figures whose spread they state
 *     × estimates: they are uncertain themselves (delta method, Fuller & Hasza, Journal of the American Statistical
 *       Association 76, 1981)
 *     × recent: surprises of late were larger or smaller than over the whole history (exponentially weighted)
 *     × horizon: an empirical factor, from the quarterly and monthly series of Makridakis et al., Journal of
 *       Forecasting 1 (1982)
 *   and Student's t in place of the normal
 */
import type { Fit } from '../sarima/fit.js';
import { movedBy, type Prediction, predictMeans } from '../sarima/predict.js';

export interface Calibration {
  /** One a step, on the model's scale: what a standard score is multiplied by. */
  readonly spread: Float64Array;
  /** Degrees of freedom of Student's t. */
  readonly freedom: number;
  /** By how much each step widens or narrows: constant over steps, then by step. */
  readonly factors: {
    readonly freedom: number;
    readonly recent: number;
    readonly estimates: readonly number[];
    readonly horizon: readonly number[];
  };
}

const MOST_FREEDOM = 12;
const LEAST_FREEDOM = 3;

/** The coefficients' part is believed up to this many times the bare variance. */
const MOST_ESTIMATES = 2;

/** The bare model's normal ranges, as textbooks have them: to compare with. */
export function uncalibrated({ standardError }: Prediction): Calibration {
  const ones = Array.from(standardError, () => 1);
  const factors = { freedom: 1, recent: 1, estimates: ones, horizon: ones };
  return { spread: standardError, freedom: Number.POSITIVE_INFINITY, factors };
}

export function calibrate(fit: Fit, prediction: Prediction): Calibration {
  const { standardError } = prediction;
  const n = fit.observations;
  const k = fit.effectiveCoefficients + 1;
  const freedom = Math.sqrt(Math.max(n, k + 4) / Math.max(n - k, 4));
  const recent = Math.sqrt(recentShare(fit));
  const added = estimateVariances(fit, standardError.length);
  const estimates = Array.from(standardError, (se, h) => Math.sqrt(1 + Math.min(added[h] / se ** 2, MOST_ESTIMATES)));
  const horizon = Array.from(standardError, (_, h) => horizonFactor(fit.season, h + 1));
  return {
    spread: standardError.map((se, h) => se * freedom * recent * estimates[h] * horizon[h]),
    freedom: Math.min(Math.max(n - k, LEAST_FREEDOM), MOST_FREEDOM),
    factors: { freedom, recent, estimates, horizon },
  };
}

/** Years are learned from quarters as from months, but not at the same rate: constants for either, and their kin. */
function memory(season: number): { readonly halfLife: number; readonly asIf: number } {
  return season >= 8 ? { halfLife: 2 * season, asIf: 24 } : { halfLife: 2.5 * Math.max(season, 2), asIf: 5 };
}

function horizonFactor(season: number, step: number): number {
  return season >= 8 ? 0.85 * step ** 0.1 : step ** 0.08;
}

/** The recent residual variance over that of all, the latter counted in as so many observations more. */
function recentShare({ standardizedResiduals, season }: Fit): number {
  const { halfLife, asIf } = memory(season);
  const squares = standardizedResiduals.filter(Number.isFinite).map((z) => z * z);
  if (squares.length === 0) return 1;
  const overall = squares.reduce((sum, square) => sum + square, 0) / squares.length;
  if (!(overall > 0)) return 1;
  let weights = asIf;
  let sum = asIf * overall;
  for (let i = 0; i < squares.length; i++) {
    const weight = 0.5 ** ((squares.length - 1 - i) / halfLife);
    weights += weight;
    sum += weight * squares[i];
  }
  return sum / weights / overall;
}

/** The variance that the estimates' own uncertainty adds to each step's mean; 0 where the information has none. */
function estimateVariances(fit: Fit, ahead: number): Float64Array {
  const { covariance } = fit;
  const variances = new Float64Array(ahead);
  if (covariance === null) return variances;
  const base = predictMeans(fit, ahead);
  const slopes = covariance.map((row, i) =>
    row[i] > 0 ? slopeOf(fit, base, i, 0.05 * Math.sqrt(row[i])) : new Float64Array(ahead),
  );
  for (let h = 0; h < ahead; h++)
    covariance.forEach((row, i) => {
      row.forEach((value, j) => {
        variances[h] += slopes[i][h] * value * slopes[j][h];
      });
    });
  return variances.map((variance) => Math.max(variance, 0));
}

/** ∂mean/∂coefficient by step, by a forward or, where that leaves the stationary region, a backward difference. */
function slopeOf(fit: Fit, base: Float64Array, index: number, by: number): Float64Array {
  for (const step of [by, -by])
    try {
      return predictMeans(movedBy(fit, index, step), base.length).map((value, h) => (value - base[h]) / step);
    } catch {
      // Not stationary there: the other side is.
    }
  return new Float64Array(base.length);
}
