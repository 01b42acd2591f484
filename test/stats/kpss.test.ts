import { describe, expect, test } from 'vitest';
import { kpssPValue, kpssStatistic } from '../../src/stats/kpss.js';

test('values that go up and down: the sums are 1, 0, 1, 0, …, so η is (n/2)/n²', () => {
  const values = Array.from({ length: 40 }, (_, t) => (t % 2 === 0 ? 1 : -1));
  expect(kpssStatistic(values, 0)).toBeCloseTo(1 / 80, 14);
});

test('one step half way: the sums climb to n/2 and return', () => {
  // S = 1 … n/2 … 0 with n = 20: Σ S² = 2·(1² + … + 9²) + 10² = 670.
  const values = Array.from({ length: 20 }, (_, t) => (t < 10 ? 1 : -1));
  expect(kpssStatistic(values, 0)).toBeCloseTo(670 / 400, 12);
  // Bartlett’s weight at lag 1 of 1 is ½; the products there are 9 + 9 − 1 = 17.
  expect(kpssStatistic(values, 1)).toBeCloseTo(670 / 400 / (1 + (2 * 0.5 * 17) / 20), 12);
});

test('a missing value adds neither to the sums nor to their number', () => {
  const values = [1, Number.NaN, -1, 1, -1];
  expect(kpssStatistic(values, 0)).toBeCloseTo(2 / 16, 14);
});

describe('p-values', () => {
  // Kwiatkowski, Phillips, Schmidt & Shin 1992, table 1, η_μ.
  test.each([
    [0.347, 0.1],
    [0.463, 0.05],
    [0.574, 0.025],
    [0.739, 0.01],
  ])('%d is the printed critical value at %d', (statistic, p) => {
    expect(kpssPValue(statistic)).toBeCloseTo(p, 12);
  });
  test('between and beyond they fall without end', () => {
    let last = 1;
    for (let statistic = 0.01; statistic < 3; statistic += 0.01) {
      const p = kpssPValue(statistic);
      expect(p).toBeLessThan(last);
      expect(p).toBeGreaterThan(0);
      last = p;
    }
  });
  // The limit’s distribution is that of the Cramér–von Mises statistic: Anderson & Darling, Annals of Mathematical
  // Statistics 23 (1952), table 1, from memory: upper tails 0.5, 0.2 and 0.001 at 0.11888, 0.24124 and 1.16786.
  test.each([
    [0.11888, 0.5],
    [0.24124, 0.2],
    [1.16786, 0.001],
  ])('%d is about the point at %d of its limit', (statistic, p) => {
    expect(Math.abs(Math.log(kpssPValue(statistic) / p))).toBeLessThan(0.15);
  });
});
