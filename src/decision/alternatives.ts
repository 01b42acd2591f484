/** Which orders to show beside the best: a few for a table, many for a curve. */

import { quantile } from '../stats/sample.js';
import type { PackBounds } from './bounds.js';

const SIDE = 3;
const FEWEST = 5;

/**
 * 5 to 7 numbers of packs in ascending order: the best and its neighbours, a round number of packs (1, 2 or 5 with
 * noughts) apart, so that they span about `width` packs. A bound on the way is shown too; beyond the bounds they go only
 * where fewer than 5 whole packs lie within.
 */
export function nearbyPacks(best: number, width: number, { fewest, most }: PackBounds): number[] {
  const roomy = most - fewest >= FEWEST - 1;
  const [from, to] = roomy ? [fewest, most] : [0, Number.POSITIVE_INFINITY];
  const apart = roundDown(Math.min(width / (2 * SIDE), (to - from) / (FEWEST - 1)));
  const rungs = (bound: number, direction: number): number[] => {
    const reach = Math.min(Math.ceil(Math.abs(bound - best) / apart), FEWEST - 1);
    return Array.from({ length: reach }, (_, i) =>
      direction < 0 ? Math.max(best - (i + 1) * apart, bound) : Math.min(best + (i + 1) * apart, bound),
    );
  };
  const [below, above] = [rungs(from, -1), rungs(to, 1)];
  const shown = (side: number[], other: number[]) => side.slice(0, Math.max(SIDE, FEWEST - 1 - other.length));
  return [...shown(below, above).reverse(), best, ...shown(above, below)];
}

/** The largest of 1, 2, 5, 10, 20, … that is not above x; 1 below that. */
function roundDown(x: number): number {
  const power = 10 ** Math.floor(Math.log10(Math.max(x, 1)));
  return power * (x >= 5 * power ? 5 : x >= 2 * power ? 2 : 1);
}

const POINTS = 60;

/** How far a curve goes on beyond what it must show, as a share of that. */
const MARGIN = 0.25;

/**
 * Units in ascending order, evenly apart and the best among them, from before to after all that is shown and nearly all
 * that is needed, so that the result is seen to fall on both sides. `need` in ascending order.
 */
export function curveUnits(best: number, shown: readonly number[], need: Float64Array): number[] {
  const low = Math.min(...shown, quantile(need, 0.01));
  const high = Math.max(...shown, quantile(need, 0.99));
  const start = Math.max(low - MARGIN * (high - low), 0);
  const end = high + MARGIN * (high - low);
  const even = Array.from({ length: POINTS }, (_, i) => start + ((end - start) * i) / (POINTS - 1));
  return [...new Set([...even, best])].sort((a, b) => a - b);
}
