/** What inputs lead to before anything is told of it: the fit, and the outlook that past figures alone give. */
import { periodIndex, position, yearOf } from '../calendar/calendar.js';
import { makeOutlook, type Outlook, type Span } from '../outlook/outlook.js';
import { type Fit, type FitOptions, fitModel } from '../sarima/fit.js';
import { seedOf } from '../stats/generator.js';
import type { BriefInputs } from './inputs.js';

export function fitOptionsOf({ figures, model, series }: BriefInputs): FitOptions {
  const first = periodIndex(figures.start, series.every);
  return {
    form: model.form,
    scale: model.scale,
    constant: model.constant,
    fittedBy: model.fittedBy,
    priors: model.priors,
    regressors: figures.regressors,
    soldOut: figures.soldOut.map((period) => periodIndex(period, series.every) - first),
    season: series.season,
  };
}

export const fitOf = (inputs: BriefInputs, fittedBy = inputs.model.fittedBy): Fit =>
  fitModel(
    inputs.figures.values.map((value) => value ?? Number.NaN),
    { ...fitOptionsOf(inputs), fittedBy },
  );

export const outlookOf = (fit: Fit, inputs: BriefInputs): Outlook =>
  makeOutlook(fit, {
    ahead: inputs.ahead,
    seed: seedOf(`${inputs.issued}/${inputs.series.slug}`),
    holdAtZero: inputs.figures.values.every((value) => value === null || value >= 0),
    spans: [aheadSpan(inputs), ...yearsAhead(inputs), ...reportingYears(inputs)],
  });

const aheadSpan = ({ ahead }: BriefInputs): Span => ({
  kind: 'ahead',
  year: null,
  known: 0,
  steps: Array.from({ length: ahead }, (_, step) => step),
});

/** More periods than this are shown by the year on page 1. */
const MOST_ROWS = 13;

function yearsAhead({ ahead, series }: BriefInputs): Span[] {
  if (ahead <= MOST_ROWS) return [];
  return Array.from({ length: Math.ceil(ahead / series.season) }, (_, year) => ({
    kind: 'year-ahead',
    year: null,
    known: 0,
    steps: Array.from(
      { length: Math.min(series.season, ahead - year * series.season) },
      (_, i) => year * series.season + i,
    ),
  }));
}

/** The reporting years that the periods ahead reach into and that figures and outlook together cover in full. */
function reportingYears({ series, figures, plan, ahead }: BriefInputs): Span[] {
  const { every, season } = series;
  const first = periodIndex(figures.start, every);
  const n = figures.values.length;
  const years = Array.from({ length: n + ahead }, (_, t) => yearOf(first + t, every, plan.yearStarts));
  return [...new Set(years.slice(n))].flatMap((year): Span[] => {
    const of = years.flatMap((each, t) => (each === year ? [t] : []));
    const known = of.filter((t) => t < n).map((t) => figures.values[t]);
    const begins = of[0] !== undefined && position(first + of[0], every, plan.yearStarts) === 1;
    if (!begins || of.length < season || known.includes(null)) return [];
    return [
      {
        kind: 'reporting-year',
        year,
        known: known.reduce<number>((sum, value) => sum + (value ?? 0), 0),
        steps: of.filter((t) => t >= n).map((t) => t - n),
      },
    ];
  });
}
