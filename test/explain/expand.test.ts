import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type Expandable,
  expand,
  expandDifferenced,
  type LagTerm,
  undoDifferences,
  weightTex,
} from '../../src/explain/expand.js';
import { differencePolynomial, multiply, polynomial } from '../../src/sarima/polynomial.js';

const coefficients = (count: number) =>
  fc.array(fc.double({ min: -0.99, max: 0.99, noNaN: true }), { minLength: count, maxLength: count });

const models: fc.Arbitrary<Expandable> = fc
  .record({
    p: fc.integer({ min: 0, max: 3 }),
    d: fc.integer({ min: 0, max: 2 }),
    q: fc.integer({ min: 0, max: 3 }),
    P: fc.integer({ min: 0, max: 2 }),
    D: fc.integer({ min: 0, max: 2 }),
    Q: fc.integer({ min: 0, max: 2 }),
    m: fc.constantFrom(2, 4, 12),
  })
  .chain((form) =>
    fc.record({
      form: fc.constant(form),
      phi: coefficients(form.p),
      theta: coefficients(form.q),
      Phi: coefficients(form.P),
      Theta: coefficients(form.Q),
      constant: fc.constant(form.d + form.D < 2),
      constantValue: fc.double({ min: -50, max: 50, noNaN: true }),
    }),
  );

/** 1 − Σ weights Bʲ (sign −1) or 1 + Σ weights Bʲ, as an array from lag 0. */
const asPolynomial = (terms: readonly LagTerm[], sign: 1 | -1, length: number): number[] => {
  const result = new Array<number>(length).fill(0);
  result[0] = 1;
  for (const { lag, weight } of terms) result[lag] = sign * weight;
  return result;
};

const expectClose = (actual: readonly number[], wanted: readonly number[]) => {
  expect(actual.length).toBe(wanted.length);
  actual.forEach((value, lag) => {
    expect(Math.abs(value - wanted[lag])).toBeLessThan(1e-10);
  });
};

/** The value of a symbolic weight, read back from its TeX. */
function valueOfTex(tex: string, model: Expandable): number {
  return [...tex.matchAll(/(^|[-+] ?)([^-+]+)/g)].reduce((sum, [, sign, product]) => {
    const whole = /^\d+/.exec(product.trim())?.[0] ?? '1';
    const symbols = [...product.matchAll(/\\(phi|theta|Phi|Theta)_\{?(\d+)\}?/g)];
    const size = symbols.reduce(
      (value, [, family, index]) => value * model[family as 'phi'][Number(index) - 1],
      Number(whole),
    );
    return sum + (sign.startsWith('-') ? -size : size);
  }, 0);
}

describe('the expanded difference equation', () => {
  test('has the weights of the multiplied polynomials, over the variable and over its differences', () => {
    fc.assert(
      fc.property(models, (model) => {
        const { d, D, m } = model.form;
        const ar = multiply(polynomial(model.phi, -1), polynomial(model.Phi, -1, m));
        const ma = multiply(polynomial(model.theta, 1), polynomial(model.Theta, 1, m));
        const full = multiply(ar, differencePolynomial(d, D, m));
        const expanded = expand(model);
        const differenced = expandDifferenced(model);
        expectClose(asPolynomial(expanded.lags, -1, full.length), full);
        expectClose(asPolynomial(differenced.lags, -1, ar.length), ar);
        expectClose(asPolynomial(expanded.surprises, 1, ma.length), ma);
        expectClose(
          asPolynomial(undoDifferences(model.form), -1, differencePolynomial(d, D, m).length),
          differencePolynomial(d, D, m),
        );
        const atOne = ar.reduce((sum, weight) => sum + weight, 0);
        expect(expanded.constant).toBeCloseTo(model.constant ? atOne * model.constantValue : 0, 8);
      }),
    );
  });

  test('writes each weight as the sum of products that it is', () => {
    fc.assert(
      fc.property(models, (model) => {
        const { lags, surprises } = expand(model);
        for (const { weight, products } of [...lags, ...surprises])
          expect(Math.abs(valueOfTex(weightTex(products), model) - weight)).toBeLessThan(1e-10);
      }),
    );
  });

  test('reads as in a textbook', () => {
    const none = { phi: [], theta: [], Phi: [], Theta: [], constant: false, constantValue: 0 };
    // ARIMA(0,1,1)×(1,0,0)₄: y_t = y_{t−1} + Φ₁y_{t−4} − Φ₁y_{t−5} + ε_t + θ₁ε_{t−1}, by hand.
    const model = { ...none, form: { p: 0, d: 1, q: 1, P: 1, D: 0, Q: 0, m: 4 }, theta: [0.4], Phi: [0.5] };
    const written = ({ lag, products }: LagTerm) => [lag, weightTex(products)];
    expect(expand(model).lags.map(written)).toEqual([
      [1, '1'],
      [4, '\\Phi_1'],
      [5, '-\\Phi_1'],
    ]);
    expect(expand(model).surprises.map(written)).toEqual([[1, '\\theta_1']]);
    // Lags that meet are merged: (1 − φ₁B)(1 − B)² by hand.
    const twice = { ...none, form: { p: 1, d: 2, q: 0, P: 0, D: 0, Q: 0, m: 1 }, phi: [0.3] };
    expect(expand(twice).lags.map(written)).toEqual([
      [1, '2 + \\phi_1'],
      [2, '-1 - 2\\phi_1'],
      [3, '\\phi_1'],
    ]);
    // A season of 2 and a second lag stand at the same place.
    const meeting = { ...none, form: { p: 2, d: 0, q: 0, P: 1, D: 0, Q: 0, m: 2 }, phi: [0.3, 0.2], Phi: [0.1] };
    expect(expand(meeting).lags.map(written)[1]).toEqual([2, '\\phi_2 + \\Phi_1']);
  });
});
