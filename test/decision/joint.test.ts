import { describe, expect, test } from 'vitest';
import { jointDraws, jointSum, residualCorrelations } from '../../src/decision/joint.js';
import { createGenerator } from '../../src/stats/generator.js';
import { normalQuantile } from '../../src/stats/normal.js';
import { mean, quantile } from '../../src/stats/sample.js';

/** A normal series' paths: every quantile once, in an order of its own. */
function normalPaths(centre: number, spread: number, seed: number, count = 10_000): Float64Array {
  const { uniform } = createGenerator(seed);
  const keyed = Array.from({ length: count }, (_, k) => [
    uniform(),
    centre + spread * normalQuantile((k + 0.5) / count),
  ]);
  return Float64Array.from(keyed.sort(([a], [b]) => a - b).map(([, value]) => value));
}

/** The sum of series whose paths are paired by a correlation. */
const totals = (series: Float64Array[], correlation: Float64Array, seed: number) => {
  const weights = series.map((row) => {
    const [low, high] = range(row);
    return high - low;
  });
  const draws = jointDraws(correlation, weights, series[0].length, seed);
  return jointSum(
    draws,
    series,
    series.map(() => 1),
  );
};

const range = (values: Float64Array, low = 0.1, high = 0.9) => {
  const sorted = values.toSorted();
  return [quantile(sorted, low), quantile(sorted, high)];
};

describe('paths put together', () => {
  const [a, b] = [normalPaths(500, 30, 1), normalPaths(200, 40, 2)];

  test.each([
    ['together', 1, 30 + 40, 1e-4],
    ['independent', 0, Math.hypot(30, 40), 0.01],
    ['opposed', -1, 40 - 30, 1e-4],
    ['half way', 0.5, Math.sqrt(900 + 1600 + 2 * 0.5 * 1200), 0.01],
  ])('two normal series that go %s: the range of their sum', (_, rho, spread, within) => {
    for (const seed of [1, 2, 3]) {
      const total = totals([a, b], Float64Array.of(1, rho, rho, 1), seed);
      const reach = normalQuantile(0.9) * spread;
      const [low, high] = range(total);
      expect(Math.abs(low - (700 - reach)) / reach).toBeLessThan(within);
      expect(Math.abs(high - (700 + reach)) / reach).toBeLessThan(within);
      expect(mean(total)).toBeCloseTo(700, 6);
    }
  });

  test('perfect correlation pairs equal ranks exactly, perfect opposition opposite ones', () => {
    const draws = (rho: number) => jointDraws(Float64Array.of(1, rho, rho, 1), [1, 1], 10_000, 4);
    const [first, second] = draws(1);
    expect(second).toEqual(first);
    const [up, down] = draws(-1);
    expect(down.toReversed()).toEqual(up);
  });

  test('every value of every series once; one series alone, and one that counts against it', () => {
    const alone = jointDraws(Float64Array.of(1), [1], 10_000, 9);
    expect(jointSum(alone, [a], [1]).sort()).toEqual(a.toSorted());
    expect(jointSum(alone, [a], [-1]).sort()).toEqual(a.map((value) => -value).sort());
    const pair = jointDraws(Float64Array.of(1, 1, 1, 1), [1, 1], 10_000, 9);
    expect(Math.max(...jointSum(pair, [a, a], [1, -1]).map(Math.abs))).toBe(0);
  });

  test('thirty equally correlated series: the sum’s variance is n σ² (1 + (n − 1) ρ)', () => {
    const [n, rho] = [30, 0.3];
    const series = Array.from({ length: n }, (_, s) => normalPaths(10, 1, s));
    const correlation = Float64Array.from({ length: n * n }, (_, at) => (at % (n + 1) === 0 ? 1 : rho));
    const [low, high] = range(totals(series, correlation, 1), 0.025, 0.975);
    const reach = normalQuantile(0.975) * Math.sqrt(n * (1 + (n - 1) * rho));
    expect(Math.abs((high - low) / (2 * reach) - 1)).toBeLessThan(0.01);
  });

  test('what doesn’t fit', () => {
    expect(() => jointDraws(new Float64Array(), [], 10, 1)).toThrow(/0 correlations don't fit 0 series/);
    expect(() => jointDraws(new Float64Array(3), [1, 1], 10, 1)).toThrow(/3 correlations don't fit 2 series/);
    expect(() => jointDraws(Float64Array.of(1), [1], 9, 1)).toThrow(/9 paths can't be paired: the number must be even/);
    const draws = jointDraws(Float64Array.of(1, 0, 0, 1), [1, 1], 10_000, 1);
    expect(() => jointSum(draws, [a, a.slice(1)], [1, 1])).toThrow(/10000 and of 9999 paths can't be paired/);
  });
});

describe('correlations of residuals', () => {
  // Columns of a table of signs: orthogonal, so the correlations of their sums are plain fractions.
  const signs = (period: number) => Array.from({ length: 16 }, (_, t) => (Math.floor(t / period) % 2 === 0 ? 1 : -1));
  const [u, v, w] = [signs(1), signs(2), signs(4)];
  const plus = (x: number[], times: number, y: number[]) => x.map((value, t) => value + times * y[t]);

  test('the intensity of Schäfer & Strimmer by hand', () => {
    // r(u, u + v) = 1/√2, r(u, w) = 0, r(u + v, w) = 0, which adds nothing but its variance. With 16 periods
    // Σ Var = ((1 − ½)² + 1 + 1)/15 = 0.15 and Σ r² = ½, so λ = 0.3.
    const { matrix, lambda, counts } = residualCorrelations([u, plus(u, 1, v), w]);
    expect(lambda).toBeCloseTo(0.3, 12);
    expect(matrix[1]).toBeCloseTo(0.7 / Math.sqrt(2), 12);
    expect([matrix[0], matrix[4], matrix[8]]).toEqual([1, 1, 1]);
    expect(matrix[2]).toBeCloseTo(0, 12);
    expect(Array.from(counts)).toEqual(Array(9).fill(16));
  });

  test('over common periods only', () => {
    // Without the last 8 periods u and u + 3v still have r = 1/√10; λ = (1 − 0.1)²/7 / 0.1, above 1.
    const cut = plus(u, 3, v).map((value, t) => (t < 8 ? value : null));
    const few = residualCorrelations([u, cut]);
    expect(Array.from(few.counts)).toEqual([16, 8, 8, 8]);
    expect(few.lambda).toBe(1);
    // u + v/3 has r² = 0.9: λ = 0.1²/7 / 0.9.
    const strong = plus(u, 1 / 3, v).map((value, t) => (t < 8 ? value : null));
    const { lambda, matrix } = residualCorrelations([u, strong]);
    expect(lambda).toBeCloseTo(0.01 / 6.3, 12);
    expect(matrix[1]).toBeCloseTo((1 - 0.01 / 6.3) * Math.sqrt(0.9), 12);
  });

  test('fewer than 8 common periods, or a series that doesn’t vary: uncorrelated', () => {
    const short = u.map((value, t) => (t < 7 ? value : null));
    const { matrix, counts, lambda } = residualCorrelations([u, short, Array<number>(16).fill(3)]);
    expect(Array.from(matrix)).toEqual([1, 0, 0, 0, 1, 0, 0, 0, 1]);
    expect(counts[1]).toBe(7);
    expect(lambda).toBe(1);
  });

  test('the same series twice keeps its perfect correlation', () => {
    const { matrix, lambda } = residualCorrelations([u, u, u.map((value) => -value)]);
    expect(lambda).toBeCloseTo(0, 12);
    [1, 1, -1, 1, 1, -1, -1, -1, 1].forEach((r, at) => {
      expect(matrix[at]).toBeCloseTo(r, 12);
    });
  });

  test('correlations that can’t all be true are brought to the nearest that can', () => {
    // Over different periods x goes with y, y with z and x against z: 1, 1, −1 has the eigenvalue −1 along (1, −1, 1).
    // Without it 2(I − vv') is left, whose correlations are ½, ½, −½.
    const over = (from: number, factor: number) =>
      Array.from({ length: 24 }, (_, t) => (t >= from && t < from + 8 ? factor * u[t % 16] : null));
    const merged = (...parts: (number | null)[][]) =>
      parts[0].map((_, t) => parts.map((part) => part[t]).find((value) => value !== null) ?? null);
    const { matrix, lambda } = residualCorrelations([
      merged(over(0, 1), over(16, 1)),
      merged(over(0, 1), over(8, 1)),
      merged(over(8, 1), over(16, -1)),
    ]);
    expect(lambda).toBe(0);
    [1, 0.5, -0.5, 0.5, 1, 0.5, -0.5, 0.5, 1].forEach((r, at) => {
      expect(matrix[at]).toBeCloseTo(r, 12);
    });
  });

  test('one series, and rows that are not aligned', () => {
    expect(Array.from(residualCorrelations([u]).matrix)).toEqual([1]);
    expect(() => residualCorrelations([u, v.slice(1)])).toThrow(/16 and of 15 periods are not aligned; give null/);
  });
});
