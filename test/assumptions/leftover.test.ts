import { expect, test } from 'vitest';
import { checkLeftover } from '../../src/assumptions/leftover.js';
import { fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const SEEDS = Array.from({ length: 100 }, (_, i) => i + 1);
const AIRLINE = { phi: 0, theta: -0.4, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 };
const NOISE = { phi: 0, theta: 0, Phi: 0, Theta: 0, m: 4, d: 0, D: 0 };

test('at max(k + 3, min(2m, n/5)) lags, k off the degrees of freedom', () => {
  const lagsOf = (n: number, form: string) => checkLeftover(fitModel(simulate(5, n, AIRLINE), { form })).details;
  // n after differencing: 39, 60, 25; k = 2, 2, 4.
  expect(lagsOf(44, '(0,1,1)x(0,1,1)4')).toMatchObject({ lags: 7, degreesOfFreedom: 5, residuals: 39 });
  expect(lagsOf(65, '(0,1,1)x(0,1,1)4')).toMatchObject({ lags: 8, degreesOfFreedom: 6, residuals: 60 });
  expect(lagsOf(30, '(1,1,1)x(1,1,1)4')).toMatchObject({ lags: 7, degreesOfFreedom: 3, residuals: 25 });
});

test('a short-run pattern that the model leaves out is found', () => {
  const found = SEEDS.filter((seed) => {
    const y = simulate(seed, 100, { ...NOISE, phi: 0.6 });
    return checkLeftover(fitModel(y, { form: '(0,0,0)', season: 4 })).status === 'fails';
  });
  expect(found.length).toBeGreaterThan(95);
});

test('a season that the model leaves out is found, at the seasonal lag', () => {
  const found = SEEDS.filter((seed) => {
    const { status, details } = checkLeftover(
      fitModel(simulate(seed, 60, { ...NOISE, Phi: 0.7 }), { form: '(1,0,0)', season: 4 }),
    );
    return status === 'fails' && details.seasonalLag === 4 && details.seasonalAutocorrelation > 0;
  });
  expect(found.length).toBeGreaterThan(90);
});

test('the worse of the two tests counts', () => {
  for (const seed of SEEDS) {
    const y = simulate(seed, 44, { ...NOISE, Phi: 0.3 });
    const { status, pValue, details } = checkLeftover(fitModel(y, { form: '(0,0,0)', season: 4 }));
    const worse = Math.min(pValue ?? Number.NaN, details.seasonalPValue);
    expect(status).toBe(worse < 0.01 ? 'fails' : worse < 0.05 ? 'doubtful' : 'holds');
  }
});

test('the right model passes, but for about one series in ten: two tests at 5% each', () => {
  const alarms = SEEDS.filter(
    (seed) => checkLeftover(fitModel(simulate(seed, 80, AIRLINE), { form: '(0,1,1)x(0,1,1)4' })).status !== 'holds',
  );
  // Binomial with 100 and 0.1: more than 17 has a chance of 0.01.
  expect(alarms.length).toBeLessThanOrEqual(17);
});

test('no season, no seasonal lag', () => {
  const fit = fitModel(simulate(1, 40, { ...NOISE, m: 1 }), { form: '(1,0,0)' });
  expect(checkLeftover(fit).details).not.toHaveProperty('seasonalLag');
});

test('untested on fewer than 12 residuals', () => {
  const fit = fitModel(simulate(1, 15, AIRLINE), { form: '(0,1,1)x(0,1,1)4', fittedBy: 'shrunk' });
  expect(checkLeftover(fit)).toMatchObject({ status: 'untested', statistic: null, pValue: null });
});
