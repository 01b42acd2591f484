/** How earlier briefs turned out: page 1's sentences, and the section among the checks. */
import { trackChart } from '../charts/track-chart.js';
import type { BriefRecord } from '../record/record.js';
import { plainText } from './document.js';
import type { Formats } from './formats.js';
import type { Theme } from './theme.js';

type LookBack = NonNullable<BriefRecord['lookBack']>;
type Outcome = LookBack['last'][number];

/** A change of the outlook by less than this is not worth page 1. */
const TOLD = 0.05;
/** From so many forecasts on a share of them says something. */
const ENOUGH = 4;

export function lookBackSentences(record: BriefRecord, theme: Theme, formats: Formats): string[] {
  const { lookBack } = record;
  if (lookBack === null) return [];
  const { last, running, change, order } = lookBack;
  return [
    ...(last.length === 0 ? [] : [lastSentence(last[0], record, theme, formats)]),
    ...(running === null || running.count < ENOUGH ? [] : [runningSentence(running, theme, formats)]),
    ...(change === null || !isTold(change) ? [] : [changeSentence(change, record, theme, formats)]),
    ...(order !== null && order.lost > 0 ? [orderOutcome(order, record, theme, formats)] : []),
  ];
}

export async function lookBackView(record: BriefRecord, theme: Theme, formats: Formats) {
  const { lookBack } = record;
  if (lookBack === null) return null;
  const { next, running, change, order, judgement, unlike } = lookBack;
  const shown = next.slice(-MOST_ROWS);
  const svg = next.length < ENOUGH ? null : await chartOf(next, record, theme, formats);
  return {
    title: theme.say('back.title'),
    text: [
      ...(running === null ? [theme.say('back.none')] : [runningSentence(running, theme, formats)]),
      ...(order === null ? [] : [orderOutcome(order, record, theme, formats)]),
      ...(judgement === null ? [] : [judgementOutcome(judgement, theme, formats)]),
      ...(unlike.length === 0 ? [] : [unlikeSentence(unlike, theme, formats)]),
    ].join(' '),
    heads: ['brief', 'period', 'expected', 'range', 'happened', 'where'].map((key) => theme.say(`back.heads.${key}`)),
    rows: shown.map((outcome) => rowOf(outcome, record, theme, formats)),
    svg,
    caption: svg === null ? '' : theme.say('back.picture', { every: theme.say(`every.${record.series.every}.one`) }),
    change: change === null ? null : changeTable(change, record, theme, formats),
  };
}

/** Older outcomes than these are left to the record. */
const MOST_ROWS = 5;

const where = ({ actual, range80, range95 }: Outcome): 'inside' | 'outer' | 'outside' =>
  actual >= range80[0] && actual <= range80[1]
    ? 'inside'
    : actual >= range95[0] && actual <= range95[1]
      ? 'outer'
      : 'outside';

/** As finely as page 1 prints the outlook of now. */
const about = (value: number, { printed }: BriefRecord, formats: Formats): string =>
  formats.rounded(value, -Math.round(Math.log10(printed.step)));

function lastSentence(outcome: Outcome, record: BriefRecord, theme: Theme, formats: Formats): string {
  return theme.say(`back.last.${where(outcome)}`, {
    date: formats.date(outcome.issued),
    expected: about(outcome.expected, record, formats),
    period: formats.period(outcome.period, 'short'),
    actual: formats.amount(outcome.actual, record.series.places),
  });
}

const runningSentence = (
  { count, inside80, miss }: NonNullable<LookBack['running']>,
  theme: Theme,
  formats: Formats,
): string =>
  theme.say(`back.running.${formats.plural(count) === 'one' ? 'one' : 'other'}`, {
    count: formats.number(count, 0),
    inside: formats.number(inside80, 0),
    miss: miss === null ? '–' : miss < 0.005 ? theme.say('trust.tiny') : formats.share(miss),
  });

const isTold = ({ total }: NonNullable<LookBack['change']>): boolean =>
  Math.abs(total.now - total.was) >= TOLD * Math.abs(total.was);

type Part = keyof NonNullable<LookBack['change']>['total']['parts'];
const PARTS: readonly Part[] = ['program', 'revised', 'observed', 'estimated', 'model'];

function changeSentence(
  { printed, periods, issued }: NonNullable<LookBack['change']>,
  record: BriefRecord,
  theme: Theme,
  formats: Formats,
): string {
  const by = printed.now - printed.was;
  const cause = PARTS.reduce((most, part) => (printed.parts[part] * by > printed.parts[most] * by ? part : most));
  return theme.say(`back.change.${by < 0 ? 'down' : 'up'}`, {
    span: formats.span(periods[0].period, periods[periods.length - 1].period),
    date: formats.date(issued),
    by: formats.number(Math.abs(by), record.printed.places),
    unit: record.series.unit,
    cause: theme.say(`back.cause.${cause}`),
  });
}

function changeTable(
  { printed, periods, issued }: NonNullable<LookBack['change']>,
  { printed: shown, series }: BriefRecord,
  theme: Theme,
  formats: Formats,
) {
  const number = (value: number) => formats.number(value, shown.places);
  const signed = (value: number) => `${value > 0 ? '+' : ''}${number(value)}`;
  return {
    title: theme.say('back.split.title', {
      span: formats.span(periods[0].period, periods[periods.length - 1].period),
      unit: series.unit,
    }),
    heads: [
      theme.say('back.split.was', { date: formats.date(issued) }),
      ...PARTS.map((part) => theme.say(`back.split.${part}`)),
      theme.say('back.split.now'),
    ],
    cells: [number(printed.was), ...PARTS.map((part) => signed(printed.parts[part])), number(printed.now)],
  };
}

function orderOutcome(
  { issued, span, ordered, demand, leftOver, lost }: NonNullable<LookBack['order']>,
  { series }: BriefRecord,
  theme: Theme,
  formats: Formats,
): string {
  const amount = (value: number) => formats.amount(value, series.places);
  return theme.say(`back.order.${lost > 0 ? 'short' : leftOver > 0 ? 'left' : 'even'}`, {
    date: formats.date(issued),
    ordered: amount(ordered),
    unit: series.unit,
    span: formats.span(...span),
    demand: amount(demand),
    left: amount(leftOver),
    lost: amount(lost),
  });
}

/** Two misses closer than this, as a share of the larger, tell nothing apart. */
const ALIKE = 0.05;

function judgementOutcome(
  { issued, withIt, without, what }: NonNullable<LookBack['judgement']>,
  theme: Theme,
  formats: Formats,
): string {
  const isAlike = Math.abs(withIt - without) <= ALIKE * Math.max(withIt, without);
  return theme.say(`back.judgement.${isAlike ? 'alike' : withIt < without ? 'closer' : 'further'}`, {
    date: formats.date(issued),
    what: formats.list(what.map((each) => theme.say('back.quoted', { what: each }))),
  });
}

function unlikeSentence(unlike: LookBack['unlike'], theme: Theme, formats: Formats): string {
  const reasons = [...new Set(unlike.map(({ reason }) => theme.say(`back.reason.${reason}`)))];
  return theme.say(`back.unlike.${formats.plural(unlike.length) === 'one' ? 'one' : 'other'}`, {
    count: formats.number(unlike.length, 0),
    reasons: formats.list(reasons),
  });
}

function rowOf(outcome: Outcome, record: BriefRecord, theme: Theme, formats: Formats) {
  return {
    brief: formats.date(outcome.issued),
    cells: [
      formats.period(outcome.period, 'short'),
      about(outcome.expected, record, formats),
      theme.say('figures.and', {
        low: about(outcome.range80[0], record, formats),
        high: about(outcome.range80[1], record, formats),
      }),
      formats.amount(outcome.actual, record.series.places),
      theme.say(`back.where.${where(outcome)}`),
    ],
  };
}

function chartOf(next: readonly Outcome[], { series }: BriefRecord, theme: Theme, formats: Formats) {
  const inside = next.filter((outcome) => where(outcome) === 'inside').length;
  return trackChart(next, {
    described: plainText(
      theme.say('trust.picture.described', {
        every: theme.say(`every.${series.every}.one`),
        count: formats.number(next.length, 0),
        inside: formats.number(inside, 0),
      }),
    ),
    share: (share) => formats.change(100 * share),
    periodName: (period) => formats.period(period, 'short'),
  });
}
