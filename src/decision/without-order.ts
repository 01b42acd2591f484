/** How each path of demand runs with the stock in hand and what is on order, and without the order to be decided. */
import type { OrderRequest } from './request.js';

/** One value a path, in the user's units. */
export interface Passage {
  readonly demand: Float64Array;
  readonly lost: Float64Array;
}

export interface WithoutOrder {
  /** The steps before the order's arrival. */
  readonly before: Passage;
  /** The steps that it covers. */
  readonly covered: Passage;
  /** Stock at the order's arrival, with what has arrived before it or with it. */
  readonly atArrival: Float64Array;
  /** Stock at the end of the steps covered. */
  readonly left: Float64Array;
  /** What the order is needed for: the sales lost in the steps covered, in ascending order. */
  readonly need: Float64Array;
}

/**
 * Step by step: what arrives is there when the step starts, sales are the lesser of stock and demand, demand beyond stock
 * is lost. What is on order for after the steps covered plays no part.
 */
export function withoutOrder(request: OrderRequest): WithoutOrder {
  const { paths, covers, arrives, inStock, onOrder, onOrderArrives } = request;
  const { matrix, count } = paths;
  const passage = (): Passage => ({ demand: new Float64Array(count), lost: new Float64Array(count) });
  const [before, covered] = [passage(), passage()];
  const stock = new Float64Array(count).fill(inStock);
  const atArrival = new Float64Array(count);
  for (let h = 0; h < arrives + covers; h++) {
    if (h === onOrderArrives) for (let i = 0; i < count; i++) stock[i] += onOrder;
    if (h === arrives) atArrival.set(stock);
    const { demand, lost } = h < arrives ? before : covered;
    for (let i = 0; i < count; i++) {
      const wanted = matrix[h * count + i];
      const sold = Math.min(stock[i], wanted);
      stock[i] -= sold;
      demand[i] += wanted;
      lost[i] += wanted - sold;
    }
  }
  return { before, covered, atArrival, left: stock, need: covered.lost.toSorted() };
}
