import { describe, expect, test } from 'vitest';
import { fUpperTail } from '../../src/stats/f.js';

const POINTS = [0.001, 0.2, 0.9, 1, 1.5, 4, 30, 1000];
const near = (found: number, exact: number) => expect(Math.abs(found / exact - 1)).toBeLessThan(1e-11);

describe('closed forms', () => {
  test.each(POINTS)('two degrees of freedom above, at %d', (x) => {
    for (const below of [1, 2, 5, 40]) near(fUpperTail(x, 2, below), (1 + (2 * x) / below) ** (-below / 2));
  });
  test.each(POINTS)('two degrees of freedom below, at %d', (x) => {
    for (const above of [1, 5, 40])
      expect(1 - fUpperTail(x, above, 2)).toBeCloseTo(((above * x) / (above * x + 2)) ** (above / 2), 12);
  });
  test.each(POINTS)('one and one, the squared Cauchy, at %d', (x) => {
    near(fUpperTail(x, 1, 1), 1 - (2 / Math.PI) * Math.atan(Math.sqrt(x)));
  });
});

test.each(POINTS)('turned about, the other tail, at %d', (x) => {
  for (const [above, below] of [
    [3, 7],
    [15, 22],
    [120, 4],
  ])
    expect(fUpperTail(x, above, below) + fUpperTail(1 / x, below, above)).toBeCloseTo(1, 12);
});

// Abramowitz & Stegun, "Handbook of Mathematical Functions", 1964, table 26.9, from memory.
test.each([
  [3.33, 5, 10, 0.05],
  [3.1, 3, 20, 0.05],
  [5.41, 4, 12, 0.01],
  [2.98, 10, 10, 0.05],
])('printed percentage point %d with %d and %d degrees of freedom', (x, above, below, p) => {
  expect(fUpperTail(x - 0.005, above, below)).toBeGreaterThan(p);
  expect(fUpperTail(x + 0.005, above, below)).toBeLessThan(p);
});

test('at the ends', () => {
  expect(fUpperTail(0, 3, 4)).toBe(1);
  expect(fUpperTail(Number.POSITIVE_INFINITY, 3, 4)).toBe(0);
  expect(() => fUpperTail(1, 0, 4)).toThrow('not 0 and 4');
  expect(() => fUpperTail(Number.NaN, 1, 1)).toThrow('NaN');
});
