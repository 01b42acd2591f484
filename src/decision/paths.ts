/** Joint paths as this room reads them: sums over steps and shares. */

export interface Paths {
  /** In the user's units or in money, ahead by count, row by row. */
  readonly matrix: Float64Array;
  readonly count: number;
}

/** How many steps ahead the paths reach. Throws where the matrix is not made of whole rows of finite numbers. */
export function aheadOf({ matrix, count }: Paths): number {
  const ahead = matrix.length / count;
  if (!(count > 0 && ahead > 0 && Number.isInteger(ahead)))
    throw new Error(`${matrix.length} figures are not whole rows of ${count} paths`);
  const odd = matrix.findIndex((value) => !Number.isFinite(value));
  if (odd !== -1)
    throw new Error(`path ${(odd % count) + 1} has ${matrix[odd]} at step ${Math.floor(odd / count) + 1} ahead`);
  return ahead;
}

/** Each path's sum over some steps (0 is the first), on top of what is known. */
export function summed({ matrix, count }: Paths, steps: readonly number[], known = 0): Float64Array {
  const total = new Float64Array(count).fill(known);
  for (const h of steps) for (let i = 0; i < count; i++) total[i] += matrix[h * count + i];
  return total;
}

/** The share of paths of which something holds. */
export function share(values: Float64Array, holds: (value: number) => boolean): number {
  let found = 0;
  for (const value of values) if (holds(value)) found++;
  return found / values.length;
}
