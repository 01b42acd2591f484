import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { expand } from '../../src/explain/expand.js';
import { difference, integrate } from '../../src/sarima/difference.js';
import { fitModel } from '../../src/sarima/fit.js';
import { type Form, formText, parseForm } from '../../src/sarima/form.js';
import { differencePolynomial, multiply } from '../../src/sarima/polynomial.js';
import { predict } from '../../src/sarima/predict.js';
import { smooth } from '../../src/sarima/smooth.js';
import { createGenerator } from '../../src/stats/generator.js';
import { simulate } from './simulate.js';

const order = fc.integer({ min: 0, max: 2 });
const forms: fc.Arbitrary<Form> = fc
  .tuple(order, order, order, order, order, order, fc.constantFrom(2, 4, 12, 52))
  .map(([p, d, q, P, D, Q, m]) => ({ p, d, q, P, D, Q, m }));

test('a form’s text is read back as the form', () => {
  fc.assert(
    fc.property(forms, (form) => {
      expect(parseForm(formText(form))).toEqual(form);
    }),
  );
  expect(parseForm('( 0,1,1 ) × (0,1,1) 12')).toEqual(parseForm('(0,1,1)(0,1,1)12'));
  expect(() => parseForm('(0,1,1)(0,1,1)')).toThrow(/season’s length|season's length/);
});

test('a product of polynomials has the product of their values at any point', () => {
  const polynomial = fc.array(fc.double({ min: -2, max: 2, noNaN: true }), { minLength: 1, maxLength: 8 });
  const value = (coefficients: readonly number[], x: number) => coefficients.reduceRight((sum, c) => sum * x + c, 0);
  fc.assert(
    fc.property(polynomial, polynomial, fc.double({ min: -1, max: 1, noNaN: true }), (a, b, x) => {
      expect(value(multiply(a, b), x)).toBeCloseTo(value(a, x) * value(b, x), 9);
    }),
  );
});

test('differencing and integrating undo each other', () => {
  const series = fc.array(fc.double({ min: -1000, max: 1000, noNaN: true }), { minLength: 40, maxLength: 60 });
  fc.assert(
    fc.property(
      series,
      fc.integer({ min: 0, max: 2 }),
      fc.integer({ min: 0, max: 2 }),
      fc.constantFrom(1, 4, 12),
      (y, d, D, m) => {
        const lost = differencePolynomial(d, D, m).length - 1;
        const back = integrate(y.slice(0, lost), difference(y, d, D, m), d, D, m);
        back.forEach((value, t) => {
          expect(Math.abs(value - y[lost + t])).toBeLessThan(1e-5);
        });
      },
    ),
  );
});

describe('a simulated model’s coefficients are recovered within four standard errors', () => {
  test.each([
    ['(1,0,0)x(0,0,1)4', { phi: 0.6, theta: 0, Phi: 0, Theta: -0.5, m: 4, d: 0, D: 0 }],
    ['(0,1,1)x(0,1,1)4', { phi: 0, theta: -0.5, Phi: 0, Theta: -0.6, m: 4, d: 1, D: 1 }],
    ['(1,0,0)x(0,1,1)12', { phi: 0.7, theta: 0, Phi: 0, Theta: -0.5, m: 12, d: 0, D: 1 }],
    ['(0,1,1)x(1,0,0)4', { phi: 0, theta: 0.4, Phi: 0.6, Theta: 0, m: 4, d: 1, D: 0 }],
  ] as const)('%s', (form, at) => {
    const fit = fitModel(simulate(11, 400, at), { form });
    const truth: Record<string, number> = { phi1: at.phi, theta1: at.theta, Phi1: at.Phi, Theta1: at.Theta };
    for (const { name, value, standardError } of fit.coefficients) {
      if (name === 'constant') continue;
      expect(standardError).not.toBeNull();
      expect(Math.abs(value - truth[name]), name).toBeLessThan(4 * (standardError ?? 0));
    }
    expect(Math.abs(Math.log(fit.innovationVariance))).toBeLessThan(4 * Math.sqrt(2 / 400));
    expect(fit.settled).toBe(true);
  });
});

describe('the expanded equation, fed with figures and surprises given all figures, is the exact forecast', () => {
  const y = simulate(5, 60, { phi: 0.5, theta: -0.3, Phi: 0, Theta: -0.7, m: 4, d: 0, D: 1 });
  const event = y.map((_, t) => (t === 30 || t === 31 ? 1 : 0));
  test.each([
    ['(1,0,1)x(0,1,1)4', [], false],
    ['(0,1,1)x(0,1,1)4', [10, 40], false, [38, 56, 59]],
    ['(0,1,1)x(0,1,1)4', [10, 57, 58], false],
    ['(2,0,0)x(1,0,0)4', [], true],
    ['(0,1,2)x(0,1,1)4', [3, 40], true],
    ['(0,2,1)', [], false],
    ['(1,0,0)x(0,2,1)4', [], false],
  ] as const)('%s, gaps at %j, event %s, sold out %j', (form, gaps, withEvent, soldOut: readonly number[] = []) => {
    const values = y.map((value, t) => ((gaps as readonly number[]).includes(t) ? Number.NaN : value));
    const regressors = withEvent ? [{ name: 'event1', values: [...event, 1] }] : [];
    const fit = fitModel(values, { form, regressors, soldOut });
    const { values: known, surprises } = smooth(fit);
    const effect = (t: number) => (withEvent ? fit.effects[0] * (t === values.length ? 1 : event[t]) : 0);
    const { lags, surprises: past, constant } = expand(fit);
    const n = values.length;
    const sum =
      lags.reduce((total, { lag, weight }) => total + weight * (known[n - lag] - effect(n - lag)), 0) +
      constant +
      past.reduce((total, { lag, weight }) => total + weight * surprises[n - lag], 0) +
      effect(n);
    expect(sum / predict(fit, 1).mean[0]).toBeCloseTo(1, 9);
  });
});

describe('hard figures give a result or an error that says what is wrong', () => {
  const AT = { phi: 0, theta: -0.4, Phi: 0, Theta: -0.5, m: 4, d: 1, D: 1 };
  const y = simulate(3, 48, AT);
  test.each([1e-9, 1, 1e12])('figures times %d have the same coefficients', (factor) => {
    const [plain, scaled] = [y, y.map((value) => factor * value)].map((values) =>
      fitModel(values, { form: '(0,1,1)x(0,1,1)4' }),
    );
    plain.coefficients.forEach(({ value }, i) => {
      expect(scaled.coefficients[i].value).toBeCloseTo(value, 6);
    });
  });

  const odd = createGenerator(3);
  const long = simulate(4, 2000, { phi: 0, theta: -0.4, Phi: 0, Theta: -0.5, m: 12, d: 1, D: 1 });
  test.each([
    ['one value repeated from the middle on', y.map((value, t) => (t > 20 ? 50 : value))],
    ['changes of sign', y.map((value, t) => (t % 2 === 0 ? 1 : -1) * (value - 100))],
    ['mostly zeros', y.map((value, t) => (t % 5 === 0 ? value : 0))],
    ['one spike', y.map((value, t) => (t === 30 ? 1e9 : value))],
    ['60% missing', simulate(6, 120, AT).map((value) => (odd.uniform() < 0.6 ? Number.NaN : value))],
    ['2,000 figures', long],
    ['2,000 figures, 60% missing', long.map((value) => (odd.uniform() < 0.6 ? Number.NaN : value))],
  ] as const)('%s', (_, values) => {
    for (const form of ['(0,1,1)x(0,1,1)4', '(1,0,2)x(0,1,1)4', '(2,1,1)x(0,1,1)4'])
      for (const fittedBy of ['maximum-likelihood', 'shrunk'] as const) {
        const fit = fitModel(values, { form, fittedBy });
        const { mean, standardError } = predict(fit, 8);
        const numbers = [fit.logLikelihood, ...fit.coefficients.map(({ value }) => value), ...mean, ...standardError];
        expect(numbers.every(Number.isFinite), form).toBe(true);
        expect(fit.innovationVariance).toBeGreaterThan(0);
      }
  });

  test('a position of the season without any figure', () => {
    const values = y.map((value, t) => (t % 4 === 0 ? Number.NaN : value));
    expect(() => fitModel(values, { form: '(0,1,1)x(0,1,1)4' })).toThrow(/every position of the season needs a figure/);
  });

  test('constant figures, too few figures, figures off the scale', () => {
    expect(() =>
      fitModel(
        y.map(() => 7),
        { form: '(0,1,1)x(0,1,1)4' },
      ),
    ).toThrow(/every figure is the same/);
    expect(() => fitModel(y.slice(0, 12), { form: '(0,1,1)x(0,1,1)4' })).toThrow(/needs at least 18 figures/);
    expect(() => fitModel(y.slice(0, 12), { form: '(0,1,1)x(0,1,1)4' })).toThrow(
      expect.objectContaining({ name: 'TooFewFigures', needed: 18, there: 12 }),
    );
    expect(() => fitModel([...y.slice(0, 40), 0], { form: '(0,1,1)x(0,1,1)4', scale: 'log' })).toThrow(/figure 41/);
    expect(fitModel(y.slice(0, 6), { form: '(0,0,0)x(0,1,0)4' }).observations).toBe(2);
  });
});
