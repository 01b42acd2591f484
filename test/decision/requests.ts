/** Requests for tests, and the same decided the long way: every order walked step by step along every path. */
import type { OrderRequest } from '../../src/decision/request.js';
import { normalQuantile } from '../../src/stats/normal.js';

/** Each level (k − ½)/N of a distribution once, as a single step. */
export const levels = (quantile: (p: number) => number, count = 10_000) => ({
  matrix: Float64Array.from({ length: count }, (_, k) => quantile((k + 0.5) / count)),
  count,
});

export const normal = (mean: number, spread: number) => levels((p) => mean + spread * normalQuantile(p));

/** One step a row. */
export const rows = (...steps: number[][]) => ({ matrix: Float64Array.from(steps.flat()), count: steps[0].length });

/** An order for one step, there at once, with nothing in stock and no bounds. */
export const request = (changes: Partial<OrderRequest>): OrderRequest => ({
  paths: rows([1, 2, 3, 4]),
  covers: 1,
  arrives: 0,
  inStock: 0,
  onOrder: 0,
  onOrderArrives: 0,
  pack: 1,
  unitCost: 3,
  atLeast: null,
  atMost: null,
  spendAtMost: null,
  aim: { kind: 'costs', unitPrice: 5, leftoverValue: 1, goodwill: 0 },
  decided: null,
  ...changes,
});

export interface Walked {
  readonly result: number;
  readonly sales: number;
  readonly leftOver: number;
  readonly lost: number;
  readonly pathsShort: number;
  readonly pathsLeft: number;
}

/** Sums over the paths, `result` in the costs' money and the rest over the steps covered. */
export function walk(request: OrderRequest, units: number): Walked {
  const { paths, covers, arrives, inStock, onOrder, onOrderArrives, unitCost, aim } = request;
  const sums = { result: 0, sales: 0, leftOver: 0, lost: 0, pathsShort: 0, pathsLeft: 0 };
  for (let i = 0; i < paths.count; i++) {
    let [stock, sold, soldCovered, lost, lostCovered] = [inStock, 0, 0, 0, 0];
    for (let h = 0; h < arrives + covers; h++) {
      if (h === onOrderArrives) stock += onOrder;
      if (h === arrives) stock += units;
      const demand = paths.matrix[h * paths.count + i];
      const sales = Math.min(stock, demand);
      stock -= sales;
      sold += sales;
      lost += demand - sales;
      if (h >= arrives) {
        soldCovered += sales;
        lostCovered += demand - sales;
      }
    }
    if (aim.kind === 'costs')
      sums.result += aim.unitPrice * sold + aim.leftoverValue * stock - (unitCost ?? 0) * units - aim.goodwill * lost;
    sums.sales += soldCovered;
    sums.leftOver += stock;
    sums.lost += lostCovered;
    if (lostCovered > 0) sums.pathsShort++;
    if (stock > 0) sums.pathsLeft++;
  }
  return sums;
}
