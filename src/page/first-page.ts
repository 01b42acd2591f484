/**
 * Page 1, for the owner.
 *
 *   sentences, tables -> how much room they leave -> pictures of that size
 */
import { outlookChart, startsAtZero } from '../charts/outlook-chart.js';
import { trackChart } from '../charts/track-chart.js';
import type { BriefRecord } from '../record/record.js';
import { budgetSentence } from './budget.js';
import { plainText } from './document.js';
import { figuresTable } from './figures-table.js';
import type { Formats } from './formats.js';
import { judgedSentences } from './judgement.js';
import { lookBackSentences } from './look-back.js';
import { orderReason, orderSentence } from './order.js';
import { MANY_ROWS, roomFor } from './room.js';
import { answerSentence, capital, caveatSentences, reasons } from './sentences.js';
import type { Theme } from './theme.js';
import { trustSentences } from './trust.js';

export async function firstPage(record: BriefRecord, theme: Theme, formats: Formats) {
  const { plan, series, outlook } = record;
  const span = formats.span(outlook.periods[0].period, outlook.periods[outlook.periods.length - 1].period);
  const texts = {
    name: series.name,
    scope: theme.say('in-unit', { span, unit: series.unit }),
    answer: answerSentence(record, theme, formats),
    judged: judgedSentences(record, theme, formats),
    todo: todoOf(record, theme, formats),
    figures: figuresTable(record, theme, formats),
    reasons: reasons(record, theme, formats),
    trust: [...trustSentences(record, theme, formats), ...lookBackSentences(record, theme, formats)].join(' '),
    caveats: caveatSentences(record, theme, formats),
  };
  const rows = texts.figures.rows.length;
  const track = rows > MANY_ROWS ? null : await trackOf(record, theme, formats);
  const mastheads = [`${plan.preparedFor} · ${plan.heading}`, `${formats.date(record.issued)} · ${record.brief}`];
  const room = await roomFor(
    {
      ...texts,
      masthead: [mastheads.join('      ')],
      judged: texts.judged.join(' '),
      order: texts.todo?.order ?? null,
      budget: texts.todo?.budget?.answer ?? null,
      rows,
      track: track?.title ?? null,
    },
    plan.paper,
    await belowPlot(record, theme, formats),
  );
  return {
    ...texts,
    setting: room.setting,
    isLong: rows > MANY_ROWS,
    isLongNamed: series.name.length > 45,
    picture: await pictureOf(record, theme, formats, room.picture),
    track: room.hasTrack ? track : null,
  };
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

/** What the picture has under and over its plot, in px, whatever the plot's height. */
async function belowPlot(record: BriefRecord, theme: Theme, formats: Formats): Promise<number> {
  const { svg } = await pictureOf(record, theme, formats, PLOT);
  return Number(/viewBox="0 0 [\d.]+ ([\d.]+)"/.exec(svg)?.[1] ?? PLOT) - PLOT;
}

const PLOT = 100;

/** `height` is the plot's, in px. */
async function pictureOf(record: BriefRecord, theme: Theme, formats: Formats, height: number) {
  const { series, figures, outlook, printed } = record;
  const every = theme.say(`every.${series.every}.one`);
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

/** The picture beside the track record's sentences; null where there is none to draw. */
async function trackOf(record: BriefRecord, theme: Theme, formats: Formats) {
  const every = theme.say(`every.${record.series.every}.one`);
  const shown = record.trackRecord?.nextPeriod.slice(-12) ?? [];
  const inside = shown.filter(({ actual, range80 }) => actual >= range80[0] && actual <= range80[1]).length;
  const facts = { every, count: formats.number(shown.length, 0), inside: formats.number(inside, 0) };
  const svg = await trackChart(shown, {
    described: plainText(theme.say('trust.picture.described', facts)),
    share: (share) => formats.change(100 * share),
    periodName: (period) => formats.period(period, 'short'),
  });
  return svg === null ? null : { title: theme.say('trust.picture.title', facts), svg };
}
