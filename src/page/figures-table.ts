/** The outlook's figures as tables: page 1's, by the period or where these are many by the year, and the annex's. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { capital, countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

export interface FiguresTable {
  readonly heads: Readonly<Record<'period' | 'expected' | 'range' | 'lastYear' | 'change', string>>;
  readonly rows: readonly FiguresRow[];
  /** Null where there is but one row. */
  readonly total: FiguresRow | null;
}

export interface FiguresRow {
  readonly name: string;
  readonly expected: string;
  readonly range: string;
  readonly lastYear: string;
  readonly change: string;
}

export function figuresTable(record: BriefRecord, theme: Theme, formats: Formats): FiguresTable {
  const years = yearRows(record, theme, formats);
  const rows = years.length > 0 ? years : periodRows(record, theme, formats);
  const { printed, outlook, series } = record;
  const name = capital(countedPeriods(outlook.periods.length, series.every, theme, formats));
  return {
    heads: headsOf(record, years.length > 0 ? 'ahead' : series.every, theme),
    rows,
    total: rows.length === 1 ? null : rowOf(name, printed.total, printed.answer.places, record, theme, formats),
  };
}

/** Every period ahead, where page 1 shows them by the year; else null. */
export function periodsTable(record: BriefRecord, theme: Theme, formats: Formats): FiguresTable | null {
  if (record.printed.years.length === 0) return null;
  return { heads: headsOf(record, record.series.every, theme), rows: periodRows(record, theme, formats), total: null };
}

const periodRows = (record: BriefRecord, theme: Theme, formats: Formats): FiguresRow[] =>
  record.outlook.periods.map(({ period }, h) =>
    rowOf(formats.period(period, 'short'), record.printed.periods[h], record.printed.places, record, theme, formats),
  );

const yearRows = (record: BriefRecord, theme: Theme, formats: Formats): FiguresRow[] =>
  record.outlook.totals
    .filter(({ kind }) => kind === 'year-ahead')
    .map(({ periods }, year) =>
      rowOf(
        formats.span(periods[0], periods[periods.length - 1]),
        record.printed.years[year],
        record.printed.places,
        record,
        theme,
        formats,
      ),
    );

function headsOf({ series }: BriefRecord, kind: string, theme: Theme): FiguresTable['heads'] {
  return {
    period: theme.say(`figures.period.${kind}`),
    expected: theme.say('figures.expected'),
    range: theme.say('figures.range'),
    lastYear: theme.say(kind === 'ahead' ? 'figures.before' : 'figures.last-year', {
      every: theme.say(`every.${series.every}.one`),
    }),
    change: theme.say('figures.change'),
  };
}

function rowOf(
  name: string,
  numbers: BriefRecord['printed']['total'],
  rangePlaces: number,
  { printed, series }: BriefRecord,
  theme: Theme,
  formats: Formats,
): FiguresRow {
  return {
    name,
    expected: formats.number(numbers.expected, printed.places),
    range: theme.say('figures.and', {
      low: formats.number(numbers.range80[0], rangePlaces),
      high: formats.number(numbers.range80[1], rangePlaces),
    }),
    lastYear: numbers.lastYear === null ? '–' : formats.number(numbers.lastYear, series.places),
    change: numbers.change === null ? '–' : formats.change(numbers.change),
  };
}
