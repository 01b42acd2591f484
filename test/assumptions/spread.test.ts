import { expect, test } from 'vitest';
import { checkSpread } from '../../src/assumptions/spread.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

const SEEDS = Array.from({ length: 100 }, (_, i) => i + 1);

/** A random walk whose surprises have standard deviation `spread(t)`. */
function walk(seed: number, n: number, spread: (t: number) => number): number[] {
  const { normal } = createGenerator(seed);
  let y = 100;
  return Array.from({ length: n }, (_, t) => (y += spread(t) * normal()));
}

const check = (y: number[]) => checkSpread(fitModel(y, { form: '(0,1,0)', season: 4 }));

test('by hand: the ratio of the squares in the last and first third', () => {
  const steps = [1, -2, 1, 3, -1, 2, -1, 1, 4, -3, 2, -4];
  let y = 50;
  const { details } = check([y, ...steps.map((step) => (y += step))]);
  // Thirds of four: 1 + 4 + 1 + 9 = 15 and 16 + 9 + 4 + 16 = 45.
  expect(details).toMatchObject({ residuals: 12, third: 4 });
  expect(details.ratio).toBeCloseTo(3, 10);
  // F(4, 4) above 3, twice: closed form of the regularized incomplete beta function, I(2, 2, y) = 3y² − 2y³ at 1/4.
  expect(details.ratioPValue).toBeCloseTo(2 * (3 / 16 - 2 / 64), 10);
});

test.each([
  ['grow', (t: number) => (t < 30 ? 1 : 3), (ratio: number) => ratio > 1],
  ['shrink', (t: number) => (t < 30 ? 3 : 1), (ratio: number) => ratio < 1],
])('surprises that %s to three times or a third are found, with their direction', (_, spread, isRight) => {
  const found = SEEDS.filter((seed) => {
    const { status, details } = check(walk(seed, 60, spread));
    return status !== 'holds' && isRight(details.ratio);
  });
  expect(found.length).toBeGreaterThan(95);
});

test('a stormy time in the middle is found, though they are as large at the end as at the start', () => {
  const found = SEEDS.filter((seed) => {
    const { pValue } = check(walk(seed, 96, (t) => (t >= 40 && t < 56 ? 4 : 1)));
    return pValue !== null && pValue < 0.05;
  });
  expect(found.length).toBeGreaterThan(75);
});

test('even surprises pass, but for about one series in twenty', () => {
  const alarms = SEEDS.filter((seed) => check(walk(seed, 44, () => 1)).status !== 'holds');
  // Binomial with 100 and 0.05: more than 11 has a chance of 0.004.
  expect(alarms.length).toBeLessThanOrEqual(11);
});

test('untested on fewer than 12 residuals', () => {
  expect(check(walk(1, 12, () => 1))).toMatchObject({ status: 'untested', statistic: null, pValue: null });
});
