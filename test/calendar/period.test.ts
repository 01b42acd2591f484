import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dateText, dayOf, isDate } from '../../src/calendar/dates.js';
import { type Every, everies, seasonOf } from '../../src/calendar/every.js';
import {
  isPeriod,
  kindsOf,
  periodHolding,
  periodIndex,
  periodText,
  position,
  spanOf,
  yearOf,
} from '../../src/calendar/period.js';

const anyDay = fc.integer({ min: dayOf('1000-01-01') + 400, max: dayOf('9890-12-31') });
const anyEvery = fc.constantFrom(...everies);
const anyStart = fc.integer({ min: 1, max: 12 });

describe('dates', () => {
  it('knows which dates are real', () => {
    // Leap years of the Gregorian calendar: by 4, not by 100, but by 400.
    expect(['2024-02-29', '2000-02-29', '2023-12-31'].map(isDate)).toEqual([true, true, true]);
    expect(
      ['2023-02-29', '1900-02-29', '2024-04-31', '2024-13-01', '2024-00-10', '2024-1-1', '20240101', ''].map(isDate),
    ).toEqual(new Array(8).fill(false));
  });

  it('counts days, and goes back', () => {
    expect(dayOf('1970-01-01')).toBe(0);
    // POSIX time of 2000-01-01T00:00:00Z is 946 684 800 seconds.
    expect(dayOf('2000-01-01') * 86_400).toBe(946_684_800);
    fc.assert(fc.property(anyDay, (day) => dayOf(dateText(day)) === day));
  });

  it('refuses what is no date, saying what stands there', () => {
    expect(() => dayOf('31/03/2024')).toThrow('"31/03/2024" is no date');
  });
});

describe('periods', () => {
  it('goes from text to index and back, one index a period', () => {
    fc.assert(
      fc.property(anyDay, anyEvery, anyStart, (day, every, yearStarts) => {
        const text = periodHolding(dateText(day), every, yearStarts);
        const index = periodIndex(text, every);
        expect(periodText(index, every)).toBe(text);
        expect(periodIndex(periodText(index + 1, every), every)).toBe(index + 1);
      }),
    );
  });

  it('lays consecutive periods end to end, each holding its own days', () => {
    fc.assert(
      fc.property(anyDay, anyEvery, anyStart, (day, every, yearStarts) => {
        const text = periodHolding(dateText(day), every, yearStarts);
        const { from, to } = spanOf(text, every, yearStarts);
        const next = periodText(periodIndex(text, every) + 1, every);
        expect(dayOf(spanOf(next, every, yearStarts).from)).toBe(dayOf(to) + 1);
        expect(dayOf(from) <= day && day <= dayOf(to)).toBe(true);
        if (every !== 'week' && every !== 'four-weeks') {
          expect(periodHolding(from, every, yearStarts)).toBe(text);
          expect(periodHolding(to, every, yearStarts)).toBe(text);
        }
      }),
    );
  });

  it('fills a reporting year with positions 1 to m, starting in its first month', () => {
    fc.assert(
      fc.property(
        anyDay,
        fc.constantFrom<Every>('month', 'quarter', 'half-year', 'year'),
        anyStart,
        (day, every, yearStarts) => {
          const index = periodIndex(periodHolding(dateText(day), every, yearStarts), every);
          const start = index - position(index, every, yearStarts) + 1;
          const year = yearOf(index, every, yearStarts);
          const m = seasonOf(every);
          for (let k = 0; k < m; k++) {
            expect(position(start + k, every, yearStarts)).toBe(k + 1);
            expect(yearOf(start + k, every, yearStarts)).toBe(year);
          }
          expect(yearOf(start + m, every, yearStarts)).toBe(year + 1);
          const month = String(yearStarts).padStart(2, '0');
          expect(spanOf(periodText(start, every), every, yearStarts).from).toBe(`${year}-${month}-01`);
        },
      ),
    );
  });

  it('keeps weeks of one phase consecutive and those of another apart', () => {
    expect(periodIndex('2024-01-08', 'week') - periodIndex('2024-01-01', 'week')).toBe(1);
    expect(periodIndex('2025-01-06', 'four-weeks') - periodIndex('2024-01-08', 'four-weeks')).toBe(13);
    expect(Math.abs(periodIndex('2024-01-09', 'week') - periodIndex('2024-01-08', 'week'))).toBeGreaterThan(1000);
  });

  it('places weeks in the reporting year', () => {
    const at = (date: string) => position(periodIndex(date, 'week'), 'week', 1);
    expect(['2024-01-01', '2024-01-08', '2024-12-23', '2024-12-30'].map(at)).toEqual([1, 2, 52, 52]);
    expect(yearOf(periodIndex('2024-12-30', 'week'), 'week', 1)).toBe(2024);
    expect(yearOf(periodIndex('2024-03-25', 'week'), 'week', 4)).toBe(2023);
    expect(position(periodIndex('2024-04-01', 'week'), 'week', 4)).toBe(1);
  });

  it('counts quarters of a reporting year from the year it starts in', () => {
    // SDMX 2.1: 2024-Q1 with a reporting year that starts in April is April to June 2024.
    expect(spanOf('2024-Q1', 'quarter', 4)).toEqual({ from: '2024-04-01', to: '2024-06-30' });
    expect(spanOf('2024-Q4', 'quarter', 4)).toEqual({ from: '2025-01-01', to: '2025-03-31' });
    expect(spanOf('2024', 'year', 10)).toEqual({ from: '2024-10-01', to: '2025-09-30' });
    expect(spanOf('2024-S2', 'half-year', 7)).toEqual({ from: '2025-01-01', to: '2025-06-30' });
    expect(spanOf('2024-02', 'month', 4)).toEqual({ from: '2024-02-01', to: '2024-02-29' });
    expect(periodHolding('2025-03-31', 'quarter', 4)).toBe('2024-Q4');
    expect(periodHolding('2025-03-31', 'month', 4)).toBe('2025-03');
  });

  it('tells the kinds of period that a text can stand for', () => {
    expect(kindsOf('2024-Q3')).toEqual(['quarter']);
    expect(kindsOf('2024-03')).toEqual(['month']);
    expect(kindsOf('2024-S2')).toEqual(['half-year']);
    expect(kindsOf('2024')).toEqual(['year']);
    expect(kindsOf('2024-01-29')).toEqual(['week', 'four-weeks']);
    for (const text of [
      '2024-Q5',
      '2024-q1',
      '2024-13',
      '2024-S3',
      'Q1 2024',
      ' 2024',
      '2024-1',
      '0024',
      '9999',
      '2024-02-30',
      '',
    ])
      expect(kindsOf(text)).toEqual([]);
    expect(isPeriod('2024-Q1', 'month')).toBe(false);
  });

  it('refuses text that is no such period, saying what stands there and how to write it', () => {
    expect(() => periodIndex('2024-03', 'quarter')).toThrow('"2024-03" is not a quarter, such as 2024-Q1');
    expect(() => periodIndex('2024-Q1', 'week')).toThrow('"2024-Q1" is no date');
  });
});
