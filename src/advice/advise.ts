/**
 * Which model for a series, why, and how it compares with others.
 *
 * An automatic search over orders forecasts short business series badly; a few forms, shrunk, do better. The table of
 * candidates is there for the planner to judge by, not to choose from mechanically.
 */
import { besideAt, type Forecast, modelForecasts, originsFor, rollingForecasts } from '../backtest/roll.js';
import { missOf, type TrackRecord, trackRecord } from '../backtest/track-record.js';
import { type Fit, type FitOptions, fitModel } from '../sarima/fit.js';
import { polynomialCoefficients } from '../sarima/form.js';
import { predictMeans } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';
import { chiSquaredUpperTail } from '../stats/chi-squared.js';
import { ljungBoxTerms } from '../stats/portmanteau.js';
import { type AdviceOptions, type Choice, choose, fitOptions, type Reason, type Remembered } from './choose.js';
import {
  fadingSeasonModel,
  type Model,
  repeatModel,
  seasonalModel,
  seasonlessModel,
  unrestrictedModels,
} from './forms.js';

export interface Candidate {
  readonly model: Model;
  readonly isChosen: boolean;
  /** Among models of the same differencing and scale only; null where shrunk. */
  readonly aicc: number | null;
  /** Over the last origins: Σ|error|/Σ|actual|, and the same for last year's figure. */
  readonly miss: number | null;
  readonly lastYearMiss: number | null;
  readonly inside80: number | null;
  /** Of the Ljung–Box test on its residuals: small where a pattern is left. */
  readonly leftoverPattern: number | null;
  /** The middle of each period ahead, in the user's units. */
  readonly middles: readonly number[];
}

export interface Advice {
  /** Goes straight into `fitModel`. */
  readonly chosen: FitOptions;
  readonly candidates: readonly Candidate[];
  readonly reasons: readonly Reason[];
  /** How the chosen model's forecasts turned out, the advice given anew at every origin; null with too little history. */
  readonly trackRecord: TrackRecord | null;
}

/** Throws an Error where there are fewer than three figures or nothing can be fitted. */
export function advise(values: ArrayLike<number>, options: AdviceOptions): Advice {
  const remembered: Remembered = new Map();
  const { chosen, candidates, reasons } = compareModels(values, options, remembered);
  const forecasts = adviceForecasts(Float64Array.from(values), options, remembered);
  return { chosen, candidates, reasons, trackRecord: trackRecord(forecasts) };
}

/** The recommendation beside its rivals, without its track record. Throws as `advise` does. */
export function compareModels(
  values: ArrayLike<number>,
  options: AdviceOptions,
  remembered: Remembered = new Map(),
): Omit<Advice, 'trackRecord'> & { readonly model: Model } {
  const figures = Float64Array.from(values);
  const choice = choose(figures, options, remembered);
  return {
    model: choice.model,
    chosen: chosenOptions(choice, options),
    candidates: others(choice, options).flatMap((model) => candidateOf(figures, model, options, choice)),
    reasons: choice.reasons,
  };
}

/** The chosen model as options for `fitModel`. */
export function chosenOptions({ model, fit }: Choice, options: AdviceOptions): FitOptions {
  return { ...fitOptions(model, options), regressors: fit.regressors };
}

/** Forecasts from rolling origins, the advice repeated at each, so that no hindsight flatters them. */
export function adviceForecasts(
  values: Float64Array,
  options: AdviceOptions,
  remembered: Remembered = new Map(),
): Forecast[] {
  const { ahead, season, soldOut = [] } = options;
  return rollingForecasts(values, (known) => adviceAt(values, known, options, remembered), {
    ahead,
    season,
    soldOut,
    origins: originsFor(values, season),
  });
}

function adviceAt(values: Float64Array, known: number, options: AdviceOptions, remembered: Remembered): Fit | null {
  try {
    return choose(values.subarray(0, known), { ...options, ...besideAt(options, known) }, remembered).fit;
  } catch {
    return null;
  }
}

/** The chosen model first, then what it is to be compared with, each once. */
function others({ model }: Choice, { season }: AdviceOptions): Model[] {
  const { scale } = model;
  const seasonal = season > 1 ? [seasonalModel(season, scale), fadingSeasonModel(season, scale)] : [];
  const all = [
    model,
    ...seasonal,
    seasonlessModel(season, scale),
    ...unrestrictedModels(season, scale),
    repeatModel(season, 'plain'),
  ];
  const key = ({ form, scale: on, constant, fittedBy }: Model) => [form, on, constant, fittedBy].join();
  return all.filter((each, i) => all.findIndex((other) => key(other) === key(each)) === i);
}

function candidateOf(values: Float64Array, model: Model, options: AdviceOptions, choice: Choice): Candidate[] {
  const isChosen = model === choice.model;
  const asked = fitOptions(model, options);
  let fit: Fit;
  try {
    fit = isChosen ? choice.fit : fitModel(values, asked);
  } catch {
    return [];
  }
  const { ahead, season, soldOut = [] } = options;
  const forecasts = modelForecasts(values, fit, asked, { ahead, season, soldOut, origins: CANDIDATE_ORIGINS });
  const { from } = parseScale(model.scale);
  return [
    {
      model,
      isChosen,
      aicc: fit.aicc,
      miss: missOf(forecasts, ({ expected }) => expected),
      lastYearMiss: missOf(forecasts, ({ lastYear }) => lastYear),
      inside80: trackRecord(forecasts)?.inside80 ?? null,
      leftoverPattern: leftoverOf(fit),
      middles: Array.from(predictMeans(fit, options.ahead), from),
    },
  ];
}

const CANDIDATE_ORIGINS = 6;

/** Ljung & Box's p-value; null with too few residuals. */
function leftoverOf({ standardizedResiduals, form, season, effectiveCoefficients }: Fit): number | null {
  const n = standardizedResiduals.filter((z) => !Number.isNaN(z)).length;
  const k = Math.round(Math.min(polynomialCoefficients(form), effectiveCoefficients));
  const lags = Math.max(k + 3, Math.floor(Math.min(2 * season, n / 5)));
  if (lags >= n) return null;
  const statistic = ljungBoxTerms(standardizedResiduals, lags).reduce((sum, term) => sum + term, 0);
  return Number.isNaN(statistic) ? null : chiSquaredUpperTail(statistic, lags - k);
}
