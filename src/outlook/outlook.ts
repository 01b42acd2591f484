/**
 * The outlook of a series: one matrix of joint paths from which every mean, median, range and total is read.
 *
 *   bare forecast -> each step's quantiles in the user's units, put in the order of joint deviates -> periods, totals
 */
import type { Fit } from '../sarima/fit.js';
import { type Prediction, predict } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';
import { ascending } from '../stats/sample.js';
import { studentQuantile } from '../stats/student.js';
import { type Calibration, calibrate } from './calibrate.js';
import { type Expectation, expectation, PATHS, type Span, summed } from './expectation.js';
import { jointDeviates } from './paths.js';

export type { Expectation, Span } from './expectation.js';

export interface OutlookOptions {
  readonly ahead: number;
  /** 32 bits unsigned. */
  readonly seed: number;
  /** Hold the paths at zero or above. */
  readonly holdAtZero: boolean;
  readonly spans: readonly Span[];
  /** How each step's distribution is made; `calibrate` unless given. */
  readonly calibration?: (fit: Fit, prediction: Prediction) => Calibration;
}

export interface Outlook {
  readonly seed: number;
  readonly paths: number;
  /** In the user's units, ahead by paths, row by row. */
  readonly matrix: Float64Array;
  /** `standardError` is the bare model's, on its own scale. */
  readonly periods: readonly (Expectation & { readonly standardError: number })[];
  readonly totals: readonly (Span & Expectation)[];
  readonly heldAtZero: boolean;
  readonly calibration: Calibration;
}

/** Off the plain scale the outermost quantile levels, so that a mean does not depend on how many paths there are. */
const OUTERMOST = 0.001;

/**
 * Throws an Error where a regressor does not reach over the periods ahead, and where the scale leads a range to infinity.
 */
export function makeOutlook(fit: Fit, options: OutlookOptions): Outlook {
  const { ahead, seed, holdAtZero, spans } = options;
  const calibrated = options.calibration ?? calibrate;
  const prediction = predict(fit, ahead);
  const centres = centresOf(fit, prediction, holdAtZero);
  const calibration = calibrated(fit, prediction);
  const values = stepValues(fit, prediction, calibration, holdAtZero);
  const deviates = jointDeviates(prediction.covariance, sumsOf(fit, prediction, spans), PATHS, seed);
  const matrix = arranged(values, deviates);
  return {
    seed,
    paths: PATHS,
    matrix,
    periods: Array.from({ length: ahead }, (_, h) => ({
      ...expectation(values[h]),
      middle: centres[h],
      standardError: prediction.standardError[h],
    })),
    totals: spans.map((span) => ({ ...span, ...expectation(summed(matrix, span).sort()) })),
    heldAtZero: holdAtZero,
    calibration,
  };
}

export interface ForecastPeriod extends Expectation {
  /** Steps ahead, from 1. */
  readonly period: number;
  readonly standardError: number;
}

/**
 * Forecasts a fitted model: expected values, medians and ranges by step, and their total.
 *
 * Paths are held at zero where no figure is below zero. Throws where a regressor does not reach over the periods ahead.
 */
export function forecast(
  fit: Fit,
  { ahead, seed = 0 }: { readonly ahead: number; readonly seed?: number },
): { readonly periods: readonly ForecastPeriod[]; readonly totals: readonly (Span & Expectation)[] } {
  const steps = Array.from({ length: ahead }, (_, h) => h);
  const outlook = makeOutlook(fit, {
    ahead,
    seed,
    holdAtZero: fit.values.every((value) => !(value < 0)),
    spans: [{ kind: 'ahead', year: null, known: 0, steps }],
  });
  return { periods: outlook.periods.map((period, h) => ({ period: h + 1, ...period })), totals: outlook.totals };
}

/** The exact centre of each step, in the user's units. */
function centresOf(fit: Fit, { mean }: Prediction, holdAtZero: boolean): number[] {
  const { from } = parseScale(fit.scale);
  return Array.from(mean, (centre) => (holdAtZero ? Math.max(from(centre), 0) : from(centre)));
}

/**
 * What each step's paths hold, the smallest first: the quantiles of its calibrated distribution at the levels
 * (k − ½)/N, in the user's units.
 */
function stepValues(fit: Fit, prediction: Prediction, calibration: Calibration, holdAtZero: boolean): Float64Array[] {
  const scale = parseScale(fit.scale);
  const scores = standardScores(calibration.freedom, scale.kind === 'plain' ? 0 : OUTERMOST);
  return Array.from(prediction.mean, (centre, h) => {
    const spread = calibration.spread[h];
    const values = scores.map((score) => scale.from(centre + spread * score));
    if (!values.every(Number.isFinite))
      throw new Error(`scale ${fit.scale}: the range ${h + 1} periods ahead has no upper end; use scale plain`);
    return holdAtZero ? values.map((value) => Math.max(value, 0)) : values;
  });
}

/** Student's quantiles at the paths' levels (k − ½)/N, held within [outermost, 1 − outermost]. */
function standardScores(freedom: number, outermost: number): Float64Array {
  const scores = new Float64Array(PATHS);
  for (let k = 0; k < PATHS / 2; k++) {
    const score = studentQuantile(Math.max((k + 0.5) / PATHS, outermost), freedom);
    scores[k] = score;
    scores[PATHS - 1 - k] = -score;
  }
  return scores;
}

/** The weights with which each span's sum follows the steps' deviates: how fast the scale turns back at their centres. */
function sumsOf(fit: Fit, { mean }: Prediction, spans: readonly Span[]): number[][] {
  const { from, logDerivative } = parseScale(fit.scale);
  const slopes = Array.from(mean, (centre) => Math.exp(-logDerivative(from(centre))));
  return spans.map(({ steps }) => slopes.map((slope, h) => (steps.includes(h) && Number.isFinite(slope) ? slope : 0)));
}

/** Each step's values in the order of its deviates: the k-th smallest deviate's path gets the k-th smallest value. */
function arranged(values: readonly Float64Array[], deviates: Float64Array): Float64Array {
  const matrix = new Float64Array(deviates.length);
  values.forEach((sorted, h) => {
    const order = ascending(deviates.subarray(h * PATHS, (h + 1) * PATHS));
    for (let k = 0; k < PATHS; k++) matrix[h * PATHS + order[k]] = sorted[k];
  });
  return matrix;
}
