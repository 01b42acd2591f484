/**
 * Money as a budget prints it, by page 1's rule: rounded to the largest power of ten that is not above a tenth of the
 * narrowest range, and never finer than the currency. What is expected of all periods is the sum of the printed rows.
 */
import { decimal, roundTo, sum, toNumber } from './decimals.js';
import { placesFor } from './printed.js';

export interface MoneyRange {
  readonly low: number;
  readonly expected: number;
  readonly high: number;
}

export interface PrintedMoney {
  /** Decimal places shown. */
  readonly places: number;
  readonly periods: readonly MoneyRange[];
  readonly totals: readonly MoneyRange[];
}

/** `isAll` tells for each total whether it is that of all the periods. `places` are the currency's. */
export function printedMoney(
  periods: readonly MoneyRange[],
  totals: readonly (MoneyRange & { readonly isAll: boolean })[],
  places: number,
): PrintedMoney {
  const rowPlaces = placesFor(Math.min(...periods.map(width)), places);
  const shown = Math.max(rowPlaces, 0);
  const rounded = ({ low, expected, high }: MoneyRange, to: number): MoneyRange => ({
    low: roundTo(low, to),
    expected: roundTo(expected, to),
    high: roundTo(high, to),
  });
  const rows = periods.map((period) => rounded(period, rowPlaces));
  const summed = toNumber(sum(rows.map(({ expected }) => decimal(expected, shown))));
  return {
    places: shown,
    periods: rows,
    totals: totals.map((total) => {
      const own = rounded(total, Math.min(placesFor(width(total), places), rowPlaces));
      return total.isAll ? { ...own, expected: summed } : { ...own, expected: roundTo(total.expected, rowPlaces) };
    }),
  };
}

const width = ({ low, high }: MoneyRange): number => high - low;
