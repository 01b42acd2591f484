import { expect, test } from 'vitest';
import { checkSettled } from '../../src/assumptions/settled.js';
import { type Fit, fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const y = simulate(4, 60, { phi: 0, theta: -0.4, Phi: 0, Theta: -0.5, m: 4, d: 1, D: 1 });
const fit = fitModel(y, { form: '(0,1,1)x(0,1,1)4' });

test('a clean fit holds', () => {
  expect(checkSettled(fit)).toMatchObject({
    status: 'holds',
    details: { settled: 1, nearlyCancels: 0, covariance: 1, nearUnitRoots: 0 },
  });
});

test.each<[string, Partial<Fit>, string]>([
  ['the search did not come to rest', { settled: false }, 'fails'],
  ['polynomials undo each other', { nearlyCancels: true }, 'doubtful'],
  ['the estimates have no covariance', { covariance: null }, 'doubtful'],
  ['a moving-average root lies at minus one', { theta: [1], nearUnitRoots: ['theta'] }, 'doubtful'],
  ['one at one speaks of the differencing and is told there', { theta: [-1], nearUnitRoots: ['theta'] }, 'holds'],
])('%s', (_, change, status) => {
  expect(checkSettled({ ...fit, ...change }).status).toBe(status);
});
