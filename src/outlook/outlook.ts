/**
 * The outlook of a series: one matrix of joint paths from which every mean, median, range and total is read.
 *
 *   bare forecast -> joint deviates -> each step's values put at their quantiles -> user's scale -> periods, totals
 */
import type { Fit } from '../sarima/fit.js';
import { type Prediction, predict } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';
import { normalQuantile } from '../stats/normal.js';
import { jointDeviates } from './paths.js';

/** A sum over steps ahead (0 is the first), with what has already happened of it. */
export interface Span {
  readonly kind: 'ahead' | 'reporting-year';
  readonly year: number | null;
  readonly known: number;
  readonly steps: readonly number[];
}

export interface OutlookOptions {
  readonly ahead: number;
  /** 32 bits unsigned. */
  readonly seed: number;
  /** Hold the paths at zero or above. */
  readonly holdAtZero: boolean;
  readonly spans: readonly Span[];
}

export interface Expectation {
  readonly expected: number;
  readonly middle: number;
  readonly range80: [number, number];
  readonly range95: [number, number];
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
}

export const PATHS = 10_000;

/** Off the plain scale the outermost quantile levels, so that a mean does not depend on how many paths there are. */
const OUTERMOST = 0.001;

/** Throws where a regressor does not reach over the periods ahead. */
export function makeOutlook(fit: Fit, options: OutlookOptions): Outlook {
  const { ahead, seed, holdAtZero, spans } = options;
  const prediction = predict(fit, ahead);
  const centres = centresOf(fit, prediction, holdAtZero);
  const matrix = pathsOf(fit, prediction, options);
  return {
    seed,
    paths: PATHS,
    matrix,
    periods: Array.from({ length: ahead }, (_, h) => ({
      ...expectation(matrix.slice(h * PATHS, (h + 1) * PATHS)),
      middle: centres[h],
      standardError: prediction.standardError[h],
    })),
    totals: spans.map((span) => ({ ...span, ...expectation(summed(matrix, span)) })),
    heldAtZero: holdAtZero,
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

function pathsOf(fit: Fit, prediction: Prediction, { ahead, seed, holdAtZero }: OutlookOptions): Float64Array {
  const scale = parseScale(fit.scale);
  const deviates = jointDeviates(prediction.covariance, ahead, PATHS, seed);
  const matrix = new Float64Array(ahead * PATHS);
  for (let h = 0; h < ahead; h++) {
    const quantile = stepQuantile(prediction, h);
    const order = ranked(deviates.subarray(h * PATHS, (h + 1) * PATHS));
    for (let k = 0; k < PATHS; k++) {
      const level = (k + 0.5) / PATHS;
      const held = scale.kind === 'plain' ? level : Math.min(Math.max(level, OUTERMOST), 1 - OUTERMOST);
      const value = scale.from(quantile(held));
      matrix[h * PATHS + order[k]] = holdAtZero ? Math.max(value, 0) : value;
    }
  }
  return matrix;
}

/** The distribution of one step on the model's scale: normal, with the bare model's standard error. */
function stepQuantile({ mean, standardError }: Prediction, step: number): (level: number) => number {
  return (level) => mean[step] + standardError[step] * normalQuantile(level);
}

/** Which path holds the smallest value, the second smallest, … */
function ranked(values: Float64Array): Uint32Array {
  const order = Uint32Array.from(values.keys());
  return order.sort((a, b) => values[a] - values[b] || a - b);
}

function summed(matrix: Float64Array, { known, steps }: Span): Float64Array {
  const total = new Float64Array(PATHS).fill(known);
  for (const h of steps) for (let i = 0; i < PATHS; i++) total[i] += matrix[h * PATHS + i];
  return total;
}

/** Mean, median and ranges of one row of paths. */
function expectation(values: Float64Array): Expectation {
  const sorted = values.sort();
  const at = (level: number) => {
    // The k-th smallest stands at level (k − ½)/N.
    const place = Math.min(Math.max(level * PATHS - 0.5, 0), PATHS - 1);
    const below = Math.floor(place);
    const above = Math.min(below + 1, PATHS - 1);
    return sorted[below] + (place - below) * (sorted[above] - sorted[below]);
  };
  return {
    expected: meanOf(sorted),
    middle: at(0.5),
    range80: [at(0.1), at(0.9)],
    range95: [at(0.025), at(0.975)],
  };
}

/** Summed in pairs from both ends, so that what mirrors about the centre cancels exactly. */
function meanOf(sorted: Float64Array): number {
  let sum = 0;
  for (let i = 0, j = sorted.length - 1; i < j; i++, j--) sum += sorted[i] + sorted[j];
  return sum / sorted.length;
}
