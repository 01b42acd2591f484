/** A planner's judgement on an outlook: stated changes to some steps, made on every path, whatever the figures say. */
import { expectation, PATHS, summed } from './expectation.js';
import type { Outlook } from './outlook.js';

/** A change to the steps from `from` up to and with `to`: 8 per cent more, or 40 units more in each. */
export interface StatedChange {
  readonly from: number;
  readonly to: number;
  readonly kind: 'percent' | 'amount';
  readonly value: number;
}

/**
 * The outlook with the changes made one after another. Ranges move with the middle: a change in per cent widens them by
 * as much, an amount leaves their width. Paths that are held at zero stay there or above.
 */
export function judged(outlook: Outlook, changes: readonly StatedChange[]): Outlook {
  const matrix = Float64Array.from(outlook.matrix);
  const floor = outlook.heldAtZero ? 0 : Number.NEGATIVE_INFINITY;
  const periods = outlook.periods.map((period, step) => {
    const own = changes.filter(({ from, to }) => step >= from && step <= to);
    if (own.length === 0) return period;
    const change = (value: number) => Math.max(own.reduce(changed, value), floor);
    const row = matrix.subarray(step * PATHS, (step + 1) * PATHS);
    row.forEach((value, path) => {
      row[path] = change(value);
    });
    return { ...period, ...expectation(row.toSorted()), middle: change(period.middle) };
  });
  const totals = outlook.totals.map((total) => ({ ...total, ...expectation(summed(matrix, total).sort()) }));
  return { ...outlook, matrix, periods, totals };
}

const changed = (value: number, { kind, value: by }: StatedChange): number =>
  kind === 'percent' ? value * (1 + by / 100) : value + by;
