import { expect, test } from 'vitest';
import { meanings } from '../../src/explain/meanings.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

const { normal } = createGenerator(21);
const figures = Array.from({ length: 48 }, (_, t) => 300 + [-80, 60, 90, -70][t % 4] + 12 * normal());
const none = new Set<string>();

test('an AR(1) coefficient moves the forecast by the last deviation, a level by what is not carried over', () => {
  const fit = fitModel(figures, { form: '(1,0,0)' });
  const [ar, constant] = meanings(fit, none, none);
  const se = fit.coefficients.map(({ standardError }) => standardError ?? Number.NaN);
  // ŷ = c + φ(y − c), differentiated by hand; it is linear in each.
  expect(ar).toMatchObject({ role: 'ar', lag: 1, percent: null });
  expect(ar.sensitivity).toBeCloseTo((figures[47] - fit.constantValue) * se[0], 8);
  expect(constant.sensitivity).toBeCloseTo((1 - fit.phi[0]) * se[1], 8);
  expect(ar.range).toEqual([fit.phi[0] - 1.96 * se[0], Math.min(fit.phi[0] + 1.96 * se[0], 1)]);
});

test('roles and lags follow the form, events their kind; effects on logarithms are told in per cent', () => {
  const step = Array.from({ length: 49 }, (_, t) => (t >= 30 ? 1 : 0));
  const blip = Array.from({ length: 49 }, (_, t) => (t === 20 ? 1 : 0));
  const fit = fitModel(figures, {
    form: '(0,1,1)x(1,0,1)4',
    scale: 'log',
    regressors: [
      { name: 'event1', values: step },
      { name: 'event2', values: blip },
    ],
  });
  const told = meanings(fit, new Set(['event1']), new Set(['event2']));
  expect(told.map(({ role, lag }) => [role, lag])).toEqual([
    ['ma', 1],
    ['seasonal-ar', 4],
    ['seasonal-ma', 4],
    ['lasting-event', 0],
    ['passing-event', 0],
  ]);
  expect(told[3].percent).toBeCloseTo(100 * (Math.exp(fit.effects[0]) - 1), 10);
  expect(told[0].percent).toBeNull();
});

test('the sensitivity on the log scale is the same share of the forecast, to first order', () => {
  const fit = fitModel(figures, { form: '(1,0,0)', scale: 'log' });
  const [ar] = meanings(fit, none, none);
  const { value, standardError } = fit.coefficients[0];
  // ŷ = exp(c + φ(log y − c)), differentiated by hand.
  const centre = Math.log(figures[47]) - fit.constantValue;
  const middle = Math.exp(fit.constantValue + value * centre);
  expect(ar.sensitivity).toBeCloseTo(middle * centre * (standardError ?? Number.NaN), 5);
});

test('a lone coefficient’s range ends at one, and a lone moving average says what of a surprise stays', () => {
  const fit = fitModel(figures, { form: '(0,1,1)x(0,1,1)4' });
  const wide = { ...fit, coefficients: fit.coefficients.map((each) => ({ ...each, standardError: 0.9 })) };
  const [ma, seasonal] = meanings(wide, none, none);
  // (1 − B)y = (1 + θB)ε: after one step every ψ is 1 + θ.
  expect(ma.lasting).toBe(1 + fit.theta[0]);
  expect(seasonal.lasting).toBe(1 + fit.Theta[0]);
  for (const { range } of [ma, seasonal]) expect(range?.[0]).toBe(-1);
  const mixed = fitModel(figures, { form: '(1,1,1)' });
  for (const { lasting } of meanings(mixed, none, none)) expect(lasting).toBeNull();
});

test('a level is told in units on every scale, a drift in per cent on logarithms', () => {
  const [level] = meanings(fitModel(figures, { form: '(0,0,0)', scale: 'log' }), none, none);
  // The mean of the logarithms, turned back, is the geometric mean.
  const geometric = Math.exp(figures.reduce((sum, y) => sum + Math.log(y), 0) / figures.length);
  expect(level.units).toBeCloseTo(geometric, 6);
  expect(level.percent).toBeNull();
  const drift = meanings(fitModel(figures, { form: '(0,1,0)', scale: 'log', constant: true }), none, none)[0];
  // The drift of a random walk is the mean change: (last − first)/(n − 1).
  expect(drift.percent).toBeCloseTo(100 * ((figures[47] / figures[0]) ** (1 / 47) - 1), 6);
  expect(drift.units).toBeNull();
});

test('without a standard error there is neither a range nor a sensitivity', () => {
  const fit = fitModel(figures, { form: '(1,0,0)' });
  const bare = { ...fit, coefficients: fit.coefficients.map((each) => ({ ...each, standardError: null })) };
  for (const { range, sensitivity } of meanings(bare, none, none)) expect([range, sensitivity]).toEqual([null, null]);
});
