/**
 * Periods: between their text and the integers that count them.
 *
 * In data a period is written as SDMX 2.1 writes it: `2026-Q4`, `2026-10`, `2026-S2`, `2026`; a week or a
 * four-week period is written as the ISO 8601 date of its first day. Where the reporting year starts in another
 * month than January, `2024-Q1` is the first quarter of the reporting year that starts in 2024 (SDMX 2.1, section
 * on reporting years), and so for half-years and years. Months are always calendar months: `2024-03` is March 2024,
 * and only their position and their reporting year depend on `yearStarts`, the reporting year's first month (1 to 12).
 *
 * Years run from 1000 to 9899, so that whatever lies ahead of a period still has four digits.
 *
 * An index counts consecutive periods: the index of the next period is one more. It has no other meaning.
 */
import { dateText, dayNumber, dayOf, isDate, monthOfDay } from './dates.js';
import { type Every, seasonOf } from './every.js';

/**
 * Weeks and four-week periods may begin on any day, so their index keeps the phase (the first day's number modulo the
 * length) apart from the count: phase * phaseStride + count. Periods of one phase are consecutive integers; those of
 * another phase are far away. Days are counted from the year 0 here, so that nothing is negative; ten thousand years
 * hold fewer weeks than the stride.
 */
const phaseStride = 2 ** 20;
const yearZero = dayNumber(0, 1, 1);
const daysIn = (every: 'week' | 'four-weeks'): number => (every === 'week' ? 7 : 28);
const countedInDays = (every: Every): every is 'week' | 'four-weeks' => every === 'week' || every === 'four-weeks';

const shapes: Readonly<Record<Exclude<Every, 'week' | 'four-weeks'>, RegExp>> = {
  month: /^((?!99)[1-9]\d{3})-(0[1-9]|1[0-2])$/,
  quarter: /^((?!99)[1-9]\d{3})-Q([1-4])$/,
  'half-year': /^((?!99)[1-9]\d{3})-S([12])$/,
  year: /^((?!99)[1-9]\d{3})$/,
};

const examples: Readonly<Record<Every, string>> = {
  week: 'the date of a week’s first day, such as 2024-01-29',
  'four-weeks': 'the date of a four-week period’s first day, such as 2024-01-29',
  month: 'a month, such as 2024-03',
  quarter: 'a quarter, such as 2024-Q1',
  'half-year': 'a half-year, such as 2024-S1',
  year: 'a year, such as 2024',
};

/** How a period of this kind is written, for messages: `a quarter, such as 2024-Q1`. */
export const examplePeriod = (every: Every): string => examples[every];

/** Whether a text is a period of this kind. */
export const isPeriod = (text: string, every: Every): boolean =>
  countedInDays(every) ? isDate(text) : shapes[every].test(text);

/** The kinds of period that a text can stand for; none where it is no period. A date is a week or four weeks. */
export const kindsOf = (text: string): readonly Every[] =>
  (['quarter', 'month', 'half-year', 'year', 'week', 'four-weeks'] as const).filter((every) => isPeriod(text, every));

/** The index of a period. Throws on text that is no such period. */
export const periodIndex = (text: string, every: Every): number => {
  if (countedInDays(every)) return indexOfFirstDay(dayOf(text), every);
  const parts = shapes[every].exec(text);
  if (!parts) throw new Error(`"${text}" is not ${examples[every]}`);
  return Number(parts[1]) * seasonOf(every) + Number(parts[2] ?? 1) - 1;
};

/** The text of the period with this index: the inverse of `periodIndex`. */
export const periodText = (index: number, every: Every): string => {
  if (countedInDays(every)) return dateText(firstDayOf(index, every));
  const season = seasonOf(every);
  const year = Math.floor(index / season);
  const part = (index % season) + 1;
  switch (every) {
    case 'month':
      return `${year}-${String(part).padStart(2, '0')}`;
    case 'quarter':
      return `${year}-Q${part}`;
    case 'half-year':
      return `${year}-S${part}`;
    case 'year':
      return String(year);
  }
};

/**
 * The place of a period in its reporting year, from 1.
 * A week is placed by how many whole weeks have passed since the reporting year began, and the 53rd week of a long
 * year shares the place of the 52nd (a 14th four-week period that of the 13th): an approximation, as 52 weeks are no
 * full year.
 */
export const position = (index: number, every: Every, yearStarts: number): number => {
  if (!countedInDays(every)) {
    const season = seasonOf(every);
    const part = index % season;
    return every === 'month' ? ((part + 13 - yearStarts) % 12) + 1 : part + 1;
  }
  const passed = firstDayOf(index, every) - dayNumber(yearOf(index, every, yearStarts), yearStarts, 1);
  return Math.min(Math.floor(passed / daysIn(every)) + 1, seasonOf(every));
};

/** The reporting year of a period, named by the calendar year that it starts in; of a week, by its first day. */
export const yearOf = (index: number, every: Every, yearStarts: number): number => {
  const { year, month } =
    every === 'month'
      ? { year: Math.floor(index / 12), month: (index % 12) + 1 }
      : countedInDays(every)
        ? monthOfDay(firstDayOf(index, every))
        : { year: Math.floor(index / seasonOf(every)), month: 12 };
  return month >= yearStarts ? year : year - 1;
};

/** First and last day of a period (both belong to it), as ISO 8601 dates. Throws on text that is no such period. */
export const spanOf = (
  text: string,
  every: Every,
  yearStarts: number,
): { readonly from: string; readonly to: string } => {
  const index = periodIndex(text, every);
  return {
    from: dateText(firstDay(index, every, yearStarts)),
    to: dateText(firstDay(index + 1, every, yearStarts) - 1),
  };
};

/** The calendar year that a whole period lies in; null where it runs over the turn of one. */
export const calendarYearOf = (index: number, every: Every, yearStarts: number): number | null => {
  const { from, to } = spanOf(periodText(index, every), every, yearStarts);
  return from.slice(0, 4) === to.slice(0, 4) ? Number(from.slice(0, 4)) : null;
};

/**
 * The period that a day falls in, as text. A week or a four-week period is named by its first day, and a date alone
 * does not say where it begins: there the date is taken as the first day itself.
 * Throws on text that is no date.
 */
export const periodHolding = (date: string, every: Every, yearStarts: number): string => {
  const day = dayOf(date);
  if (countedInDays(every)) return date;
  const { year, month } = monthOfDay(day);
  const monthsIn = 12 / seasonOf(every);
  const monthsSinceStart = every === 'month' ? year * 12 + month - 1 : year * 12 + month - yearStarts;
  return periodText(Math.floor(monthsSinceStart / monthsIn), every);
};

const firstDay = (index: number, every: Every, yearStarts: number): number => {
  if (countedInDays(every)) return firstDayOf(index, every);
  const monthsIn = 12 / seasonOf(every);
  return dayNumber(0, index * monthsIn + (every === 'month' ? 1 : yearStarts), 1);
};

const indexOfFirstDay = (day: number, every: 'week' | 'four-weeks'): number => {
  const days = day - yearZero;
  const phase = days % daysIn(every);
  return phase * phaseStride + (days - phase) / daysIn(every);
};

const firstDayOf = (index: number, every: 'week' | 'four-weeks'): number => {
  const phase = Math.floor(index / phaseStride);
  return yearZero + (index % phaseStride) * daysIn(every) + phase;
};
