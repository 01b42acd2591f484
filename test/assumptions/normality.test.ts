import { describe, expect, test } from 'vitest';
import { checkNormality, jarqueBera, jarqueBeraPValue } from '../../src/assumptions/normality.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

test('by hand: values −1, 0, 0, 1 have no skewness and the kurtosis 2', () => {
  // Moments: m₂ = ½, m₄ = ½, so K = ½/¼ − 3 = −1 and the statistic is 4/6 · ¼.
  const { statistic, skewness, excessKurtosis } = jarqueBera(Float64Array.of(-1, 0, 0, 1));
  expect(skewness).toBe(0);
  expect(excessKurtosis).toBeCloseTo(-1, 14);
  expect(statistic).toBeCloseTo(1 / 6, 14);
});

describe('the table is that of normal samples, simulated anew', () => {
  const SAMPLES = 40_000;
  // Sizes of the table and sizes between them.
  test.each([12, 17, 25, 40, 55, 90, 140])('%i values', (n) => {
    const { normal } = createGenerator(n);
    const levels = [0.5, 0.2, 0.1, 0.05, 0.025, 0.01];
    const below = levels.map(() => 0);
    for (let i = 0; i < SAMPLES; i++) {
      const { statistic } = jarqueBera(Float64Array.from({ length: n }, normal));
      const p = jarqueBeraPValue(statistic, n);
      for (let l = 0; l < levels.length; l++) if (p < levels[l]) below[l]++;
    }
    levels.forEach((level, l) => {
      const error = Math.sqrt((level * (1 - level)) / SAMPLES);
      // Four standard errors of the simulation, and a fiftieth for the lines between the table’s sizes.
      expect(Math.abs(below[l] / SAMPLES - level), `at ${level}`).toBeLessThan(4 * error + 0.02 * level);
    });
  });
});

test('the p-value falls as the statistic grows, for every number of values', () => {
  for (const n of [5, 12, 13, 38, 100, 333, 1000, 5000]) {
    let last = 1;
    for (let statistic = 0.05; statistic < 60; statistic += 0.05) {
      const p = jarqueBeraPValue(statistic, n);
      expect(p).toBeLessThan(last);
      last = p;
    }
  }
});

const walk = (draw: () => number, n: number) => {
  let y = 100;
  return Array.from({ length: n }, () => (y += draw()));
};

test('surprises with a long tail fail', () => {
  const { uniform } = createGenerator(3);
  // Exponential: skewness 2, excess kurtosis 6.
  const fit = fitModel(
    walk(() => -Math.log(uniform()) - 1, 80),
    { form: '(0,1,0)' },
  );
  const { status, details } = checkNormality(fit);
  expect(status).toBe('fails');
  expect(details.skewness).toBeGreaterThan(1);
});

test('normal surprises pass, but for about one series in twenty', () => {
  let alarms = 0;
  for (let seed = 1; seed <= 200; seed++) {
    const fit = fitModel(walk(createGenerator(seed).normal, 44), { form: '(0,1,0)' });
    if (checkNormality(fit).status !== 'holds') alarms++;
  }
  // Binomial with 200 and 0.05: 20 or more has a chance below 0.005.
  expect(alarms).toBeLessThan(20);
});

test('untested on few surprises', () => {
  const fit = fitModel(walk(createGenerator(1).normal, 12), { form: '(0,1,0)' });
  const { status, statistic, pValue } = checkNormality(fit);
  expect([status, statistic, pValue]).toEqual(['untested', null, null]);
});
