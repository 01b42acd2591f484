import { describe, expect, test } from 'vitest';
import { createGenerator } from '../../src/stats/generator.js';
import { normalProbability } from '../../src/stats/normal.js';
import { truncateBelow } from '../../src/stats/truncated.js';

const density = (z: number) => Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
const of = (...values: number[]) => Float64Array.from(values);

test.each([
  [0, 1, 0],
  [3, 4, 5],
  [-2, 0.25, -1.5],
  [10, 9, 2],
])('one value, mean %d, variance %d, bound %d: the truncated normal', (mean, variance, bound) => {
  // Johnson, Kotz & Balakrishnan, "Continuous Univariate Distributions", vol. 1, 2nd ed. 1994, section 13.10.1.
  const spread = Math.sqrt(variance);
  const a = (bound - mean) / spread;
  const hazard = density(a) / (1 - normalProbability(a));
  const found = truncateBelow(of(mean), of(variance), of(bound));
  expect(found.mean[0]).toBeCloseTo(mean + spread * hazard, 10);
  expect(found.covariance[0]).toBeCloseTo(variance * (1 + a * hazard - hazard * hazard), 10);
  expect(found.logProbability).toBeCloseTo(Math.log(1 - normalProbability(a)), 10);
});

test('a bound far above the mean: just above the bound, by Mills’ ratio', () => {
  const { mean, covariance, logProbability } = truncateBelow(of(0), of(1), of(30));
  // Asymptotically the excess over a is 1/a − 2/a³ + 10/a⁵, its variance 1/a² − 6/a⁴.
  expect(mean[0] - 30).toBeCloseTo(1 / 30 - 2 / 30 ** 3 + 10 / 30 ** 5, 7);
  expect(covariance[0]).toBeCloseTo(1 / 900 - 6 / 30 ** 4, 6);
  expect(logProbability).toBeCloseTo(-450 - Math.log(30 * Math.sqrt(2 * Math.PI)) + Math.log(1 - 1 / 900), 4);
});

describe('two values above zero', () => {
  test.each([0.5, -0.5, 0.2])('correlation %d', (rho) => {
    const found = truncateBelow(of(0, 0), of(1, rho, rho, 1), of(0, 0));
    // Sheppard's theorem on the bivariate normal's quadrants (1899).
    expect(Math.exp(found.logProbability)).toBeCloseTo(0.25 + Math.asin(rho) / (2 * Math.PI), 2);
    const { normal } = createGenerator(1);
    const kept: number[] = [];
    for (let i = 0; i < 400_000; i++) {
      const a = normal();
      if (a > 0 && rho * a + Math.sqrt(1 - rho * rho) * normal() > 0) kept.push(a);
    }
    const mean = kept.reduce((sum, value) => sum + value, 0) / kept.length;
    const variance = kept.reduce((sum, value) => sum + (value - mean) ** 2, 0) / kept.length;
    expect(Math.abs(found.mean[0] - mean)).toBeLessThan(0.01);
    expect(Math.abs(found.covariance[0] - variance)).toBeLessThan(0.02);
  });
});

test('a value without a bound follows the others by regression', () => {
  const found = truncateBelow(of(0, 0), of(1, 0.5, 0.5, 1), of(0, Number.NEGATIVE_INFINITY));
  expect(found.mean[1]).toBeCloseTo(0.5 * found.mean[0], 10);
  expect(found.covariance[3]).toBeCloseTo(0.75 + 0.25 * found.covariance[0], 10);
});
