/**
 * Rolling origins: forecasts from where the figures stood so many periods ago, each beside what then happened and what
 * two plain rules would have said (Tashman, "Out-of-sample tests of forecasting accuracy", International Journal of
 * Forecasting 16, 2000).
 */
import type { Expectation } from '../outlook/outlook.js';
import { stepExpectations } from '../outlook/steps.js';
import { type Fit, type FitOptions, fitModel } from '../sarima/fit.js';

/** One forecast of one period. */
export interface Forecast extends Expectation {
  /** Figures that were known. */
  readonly known: number;
  /** Steps ahead, from 1. */
  readonly step: number;
  readonly actual: number;
  /** The same period of the year before; of the last year known, further ahead. */
  readonly lastYear: number;
  /** The same plus the average change on a year before over the last year known. */
  readonly lastYearPlusChange: number;
  /** What misses are measured by: the average change on a year before, without its sign, up to the origin. */
  readonly scale: number;
}

export interface RollOptions {
  readonly ahead: number;
  readonly season: number;
  readonly origins: number;
  readonly soldOut: readonly number[];
}

/**
 * `values` NaN where missing; `fitAt` fits what is to be tested to the first so many of them, or gives null where it
 * can't. Periods without a figure, or sold out, are not scored.
 */
export function rollingForecasts(
  values: Float64Array,
  fitAt: (known: number) => Fit | null,
  { ahead, season, origins, soldOut }: RollOptions,
): Forecast[] {
  const n = values.length;
  const holdAtZero = values.every((value) => !(value < 0));
  const forecasts: Forecast[] = [];
  for (let back = Math.min(origins, n - season - 1); back >= 1; back--) {
    const known = n - back;
    const scale = typicalChange(values.subarray(0, known), season);
    const fit = scale > 0 ? fitAt(known) : null;
    if (fit === null) continue;
    const change = recentChange(values.subarray(0, known), season);
    stepExpectations(fit, Math.min(ahead, back), holdAtZero).forEach((expectation, h) => {
      const actual = values[known + h];
      const lastYear = values[known + h - season * Math.ceil((h + 1) / season)];
      if (Number.isNaN(actual) || Number.isNaN(lastYear) || soldOut.includes(known + h)) return;
      forecasts.push({
        ...expectation,
        known,
        step: h + 1,
        actual,
        lastYear,
        lastYearPlusChange: lastYear + change * Math.ceil((h + 1) / season),
        scale,
      });
    });
  }
  return forecasts;
}

/** The same model fitted again at every origin, its form kept. */
export function modelForecasts(
  values: Float64Array,
  fit: Fit,
  asked: FitOptions,
  options: Omit<RollOptions, 'origins'> & { readonly origins?: number },
): Forecast[] {
  const again = (known: number): Fit | null => {
    try {
      return fitModel(values.subarray(0, known), { ...asked, ...besideAt(asked, known), near: fit });
    } catch {
      return null;
    }
  };
  return rollingForecasts(values, again, {
    ...options,
    origins: options.origins ?? originsFor(values, options.season),
  });
}

/** At least 8 origins where the history allows, two years' worth where that is more, and half the figures at most. */
export function originsFor(values: Float64Array, season: number): number {
  return Math.min(Math.max(8, Math.min(2 * season, 24)), Math.floor(values.length / 2));
}

/** What stood beside the figures when only so many of them were known. */
export function besideAt(
  { regressors, soldOut }: Pick<FitOptions, 'regressors' | 'soldOut'>,
  known: number,
): Pick<FitOptions, 'regressors' | 'soldOut'> {
  return {
    // A column that has not moved yet says nothing; what it will do was not known.
    regressors: (regressors ?? []).filter(({ values }) => {
      for (let t = 1; t < known; t++) if (values[t] !== values[0]) return true;
      return false;
    }),
    soldOut: (soldOut ?? []).filter((t) => t < known),
  };
}

function changes(known: Float64Array, season: number): number[] {
  const differences: number[] = [];
  for (let t = season; t < known.length; t++) differences.push(known[t] - known[t - season]);
  return differences;
}

function typicalChange(known: Float64Array, season: number): number {
  return meanOf(changes(known, season).map(Math.abs));
}

function recentChange(known: Float64Array, season: number): number {
  return meanOf(changes(known, season).slice(-season));
}

function meanOf(values: readonly number[]): number {
  const there = values.filter((value) => !Number.isNaN(value));
  return there.length === 0 ? 0 : there.reduce((sum, value) => sum + value, 0) / there.length;
}
