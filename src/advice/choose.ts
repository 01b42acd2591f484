/**
 * The recommendation itself: which model for these figures, and why, as data.
 *
 *   enough history? -> a season? -> plain or logarithms, by likelihood, with a veto by back-test
 */

import { besideAt } from '../backtest/roll.js';
import { type Fit, type FitOptions, fitModel } from '../sarima/fit.js';
import { predictMeans } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';
import { type Model, repeatModel, seasonalModel, seasonlessModel } from './forms.js';
import { seasonEvidence } from './season.js';

export interface Reason {
  readonly id:
    | 'little-history'
    | 'no-year'
    | 'season'
    | 'no-season'
    | 'yearly'
    | 'gaps-in-season'
    | 'shrunk'
    | 'unrestricted'
    | 'log-likelier'
    | 'plain-likelier'
    | 'log-missed-more'
    | 'not-above-zero'
    | 'scale-given';
  /** What the reason rests on, by name. */
  readonly numbers: Readonly<Record<string, number>>;
}

export interface AdviceOptions {
  readonly season: number;
  readonly ahead: number;
  readonly scale?: string;
  readonly constant?: boolean;
  readonly fittedBy?: 'maximum-likelihood' | 'shrunk';
  readonly regressors?: FitOptions['regressors'];
  readonly soldOut?: readonly number[];
}

export interface Choice {
  readonly model: Model;
  readonly fit: Fit;
  readonly reasons: readonly Reason[];
}

/** Fewer yearly differences than this leave nothing to estimate from. */
const FEWEST_DIFFERENCES = 8;

/** Months and finer: logarithms, unless plain figures are likelier by this many units of −2 log-likelihood. */
export const IN_FAVOUR_OF_LOG = 6;

/** Logarithms that missed by this many times as much in the back-test are not taken. */
const VETO = 1.2;
const VETO_ORIGINS = 4;
/** By as much as this the likelihood alone decides. */
const DECISIVE = 10;

/** Fits of one series by form, scale and number of figures: rolling origins and the veto at each ask for the same ones. */
export type Remembered = Map<string, Fit | Error>;

/** Throws an Error with fewer than three figures, or none that a model can be fitted to. */
export function choose(values: Float64Array, options: AdviceOptions, remembered: Remembered = new Map()): Choice {
  const { season } = options;
  const soldOut = options.soldOut ?? [];
  const there = values.reduce((count, value, t) => count + (Number.isNaN(value) || soldOut.includes(t) ? 0 : 1), 0);
  if (there < 3) throw new Error(`advice needs at least 3 figures; there are ${there}`);
  const numbers = { figures: there };
  const scale = options.scale ?? 'plain';
  if (season > 1 && there < season + 2)
    return settled(values, options, repeatModel(1, scale), [{ id: 'no-year', numbers }]);
  if (there < FEWEST_DIFFERENCES + season)
    return settled(values, options, repeatModel(season, scale), [{ id: 'little-history', numbers }]);

  const evidence = season > 1 ? seasonEvidence(onSteadyScale(values), season) : 0;
  const isSeasonal = evidence >= 1;
  const shape: Reason =
    season === 1 ? { id: 'yearly', numbers } : { id: isSeasonal ? 'season' : 'no-season', numbers: { evidence } };
  const model = (on: string) => (isSeasonal ? seasonalModel(season, on) : seasonlessModel(season, on));
  const found = byScale(values, options, remembered, model);
  if (found !== null) return { ...found, reasons: [shape, ...found.reasons] };
  // Gaps can leave a position of the season without any figure: then only a model without one can be fitted.
  const seasonless = byScale(values, options, remembered, (on) => seasonlessModel(season, on));
  if (seasonless !== null)
    return { ...seasonless, reasons: [{ id: 'gaps-in-season', numbers }, ...seasonless.reasons] };
  return settled(values, options, repeatModel(1, scale), [{ id: 'little-history', numbers }]);
}

/** Logarithms where all figures allow them, so that a season that grows with the level stays one. */
function onSteadyScale(values: Float64Array): Float64Array {
  return values.every((value) => Number.isNaN(value) || value > 0) ? values.map(Math.log) : values;
}

/** The same model on either scale, and which of the two; null where neither can be fitted. */
function byScale(
  values: Float64Array,
  options: AdviceOptions,
  remembered: Remembered,
  model: (scale: string) => Model,
): Choice | null {
  const method: Reason = { id: options.fittedBy === 'maximum-likelihood' ? 'unrestricted' : 'shrunk', numbers: {} };
  const fitted = (scale: string): Choice | null => {
    try {
      const asked = { ...model(scale), ...kept(options) };
      return { model: asked, fit: fitOnce(values, asked, options, remembered), reasons: [] };
    } catch {
      return null;
    }
  };
  if (options.scale !== undefined) {
    const only = fitted(options.scale);
    return only && { ...only, reasons: [method, { id: 'scale-given', numbers: {} }] };
  }
  const plain = fitted('plain');
  const isPositive = values.every((value) => Number.isNaN(value) || value > 0);
  const log = isPositive ? fitted('log') : null;
  if (plain === null || log === null) {
    const only = plain ?? log;
    const why: Reason[] = isPositive ? [] : [{ id: 'not-above-zero', numbers: {} }];
    return only && { ...only, reasons: [method, ...why] };
  }
  const difference = logAdvantage(plain.fit, log.fit);
  const numbers = { difference };
  const favour = options.season >= 8 ? IN_FAVOUR_OF_LOG : 0;
  if (difference + favour <= 0) return { ...plain, reasons: [method, { id: 'plain-likelier', numbers }] };
  const ratio = options.season < 8 && difference < DECISIVE ? missRatio(values, log, plain, options, remembered) : 1;
  if (ratio > VETO) return { ...plain, reasons: [method, { id: 'log-missed-more', numbers: { difference, ratio } }] };
  return { ...log, reasons: [method, { id: 'log-likelier', numbers }] };
}

/** What the caller has settled. */
function kept({ constant, fittedBy }: AdviceOptions): Partial<Model> {
  return {
    ...(constant === undefined ? {} : { constant }),
    ...(fittedBy === undefined ? {} : { fittedBy }),
    ...(fittedBy === 'maximum-likelihood' ? { priors: null } : {}),
  };
}

/** A model and what the figures come with, as `fitModel` takes them. */
export function fitOptions(model: Model, { regressors, soldOut, season }: AdviceOptions): FitOptions {
  return { ...model, regressors, soldOut, season };
}

function settled(values: Float64Array, options: AdviceOptions, model: Model, reasons: readonly Reason[]): Choice {
  const asked = { ...model, ...kept({ ...options, fittedBy: undefined }) };
  try {
    return { model: asked, fit: fitModel(values, fitOptions(asked, options)), reasons };
  } catch (error) {
    // Too short for events: what they did can't be measured.
    if ((options.regressors ?? []).length === 0) throw error;
    const bare = { ...options, regressors: [] };
    return { model: asked, fit: fitModel(values, fitOptions(asked, bare)), reasons };
  }
}

/**
 * By how many units of −2 log-likelihood, penalties included, the same model is likelier on logarithms. The first
 * periods' residuals hang on the start and are left out.
 */
export function logAdvantage(plain: Fit, log: Fit): number {
  const first = (of: Fit) => of.standardizedResiduals.findIndex((z) => !Number.isNaN(z));
  const from = Math.max(first(plain), first(log)) + (plain.season >= 8 ? 2 : 1);
  return criterion(plain, from) - criterion(log, from);
}

/** −2 log-likelihood of the figures themselves from a period on, twice the priors' penalty added. */
function criterion(fit: Fit, from: number): number {
  const { residuals, standardizedResiduals, values, innovationVariance } = fit;
  const { logDerivative } = parseScale(fit.scale);
  let sum = 2 * fit.penalty;
  for (let t = from; t < values.length; t++) {
    const z = standardizedResiduals[t];
    if (Number.isNaN(z)) continue;
    const variance = z === 0 ? innovationVariance : (residuals[t] / z) ** 2;
    sum += Math.log(2 * Math.PI * variance) + z * z - 2 * logDerivative(values[t]);
  }
  return sum;
}

/** How many times as much the one missed as the other, over the last origins; 1 where there is too little to say. */
function missRatio(
  values: Float64Array,
  one: Choice,
  other: Choice,
  options: AdviceOptions,
  remembered: Remembered,
): number {
  const n = values.length;
  const origins = Math.min(VETO_ORIGINS, n - 2 * options.season - FEWEST_DIFFERENCES - 1);
  const missed = [0, 0];
  for (let back = origins; back >= 1; back--) {
    const misses = [one, other].map(({ model }) => missAt(values, model, n - back, options, remembered));
    if (!misses.every(Number.isFinite)) continue;
    missed[0] += misses[0];
    missed[1] += misses[1];
  }
  return missed[1] > 0 ? missed[0] / missed[1] : 1;
}

function missAt(
  values: Float64Array,
  model: Model,
  known: number,
  options: AdviceOptions,
  remembered: Remembered,
): number {
  try {
    const then = { ...options, ...besideAt(options, known) };
    const fit = fitOnce(values.subarray(0, known), model, then, remembered);
    const { from } = parseScale(model.scale);
    const ahead = Math.min(options.season, values.length - known);
    return predictMeans(fit, Math.max(ahead, 1)).reduce((sum, mean, h) => {
      const actual = values[known + h];
      return Number.isNaN(actual) ? sum : sum + Math.abs(actual - from(mean));
    }, 0);
  } catch {
    return Number.NaN;
  }
}

function fitOnce(values: Float64Array, model: Model, options: AdviceOptions, remembered: Remembered): Fit {
  const key = [model.form, model.scale, values.length].join();
  let found = remembered.get(key);
  if (found === undefined) {
    try {
      found = fitModel(values, fitOptions(model, options));
    } catch (error) {
      found = error instanceof Error ? error : new Error(String(error));
    }
    remembered.set(key, found);
  }
  if (found instanceof Error) throw found;
  return found;
}
