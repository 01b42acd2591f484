import fc from 'fast-check';
import { expect, test } from 'vitest';
import { checkAssumptions } from '../../src/assumptions/assumptions.js';
import { type Fit, fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const AIRLINE = { phi: 0, theta: -0.4, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 };
/** The order of the table of assumptions. */
const IDS = [
  'leftover-pattern',
  'even-spread',
  'normal-surprises',
  'odd-quarters',
  'stable-over-time',
  'enough-history',
  'differencing',
  'settled-fit',
];

test('one of each, in order, and the same every time', () => {
  const fit = fitModel(simulate(8, 44, AIRLINE), { form: '(0,1,1)x(0,1,1)4' });
  const found = checkAssumptions(fit);
  expect(found.map(({ id }) => id)).toEqual(IDS);
  expect(checkAssumptions(fit)).toEqual(found);
});

test('whatever the series, the model and the gaps: no error, no number that is none', () => {
  const seeds = fc.integer({ min: 1, max: 1e6 });
  const holes = fc.uniqueArray(fc.nat(60), { maxLength: 8 });
  const models = fc.constantFrom(
    '(0,1,1)x(0,1,1)4',
    '(1,0,2)x(0,1,1)4',
    '(0,0,0)x(0,1,0)4',
    '(2,1,0)',
    '(1,0,1)',
    '(0,1,1)x(1,0,0)12',
    '(0,2,2)',
    '(0,0,0)',
  );
  const arbitrary = {
    seed: seeds,
    n: fc.integer({ min: 3, max: 61 }),
    form: models,
    scale: fc.constantFrom('plain', 'log', 'box-cox 0.5'),
    fittedBy: fc.constantFrom('maximum-likelihood' as const, 'shrunk' as const),
    gaps: holes,
    soldOut: fc.uniqueArray(fc.nat(60), { maxLength: 2 }),
    spike: fc.nat(60),
    hasEvent: fc.boolean(),
  };
  fc.assert(
    fc.property(fc.record(arbitrary), ({ seed, n, form, scale, fittedBy, gaps, soldOut, spike, hasEvent }) => {
      const y = simulate(seed, n, AIRLINE).map((value, t) =>
        gaps.includes(t) ? Number.NaN : Math.exp(value / 50) * (t === spike ? 3 : 1),
      );
      const bounds = soldOut.filter((t) => t < n && !gaps.includes(t));
      // An event that the plan names for the past only.
      const regressors = hasEvent ? [{ name: 'event', values: y.map((_, t) => (t % 7 === 2 ? 1 : 0)) }] : [];
      const fit = fitted(() => fitModel(y, { form, scale, fittedBy, soldOut: bounds, regressors, season: 4 }));
      fc.pre(fit !== null);
      if (fit === null) return;
      const found = checkAssumptions(fit);
      expect(found.map(({ id }) => id)).toEqual(IDS);
      for (const { status, statistic, pValue, details, outliers } of found) {
        const numbers = [
          statistic,
          pValue,
          ...Object.values(details),
          ...outliers.flatMap((each) => Object.values(each)),
        ];
        for (const value of numbers) if (typeof value === 'number') expect(value).toSatisfy(Number.isFinite);
        if (pValue !== null) expect(pValue >= 0 && pValue <= 1).toBe(true);
        if (status === 'untested') expect([statistic, pValue, outliers.length]).toEqual([null, null, 0]);
        expect(outliers.length).toBeLessThanOrEqual(5);
      }
    }),
    { numRuns: 300, seed: 5 },
  );
});

function fitted(make: () => Fit): Fit | null {
  try {
    return make();
  } catch {
    return null;
  }
}

test('units don’t matter: a thousand times the figures give the same verdicts', () => {
  for (let seed = 1; seed <= 10; seed++) {
    const y = simulate(seed, 44, AIRLINE);
    y[21] += 8;
    const [small, large] = [y, y.map((value) => 1000 * value)].map((values) =>
      checkAssumptions(fitModel(values, { form: '(0,1,1)x(0,1,1)4' })),
    );
    small.forEach(({ status, statistic, outliers }, i) => {
      expect(large[i].status).toBe(status);
      if (statistic !== null) expect(large[i].statistic).toBeCloseTo(statistic, 3);
      outliers.forEach(({ period, forecastChange }, j) => {
        expect(large[i].outliers[j].period).toBe(period);
        expect(large[i].outliers[j].forecastChange / 1000).toBeCloseTo(forecastChange, 3);
      });
    });
  }
});
