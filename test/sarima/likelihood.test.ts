import { describe, expect, test } from 'vitest';
import { createEngine, createFilterEngine } from '../../src/sarima/engine.js';
import { fitModel } from '../../src/sarima/fit.js';
import { parseForm } from '../../src/sarima/form.js';
import { prepare } from '../../src/sarima/prepare.js';
import { noPenalty } from '../../src/sarima/priors.js';
import { createGenerator } from '../../src/stats/generator.js';
import { denseLogLikelihood } from './dense.js';
import { simulate } from './simulate.js';

/** Seasonal series made from a seed: a random walk with a season that drifts. */
function series(seed: number, n: number, m: number): number[] {
  const { normal } = createGenerator(seed);
  const y: number[] = [];
  for (let t = 0; t < n; t++)
    y.push((t >= m ? y[t - m] : 10) + (t >= 1 ? 0.4 * (y[t - 1] - (t > m ? y[t - m - 1] : 10)) : 0) + normal());
  return y;
}

test.each(['(1,0,1)x(1,0,1)4', '(0,1,1)x(0,1,1)4', '(2,1,1)x(1,1,1)4', '(1,0,0)x(0,1,1)12', '(2,0,2)'])(
  'the likelihood of %s is the dense Gaussian density at the estimates',
  (form) => {
    const y = series(7, 80, 4);
    const fit = fitModel(y, { form });
    const regressors = fit.constant ? [y.map(() => 1)] : [];
    expect(fit.logLikelihood).toBeCloseTo(denseLogLikelihood(fit.form, fit, y, regressors), 6);
  },
);

test('gaps as unknown figures and gaps in the diffuse filter differ by a number that no coefficient moves', () => {
  const y = Float64Array.from(series(5, 60, 4), (value, t) => ([0, 17, 18, 41, 59].includes(t) ? Number.NaN : value));
  const form = parseForm('(1,0,1)x(0,1,1)4');
  const penalty = noPenalty(0);
  const prepared = prepare(form, y, false, [], penalty.ridge);
  const fast = createEngine(form, prepared, penalty);
  const filter = createFilterEngine(form, prepared, penalty);
  expect(fast.concentrated.unknowns).toBe(5);
  expect(fast.observations).toBe(filter.observations);
  const differences = [
    [0, 0, 0],
    [1, -0.5, -1],
    [-0.7, 2, 0.4],
    [2.5, -2.5, -3],
  ].map((z) => fast.problem.evaluate(Float64Array.from(z)) - filter.problem.evaluate(Float64Array.from(z)));
  for (const difference of differences) expect(difference).toBeCloseTo(differences[0], 8);
});

describe('standard errors against a parametric bootstrap', () => {
  // Efron & Tibshirani, "An Introduction to the Bootstrap", 1993, section 6.5: the model simulated and fitted again.
  test.each([
    ['(1,0,0)x(0,1,1)4', 60, { phi: 0.5, theta: 0, Phi: 0, Theta: -0.4, m: 4, d: 0, D: 1 }],
    ['(0,1,1)x(1,0,0)4', 48, { phi: 0, theta: -0.4, Phi: 0.4, Theta: 0, m: 4, d: 1, D: 0 }],
  ] as const)('%s on %d figures', (form, n, at) => {
    const fits = Array.from({ length: 400 }, (_, i) => fitModel(simulate(1000 + i, n, at), { form }));
    fits[0].coefficients.forEach(({ name }, i) => {
      if (name === 'constant') return;
      const values = fits.map(({ coefficients }) => coefficients[i].value);
      const mean = values.reduce((a, b) => a + b) / values.length;
      const spread = Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
      const stated = fits.flatMap(({ coefficients }) => coefficients[i].standardError ?? []).sort((a, b) => a - b);
      const typical = stated[Math.floor(stated.length / 2)];
      // 400 draws know a spread to 3.5%; the asymptotic error may be a sixth off on so few figures.
      expect(typical / spread, name).toBeGreaterThan(0.8);
      expect(typical / spread, name).toBeLessThan(1.2);
    });
  });
});
