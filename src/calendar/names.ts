/**
 * What a locale calls periods and dates. Every name comes from Intl, so no English and no hand-written format stands
 * here; what a name looks like in detail (spaces, points) is up to the version of ICU that Node brings.
 * All names are in the Gregorian calendar, which the figures are counted in, whatever calendar a locale prefers.
 */
import { dateOfDay, dayNumber, dayOf } from './dates.js';
import type { Every } from './every.js';
import { spanOf } from './period.js';

export type NameStyle = 'axis' | 'short' | 'long';

const dayLong: Intl.DateTimeFormatOptions = { day: 'numeric', month: 'long', year: 'numeric' };
const dayShort: Intl.DateTimeFormatOptions = { day: 'numeric', month: 'short', year: 'numeric' };
const monthLong: Intl.DateTimeFormatOptions = { month: 'long', year: 'numeric' };
const monthShort: Intl.DateTimeFormatOptions = { month: 'short', year: 'numeric' };
const yearOnly: Intl.DateTimeFormatOptions = { year: 'numeric' };

/**
 * A period's name. In en-GB, for the last quarter of 2026:
 * `axis` "Oct – Dec", as short as a label under an axis must be, so without the year (a year's own label is the year);
 * `short` "Oct – Dec 2026"; `long` "October – December 2026". A week's axis label is its first day.
 * Throws on text that is no such period.
 */
export const periodName = (
  text: string,
  every: Every,
  yearStarts: number,
  locale: string,
  style: NameStyle,
): string => {
  const { from, to } = spanOf(text, every, yearStarts);
  if (style === 'axis') return axisName(from, to, every, locale);
  return rangeName(from, to, locale, formatFor(every, yearStarts, style));
};

/** The name of the span from one period's first day to another's last: "October 2026 – September 2027". */
export const spanName = (
  firstText: string,
  lastText: string,
  every: Every,
  yearStarts: number,
  locale: string,
): string => {
  const { from } = spanOf(firstText, every, yearStarts);
  const { to } = spanOf(lastText, every, yearStarts);
  return rangeName(from, to, locale, formatFor(every, yearStarts, 'long'));
};

/** The name of a day: "5 October 2026". Throws on text that is no ISO 8601 date. */
export const dateName = (iso: string, locale: string): string =>
  formatter(locale, dayLong).format(dateOfDay(dayOf(iso)));

/**
 * The name of a place in the reporting year, whatever the year: "July – September".
 * A week's place is named by the days it has in a year whose weeks begin with the reporting year; other years' weeks
 * lie a few days off.
 */
export const positionName = (position: number, every: Every, yearStarts: number, locale: string): string => {
  if (every === 'week' || every === 'four-weeks') {
    const length = every === 'week' ? 7 : 28;
    const from = dayNumber(referenceYear, yearStarts, 1 + (position - 1) * length);
    return formatter(locale, { day: 'numeric', month: 'long' }).formatRange(
      dateOfDay(from),
      dateOfDay(from + length - 1),
    );
  }
  const months = { month: 1, quarter: 3, 'half-year': 6, year: 12 }[every];
  const first = yearStarts + (position - 1) * months;
  return monthsName(first, first + months - 1, locale, 'long');
};

/** A year that is no leap year, for names that show none. */
const referenceYear = 2001;

const formatFor = (every: Every, yearStarts: number, style: 'short' | 'long'): Intl.DateTimeFormatOptions => {
  if (every === 'week' || every === 'four-weeks') return style === 'long' ? dayLong : dayShort;
  if (every === 'year' && yearStarts === 1) return yearOnly;
  return style === 'long' ? monthLong : monthShort;
};

const axisName = (from: string, to: string, every: Every, locale: string): string => {
  switch (every) {
    case 'week':
    case 'four-weeks':
      return formatter(locale, { day: 'numeric', month: 'short' }).format(dateOfDay(dayOf(from)));
    case 'year':
      return rangeName(from, to, locale, yearOnly);
    default:
      return monthsName(
        dateOfDay(dayOf(from)).getUTCMonth() + 1,
        dateOfDay(dayOf(to)).getUTCMonth() + 1,
        locale,
        'short',
      );
  }
};

const rangeName = (from: string, to: string, locale: string, format: Intl.DateTimeFormatOptions): string =>
  formatter(locale, format).formatRange(dateOfDay(dayOf(from)), dateOfDay(dayOf(to)));

/** Months without a year. Both are put into one year, as some locales add the years to a range that crosses them. */
const monthsName = (first: number, last: number, locale: string, month: 'short' | 'long'): string => {
  const within = (number: number): Date => dateOfDay(dayNumber(referenceYear, ((number - 1) % 12) + 1, 1));
  return formatter(locale, { month }).formatRange(within(first), within(last));
};

/** Making a formatter is slow and a brief names hundreds of periods, so each is made once. */
const formatters = new Map<string, Intl.DateTimeFormat>();

const formatter = (locale: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat => {
  const key = JSON.stringify([locale, options]);
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.DateTimeFormat(locale, { ...options, calendar: 'gregory', timeZone: 'UTC' });
  formatters.set(key, made);
  return made;
};
