/** How forecasts made the same way turned out. */
import type { Forecast } from './roll.js';

export type Rule = 'model' | 'last-year' | 'last-year-plus-change';

export interface TrackRecord {
  /** Different origins, and forecasts from them that could be scored. */
  readonly origins: number;
  readonly count: number;
  /** Σ|error| / Σ|actual| of all, by rule; null where every actual is zero. */
  readonly miss: number | null;
  readonly lastYearMiss: number | null;
  readonly lastYearPlusChangeMiss: number | null;
  /** The rule that missed by least; the model where it ties. */
  readonly best: Rule;
  /** Σerror / Σ|actual|, actual less expected: above zero where forecasts were too low. */
  readonly bias: number | null;
  /** Mean |error| over the mean change on a year before (Hyndman & Koehler, International Journal of Forecasting 22, 2006). */
  readonly mase: number;
  readonly inside80: number;
  readonly inside95: number;
  /** Of the 95% range, in the same unit (Gneiting & Raftery, Journal of the American Statistical Association 102, 2007). */
  readonly intervalScore: number;
  /** By step ahead, from 1; null where a step has no forecast. */
  readonly missByStep: readonly (number | null)[];
  readonly lastYearMissByStep: readonly (number | null)[];
  readonly lastYearPlusChangeMissByStep: readonly (number | null)[];
  readonly inside80ByStep: readonly (number | null)[];
}

/** Fewer forecasts than this say nothing. */
const FEWEST = 4;

/** Null where there are too few forecasts to say anything. */
export function trackRecord(forecasts: readonly Forecast[]): TrackRecord | null {
  if (forecasts.length < FEWEST) return null;
  const steps = Math.max(...forecasts.map(({ step }) => step));
  const byStep = <T>(value: (of: readonly Forecast[]) => T): (T | null)[] =>
    Array.from({ length: steps }, (_, h) => {
      const of = forecasts.filter(({ step }) => step === h + 1);
      return of.length === 0 ? null : value(of);
    });
  const [model, lastYear, plusChange] = [missOf(forecasts, expected), missOf(forecasts, last), missOf(forecasts, plus)];
  return {
    origins: new Set(forecasts.map(({ known }) => known)).size,
    count: forecasts.length,
    miss: model,
    lastYearMiss: lastYear,
    lastYearPlusChangeMiss: plusChange,
    best: bestOf(model, lastYear, plusChange),
    bias: shareOf(
      forecasts,
      forecasts.map(({ actual, expected: said }) => actual - said),
    ),
    mase: mean(forecasts.map(({ actual, expected: said, scale }) => Math.abs(actual - said) / scale)),
    inside80: mean(forecasts.map(({ actual, range80 }) => inside(actual, range80))),
    inside95: mean(forecasts.map(({ actual, range95 }) => inside(actual, range95))),
    intervalScore: mean(forecasts.map(intervalScore)),
    missByStep: byStep((of) => missOf(of, expected)),
    lastYearMissByStep: byStep((of) => missOf(of, last)),
    lastYearPlusChangeMissByStep: byStep((of) => missOf(of, plus)),
    inside80ByStep: byStep((of) => mean(of.map(({ actual, range80 }) => inside(actual, range80)))),
  };
}

const expected = (forecast: Forecast) => forecast.expected;
const last = ({ lastYear }: Forecast) => lastYear;
const plus = ({ lastYearPlusChange }: Forecast) => lastYearPlusChange;

/** Σ|error| / Σ|actual|; null where every actual is zero. */
export function missOf(forecasts: readonly Forecast[], said: (forecast: Forecast) => number): number | null {
  return shareOf(
    forecasts,
    forecasts.map((forecast) => Math.abs(forecast.actual - said(forecast))),
  );
}

function shareOf(forecasts: readonly Forecast[], errors: readonly number[]): number | null {
  const size = forecasts.reduce((sum, { actual }) => sum + Math.abs(actual), 0);
  return size > 0 ? errors.reduce((sum, error) => sum + error, 0) / size : null;
}

function bestOf(model: number | null, lastYear: number | null, plusChange: number | null): Rule {
  if (model === null || lastYear === null || plusChange === null) return 'model';
  if (model <= Math.min(lastYear, plusChange)) return 'model';
  return lastYear <= plusChange ? 'last-year' : 'last-year-plus-change';
}

const inside = (actual: number, [low, high]: readonly [number, number]): number =>
  actual >= low && actual <= high ? 1 : 0;

/** 2/α is 40 for the 95% range. */
function intervalScore({ actual, range95: [low, high], scale }: Forecast): number {
  return (high - low + 40 * Math.max(low - actual, 0, actual - high)) / scale;
}

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;
