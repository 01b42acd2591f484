import { describe, expect, test } from 'vitest';
import { pastWeights } from '../../src/explain/weights.js';
import { fitModel } from '../../src/sarima/fit.js';
import { predict } from '../../src/sarima/predict.js';
import { createGenerator } from '../../src/stats/generator.js';

const { normal } = createGenerator(31);
const figures = Array.from({ length: 24 }, (_, t) => 300 + [-80, 60, 90, -70][t % 4] + 12 * normal());

describe('the weights of past figures', () => {
  test.each(['(0,1,1)x(0,1,1)4', '(1,0,1)', '(2,1,0)x(1,0,0)4'])(
    'of %s give the forecast back, when they reach over the whole history',
    (form) => {
      const fit = fitModel(figures, { form, constant: false });
      const weights = pastWeights(fit, 8);
      expect(weights.length).toBe(24);
      const sum = weights.reduce((total, { lag, weight }) => total + weight * figures[24 - lag], 0);
      expect(sum).toBeCloseTo(predict(fit, 1).mean[0], 7);
    },
  );

  test('of a model of differences add up to 1, so that a higher level is carried on', () => {
    const weights = pastWeights(fitModel(figures, { form: '(0,1,1)' }), 8);
    expect(weights.reduce((total, { weight }) => total + weight, 0)).toBeCloseTo(1, 10);
  });

  test('a missing figure has none', () => {
    const gaps = figures.map((value, t) => (t === 20 ? Number.NaN : value));
    const fit = fitModel(gaps, { form: '(0,1,1)' });
    const weights = pastWeights(fit, 8);
    expect(weights[3]).toEqual({ lag: 4, weight: 0 });
    const sum = weights.reduce((total, { lag, weight }) => total + (weight === 0 ? 0 : weight * gaps[24 - lag]), 0);
    expect(sum).toBeCloseTo(predict(fit, 1).mean[0], 7);
  });
});
