/** The file copy: what was done to the data, how the ranges were made, all past figures. */
import { periodIndex, periodText, position, yearOf } from '../calendar/calendar.js';
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import type { Theme } from './theme.js';

export function checksOf({ figures, fit, outlook, series, trackRecord }: BriefRecord, theme: Theme, formats: Formats) {
  const list = (periods: readonly string[]) => periods.map((period) => formats.period(period, 'short')).join('; ');
  const found = figures.findings.map(({ id, periods }) => {
    const key = `checks.data.${id}`;
    const form = formats.plural(periods.length) === 'one' ? 'one' : 'other';
    return theme.say(theme.has(key) ? key : `${key}.${form}`, { count: periods.length, list: list(periods) });
  });
  const events = figures.events.map(({ what, from, to, effect }) =>
    theme.say(`checks.data.${effect}`, { what, span: formats.span(from, to ?? from) }),
  );
  const soldOut =
    figures.soldOut.length === 0
      ? []
      : [
          theme.say(`checks.data.sold-out.${formats.plural(figures.soldOut.length) === 'one' ? 'one' : 'other'}`, {
            list: list(figures.soldOut),
            demand: fit.demand.map(({ middle }) => formats.number(middle, series.places)).join('; '),
          }),
        ];
  const data = [...found, ...soldOut, ...events];
  const { freedom, factors } = outlook.calibration;
  const first = factors.freedom * factors.recent * factors.estimates[0] * factors.horizon[0];
  const ranges = [
    theme.say('checks.ranges.text', {
      paths: formats.number(outlook.paths, 0),
      seed: String(outlook.seed),
      every: theme.say(`every.${series.every}.other`),
      freedom: formats.number(freedom, 0),
      times: formats.number(first, 3),
      fitted: formats.number(factors.freedom, 3),
      estimates: formats.number(factors.estimates[0], 3),
      recent: formats.number(factors.recent, 3),
      horizon: formats.number(factors.horizon[0], 3),
    }),
    ...(trackRecord === null
      ? []
      : [
          theme.say('checks.ranges.did', {
            count: formats.number(trackRecord.count, 0),
            inside80: formats.share(trackRecord.inside80),
            inside95: formats.share(trackRecord.inside95),
          }),
        ]),
  ].join(' ');
  return {
    done: data.length === 0 ? [theme.say('checks.data.nothing')] : data,
    ranges: outlook.heldAtZero ? `${ranges} ${theme.say('checks.ranges.held')}` : ranges,
  };
}

/**
 * A row a reporting year, a column a position; one column where a year is one period. A narrow table stands in two
 * halves beside each other; columns that the page is too narrow for go on in further parts.
 */
export function pastTable({ series, figures, plan }: BriefRecord, theme: Theme, formats: Formats) {
  const { every, season } = series;
  const first = periodIndex(figures.start, every);
  const marked = new Set(
    figures.events.flatMap(({ from, to }) => {
      const [start, end] = [periodIndex(from, every), to === null ? Number.POSITIVE_INFINITY : periodIndex(to, every)];
      return figures.values.flatMap((_, t) => (first + t >= start && first + t <= end ? [t] : []));
    }),
  );
  const atLeast = new Set(figures.soldOut.map((period) => periodIndex(period, every) - first));
  const figureText = (t: number, value: number | null) => {
    if (value === null) return theme.say('checks.past.missing');
    const number = formats.number(value, series.places);
    return atLeast.has(t) ? theme.say('checks.past.at-least', { value: number }) : number;
  };
  const years = new Map<number, { text: string; isMarked: boolean; isMissing: boolean }[]>();
  figures.values.forEach((value, t) => {
    const year = yearOf(first + t, every, plan.yearStarts);
    const row =
      years.get(year) ?? Array.from({ length: season }, () => ({ text: '', isMarked: false, isMissing: false }));
    row[position(first + t, every, plan.yearStarts) - 1] = {
      text: figureText(t, value),
      isMarked: marked.has(t),
      isMissing: value === null,
    };
    years.set(year, row);
  });
  const columns = Array.from({ length: season }, (_, i) =>
    season <= 12
      ? formats.period(periodText(first - position(first, every, plan.yearStarts) + 1 + i, every), 'axis')
      : `${i + 1}`,
  );
  const texts = [...columns, ...[...years.values()].flatMap((cells) => cells.map(({ text }) => text))];
  const widest = Math.max(...texts.map((text) => text.length)) * DIGIT + GAP;
  const each = columnsAPart(widest, season);
  const rows = [...years].map(([year, cells]) => ({ year: String(year), cells }));
  const halfway = Math.ceil(rows.length / 2);
  const isBeside = season * widest <= HALF_ROOM && rows.length > 6;
  const parts = isBeside
    ? [rows.slice(0, halfway), rows.slice(halfway)].map((half) => ({ columns, rows: half }))
    : Array.from({ length: Math.ceil(season / each) }, (_, part) => ({
        columns: columns.slice(part * each, (part + 1) * each),
        rows: rows.map(({ year, cells }) => ({ year, cells: cells.slice(part * each, (part + 1) * each) })),
      }));
  return {
    title: theme.say('checks.past.title'),
    year: theme.say('checks.past.year'),
    parts,
    isBeside,
    height: isBeside ? halfway : parts.length * rows.length,
    note: [
      ...(marked.size > 0 ? ['checks.past.marked'] : []),
      ...(atLeast.size > 0 ? ['checks.past.at-least-note'] : []),
    ]
      .map((key) => theme.say(key, { every: theme.say(`every.${every}.other`) }))
      .join(' '),
  };
}

/** In millimetres: the room beside the year on the narrowest paper, and on half of it. */
const ROOM = 160;
const HALF_ROOM = 70;
/** A digit of the table's type, and the gap between columns. */
const DIGIT = 1.55;
const GAP = 2;

/** As many columns as fit, and about as many in each part. */
function columnsAPart(widest: number, columns: number): number {
  const parts = Math.ceil(columns / Math.max(1, Math.floor(ROOM / widest)));
  return Math.ceil(columns / parts);
}
