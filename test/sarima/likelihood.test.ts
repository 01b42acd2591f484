import { expect, test } from 'vitest';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';
import { denseLogLikelihood } from './dense.js';

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
