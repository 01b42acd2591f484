/**
 * A brief from its record: one self-contained HTML document.
 *
 *   record -> charts, sentences, tables -> brief.hbs -> the type that the text needs
 */
import { barChart } from '../charts/bar-chart.js';
import { residualsChart } from '../charts/residuals-chart.js';
import type { BriefRecord } from '../record/record.js';
import { budgetView } from './budget.js';
import { checksOf, pastTable } from './checks.js';
import { meaningRows } from './coefficients.js';
import { pageStyle, withType } from './document.js';
import { equationHtml } from './equation.js';
import { periodsTable } from './figures-table.js';
import { firstPage } from './first-page.js';
import { type Formats, formatsOf } from './formats.js';
import { madeOf, sumTable } from './how-made.js';
import { judgementView } from './judgement.js';
import { lookBackView } from './look-back.js';
import { orderView } from './order.js';
import type { Theme } from './theme.js';
import { assumptionRows } from './trust.js';

export interface BriefOptions {
  /** SHA-256 of the record's file. */
  readonly fingerprint: string;
  /** Marked as a trial, which is not filed. */
  readonly trial: boolean;
}

export async function renderBrief(record: BriefRecord, theme: Theme, options: BriefOptions): Promise<string> {
  const formats = formatsOf(record.plan, record.series.every);
  const { plan, series, outlook } = record;
  const span = formats.span(outlook.periods[0].period, outlook.periods[outlook.periods.length - 1].period);
  const every = theme.say(`every.${series.every}.one`);
  const first = await firstPage(record, theme, formats);
  const past = pastTable(record, theme, formats);
  const decision = await decisionOf(record, theme, formats);
  const judgement = judgementView(record, theme, formats);
  const annex = {
    periods: periodsTable(record, theme, formats),
    judgement: judgement?.annex ?? null,
    budget: decision?.budget?.annex ?? null,
    // Looking back takes the room of the past figures.
    past: past.height > MOST_PAST_ROWS || record.lookBack !== null ? past : null,
  };
  const view = {
    lang: plan.locale,
    title: `${series.name}, ${span} · ${plan.preparedFor}`,
    style: await pageStyle(theme, plan.paper, {
      left: theme.say('running', { series: shortened(series.name), brief: record.brief }),
      foot: theme.say('foot'),
      page: theme.say('page'),
      of: theme.say('of'),
    }),
    trial: options.trial ? theme.say('trial') : null,
    paper: plan.paper.toLowerCase(),
    logo: theme.logo,
    preparedFor: plan.preparedFor,
    heading: plan.heading,
    issued: formats.date(record.issued),
    brief: record.brief,
    first,
    decision,
    judgement,
    back: await lookBackView(record, theme, formats),
    made: madeOf(record, theme, formats, (tex) => equationHtml(tex, theme, plan.locale)),
    sum: sumTable(record, theme, formats),
    meanings: meaningRows(record, theme, formats),
    weights: await weightsOf(record, theme, formats),
    echo: await echoOf(record, theme, formats),
    checks: await checksCharts(record, theme, formats),
    assumed: assumptionRows(record, theme, formats),
    data: checksOf(record, theme, formats),
    past: annex.past === null ? past : null,
    annexTitle: theme.say('annex.periods', { every }),
    annex: Object.values(annex).every((part) => part === null) ? null : annex,
    file: fileLines(record, theme, formats, options),
    disclaimer: theme.say('disclaimer'),
  };
  return withType(theme.brief(view));
}

async function decisionOf(record: BriefRecord, theme: Theme, formats: Formats) {
  const order = await orderView(record, theme, formats);
  const budget = budgetView(record, theme, formats);
  return order === null && budget === null ? null : { order, budget };
}

/** A name that leaves room beside it in the running head. */
const shortened = (name: string): string =>
  [...name].length > 45 ? `${[...name].slice(0, 44).join('').trimEnd()}…` : name;

/** More rows of past figures than this stand in the annex, so that the checks stay one page. */
const MOST_PAST_ROWS = 15;

/** The plot of a chart beside the equations, in px of its own. */
const NARROW = 172;

async function weightsOf({ series, equation }: BriefRecord, theme: Theme, formats: Formats) {
  const many = theme.say(`every.${series.every}.other`);
  const largest = equation.weights.reduce((a, b) => (Math.abs(b.weight) > Math.abs(a.weight) ? b : a));
  return {
    title: theme.say('weights.title', { every: many }),
    svg: await barChart(
      { bars: equation.weights.map(({ lag, weight }) => ({ step: lag, value: weight })), width: NARROW },
      {
        described: theme.say('weights.described', {
          count: equation.weights.length,
          largest: formats.number(largest.weight, 2),
          lag: largest.lag,
        }),
        axis: theme.say('weights.axis', { every: many }),
        number: formats.number,
      },
    ),
  };
}

async function echoOf({ series, equation }: BriefRecord, theme: Theme, formats: Formats) {
  const many = theme.say(`every.${series.every}.other`);
  const last = equation.echo[equation.echo.length - 1];
  return {
    title: theme.say('echo.title'),
    svg: await barChart(
      { bars: equation.echo.map(({ step, effect }) => ({ step, value: effect })), ahead: true, width: NARROW },
      {
        described: theme.say('echo.described', {
          every: many,
          next: formats.number(equation.echo[1]?.effect ?? 0, 2),
          last: formats.number(last.effect, 2),
          count: last.step,
        }),
        axis: theme.say('echo.axis', { every: many }),
        number: formats.number,
      },
    ),
  };
}

async function checksCharts(record: BriefRecord, theme: Theme, formats: Formats) {
  const { series, fit } = record;
  const known = fit.standardizedResiduals.filter((value) => value !== null);
  const words = { number: formats.number };
  return {
    residuals: {
      title: theme.say('checks.residuals.title', { every: theme.say(`every.${series.every}.one`) }),
      svg: await residualsChart(record, {
        ...words,
        described: theme.say('checks.residuals.described', {
          outside: known.filter((value) => Math.abs(value) > 2).length,
          count: known.length,
        }),
        yearName: (period) => period.slice(0, 4),
      }),
    },
    pattern: {
      title: theme.say('checks.pattern.title'),
      note: theme.say('checks.pattern.note'),
      svg: await barChart(
        {
          bars: fit.autocorrelations.map((value, i) => ({ step: i + 1, value })),
          bound: fit.autocorrelationBound,
        },
        {
          ...words,
          described: theme.say('checks.pattern.described', {
            count: fit.autocorrelations.length,
            bound: formats.number(fit.autocorrelationBound, 2),
            outside: fit.autocorrelations.filter((value) => Math.abs(value) > fit.autocorrelationBound).length,
          }),
          axis: theme.say('checks.pattern.axis', { every: theme.say(`every.${series.every}.other`) }),
        },
      ),
    },
  };
}

function fileLines(record: BriefRecord, theme: Theme, formats: Formats, { fingerprint }: BriefOptions): string[] {
  const { fit, plan, figures, software, series } = record;
  return [
    theme.say(fit.aicc === null ? 'checks.file.fit-without' : 'checks.file.fit', {
      likelihood: formats.number(fit.logLikelihood, 2),
      aicc: fit.aicc === null ? '–' : formats.number(fit.aicc, 2),
      observations: fit.observations,
      variance: Number(fit.innovationVariance.toPrecision(4)).toString(),
    }),
    theme.say('checks.file.fingerprint', { brief: series.slug, fingerprint }),
    [
      theme.say('checks.file.program', { version: software.version, figures: figures.sha256 }),
      ...(plan.preparedBy === null ? [] : [theme.say('prepared', { by: plan.preparedBy })]),
    ].join(' · '),
  ];
}
