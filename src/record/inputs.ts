/**
 * What a brief is made from: everything in its record that comes from the plan and the figures, before anything is
 * computed. Two briefs with the same inputs say the same, so these decide whether a filed brief still stands; and a
 * filed record holds them, so it can be computed again from itself alone.
 */
import { isDeepStrictEqual } from 'node:util';
import { compareModels } from '../advice/advise.js';
import type { AdviceOptions } from '../advice/choose.js';
import { type Every, periodIndex, periodText, seasonOf } from '../calendar/calendar.js';
import type { SeriesFigures } from '../figures/figures.js';
import type { Budget, Plan, PlannedSeries, Purchase } from '../plan/plan.js';
import { formText, parseForm } from '../sarima/form.js';
import { defaultPriors, statedPriors } from '../sarima/priors.js';
import { canonicalJson, sha256 } from './canonical.js';
import { eventRegressor } from './events.js';
import type { BriefRecord } from './record.js';

export interface BriefInputs extends Readonly<Pick<BriefRecord, 'issued' | 'plan' | 'series' | 'figures' | 'model'>> {
  /** Periods to look ahead. */
  readonly ahead: number;
  readonly judgement: NonNullable<BriefRecord['judgement']>['entries'];
  readonly purchase: NonNullable<BriefRecord['purchase']>['asked'] | null;
  readonly budget: NonNullable<BriefRecord['budget']>['asked'] | null;
}

/** The inputs of one series' brief. The plan must have been checked against the figures. */
export function briefInputs(
  plan: Plan,
  series: PlannedSeries,
  { every, start, values, findings }: SeriesFigures,
  templates: string,
): BriefInputs {
  const length = values.length + plan.ahead;
  const events = series.events.map((event, i) => ({ ...event, coefficient: `event${i + 1}` }));
  const regressors = events.map((event) => ({
    name: event.coefficient,
    values: eventRegressor(event, every, start, length),
  }));
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
      season: seasonOf(every),
    },
    figures: {
      start,
      values: [...values],
      sha256: figuresSha256(every, start, values),
      findings: findings.map(({ id, periods, done }) => ({ id, periods: [...periods], done })),
      events: events.map(({ what, from, to, effect, coefficient }) => ({ what, from, to, effect, coefficient })),
      soldOut: [...series.soldOut],
      regressors,
    },
    model:
      series.model === 'advise'
        ? advisedModel(series, values, { every, start, ahead: plan.ahead, regressors })
        : plannedModel(series),
    ahead: plan.ahead,
    judgement: series.judgement.map(({ at, ...entry }) => entry),
    purchase: series.purchase === null ? null : withoutPlace(series.purchase),
    budget: series.budget === null ? null : budgetAsked(series.budget),
  };
}

const withoutPlace = ({ at, ...purchase }: Purchase): BriefInputs['purchase'] => purchase;

const budgetAsked = ({ kind, perUnit, paidAfter }: Budget): BriefInputs['budget'] => ({
  kind,
  perUnit: perUnit.map(({ from, amount }) => ({ from, amount })),
  paidAfter,
});

function plannedModel({ model, reason, priors, ...series }: PlannedSeries): BriefRecord['model'] {
  const form = parseForm(model);
  const scale = series.scale ?? 'plain';
  const constant = series.constant ?? form.d + form.D === 0;
  const fittedBy = series.fittedBy ?? 'maximum-likelihood';
  return {
    form: formText(form),
    scale,
    constant,
    fittedBy,
    priors: fittedBy === 'shrunk' ? statedPriors(form, defaultPriors(form, scale, constant), priors) : null,
    chosenBy: 'planner',
    reason,
    advice: null,
  };
}

/** What the figures come with, for advice on a model for them. */
interface Beside {
  readonly every: Every;
  readonly start: string;
  readonly ahead: number;
  readonly regressors: readonly { readonly name: string; readonly values: readonly number[] }[];
}

/** The plan's series as the advice takes it. */
export function adviceOptions(
  { scale, constant, fittedBy, soldOut }: PlannedSeries,
  { every, start, ahead, regressors }: Beside,
): AdviceOptions {
  const first = periodIndex(start, every);
  return {
    season: seasonOf(every),
    ahead,
    scale: scale ?? undefined,
    constant: constant ?? undefined,
    fittedBy: fittedBy ?? undefined,
    regressors,
    soldOut: soldOut.map((period) => periodIndex(period, every) - first),
  };
}

function advisedModel(series: PlannedSeries, values: readonly (number | null)[], beside: Beside): BriefRecord['model'] {
  const figures = values.map((value) => value ?? Number.NaN);
  const { model, reasons, candidates } = compareModels(figures, adviceOptions(series, beside));
  const { scale, constant, fittedBy } = series;
  return {
    form: model.form,
    scale: model.scale,
    constant: model.constant,
    fittedBy: model.fittedBy,
    priors: model.priors === null ? null : statedPriors(parseForm(model.form), model.priors, null),
    chosenBy: 'advice',
    reason: series.reason,
    advice: {
      asked: { scale, constant, fittedBy },
      reasons: reasons.map(({ id, numbers }) => ({ id, numbers: { ...numbers } })),
      candidates: candidates.map(({ model: each, middles, ...rest }) => ({
        form: each.form,
        scale: each.scale,
        constant: each.constant,
        fittedBy: each.fittedBy,
        ...rest,
      })),
    },
  };
}

/** The part of the plan that all its briefs and their cover share. */
export const planPart = (plan: Plan, templates: string): BriefRecord['plan'] => ({
  heading: plan.heading,
  preparedFor: plan.preparedFor,
  preparedBy: plan.preparedBy,
  locale: plan.locale,
  currency: plan.currency,
  paper: plan.paper,
  yearStarts: plan.yearStarts,
  templates,
});

/** SHA-256 of the figures as they were used, whatever else stands in their file. */
const figuresSha256 = (every: Every, start: string, values: readonly (number | null)[]): string =>
  sha256(canonicalJson({ every, start, values }));

/** The inputs that a record was made from. */
export const inputsOfRecord = (record: BriefRecord): BriefInputs => {
  const { issued, plan, series, figures, model, outlook, judgement, purchase, budget } = record;
  return {
    issued,
    plan,
    series,
    figures,
    model,
    ahead: outlook.periods.length,
    judgement: judgement?.entries ?? [],
    purchase: purchase?.asked ?? null,
    budget: budget?.asked ?? null,
  };
};

/**
 * Whether two briefs say the same: the same date, figures, model and plan. The templates and the program's version are
 * left out of it, since a brief that was issued stands as it was issued, whatever program is installed later; so is
 * what was advised, which follows from the rest.
 */
export const sameInputs = (a: BriefInputs, b: BriefInputs): boolean => isDeepStrictEqual(asAsked(a), asAsked(b));

const asAsked = ({ model, ...inputs }: BriefInputs) => ({
  ...inputs,
  plan: { ...inputs.plan, templates: '' },
  model: model.advice === null ? model : { asked: model.advice.asked, reason: model.reason },
});

/** The text of the period so many after the first. */
export const periodAt = (inputs: BriefInputs, index: number): string =>
  periodText(periodIndex(inputs.figures.start, inputs.series.every) + index, inputs.series.every);
