import { expect, test } from 'vitest';
import { checkDifferencing } from '../../src/assumptions/differencing.js';
import { fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const SEEDS = Array.from({ length: 100 }, (_, i) => i + 1);
const PLAIN = { phi: 0, theta: 0, Phi: 0, Theta: 0, m: 1, d: 0, D: 0 };
const statuses = (n: number, at: typeof PLAIN, form: string) =>
  SEEDS.map((seed) => checkDifferencing(fitModel(simulate(seed, n, at), { form })));

test('a random walk that is not differenced: by the test or by a root at one', () => {
  const found = statuses(150, { ...PLAIN, d: 1 }, '(1,0,0)').filter(({ status }) => status !== 'holds');
  expect(found.length).toBeGreaterThan(50);
  expect(found.some(({ details }) => details.phi === 1)).toBe(true);
});

test('a climb that is not differenced', () => {
  const y = simulate(3, 44, { ...PLAIN, phi: 0.3 }).map((value, t) => value + t);
  expect(checkDifferencing(fitModel(y, { form: '(0,0,1)' })).status).toBe('doubtful');
  expect(checkDifferencing(fitModel(y, { form: '(0,1,1)', constant: true })).details.phi).toBe(0);
});

test('independent values, differenced once: a moving-average root at one', () => {
  // The estimate is −1 itself for most such series: Sargan & Bhargava, Econometrica 51 (1983).
  const found = statuses(60, PLAIN, '(0,1,1)').filter(
    ({ status, details }) => status !== 'holds' && details.theta === 1,
  );
  expect(found.length).toBeGreaterThan(60);
});

test('a fixed season, differenced: a seasonal moving-average root at one', () => {
  const found = SEEDS.filter((seed) => {
    const y = simulate(seed, 60, { ...PLAIN, d: 1 }).map((value, t) => value + [0, 20, -10, 5][t % 4]);
    return checkDifferencing(fitModel(y, { form: '(0,1,0)x(0,1,1)4' })).details.Theta === 1;
  });
  expect(found.length).toBeGreaterThan(50);
});

test('a moving-average root where nothing is differenced undoes no difference', () => {
  const fit = fitModel(simulate(1, 60, { ...PLAIN, theta: 0.3 }), { form: '(0,0,1)' });
  expect(checkDifferencing({ ...fit, theta: [-1], nearUnitRoots: ['theta'] }).details.theta).toBe(0);
  // θ = +1 has its root at minus one, where ∇ has none.
  const once = fitModel(simulate(1, 60, { ...PLAIN, theta: 0.3, d: 1 }), { form: '(0,1,1)' });
  expect(checkDifferencing({ ...once, theta: [1], nearUnitRoots: ['theta'] }).details.theta).toBe(0);
  expect(checkDifferencing({ ...once, theta: [-1], nearUnitRoots: ['theta'] }).details.theta).toBe(1);
});

test('a regressor’s step is no wandering', () => {
  const step = Array.from({ length: 80 }, (_, t) => (t < 40 ? 0 : 10));
  const y = simulate(6, 80, PLAIN).map((value, t) => value + step[t]);
  expect(checkDifferencing(fitModel(y, { form: '(0,0,1)' })).status).not.toBe('holds');
  const regressors = [{ name: 'step', values: step }];
  expect(checkDifferencing(fitModel(y, { form: '(0,0,1)', regressors })).status).toBe('holds');
});

test('series that return to their level, however slowly, pass but for about one in twenty', () => {
  for (const phi of [0, 0.6, 0.8]) {
    const alarms = statuses(100, { ...PLAIN, phi }, '(1,0,0)').filter(({ status }) => status !== 'holds');
    expect(alarms.length, `φ ${phi}`).toBeLessThanOrEqual(11);
  }
});

test('untested on fewer than 12 differences', () => {
  const fit = fitModel(simulate(1, 15, { ...PLAIN, m: 4 }), { form: '(0,0,0)x(0,1,0)4' });
  expect(checkDifferencing(fit)).toMatchObject({ status: 'untested', statistic: null, pValue: null });
});
