import { expect, test } from 'vitest';
import { aheadOf, share, summed } from '../../src/decision/paths.js';
import { rows } from './requests.js';

test('sums over steps, path by path, on top of what is known', () => {
  expect(Array.from(summed(rows([1, 2], [10, 20], [100, 200]), [0, 2], 0.5))).toEqual([101.5, 202.5]);
});

test('shares of paths', () => {
  expect(share(Float64Array.of(1, 2, 3), (value) => value > 1)).toBe(2 / 3);
});

test('rows that are not whole, and figures that are none', () => {
  expect(aheadOf(rows([1, 2], [3, 4], [5, 6]))).toBe(3);
  expect(() => aheadOf({ matrix: Float64Array.of(1, 2, 3), count: 2 })).toThrow(
    '3 figures are not whole rows of 2 paths',
  );
  expect(() => aheadOf({ matrix: new Float64Array(), count: 2 })).toThrow('0 figures');
  expect(() => aheadOf(rows([1, 2], [3, Number.POSITIVE_INFINITY]))).toThrow('path 2 has Infinity at step 2 ahead');
});
