/**
 * The season's order, from the joint paths of demand.
 *
 *   what happens without it -> the best number of packs -> held within the bounds -> what to expect of it and its neighbours
 */

import { mean, quantile } from '../stats/sample.js';
import { curveUnits, nearbyPacks } from './alternatives.js';
import { type Bound, heldWithin, packBounds } from './bounds.js';
import { firstWhere } from './first-where.js';
import { type OrderOutcome, outcomes } from './outcome.js';
import { share } from './paths.js';
import { type Goal, goalOf, type OrderRequest } from './request.js';
import { type WithoutOrder, withoutOrder } from './without-order.js';

export interface CoveredDemand {
  readonly expected: number;
  readonly middle: number;
  readonly range80: readonly [number, number];
  /** Its quantile at the critical ratio, or at the stated chance. */
  readonly target: number;
}

/** Expected units, and the chance of losing sales, before the order arrives. */
export interface BeforeArrival {
  readonly demand: number;
  readonly lost: number;
  readonly chanceShort: number;
}

/** A point of the curve over orders of any size; `result` as in an outcome. */
export interface OrderPoint {
  readonly units: number;
  readonly result: number | null;
  readonly chanceShort: number;
}

export interface OrderDecision {
  /** Money a unit, Cu and Co, and the critical ratio Cu/(Cu + Co); null where the aim is a chance. */
  readonly shortCost: number | null;
  readonly leftOverCost: number | null;
  readonly ratio: number | null;
  /** Over the steps covered, stock or no stock. */
  readonly demand: CoveredDemand;
  /** Null where the order is there at once. */
  readonly beforeArrival: BeforeArrival | null;
  /** Expected, with what has arrived before the order or with it. */
  readonly stockAtArrival: number;
  readonly best: OrderOutcome;
  /** The best if nothing were said about the least, the most or the spending. */
  readonly unbound: OrderOutcome;
  /** The bound that keeps `best` from `unbound`. */
  readonly heldBy: Bound | null;
  readonly decided: OrderOutcome | null;
  /** 5 to 7 orders in ascending order, the best among them. */
  readonly nearby: readonly OrderOutcome[];
  /** About 60 points in ascending order, the best among them; not held to whole packs or bounds. */
  readonly curve: readonly OrderPoint[];
}

/**
 * The whole packs within the bounds that have the best expected result over the paths (of equals the fewest), or the
 * fewest that keep to the stated chance; the most allowed where the bounds don't let them.
 *
 * Throws an Error where the request can't be decided.
 */
export function decideOrder(request: OrderRequest): OrderDecision {
  const goal = goalOf(request);
  const bounds = packBounds(request);
  const { arrives, pack, decided } = request;
  const standing = withoutOrder(request);
  const outcomeOf = outcomes(standing, request);
  const ofPacks = (packs: number): OrderOutcome => ({ ...outcomeOf(packs * pack), packs });
  const demand = coveredDemand(standing, goal);
  const unbound = ofPacks(bestPacks(standing.need, pack, goal));
  const { packs, by: heldBy } = heldWithin(unbound.packs, bounds);
  const best = ofPacks(packs);
  const nearby = nearbyPacks(packs, (demand.range80[1] - demand.range80[0]) / pack, bounds).map(ofPacks);
  const shown = [unbound, ...nearby].map(({ units }) => units).concat(decided ?? []);
  return {
    shortCost: goal.costs?.short ?? null,
    leftOverCost: goal.costs?.leftOver ?? null,
    ratio: goal.costs && goal.level,
    demand,
    beforeArrival: arrives === 0 ? null : beforeArrival(standing),
    stockAtArrival: mean(standing.atArrival),
    best,
    unbound,
    heldBy,
    decided: decided === null ? null : outcomeOf(decided),
    nearby,
    curve: curveUnits(best.units, shown, standing.need).map((units) => {
      const { result, chanceShort } = outcomeOf(units);
      return { units, result, chanceShort };
    }),
  };
}

function coveredDemand({ covered }: WithoutOrder, { level }: Goal): CoveredDemand {
  const sorted = covered.demand.toSorted();
  return {
    expected: mean(sorted),
    middle: quantile(sorted, 0.5),
    range80: [quantile(sorted, 0.1), quantile(sorted, 0.9)],
    target: quantile(sorted, level),
  };
}

/** Shares within this of each other differ by rounding alone. */
const ROUNDING = 1e-12;

/**
 * The fewest packs whose risk is at most 1 − level. In a stated chance the risk is running short. In costs it is the
 * share of one pack more that would be sold: that pack is worth having while it exceeds Co/(Cu + Co) = 1 − level. Both
 * fall as packs are added; so the first that will do is found by halving, and of equal results it is the fewest packs'.
 */
function bestPacks(need: Float64Array, pack: number, { costs, level }: Goal): number {
  const risk = costs === null ? chanceShort : shareSoldOfNext;
  const enough = Math.floor(need[need.length - 1] / pack) + 1;
  return firstWhere(enough, (packs) => risk(need, packs, pack) <= 1 - level + ROUNDING);
}

function chanceShort(need: Float64Array, packs: number, pack: number): number {
  return 1 - firstWhere(need.length, (i) => need[i] > packs * pack) / need.length;
}

/** Summed over the paths that the next pack falls short of, so that not even one unit is lost to rounding in ten million. */
function shareSoldOfNext(need: Float64Array, packs: number, pack: number): number {
  const [start, end] = [packs * pack, (packs + 1) * pack];
  let i = firstWhere(need.length, (at) => need[at] > start);
  let sold = 0;
  for (; i < need.length && need[i] < end; i++) sold += need[i] - start;
  return (sold / pack + need.length - i) / need.length;
}

function beforeArrival({ before }: WithoutOrder): BeforeArrival {
  return { demand: mean(before.demand), lost: mean(before.lost), chanceShort: share(before.lost, (lost) => lost > 0) };
}
