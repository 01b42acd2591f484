import { describe, expect, test } from 'vitest';
import { calibrate } from '../../src/outlook/calibrate.js';
import { makeOutlook } from '../../src/outlook/outlook.js';
import { stepExpectations } from '../../src/outlook/steps.js';
import { fitModel } from '../../src/sarima/fit.js';
import { predict } from '../../src/sarima/predict.js';
import { createGenerator } from '../../src/stats/generator.js';
import { normalQuantile } from '../../src/stats/normal.js';
import { simulate } from '../sarima/simulate.js';

const noise = (seed: number, n: number, late = 1) => {
  const { normal } = createGenerator(seed);
  return Array.from({ length: n }, (_, t) => 100 + (t < (2 * n) / 3 ? 1 : late) * normal());
};
const calibration = (values: readonly number[], form = '(0,0,0)') => {
  const fit = fitModel(values, { form, season: 4 });
  return { fit, ...calibrate(fit, predict(fit, 4)) };
};

describe('the factors', () => {
  test('a mean that is estimated from n figures adds a share of 1/n to the variance', () => {
    // Any text on regression: the variance of a prediction about a mean is σ²(1 + 1/n).
    const { factors } = calibration(noise(1, 25));
    for (const estimate of factors.estimates) expect(estimate).toBeCloseTo(Math.sqrt(1 + 1 / 25), 6);
  });

  test('n figures and k coefficients with the variance widen by √(n/(n − k))', () => {
    const { factors, freedom } = calibration(noise(1, 25));
    expect(factors.freedom).toBeCloseTo(Math.sqrt(25 / 23), 9);
    expect(freedom).toBe(12);
    expect(calibration(noise(1, 12)).freedom).toBe(10);
  });

  test('steady surprises change little, larger ones of late widen, smaller ones narrow', () => {
    expect(Math.abs(calibration(noise(2, 90)).factors.recent - 1)).toBeLessThan(0.15);
    expect(calibration(noise(2, 90, 3)).factors.recent).toBeGreaterThan(1.3);
    expect(calibration(noise(2, 90, 1 / 3)).factors.recent).toBeLessThan(0.85);
  });

  test('the spread is the bare standard error times all of them', () => {
    const { fit, spread, factors } = calibration(simulate(3, 44, AT), '(0,1,1)x(0,1,1)4');
    const { standardError } = predict(fit, 4);
    spread.forEach((value, h) => {
      const factor = factors.freedom * factors.recent * factors.estimates[h] * factors.horizon[h];
      expect(value).toBeCloseTo(standardError[h] * factor, 9);
    });
  });
});

const AT = { phi: 0, theta: -0.5, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 };

test('steps by themselves have the ranges of the paths', () => {
  for (const scale of ['plain', 'log']) {
    const fit = fitModel(simulate(3, 44, AT), { form: '(0,1,1)x(0,1,1)4', scale });
    const { periods } = makeOutlook(fit, { ahead: 4, seed: 1, holdAtZero: true, spans: [] });
    stepExpectations(fit, 4, true).forEach(({ expected, middle, range80, range95 }, h) => {
      expect(middle).toBeCloseTo(periods[h].middle, 9);
      const width = periods[h].range95[1] - periods[h].range95[0];
      for (const side of [0, 1]) {
        expect(Math.abs(range80[side] - periods[h].range80[side])).toBeLessThan(1e-3 * width);
        expect(Math.abs(range95[side] - periods[h].range95[side])).toBeLessThan(1e-3 * width);
      }
      expect(Math.abs(expected - periods[h].expected)).toBeLessThan(5e-3 * width);
    });
  }
});

test('where the model is right, 8-in-10 ranges hold about 8 in 10, which the bare model’s do not', () => {
  const held = { calibrated: 0, bare: 0 };
  const series = 300;
  for (let seed = 0; seed < series; seed++) {
    const y = simulate(5000 + seed, 36, AT);
    const fit = fitModel(y.slice(0, 32), { form: '(0,1,1)x(0,1,1)4' });
    const { mean, standardError } = predict(fit, 4);
    stepExpectations(fit, 4, false).forEach(({ range80 }, h) => {
      const actual = y[32 + h];
      if (actual >= range80[0] && actual <= range80[1]) held.calibrated += 1 / (4 * series);
      if (Math.abs(actual - mean[h]) <= normalQuantile(0.9) * standardError[h]) held.bare += 1 / (4 * series);
    });
  }
  // 1,200 dependent outcomes know a share of 0.8 to about 0.015.
  expect(held.calibrated).toBeGreaterThan(0.76);
  expect(held.calibrated).toBeLessThan(0.87);
  expect(held.bare).toBeLessThan(held.calibrated - 0.04);
});
