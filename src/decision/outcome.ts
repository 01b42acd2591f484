/**
 * What to expect of an order of any size.
 *
 * With Dₜ the demand and Rₜ the arrivals summed over the covered steps up to t, and S the stock at the order's arrival,
 * the sales lost up to t are the highest that Dᵤ − Rᵤ − S has stood above zero at any u up to t: stock is held at zero
 * from below (Skorokhod, Theory of Probability and its Applications 6, 1961). An order Q adds to S. So a path that loses
 * `need` sales without an order loses max(need − Q, 0) with it, and the rest of the order, max(Q − need, 0), is left over
 * beside what was left without it. However many the steps and arrivals, this is the problem of a single season (Arrow,
 * Harris & Marschak, Econometrica 19, 1951) with need in the place of demand: the expected result is concave in Q.
 */

import { mean } from '../stats/sample.js';
import { firstWhere } from './first-where.js';
import type { OrderRequest } from './request.js';
import type { WithoutOrder } from './without-order.js';

/** Units, and money; over the steps covered unless it says otherwise. */
export interface OrderOutcome {
  /** Not whole where a decided order isn't. */
  readonly packs: number;
  readonly units: number;
  /** Null where the unit cost isn't known. */
  readonly cost: number | null;
  /** Expected; sales and lost add up to the demand. */
  readonly sales: number;
  readonly leftOver: number;
  readonly lost: number;
  /**
   * Expected: sales at their price and what is left over at its value, less the order's cost and the goodwill lost, from
   * now to the end of the steps covered. Null where the aim is a chance.
   */
  readonly result: number | null;
  /** Shares of paths that lose sales, and that have anything left over. */
  readonly chanceShort: number;
  readonly chanceLeft: number;
}

/** The outcome of an order of so many units: one sort, and then a search an order. */
export function outcomes(standing: WithoutOrder, request: OrderRequest): (units: number) => OrderOutcome {
  const { before, covered, left, need } = standing;
  const { aim, pack, unitCost } = request;
  const count = need.length;
  const soldOut = covered.lost.filter((_, i) => left[i] === 0).sort();
  const from = sumsFrom(need);
  const expected = {
    need: from[0] / count,
    demand: mean(covered.demand),
    left: mean(left),
    lostBefore: mean(before.lost),
    soldBefore: mean(before.demand) - mean(before.lost),
  };
  return (units) => {
    const met = firstWhere(count, (i) => need[i] > units);
    const lost = Math.max((from[met] - units * (count - met)) / count, 0);
    const sales = expected.demand - lost;
    const leftOver = expected.left + units - (expected.need - lost);
    const cost = unitCost === null ? null : unitCost * units;
    const stillSoldOut = soldOut.length - firstWhere(soldOut.length, (i) => soldOut[i] >= units);
    return {
      packs: units / pack,
      units,
      cost,
      sales,
      leftOver,
      lost,
      result:
        aim.kind === 'costs' && cost !== null
          ? aim.unitPrice * (expected.soldBefore + sales) +
            aim.leftoverValue * leftOver -
            cost -
            aim.goodwill * (expected.lostBefore + lost)
          : null,
      chanceShort: (count - met) / count,
      chanceLeft: (count - stillSoldOut) / count,
    };
  };
}

/** The sums of the i-th value and all after it, for i from 0 to their number. */
function sumsFrom(values: Float64Array): Float64Array {
  const sums = new Float64Array(values.length + 1);
  for (let i = values.length - 1; i >= 0; i--) sums[i] = sums[i + 1] + values[i];
  return sums;
}
