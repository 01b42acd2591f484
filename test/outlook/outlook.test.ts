import { describe, expect, test } from 'vitest';
import { uncalibrated } from '../../src/outlook/calibrate.js';
import { forecast, makeOutlook } from '../../src/outlook/outlook.js';
import { fitModel } from '../../src/sarima/fit.js';
import { type Prediction, predict } from '../../src/sarima/predict.js';
import { createGenerator } from '../../src/stats/generator.js';
import { normalQuantile } from '../../src/stats/normal.js';

/** Ten invented years of quarters: a season, a trend and noise. */
const { normal } = createGenerator(7);
const figures = Array.from({ length: 40 }, (_, t) => 300 + 2 * t + [-80, 60, 90, -70][t % 4] + 12 * normal());
const fitted = (scale: string) => fitModel(figures, { form: '(0,1,1)x(0,1,1)4', scale });
const steps = [0, 1, 2, 3];
const options = {
  ahead: 4,
  seed: 1,
  holdAtZero: true,
  spans: [{ kind: 'ahead' as const, year: null, known: 0, steps }],
};

/** The bare model's own ranges, for which there are closed forms. */
const bare = { ...options, calibration: (_: unknown, prediction: Prediction) => uncalibrated(prediction) };

describe('the matrix of paths', () => {
  test('on the plain scale each step has the bare model’s mean, and normal quantiles by its standard error', () => {
    const plain = fitted('plain');
    const { mean, standardError } = predict(plain, 4);
    makeOutlook(plain, bare).periods.forEach(({ expected, middle, range80, range95 }, h) => {
      expect(expected).toBeCloseTo(mean[h], 8);
      expect(middle).toBe(mean[h]);
      for (const [range, level] of [
        [range80, 0.9],
        [range95, 0.975],
      ] as const) {
        const reach = normalQuantile(level) * standardError[h];
        expect(Math.abs(range[1] - (mean[h] + reach))).toBeLessThan(1e-5 * reach);
        expect(Math.abs(range[0] - (mean[h] - reach))).toBeLessThan(1e-5 * reach);
      }
    });
  });

  test('on the log scale the middle is exp of the centre and the mean that of a lognormal, to the clipped tails', () => {
    const log = fitted('log');
    const { mean, standardError } = predict(log, 4);
    makeOutlook(log, bare).periods.forEach(({ expected, middle }, h) => {
      expect(middle).toBeCloseTo(Math.exp(mean[h]), 10);
      const lognormal = Math.exp(mean[h] + standardError[h] ** 2 / 2);
      expect(Math.abs(expected / lognormal - 1)).toBeLessThan(standardError[h] * 1e-3);
    });
  });

  test('expected values add up to the total’s, and a known part is added to everything', () => {
    const spans = [...options.spans, { kind: 'reporting-year' as const, year: 2026, known: 1000, steps: [0, 1] }];
    const { periods, totals } = makeOutlook(fitted('log'), { ...options, spans });
    const sum = periods.reduce((total, { expected }) => total + expected, 0);
    expect(totals[0].expected).toBeCloseTo(sum, 8);
    expect(totals[1].expected).toBeCloseTo(1000 + periods[0].expected + periods[1].expected, 8);
    expect(totals[1].range80[0]).toBeGreaterThan(1000);
  });

  test('the total’s range is that of the joint normal distribution', () => {
    const plain = fitted('plain');
    const { mean, covariance } = predict(plain, 4);
    const spread = Math.sqrt(covariance.reduce((sum, value) => sum + value, 0));
    const centre = mean.reduce((sum, value) => sum + value, 0);
    const [total] = makeOutlook(plain, bare).totals;
    expect(Math.abs(total.range80[1] - (centre + normalQuantile(0.9) * spread))).toBeLessThan(0.01 * spread);
    expect(Math.abs(total.range95[0] - (centre - normalQuantile(0.975) * spread))).toBeLessThan(0.02 * spread);
  });

  test.each([
    ['plain', 4],
    ['log', 4],
    ['plain', 12],
    ['log', 12],
  ] as const)(
    'from seed to seed the ends of every total’s range move by less than a fiftieth of its width: %s scale, %i ahead',
    (scale, ahead) => {
      const once = fitted(scale);
      const all = Array.from({ length: ahead }, (_, h) => h);
      const spans = [all, all.slice(0, 3), all.slice(ahead / 2)].map((steps) => ({
        kind: 'ahead' as const,
        year: null,
        known: 0,
        steps,
      }));
      const made = Array.from({ length: 20 }, (_, seed) => makeOutlook(once, { ...options, ahead, seed, spans }));
      spans.forEach((_, i) => {
        const ranges = made.map(({ totals }) => totals[i].range80);
        const width = ranges[0][1] - ranges[0][0];
        for (const side of [0, 1]) {
          const ends = ranges.map((range) => range[side]);
          expect(Math.max(...ends) - Math.min(...ends)).toBeLessThan(0.02 * width);
        }
      });
    },
  );

  test('the paths have the joint covariance that the filter gives', () => {
    const plain = fitted('plain');
    const { mean, covariance } = predict(plain, 4);
    const { matrix, paths } = makeOutlook(plain, { ...bare, holdAtZero: false });
    for (let i = 0; i < 4; i++)
      for (let j = 0; j <= i; j++) {
        let sum = 0;
        for (let k = 0; k < paths; k++) sum += (matrix[i * paths + k] - mean[i]) * (matrix[j * paths + k] - mean[j]);
        const scale = Math.sqrt(covariance[i * 5] * covariance[j * 5]);
        expect(Math.abs(sum / paths - covariance[i * 4 + j])).toBeLessThan(0.01 * scale);
      }
  });

  test('beyond its end a power scale gives zero, or, where it has no upper end, an error', () => {
    const small = figures.map((value) => Math.max(value - 240, 1));
    const { matrix } = makeOutlook(fitModel(small, { form: '(0,1,1)x(0,1,1)4', scale: 'box-cox 0.5' }), options);
    expect(matrix.every((value) => value >= 0 && Number.isFinite(value))).toBe(true);
    const inverse = fitModel(small, { form: '(0,1,1)x(0,1,1)4', scale: 'box-cox -1' });
    expect(() => makeOutlook(inverse, options)).toThrow(/box-cox -1: .* no upper end; use scale plain/);
  });

  test('held at zero, no path is below it and the mean rises above the centre’s', () => {
    const low = fitModel(
      figures.map((value) => Math.max(0, value - 330)),
      { form: '(0,1,1)x(0,1,1)4' },
    );
    const { periods, matrix } = makeOutlook(low, options);
    expect(matrix.every((value) => value >= 0)).toBe(true);
    expect(periods[0].expected).toBeGreaterThanOrEqual(Math.max(0, predict(low, 4).mean[0]) - 1e-9);
  });

  test('the same seed gives the same paths', () => {
    const log = fitted('log');
    expect(makeOutlook(log, options).matrix).toEqual(makeOutlook(log, options).matrix);
    expect(forecast(log, { ahead: 4, seed: 1 }).periods[0].period).toBe(1);
  });
});
