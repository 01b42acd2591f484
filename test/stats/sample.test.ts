import fc from 'fast-check';
import { expect, test } from 'vitest';
import { ascending, mean, quantile } from '../../src/stats/sample.js';

test('the k-th smallest of N stands at level (k − ½)/N, in straight lines between and flat beyond', () => {
  const sorted = Float64Array.of(10, 20, 40, 80);
  expect([1, 3, 5, 7].map((eighths) => quantile(sorted, eighths / 8))).toEqual([10, 20, 40, 80]);
  expect(quantile(sorted, 0.5)).toBe(30);
  expect([quantile(sorted, 0), quantile(sorted, 1)]).toEqual([10, 80]);
});

test('means', () => {
  expect(mean(Float64Array.of(1, 2, 3))).toBe(2);
  expect(mean(Float64Array.of(-1e16, 1, 1e16, 3))).toBe(1);
});

test('ranks are those of sorting by value and then by place', () => {
  fc.assert(
    fc.property(fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 1, maxLength: 200 }), (values) => {
      const expected = [...values.keys()].sort((a, b) => values[a] - values[b] || a - b);
      expect(Array.from(ascending(Float64Array.from(values)))).toEqual(expected);
    }),
  );
});
