/** What a row of paths amounts to: its mean, its middle and its ranges; and the sum of several rows. */
import { mean, quantile } from '../stats/sample.js';

export const PATHS = 10_000;

/** A sum over steps ahead (0 is the first), with what has already happened of it. */
export interface Span {
  readonly kind: 'ahead' | 'year-ahead' | 'reporting-year';
  readonly year: number | null;
  readonly known: number;
  readonly steps: readonly number[];
}

export interface Expectation {
  readonly expected: number;
  readonly middle: number;
  readonly range80: [number, number];
  readonly range95: [number, number];
}

/** A span's sum on each path of a matrix of steps by PATHS. */
export function summed(matrix: Float64Array, { known, steps }: Span): Float64Array {
  const total = new Float64Array(PATHS).fill(known);
  for (const h of steps) for (let i = 0; i < PATHS; i++) total[i] += matrix[h * PATHS + i];
  return total;
}

/** Mean, median and ranges of one row of paths, the smallest first. */
export function expectation(sorted: Float64Array): Expectation {
  const at = (level: number) => quantile(sorted, level);
  return {
    expected: mean(sorted),
    middle: at(0.5),
    range80: [at(0.1), at(0.9)],
    range95: [at(0.025), at(0.975)],
  };
}
