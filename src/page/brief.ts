/**
 * A brief from its record: one self-contained HTML document.
 *
 *   record -> charts, sentences, tables -> brief.hbs -> the type that the text needs
 */
import { barChart } from '../charts/bar-chart.js';
import { outlookChart, startsAtZero } from '../charts/outlook-chart.js';
import { residualsChart } from '../charts/residuals-chart.js';
import { trackChart } from '../charts/track-chart.js';
import type { BriefRecord } from '../record/record.js';
import { budgetSentence, budgetView } from './budget.js';
import { checksOf, pastTable } from './checks.js';
import { meaningRows } from './coefficients.js';
import { pageStyle, plainText, withType } from './document.js';
import { equationHtml } from './equation.js';
import { figuresTable, periodsTable } from './figures-table.js';
import { type Formats, formatsOf } from './formats.js';
import { madeOf, sumTable } from './how-made.js';
import { judgedSentences, judgementView } from './judgement.js';
import { orderReason, orderSentence, orderView } from './order.js';
import { answerSentence, capital, caveatSentences, reasons } from './sentences.js';
import type { Theme } from './theme.js';
import { assumptionRows, trustSentences } from './trust.js';

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
  const figures = figuresTable(record, theme, formats);
  const isLong = figures.rows.length > MANY;
  const room = roomOf(record, figures.rows.length);
  const past = pastTable(record, theme, formats);
  const decision = await decisionOf(record, theme, formats);
  const judgement = judgementView(record, theme, formats);
  const annex = {
    periods: periodsTable(record, theme, formats),
    judgement: judgement?.annex ?? null,
    budget: decision?.budget?.annex ?? null,
    past: past.height > MOST_PAST_ROWS ? past : null,
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
    name: series.name,
    scope: theme.say('in-unit', { span, unit: series.unit }),
    answer: answerSentence(record, theme, formats),
    judged: judgedSentences(record, theme, formats),
    todo: todoOf(record, theme, formats),
    picture: await pictureOf(record, theme, formats, every, room.picture),
    figures,
    isLong,
    isFull: room.isFull,
    isCrowded: room.isCrowded,
    isLongNamed: series.name.length > 45,
    reasons: reasons(record, theme, formats),
    trust: trustSentences(record, theme, formats).join(' '),
    track: room.hasTrack ? await trackOf(record, theme, formats, every) : null,
    caveats: caveatSentences(record, theme, formats),
    decision,
    judgement,
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

/** Page 1's answer to what to do; null where neither an order nor a budget was asked for. */
function todoOf(record: BriefRecord, theme: Theme, formats: Formats) {
  const { purchase, budget } = record;
  if (purchase === null && budget === null) return null;
  return {
    title: theme.say('todo.title'),
    order:
      purchase === null
        ? null
        : { answer: orderSentence(record, theme, formats), why: orderReason(record, theme, formats) },
    budget: budget === null ? null : { answer: budgetSentence(record, theme, formats) },
  };
}

async function decisionOf(record: BriefRecord, theme: Theme, formats: Formats) {
  const order = await orderView(record, theme, formats);
  const budget = budgetView(record, theme, formats);
  return order === null && budget === null ? null : { order, budget };
}

/** The picture beside the track record's sentences; null where there is none to draw. */
async function trackOf(record: BriefRecord, theme: Theme, formats: Formats, every: string) {
  const shown = record.trackRecord?.nextPeriod.slice(-12) ?? [];
  const inside = shown.filter(({ actual, range80 }) => actual >= range80[0] && actual <= range80[1]).length;
  const facts = { every, count: formats.number(shown.length, 0), inside: formats.number(inside, 0) };
  const svg = await trackChart(record, {
    described: plainText(theme.say('trust.picture.described', facts)),
    share: (share) => formats.change(100 * share),
    periodName: (period) => formats.period(period, 'short'),
  });
  return svg === null ? null : { title: theme.say('trust.picture.title', facts), svg };
}

/** A name that leaves room beside it in the running head. */
const shortened = (name: string): string =>
  [...name].length > 45 ? `${[...name].slice(0, 44).join('').trimEnd()}…` : name;

/** More rows than this are set closer, so that page 1 stays one page. */
const MANY = 6;

/** More rows of past figures than this stand in the annex, so that the checks stay one page. */
const MOST_PAST_ROWS = 15;

/** The plot of a chart beside the equations, in px of its own. */
const NARROW = 172;

/** How page 1 shares its height: what is asked for and many rows leave less to the pictures, and Letter less still. */
function roomOf({ plan, purchase, budget, judgement }: BriefRecord, rows: number) {
  const isLetter = plan.paper === 'Letter';
  const asked = [purchase, budget, judgement].filter((part) => part !== null).length;
  const isFull = asked > 0;
  const height = 140 - 13 * Math.max(0, rows - 4) - 18 * asked - (isLetter ? 24 : 0);
  return {
    isFull,
    isCrowded: asked > 2,
    picture: Math.max(isLetter ? 70 : asked < 3 ? 90 : 70, height),
    hasTrack: rows <= MANY && asked + (isLetter ? 2 : 0) < 3,
  };
}

/** `height` is the plot's, in px. */
async function pictureOf(record: BriefRecord, theme: Theme, formats: Formats, every: string, height: number) {
  const { series, figures, outlook, printed } = record;
  const last = outlook.periods[outlook.periods.length - 1].period;
  const periods = outlook.periods.map(({ period }, h) => ({ period, value: printed.periods[h].expected }));
  const lowest = periods.reduce((a, b) => (b.value < a.value ? b : a));
  const highest = periods.reduce((a, b) => (b.value > a.value ? b : a));
  const end = formats.period(last, 'long');
  const described = theme.say('picture.described', {
    series: series.name,
    unit: series.unit,
    every,
    start: formats.period(figures.start, 'short'),
    last: formats.period(record.facts.surprise?.period ?? figures.start, 'short'),
    end,
    lowest: formats.number(lowest.value, printed.places),
    lowestPeriod: formats.period(lowest.period, 'short'),
    highest: formats.number(highest.value, printed.places),
    highestPeriod: formats.period(highest.period, 'short'),
  });
  return {
    title: theme.say('picture.title', { unit: capital(series.unit), every, end }),
    note: startsAtZero(record) ? null : theme.say('picture.not-from-zero'),
    svg: await outlookChart(
      record,
      {
        described: plainText(described),
        eight: theme.say('picture.eight'),
        nineteen: theme.say('picture.nineteen'),
        lastYear: theme.say('picture.last-year'),
        number: formats.number,
        railName: (period) => formats.period(period, 'axis'),
        yearName: (period) => period.slice(0, 4),
      },
      height,
    ),
  };
}

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
