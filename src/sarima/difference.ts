/** Differencing a series and undoing it. */
import { differencePolynomial } from './polynomial.js';

/** ∇ᵈ∇ₘᴰ of a series: d + mD values fewer; a difference with a missing value in it is missing (NaN). */
export function difference(values: ArrayLike<number>, d: number, D: number, m: number): Float64Array {
  const result = Float64Array.from(values);
  let length = result.length;
  for (let i = 0; i < d; i++) length = differenceOnce(result, length, 1);
  for (let i = 0; i < D; i++) length = differenceOnce(result, length, m);
  return result.slice(0, Math.max(length, 0));
}

/** In place: the first `length − lag` values become xₜ − xₜ₋ₗₐ. */
function differenceOnce(values: Float64Array, length: number, lag: number): number {
  for (let t = lag; t < length; t++) values[t - lag] = values[t] - values[t - lag];
  return length - lag;
}

/**
 * Undoes `difference`: from the d + mD (or more) values that came before and the differences that follow them to the
 * values that follow.
 */
export function integrate(
  before: ArrayLike<number>,
  differences: ArrayLike<number>,
  d: number,
  D: number,
  m: number,
): Float64Array {
  const weights = differencePolynomial(d, D, m);
  const known = before.length;
  if (known < weights.length - 1)
    throw new Error(`integrating needs ${weights.length - 1} values that came before; there are ${known}`);
  const all = new Float64Array(known + differences.length);
  all.set(before);
  for (let h = 0; h < differences.length; h++) {
    let value = differences[h];
    for (let k = 1; k < weights.length; k++) if (weights[k] !== 0) value -= weights[k] * all[known + h - k];
    all[known + h] = value;
  }
  return all.slice(known);
}
