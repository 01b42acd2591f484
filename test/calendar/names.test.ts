import { describe, expect, it } from 'vitest';
import { everies } from '../../src/calendar/every.js';
import { dateName, type NameStyle, periodName, positionName, spanName } from '../../src/calendar/names.js';

/** Versions of ICU differ in which space or point they set, so names are compared by their words and dashes. */
const plain = (name: string): string =>
  name
    .replaceAll('.', '')
    .replace(/\s*[–—-]\s*/gu, '–')
    .replace(/\s/gu, ' ');

const sample: Readonly<Record<(typeof everies)[number], string>> = {
  week: '2026-01-05',
  'four-weeks': '2026-01-05',
  month: '2026-03',
  quarter: '2026-Q4',
  'half-year': '2026-S1',
  year: '2026',
};

/** Month names and their order are those of the Unicode CLDR for each locale. */
describe('names of periods', () => {
  it.each([
    ['en-GB', 'Oct–Dec', 'Oct–Dec 2026', 'October–December 2026', 'October 2026–September 2027', '5 October 2026'],
    ['en-US', 'Oct–Dec', 'Oct–Dec 2026', 'October–December 2026', 'October 2026–September 2027', 'October 5, 2026'],
    ['de-DE', 'Okt–Dez', 'Okt–Dez 2026', 'Oktober–Dezember 2026', 'Oktober 2026–September 2027', '5 Oktober 2026'],
    ['sv-SE', 'okt–dec', 'okt–dec 2026', 'oktober–december 2026', 'oktober 2026–september 2027', '5 oktober 2026'],
  ])('names a quarter in %s', (locale, axis, short, long, span, date) => {
    const name = (style: NameStyle) => plain(periodName('2026-Q4', 'quarter', 1, locale, style));
    expect([name('axis'), name('short'), name('long')]).toEqual([axis, short, long]);
    expect(plain(spanName('2026-Q4', '2027-Q3', 'quarter', 1, locale))).toBe(span);
    expect(plain(dateName('2026-10-05', locale))).toBe(date);
  });

  it('names the months that a quarter of another reporting year has', () => {
    expect(plain(periodName('2026-Q4', 'quarter', 4, 'en-GB', 'short'))).toBe('Jan–Mar 2027');
    expect(plain(periodName('2026-Q1', 'quarter', 11, 'en-GB', 'axis'))).toBe('Nov–Jan');
    expect(plain(periodName('2026-Q1', 'quarter', 11, 'en-GB', 'short'))).toBe('Nov 2026–Jan 2027');
    expect(plain(periodName('2026', 'year', 1, 'en-GB', 'long'))).toBe('2026');
    expect(plain(periodName('2026', 'year', 4, 'en-GB', 'long'))).toBe('April 2026–March 2027');
    expect(plain(periodName('2026', 'year', 4, 'en-GB', 'axis'))).toBe('2026–2027');
  });

  it('names months, half-years and weeks', () => {
    expect(plain(periodName('2026-03', 'month', 1, 'en-GB', 'short'))).toBe('Mar 2026');
    expect(plain(periodName('2026-S1', 'half-year', 1, 'sv-SE', 'long'))).toBe('januari–juni 2026');
    expect(plain(periodName('2026-01-05', 'week', 1, 'en-GB', 'long'))).toBe('5–11 January 2026');
    expect(plain(periodName('2026-01-05', 'four-weeks', 1, 'de-DE', 'long'))).toBe('5 Januar–1 Februar 2026');
    expect(plain(periodName('2026-01-05', 'week', 1, 'en-GB', 'axis'))).toBe('5 Jan');
  });

  it('names places in the reporting year', () => {
    expect(plain(positionName(3, 'quarter', 1, 'en-GB'))).toBe('July–September');
    expect(plain(positionName(1, 'quarter', 11, 'de-DE'))).toBe('November–Januar');
    expect(plain(positionName(10, 'month', 4, 'en-GB'))).toBe('January');
    expect(plain(positionName(2, 'half-year', 7, 'sv-SE'))).toBe('januari–juni');
    expect(plain(positionName(2, 'week', 1, 'en-GB'))).toBe('8–14 January');
  });

  it('keeps to the Gregorian months and year in a locale that prefers another calendar', () => {
    expect(periodName('2026-Q4', 'quarter', 1, 'th-TH', 'short')).toContain('2026');
    expect(periodName('2026-Q4', 'quarter', 1, 'th-TH-u-ca-buddhist', 'short')).toContain('2026');
    // Japanese adds the years to a range of months that crosses them, unless it is kept from it.
    expect(periodName('2026-Q1', 'quarter', 11, 'ja-JP', 'axis')).not.toMatch(/20\d\d/);
  });

  it('gives every kind of period a name in every style and in scripts of all kinds', () => {
    for (const locale of ['en-GB', 'de-DE', 'ar-EG', 'fa-IR', 'ja-JP', 'hi-IN', 'sr-Cyrl', 'pt-BR'])
      for (const every of everies)
        for (const style of ['axis', 'short', 'long'] as const)
          expect(periodName(sample[every], every, 4, locale, style).length).toBeGreaterThan(0);
  });
});
