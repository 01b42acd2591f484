/** Means, quantiles and ranks of a sample. */

/** Of values in ascending order: the k-th smallest of N stands at level (k − ½)/N, in straight lines between. */
export function quantile(sorted: Float64Array, level: number): number {
  const last = sorted.length - 1;
  const place = Math.min(Math.max(level * sorted.length - 0.5, 0), last);
  const below = Math.floor(place);
  return sorted[below] + (place - below) * (sorted[Math.min(below + 1, last)] - sorted[below]);
}

/** Summed in pairs from both ends, so that what mirrors about the centre cancels exactly. */
export function mean(values: Float64Array): number {
  const last = values.length - 1;
  let sum = last % 2 === 0 ? values[last / 2] : 0;
  for (let i = 0, j = last; i < j; i++, j--) sum += values[i] + values[j];
  return sum / values.length;
}

/** Bits of a double's whole numbers that a value and its place share. */
const BITS = 52;

/**
 * Where the smallest value stands, the second smallest, …; of equal ones the earlier first. Values are told apart to
 * what a place leaves of 52 bits of their span: sorted as one whole number with the place behind it they are in order
 * many times sooner than by comparing.
 */
export function ascending(values: Float64Array): Uint32Array {
  let [least, most] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < least) least = value;
    if (value > most) most = value;
  }
  const placeBits = Math.ceil(Math.log2(Math.max(values.length, 2)));
  const room = 2 ** placeBits;
  const fineness = most > least ? 2 ** (BITS - placeBits) / (most - least) : 0;
  const keys = values.map((value, i) => Math.round((value - least) * fineness) * room + i).sort();
  const order = new Uint32Array(keys.length);
  for (let k = 0; k < order.length; k++) order[k] = keys[k] % room;
  return order;
}
