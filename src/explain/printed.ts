/**
 * The numbers as page 1 prints them.
 *
 * The rule: a number is rounded to the largest power of ten that is not above a tenth of the narrowest 8-in-10 range
 * beside it, and never finer than the plan's decimal places. It is rounded to those places first, as the worked sum
 * prints it, so that a reader who rounds on from there gets the same. The total's expected value is the sum of the
 * printed rows, and the answer is that sum, rounded on by the total's own range. Changes are in whole per cent of the
 * printed numbers. Figures of the year before are known, and stand as they were, to the plan's decimal places.
 */
import type { Outlook } from '../outlook/outlook.js';
import { decimal, roundTo, sum, toNumber } from './decimals.js';

export interface PrintedRow {
  readonly expected: number;
  readonly range80: [number, number];
  readonly range95: [number, number];
  readonly lastYear: number | null;
  readonly change: number | null;
}

export interface Printed {
  readonly places: number;
  readonly step: number;
  readonly periods: readonly PrintedRow[];
  /** One for each of the outlook's totals by the year ahead; theirs add up to the total. */
  readonly years: readonly PrintedRow[];
  readonly total: PrintedRow;
  readonly answer: {
    readonly places: number;
    readonly step: number;
    readonly expected: number;
    readonly range80: [number, number];
    readonly lastYear: number | null;
    readonly change: number | null;
  };
}

/** `lastYears`: for each period ahead the figure a year before, null where missing or itself ahead. */
export function printedNumbers(outlook: Outlook, places: number, lastYears: readonly (number | null)[]): Printed {
  const total = outlook.totals[0];
  const round = (number: number, to: number) => roundTo(roundTo(number, places), to);
  const both = ([low, high]: readonly [number, number], to: number): [number, number] => [
    round(low, to),
    round(high, to),
  ];
  const rowPlaces = placesFor(Math.min(...outlook.periods.map(({ range80 }) => width(range80))), places);
  const shownPlaces = Math.max(rowPlaces, 0);
  const row = (numbers: Omit<PrintedRow, 'lastYear' | 'change'>, before: number | null): PrintedRow => {
    const lastYear = before === null ? null : roundTo(before, places);
    return { ...numbers, lastYear, change: change(numbers.expected, lastYear) };
  };
  const periods = outlook.periods.map((period, h) =>
    row(
      {
        expected: round(period.expected, rowPlaces),
        range80: both(period.range80, rowPlaces),
        range95: both(period.range95, rowPlaces),
      },
      lastYears[h],
    ),
  );
  const sumOf = (numbers: readonly number[], to: number) => toNumber(sum(numbers.map((number) => decimal(number, to))));
  const beforeOf = (steps: readonly number[]) => {
    const known = steps.flatMap((step) => lastYears[step] ?? []);
    return known.length === steps.length ? sumOf(known, places) : null;
  };
  const summedOf = (steps: readonly number[]) =>
    sumOf(
      steps.map((step) => periods[step].expected),
      shownPlaces,
    );
  const summary = ({ steps, range80, range95 }: Outlook['totals'][number]) => {
    const to = Math.min(placesFor(width(range80), places), rowPlaces);
    return row({ expected: summedOf(steps), range80: both(range80, to), range95: both(range95, to) }, beforeOf(steps));
  };
  const before = beforeOf(total.steps);
  const summed = summedOf(total.steps);
  const totalPlaces = Math.min(placesFor(width(total.range80), places), rowPlaces);
  return {
    places: shownPlaces,
    step: 10 ** -rowPlaces,
    periods,
    years: outlook.totals.filter(({ kind }) => kind === 'year-ahead').map(summary),
    total: summary(total),
    answer: {
      places: Math.max(totalPlaces, 0),
      step: 10 ** -totalPlaces,
      expected: roundTo(summed, totalPlaces),
      range80: both(total.range80, totalPlaces),
      lastYear: before,
      change: change(summed, before),
    },
  };
}

const width = ([low, high]: readonly [number, number]): number => high - low;

/** Decimal places (negative: tens, hundreds) that a range of this width warrants, `most` at the finest. */
export function placesFor(range: number, most: number): number {
  if (!(range > 0)) return most;
  return Math.min(-Math.floor(Math.log10(range / 10) + 1e-12), most);
}

function change(now: number, before: number | null): number | null {
  if (before === null || !(before > 0)) return null;
  return roundTo((100 * (now - before)) / before, 0);
}
