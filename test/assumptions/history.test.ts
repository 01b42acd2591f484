import { expect, test } from 'vitest';
import { checkHistory } from '../../src/assumptions/history.js';
import { fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const series = (n: number, m = 4) => simulate(2, n, { phi: 0, theta: 0, Phi: 0, Theta: 0, m, d: 0, D: 0 });
const check = (y: number[], m = 4) => checkHistory(fitModel(y, { form: `(0,0,0)x(0,1,0)${m}` }));

test.each([
  [8, 2, 'fails'],
  [11, 2, 'fails'],
  [12, 3, 'doubtful'],
  [15, 3, 'doubtful'],
  [16, 4, 'holds'],
  [44, 11, 'holds'],
])('%i quarters are %i full years', (n, years, status) => {
  expect(check(series(n))).toMatchObject({ status, statistic: years, pValue: null, details: { years, season: 4 } });
});

test('47 months are three full years', () => {
  expect(check(series(47, 12), 12)).toMatchObject({ status: 'doubtful', details: { years: 3 } });
});

test('a gap takes its year away', () => {
  const y = series(17);
  y[6] = Number.NaN;
  expect(check(y)).toMatchObject({ status: 'doubtful', details: { years: 3, figures: 16 } });
  // The seventeenth figure is a fifth of its quarter, of which one may be missing.
  const other = series(17);
  other[4] = Number.NaN;
  expect(check(other).status).toBe('holds');
});
