import { describe, expect, test } from 'vitest';
import { checkStability } from '../../src/assumptions/stability.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';
import { simulate } from '../sarima/simulate.js';

const SEEDS = Array.from({ length: 100 }, (_, i) => i + 1);
const AIRLINE = { phi: 0, theta: -0.4, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 };
const form = '(0,1,1)x(0,1,1)4';
const check = (y: number[]) => checkStability(fitModel(y, { form }));

test('by hand: a random walk has no coefficients to hold', () => {
  // Eighteen figures, so twelve and six: squares 1 eleven times before, then 1, 4, 9, 4, 1, 9 with mean 28/6.
  const steps = [1, -1, 1, -1, 1, -1, 1, -1, 1, -1, 1, -1, 2, -3, 2, 1, 3];
  let y = 50;
  const found = checkStability(fitModel([y, ...steps.map((step) => (y += step))], { form: '(0,1,0)' }));
  expect(found.details).toMatchObject({ from: 12, surprisesBefore: 11, surprisesAfter: 6 });
  expect(found.statistic).toBeCloseTo(28 / 6, 8);
  expect(found.details.ratio).toBeCloseTo(28 / 6, 8);
});

describe('what breaks in the last third is found', () => {
  test.each<[string, (value: number, t: number, seed: number) => number]>([
    ['surprises three times as large', (value, t, seed) => value + (t < 31 ? 0 : 4 * noise(seed, t))],
    ['a level that drops by six standard deviations', (value, t) => value - (t < 35 ? 0 : 6)],
    ['a season that turns about', (value, t) => value + (t < 31 ? 1 : -1) * [4, -4, 4, -4][t % 4]],
  ])('%s', (_, broken) => {
    const found = SEEDS.filter((seed) => {
      const y = simulate(seed, 44, AIRLINE).map((value, t) => broken(value, t, seed));
      return check(y).status !== 'holds';
    });
    expect(found.length).toBeGreaterThan(85);
  });
});

/** A standard normal value for each seed and period. */
function noise(seed: number, t: number): number {
  return createGenerator(1000 * seed + t).normal();
}

test('nothing that breaks: about one alarm in twenty', () => {
  const alarms = SEEDS.filter((seed) => check(simulate(seed, 44, AIRLINE)).status !== 'holds');
  // Binomial with 100 and 0.05: more than 11 has a chance of 0.004.
  expect(alarms.length).toBeLessThanOrEqual(11);
});

test('an event known as a regressor is no break', () => {
  const event = Array.from({ length: 44 }, (_, t) => (t === 38 ? 1 : 0));
  const y = simulate(9, 44, AIRLINE).map((value, t) => value + 15 * event[t]);
  expect(check(y).status).toBe('fails');
  const fit = fitModel(y, { form, regressors: [{ name: 'event', values: event }] });
  expect(checkStability(fit).status).toBe('holds');
});

test('figures after a gap and figures that sold out do not count', () => {
  const y = simulate(2, 44, AIRLINE);
  y[40] = Number.NaN;
  const { details } = checkStability(fitModel(y, { form, soldOut: [41] }));
  // The last third is periods 29 to 43, the first two thirds lose five to differencing.
  expect(details).toMatchObject({ from: 29, surprisesBefore: 24, surprisesAfter: 13 });
});

test('untested where two thirds are too few to fit', () => {
  const y = simulate(1, 18, AIRLINE);
  expect(checkStability(fitModel(y, { form }))).toMatchObject({ status: 'untested', statistic: null, pValue: null });
});
