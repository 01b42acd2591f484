/** How many whole packs an order may have. */
import type { OrderRequest } from './request.js';

export type Bound = 'at-least' | 'at-most' | 'spend-at-most';

export interface PackBounds {
  readonly fewest: number;
  /** Infinity where nothing bounds it. */
  readonly most: number;
  /** The bound from which `most` comes. */
  readonly mostBy: 'at-most' | 'spend-at-most';
}

/** Throws an Error where no whole number of packs keeps to all bounds. */
export function packBounds({ pack, unitCost, atLeast, atMost, spendAtMost }: OrderRequest): PackBounds {
  if (atLeast !== null && atMost !== null && atLeast > atMost)
    throw new Error(`the least to order, ${atLeast}, is above the most to order, ${atMost}; change one of them`);
  const fewest = atLeast === null ? 0 : Math.ceil(packsIn(atLeast, pack, -ROUNDING));
  const byUnits = atMost === null ? Number.POSITIVE_INFINITY : Math.floor(packsIn(atMost, pack, ROUNDING));
  const packCost = (unitCost ?? 0) * pack;
  const bySpend =
    spendAtMost === null || packCost === 0
      ? Number.POSITIVE_INFINITY
      : Math.floor(packsIn(spendAtMost, packCost, ROUNDING));
  if (fewest > byUnits)
    throw new Error(
      `no whole number of packs of ${pack} lies from ${atLeast ?? 0} to ${atMost}; change the least, the most or the pack`,
    );
  if (fewest > bySpend)
    throw new Error(
      `the most to spend, ${spendAtMost}, does not pay for the least to order: ${atLeast} units are ${fewest} packs of ` +
        `${pack} at ${unitCost} a unit, ${fewest * packCost} in all; allow more or order less`,
    );
  return bySpend < byUnits
    ? { fewest, most: bySpend, mostBy: 'spend-at-most' }
    : { fewest, most: byUnits, mostBy: 'at-most' };
}

/** The number of packs nearest to `packs` that keeps to the bounds, and the bound that holds it there. */
export function heldWithin(packs: number, { fewest, most, mostBy }: PackBounds): { packs: number; by: Bound | null } {
  if (packs < fewest) return { packs: fewest, by: 'at-least' };
  if (packs > most) return { packs: most, by: mostBy };
  return { packs, by: null };
}

/** 0.3 holds three packs of 0.1, although the division falls short of 3 by a rounding. */
const ROUNDING = 1e-12;

const packsIn = (quantity: number, pack: number, leeway: number): number => (quantity / pack) * (1 + leeway);
