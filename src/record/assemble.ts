/**
 * The upper half of the program: from a brief's inputs to its record.
 *
 *   inputs (plan, figures, advice) -> fit -> outlook -> explain, assumptions, track record -> RECORD
 *
 * Nothing but the inputs goes in: no file, no clock. The same inputs give the same record, today and in ten years.
 */

import { adviceForecasts } from '../advice/advise.js';
import { checkAssumptions } from '../assumptions/assumptions.js';
import { modelForecasts } from '../backtest/roll.js';
import { trackRecord as scored } from '../backtest/track-record.js';
import { periodIndex, position } from '../calendar/calendar.js';
import type { Context } from '../explain/context.js';
import { explain } from '../explain/explain.js';
import type { Outlook } from '../outlook/outlook.js';
import type { Fit } from '../sarima/fit.js';
import { parseScale } from '../sarima/scale.js';
import { autocorrelations } from '../stats/autocorrelation.js';
import type { FiledRecord } from './archive.js';
import { budgetPart, judgementPart, type Money, moneyOf, purchasePart, withJudgement } from './assemble-decisions.js';
import { caveatsWith } from './caveats.js';
import { fitOf, fitOptionsOf, outlookOf } from './computed.js';
import { type BriefInputs, inputsOfRecord, periodAt } from './inputs.js';
import { lookBackAt } from './look-back.js';
import { type BriefRecord, recordSchema } from './record.js';

/** Where the record comes from: the program's version, and the folder that its brief is filed in (a date, or `trial`). */
export interface Origin {
  readonly version: string;
  readonly folder: string;
}

/**
 * Computes a record. `earlier` are the filed records of the series, for the look back. Throws an Error that says what is wrong where the model can't be fitted to the figures (too few of
 * them, a figure that the scale can't hold …).
 */
export function assemble(inputs: BriefInputs, origin: Origin, earlier: readonly FiledRecord[] = []): BriefRecord {
  return assembleWithMoney(inputs, origin, earlier).record;
}

/** The money of a record that has a budget, computed again from the record itself. */
export function moneyOfRecord(record: BriefRecord): Money {
  const inputs = inputsOfRecord(record);
  if (inputs.budget === null) throw new Error(`${record.brief} has no budget`);
  return moneyOf(withJudgement(outlookOf(fitOf(inputs), inputs), inputs), inputs, inputs.budget);
}

/** The record, and where it has a budget its money on every path, which the record leaves out. */
export function assembleWithMoney(
  inputs: BriefInputs,
  origin: Origin,
  earlier: readonly FiledRecord[] = [],
): { record: BriefRecord; money: Money | null } {
  const fit = fitOf(inputs);
  const alone = outlookOf(fit, inputs);
  const outlook = withJudgement(alone, inputs);
  const explained = explain(fit, { alone, outlook }, contextOf(inputs));
  const assumptions = assumptionsOf(fit, inputs);
  const trackRecord = trackRecordOf(fit, inputs);
  const shown = outlookPart(outlook, inputs);
  const judgement = judgementPart(expectations(alone, inputs), explained.printed, inputs);
  const purchase = purchasePart(outlook, inputs);
  const record = recordSchema.parse({
    format: 'seasonbrief-record/1',
    brief: `${origin.folder}/${inputs.series.slug}`,
    issued: inputs.issued,
    software: { name: 'seasonbrief', version: origin.version },
    plan: inputs.plan,
    series: inputs.series,
    figures: inputs.figures,
    model: inputs.model,
    fit: fitPart(fit, inputs),
    equation: explained.equation,
    outlook: shown,
    printed: explained.printed,
    facts: {
      ...explained.facts,
      caveats: caveatsWith(explained.facts.caveats, assumptions, trackRecord, { judgement, purchase }),
    },
    assumptions,
    trackRecord,
    judgement,
    purchase,
    budget: budgetPart(outlook, inputs),
    lookBack: lookBackAt(earlier, { inputs, outlook: shown, printed: explained.printed }),
  });
  return { record, money: inputs.budget === null ? null : moneyOf(outlook, inputs, inputs.budget) };
}

/** What maximum likelihood makes of a model that was shrunk; null where it needs more figures than there are. */
function unrestrictedOf(fit: Fit, inputs: BriefInputs): BriefRecord['fit']['unrestricted'] {
  if (fit.fittedBy !== 'shrunk') return null;
  try {
    const { coefficients } = fitOf(inputs, 'maximum-likelihood');
    return coefficients.map(({ value, standardError }) => ({ value, standardError }));
  } catch {
    return null;
  }
}

const assumptionsOf = (fit: Fit, inputs: BriefInputs): BriefRecord['assumptions'] =>
  checkAssumptions(fit).map(({ outliers, details, ...rest }) => ({
    ...rest,
    details: { ...details },
    periods: outliers.map(({ period, ...outlier }) => ({ period: periodAt(inputs, period), ...outlier })),
  }));

/** How forecasts made the same way turned out: the model fitted again at every origin, or the advice given again. */
function trackRecordOf(fit: Fit, inputs: BriefInputs): BriefRecord['trackRecord'] {
  const { series, figures, model, ahead } = inputs;
  const values = figures.values.map((value) => value ?? Number.NaN);
  const options = {
    season: series.season,
    ahead,
    scale: model.advice?.asked.scale ?? undefined,
    constant: model.advice?.asked.constant ?? undefined,
    fittedBy: model.advice?.asked.fittedBy ?? undefined,
    regressors: figures.regressors,
    soldOut: fit.soldOut,
  };
  const forecasts =
    model.advice === null
      ? modelForecasts(Float64Array.from(values), fit, fitOptionsOf(inputs), options)
      : adviceForecasts(Float64Array.from(values), options);
  const record = scored(forecasts);
  if (record === null) return null;
  const nextPeriod = forecasts
    .filter(({ step }) => step === 1)
    .map(({ known, expected, range80, actual }) => ({ period: periodAt(inputs, known), expected, range80, actual }));
  return {
    ...record,
    missByStep: [...record.missByStep],
    lastYearMissByStep: [...record.lastYearMissByStep],
    lastYearPlusChangeMissByStep: [...record.lastYearPlusChangeMissByStep],
    inside80ByStep: [...record.inside80ByStep],
    nextPeriod,
  };
}

function contextOf(inputs: BriefInputs): Context {
  const { series, figures, plan, ahead } = inputs;
  const first = periodIndex(figures.start, series.every);
  const times = Array.from({ length: figures.values.length + ahead }, (_, t) => t);
  return {
    places: series.places,
    season: series.season,
    periods: times.map((t) => periodAt(inputs, t)),
    positions: times.map((t) => position(first + t, series.every, plan.yearStarts)),
    events: figures.events,
  };
}

function fitPart(fit: Fit, inputs: BriefInputs): BriefRecord['fit'] {
  const { series, figures } = inputs;
  const { from } = parseScale(fit.scale);
  const standardized = Array.from(fit.standardizedResiduals, missable);
  const known = standardized.filter((value) => value !== null).length;
  const lags = Math.max(0, Math.min(Math.max(2 * series.season, 8), Math.floor(known / 2)));
  return {
    coefficients: fit.coefficients.map(({ name, symbol, value, standardError }) => ({
      name,
      symbol,
      value,
      standardError,
    })),
    innovationVariance: fit.innovationVariance,
    logLikelihood: fit.logLikelihood,
    aicc: fit.aicc,
    observations: fit.observations,
    residuals: Array.from(fit.residuals, missable),
    standardizedResiduals: standardized,
    effectiveCoefficients: fit.effectiveCoefficients,
    unrestricted: unrestrictedOf(fit, inputs),
    demand: figures.soldOut.map((period, i) => ({ period, middle: from(fit.demand[i]) })),
    settled: fit.settled,
    nearUnitRoots: [...fit.nearUnitRoots],
    nearlyCancels: fit.nearlyCancels,
    autocorrelations: [...autocorrelations(fit.standardizedResiduals, lags)],
    // Bartlett (1946): about 19 in 20 autocorrelations of pure chance lie within this.
    autocorrelationBound: 1.96 / Math.sqrt(Math.max(known, 1)),
  };
}

const missable = (value: number): number | null => (Number.isNaN(value) ? null : value);

function expectations(outlook: Outlook, inputs: BriefInputs) {
  const n = inputs.figures.values.length;
  return {
    periods: outlook.periods.map((period, step) => ({ period: periodAt(inputs, n + step), ...period })),
    totals: outlook.totals.map(({ steps, ...total }) => ({
      ...total,
      periods: steps.map((step) => periodAt(inputs, n + step)),
    })),
  };
}

function outlookPart(outlook: Outlook, inputs: BriefInputs): BriefRecord['outlook'] {
  return {
    seed: outlook.seed,
    paths: outlook.paths,
    ...expectations(outlook, inputs),
    heldAtZero: outlook.heldAtZero,
    calibration: {
      freedom: outlook.calibration.freedom,
      factors: {
        ...outlook.calibration.factors,
        estimates: [...outlook.calibration.factors.estimates],
        horizon: [...outlook.calibration.factors.horizon],
      },
    },
  };
}
