/**
 * A choice sheet from the plan and the figures of one series.
 *
 *   figures -> advice -> season's profile -> levels before and after differencing -> candidates -> SHEET
 */
import { type Advice, advise, type Candidate } from '../advice/advise.js';
import { seasonEvidence } from '../advice/season.js';
import { FEWEST_RESIDUALS, present, statusOf } from '../assumptions/assumption.js';
import { periodIndex, periodText, position, seasonOf } from '../calendar/calendar.js';
import type { SeriesFigures } from '../figures/figures.js';
import type { Plan, PlannedSeries } from '../plan/plan.js';
import { difference } from '../sarima/difference.js';
import { type Fit, fitModel } from '../sarima/fit.js';
import { parseForm, polynomialCoefficients } from '../sarima/form.js';
import { modelled } from '../sarima/predict.js';
import { autocorrelations } from '../stats/autocorrelation.js';
import { chiSquaredUpperTail } from '../stats/chi-squared.js';
import { kpssPValue, kpssStatistic } from '../stats/kpss.js';
import type { ChoiceSheet, Level, Recommended, SeasonProfile, SeasonTest, SheetCandidate } from './choice.js';
import { eventRegressor } from './events.js';
import { adviceOptions, planPart } from './inputs.js';
import { planLines } from './plan-lines.js';

/**
 * The plan must have been checked against the figures. Throws an Error with fewer than three figures, and where no model
 * can be fitted to them.
 */
export function assembleChoice(
  plan: Plan,
  series: PlannedSeries,
  { every, start, values }: SeriesFigures,
  templates: string,
): ChoiceSheet {
  const season = seasonOf(every);
  const figures = Float64Array.from(values, (value) => value ?? Number.NaN);
  const regressors = series.events.map((event, i) => ({
    name: `event${i + 1}`,
    values: eventRegressor(event, every, start, values.length + plan.ahead),
  }));
  const advice = advise(figures, adviceOptions(series, { every, start, ahead: plan.ahead, regressors }));
  const { model } = recommendedOf(advice);
  const fit = fitModel(figures, advice.chosen);
  const { d, D, m } = fit.form;
  const steady = withoutEvents(fit);
  const first = periodIndex(start, every);
  return {
    issued: plan.issued,
    plan: planPart(plan, templates),
    series: {
      name: series.name,
      slug: series.slug,
      formerly: [...series.formerly],
      unit: series.unit,
      places: series.places,
      every,
      season,
    },
    figures: {
      start,
      values,
      events: series.events.map(({ what, from, to }) => ({ what, from, to })),
      soldOut: series.soldOut,
    },
    ahead: Array.from({ length: plan.ahead }, (_, h) => periodText(first + values.length + h, every)),
    recommended: {
      form: model.form,
      scale: model.scale,
      constant: model.constant,
      fittedBy: model.fittedBy,
      shape: shapeOf(model.form),
    },
    reasons: advice.reasons,
    profile: profileOf(figures, {
      season,
      isShare: model.scale !== 'plain',
      periodAt: (t) => periodText(first + t, every),
      positionAt: (t) => position(first + t, every, plan.yearStarts),
    }),
    differencing: {
      regular: d,
      seasonal: D,
      before: levelOf(steady, season),
      after: levelOf(difference(steady, d, D, m), season),
    },
    season: seasonTest(figures, season, advice),
    candidates: candidatesOf(advice, figures),
    comparable: comparableOf(advice),
    trackRecord: advice.trackRecord,
    planLines: planLines(model),
    eventsLeftOut: fit.regressors.length < regressors.length,
  };
}

function recommendedOf({ candidates }: Advice): Candidate {
  const recommended = candidates.find(({ isChosen }) => isChosen);
  if (recommended === undefined) throw new Error('the advised model gives no forecasts for these figures');
  return recommended;
}

function shapeOf(text: string): Recommended['shape'] {
  const form = parseForm(text);
  if (polynomialCoefficients(form) === 0) return form.D > 0 ? 'last-year' : 'last-figure';
  if (form.D > 0) return 'yearly-changes';
  return form.p > 0 ? 'fading-trend' : 'wandering-level';
}

/** More years back a season may have been another. */
const MOST_YEARS = 7;

interface ProfileOf {
  readonly season: number;
  readonly isShare: boolean;
  readonly periodAt: (t: number) => string;
  readonly positionAt: (t: number) => number;
}

/** Years are counted back from the last figure, so that none is lost to a reporting year that has just begun. */
function profileOf(values: Float64Array, { season, isShare, periodAt, positionAt }: ProfileOf): ChoiceSheet['profile'] {
  if (season === 1) return null;
  const n = values.length;
  const years = Array.from({ length: Math.min(MOST_YEARS, Math.floor(n / season)) }, (_, i) =>
    values.slice(n - (i + 1) * season, n - i * season),
  )
    .reverse()
    .filter((year) => year.every((value) => !Number.isNaN(value)));
  if (years.length < 2) return null;
  const means = years.map((year) => year.reduce((sum, value) => sum + value, 0) / season);
  const kind: SeasonProfile['kind'] = isShare && means.every((mean) => mean > 0) ? 'share' : 'difference';
  const positions = Array.from({ length: season }, (_, i) => {
    const byYear = years.map((year, y) => (kind === 'share' ? year[i] / means[y] : year[i] - means[y]));
    return { period: periodAt(n - season + i), median: medianOf(byYear), byYear };
  });
  const first = positions.findIndex((_, i) => positionAt(n - season + i) === 1);
  return { kind, positions: first > 0 ? [...positions.slice(first), ...positions.slice(0, first)] : positions };
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length / 2;
  return (sorted[Math.ceil(middle) - 1] + sorted[Math.floor(middle)]) / 2;
}

/** The figures on the model's scale, events' effects taken off. */
function withoutEvents(fit: Fit): Float64Array {
  return modelled(fit).map((y, t) =>
    fit.regressors.reduce((rest, { values }, i) => rest - fit.effects[i] * values[t], y),
  );
}

const FEWEST_LAGS = 8;
const MOST_LAGS = 60;

function levelOf(values: Float64Array, season: number): Level {
  const n = present(values).length;
  const lags = Math.min(Math.max(2 * season, FEWEST_LAGS), MOST_LAGS, Math.floor(n / 2));
  const r = n < FEWEST_RESIDUALS ? [] : [...autocorrelations(values, lags)];
  return {
    autocorrelations: r.every(Number.isFinite) ? r : [],
    bound: 1.96 / Math.sqrt(Math.max(n, 1)),
    kpss: kpssOf(values, n),
  };
}

/** With the bandwidth by which the assumptions are checked: the longest of the paper's, 12(n/100)^¼. */
function kpssOf(values: Float64Array, n: number): Level['kpss'] {
  if (n < FEWEST_RESIDUALS) return null;
  const statistic = kpssStatistic(values, Math.floor(12 * (n / 100) ** 0.25));
  if (!Number.isFinite(statistic)) return null;
  const pValue = kpssPValue(statistic);
  const status = statusOf(pValue);
  return status === 'untested' ? null : { statistic, pValue, status };
}

/** The evidence that the advice went by; where gaps kept it from a season, the evidence that it would have gone by. */
function seasonTest(values: Float64Array, season: number, { reasons }: Advice): SeasonTest | null {
  if (reasons.some(({ id }) => id === 'yearly' || id === 'no-year' || id === 'little-history')) return null;
  const isPositive = values.every((value) => Number.isNaN(value) || value > 0);
  const evidence = seasonEvidence(isPositive ? values.map(Math.log) : values, season);
  if (!Number.isFinite(evidence)) return null;
  const chance = chiSquaredUpperTail(evidence * (season - 1), season - 1);
  return { evidence, verdict: evidence < 1 ? 'none' : statusOf(chance) === 'holds' ? 'faint' : 'clear' };
}

/** So many more than the recommended one are in the picture. */
const RIVALS_DRAWN = 3;
const LEFTOVER = { holds: 'none-seen', doubtful: 'doubtful', fails: 'left', untested: null } as const;

function candidatesOf(advice: Advice, values: Float64Array): SheetCandidate[] {
  const isNeverBelowZero = values.every((value) => !(value < 0));
  const drawn = drawnOf(advice.candidates);
  return advice.candidates.map((candidate, i) => {
    const { model, isChosen, aicc, miss, lastYearMiss, inside80, leftoverPattern, middles } = candidate;
    return {
      label: labelOf(i),
      form: model.form,
      scale: model.scale,
      constant: model.constant,
      fittedBy: model.fittedBy,
      isRecommended: isChosen,
      isDrawn: drawn.includes(candidate),
      aicc,
      miss,
      lastYearMiss,
      inside80,
      leftover: leftoverPattern === null ? null : LEFTOVER[statusOf(leftoverPattern)],
      // As in a brief.
      middles: isNeverBelowZero ? middles.map((middle) => Math.max(middle, 0)) : middles,
    };
  });
}

const labelOf = (i: number): string => String.fromCodePoint('A'.charCodeAt(0) + i);

/** The recommended one, then those that missed by least. */
function drawnOf(candidates: readonly Candidate[]): Candidate[] {
  const missed = ({ miss }: Candidate) => miss ?? Number.POSITIVE_INFINITY;
  const rivals = candidates.filter(({ isChosen }) => !isChosen);
  // Two infinite misses have no difference; the sort keeps their order.
  const best = [...rivals].sort((a, b) => (missed(a) < missed(b) ? -1 : missed(a) > missed(b) ? 1 : 0));
  return [...candidates.filter(({ isChosen }) => isChosen), ...best.slice(0, RIVALS_DRAWN)];
}

function comparableOf({ candidates }: Advice): string[][] {
  const groups = new Map<string, string[]>();
  candidates.forEach(({ model, aicc }, i) => {
    if (aicc === null) return;
    const { d, D } = parseForm(model.form);
    const key = [d, D, model.scale].join();
    groups.set(key, [...(groups.get(key) ?? []), labelOf(i)]);
  });
  return [...groups.values()].filter((labels) => labels.length > 1);
}
