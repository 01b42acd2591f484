import { describe, expect, test } from 'vitest';
import type { Assumption } from '../../src/assumptions/assumption.js';
import { checkOutliers } from '../../src/assumptions/outliers.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';
import { simulate } from '../sarima/simulate.js';

const SEEDS = Array.from({ length: 100 }, (_, i) => i + 1);
const AIRLINE = { phi: 0, theta: -0.4, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 };
const form = '(0,1,1)x(0,1,1)4';

describe('by algebra, on random walks', () => {
  const { normal } = createGenerator(11);
  let level = 100;
  const calm = Array.from({ length: 40 }, () => (level += normal()));
  const last = calm.length - 1;
  const at = (period: number, size: number) => calm.map((value, t) => (t === period ? value + size : value));
  const from = (period: number, size: number) => calm.map((value, t) => (t >= period ? value + size : value));

  test('an additive outlier is half the way up less half the way down', () => {
    const y = at(20, 12);
    const [outlier] = checkOutliers(fitModel(y, { form: '(0,1,0)' })).outliers;
    expect(outlier).toMatchObject({ period: 20, kind: 'additive' });
    // Its trace in the steps is +1, −1, so that ω = (w₂₀ − w₂₁)/2; and y₄₀ is forecast by y₃₉ with it and without it.
    expect(outlier.size).toBeCloseTo((y[20] - y[19] - (y[21] - y[20])) / 2, 8);
    expect(outlier.forecastChange).toBeCloseTo(0, 8);
  });
  test('a level shift is the step itself', () => {
    const y = from(25, -9);
    const [outlier] = checkOutliers(fitModel(y, { form: '(0,1,0)' })).outliers;
    expect(outlier).toMatchObject({ period: 25, kind: 'level-shift' });
    expect(outlier.size).toBeCloseTo(y[25] - y[24], 8);
    // Its standard error is σ, estimated from the other 38 steps over all 39.
    const others = y.slice(1).map((value, t) => (t === 24 ? 0 : value - y[t]));
    const sigma = Math.sqrt(others.reduce((sum, w) => sum + w * w, 0) / 39);
    expect(outlier.t).toBeCloseTo((y[25] - y[24]) / sigma, 4);
    expect(outlier.forecastChange).toBeCloseTo(0, 8);
  });
  test.each(['plain', 'log'])(
    'an outlier at the last figure: set aside, the one before is the forecast (%s)',
    (scale) => {
      const y = at(last, 40);
      const { status, outliers } = checkOutliers(fitModel(y, { form: '(0,1,0)', scale }));
      expect(outliers).toMatchObject([{ period: last, kind: 'additive' }]);
      expect(outliers[0].forecastChange).toBeCloseTo(y[last - 1] - y[last], 6);
      expect(status).toBe('fails');
    },
  );
  test('last year’s figure as the forecast: set aside, it is the year’s before', () => {
    const { normal: draw } = createGenerator(12);
    const y = Array.from({ length: 40 }, (_, t) => 100 + [0, 30, -20, 10][t % 4] + draw());
    y[36] += 25;
    const { outliers } = checkOutliers(fitModel(y, { form: '(0,0,0)x(0,1,0)4' }));
    expect(outliers[0]).toMatchObject({ period: 36, kind: 'additive' });
    expect(outliers[0].forecastChange).toBeCloseTo(y[32] - y[36], 6);
  });
  test('far from the forecast an outlier is doubtful, not a failure', () => {
    expect(checkOutliers(fitModel(at(12, 15), { form: '(0,1,0)' })).status).toBe('doubtful');
  });
});

describe('planted in 44 quarters, at six standard deviations', () => {
  const hits = (planted: (value: number, t: number) => number, isRight: (found: Assumption) => boolean) =>
    SEEDS.filter((seed) => {
      const y = simulate(seed, 44, AIRLINE).map(planted);
      return isRight(checkOutliers(fitModel(y, { form })));
    }).length;

  test.each([12, 20, 33])('an additive outlier at period %i', (place) => {
    const found = hits(
      (value, t) => (t === place ? value + 6 : value),
      ({ outliers }) => outliers.some(({ period, kind, size }) => period === place && kind === 'additive' && size > 0),
    );
    expect(found).toBeGreaterThan(95);
  });
  test.each([12, 20, 33])('a fall in level at period %i', (place) => {
    const found = hits(
      (value, t) => (t >= place ? value - 6 : value),
      ({ outliers }) =>
        outliers.some(({ period, kind, size }) => period === place && kind === 'level-shift' && size < 0),
    );
    expect(found).toBeGreaterThan(95);
  });
  test('one of each', () => {
    const found = hits(
      (value, t) => value + (t === 14 ? 8 : 0) + (t >= 30 ? 8 : 0),
      ({ outliers }) => [14, 30].every((place) => outliers.some(({ period }) => period === place)),
    );
    expect(found).toBeGreaterThan(70);
  });
});

describe('clean series: about one alarm in twenty at most', () => {
  test.each([
    [44, form, AIRLINE],
    [110, '(0,1,1)x(0,1,1)12', { ...AIRLINE, m: 12 }],
    [60, '(1,0,0)', { phi: 0.6, theta: 0, Phi: 0, Theta: 0, m: 1, d: 0, D: 0 }],
  ])('%i figures, %s', (n, text, at) => {
    const alarms = SEEDS.filter(
      (seed) => checkOutliers(fitModel(simulate(seed, n, at), { form: text })).status !== 'holds',
    );
    // Binomial with 100 and 0.05: more than 11 has a chance of 0.004.
    expect(alarms.length).toBeLessThanOrEqual(11);
  });
});

test('neither a gap nor a period that sold out is an outlier', () => {
  const y = simulate(3, 44, AIRLINE);
  y[15] = Number.NaN;
  y[22] -= 12;
  expect(checkOutliers(fitModel(y, { form })).outliers).toMatchObject([{ period: 22 }]);
  expect(checkOutliers(fitModel(y, { form, soldOut: [22] })).outliers).toEqual([]);
});

test('an event that is a regressor already is no outlier', () => {
  const event = Array.from({ length: 44 }, (_, t) => (t === 22 ? 1 : 0));
  const y = simulate(3, 44, AIRLINE).map((value, t) => value + 12 * event[t]);
  expect(checkOutliers(fitModel(y, { form })).outliers).toMatchObject([{ period: 22, kind: 'additive' }]);
  expect(checkOutliers(fitModel(y, { form, regressors: [{ name: 'fair', values: event }] })).outliers).toEqual([]);
});

test('untested on fewer than 12 residuals', () => {
  const fit = fitModel(simulate(1, 15, AIRLINE), { form, fittedBy: 'shrunk' });
  expect(checkOutliers(fit)).toMatchObject({ status: 'untested', outliers: [] });
});
