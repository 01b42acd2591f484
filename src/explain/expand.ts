/**
 * The expanded difference equation (METHODS: Box, Jenkins, Reinsel & Ljung 2015, ch. 9, with plus signs on the
 * moving-average side). Multiplies φ(B)Φ(Bᵐ)∇ᵈ∇ₘᴰ and θ(B)Θ(Bᵐ) out, with symbols and with numbers.
 */
import type { Form } from '../sarima/form.js';
import { coefficientTex } from './symbols.js';

/** What is expanded: a form with the values of its coefficients. */
export interface Expandable {
  readonly form: Form;
  readonly phi: readonly number[];
  readonly theta: readonly number[];
  readonly Phi: readonly number[];
  readonly Theta: readonly number[];
  readonly constant: boolean;
  readonly constantValue: number;
}

/** A whole multiple of a product of coefficients: -1 times `phi1` times `Phi1`. No names: the number itself. */
export interface Product {
  readonly times: number;
  readonly names: readonly string[];
}

/** A term of the right-hand side: a weight on a value `lag` periods back, and the products it is the sum of. */
export interface LagTerm {
  readonly lag: number;
  readonly weight: number;
  readonly products: readonly Product[];
}

/** y_t = sum of lags + constant + ε_t + sum of surprises; `constant` is φ(1)Φ(1)c. */
export interface Expansion {
  readonly lags: readonly LagTerm[];
  readonly surprises: readonly LagTerm[];
  readonly constant: number;
}

/** The expansion over the variable itself. */
export function expand(model: Expandable): Expansion {
  const { d, D, m } = model.form;
  return rightHandSide(model, [...repeat(difference(1), d), ...repeat(difference(m), D)]);
}

/** The expansion over the differenced variable z = ∇ᵈ∇ₘᴰ y. */
export function expandDifferenced(model: Expandable): Expansion {
  return rightHandSide(model, []);
}

/** ∇ᵈ∇ₘᴰ as the terms that lead back from z: y_t = z_t + sum of these. */
export function undoDifferences({ d, D, m }: Form): readonly LagTerm[] {
  return negated(pastTerms(multiplyOut([...repeat(difference(1), d), ...repeat(difference(m), D)]), () => 0));
}

/** One term of a polynomial in B. */
interface Monomial extends Product {
  readonly lag: number;
}
type Polynomial = readonly Monomial[];

function rightHandSide(model: Expandable, differences: readonly Polynomial[]): Expansion {
  const { p, q, P, Q, m } = model.form;
  const value = valuesByName(model);
  const autoregressive = [polynomial('phi', p, 1, -1), polynomial('Phi', P, m, -1)];
  const movingAverage = [polynomial('theta', q, 1, 1), polynomial('Theta', Q, m, 1)];
  return {
    lags: negated(pastTerms(multiplyOut([...autoregressive, ...differences]), value)),
    surprises: pastTerms(multiplyOut(movingAverage), value),
    constant: model.constant ? autoregressive.reduce((c, factor) => c * atOne(factor, value), model.constantValue) : 0,
  };
}

/** 1 + sign·name₁Bˢ + sign·name₂B²ˢ + … */
function polynomial(name: string, order: number, spacing: number, sign: 1 | -1): Polynomial {
  const terms = Array.from({ length: order }, (_, i) => ({
    lag: (i + 1) * spacing,
    times: sign,
    names: [`${name}${i + 1}`],
  }));
  return [one, ...terms];
}

const one: Monomial = { lag: 0, times: 1, names: [] };

/** 1 − Bˢ */
const difference = (spacing: number): Polynomial => [one, { lag: spacing, times: -1, names: [] }];

const repeat = <T>(item: T, count: number): T[] => Array.from({ length: count }, () => item);

function multiplyOut(factors: readonly Polynomial[]): Polynomial {
  return factors.reduce(
    (product, factor) => collected(product.flatMap((a) => factor.map((b) => multiplied(a, b)))),
    [one],
  );
}

function multiplied(a: Monomial, b: Monomial): Monomial {
  return { lag: a.lag + b.lag, times: a.times * b.times, names: [...a.names, ...b.names] };
}

/** Adds what stands at the same lag with the same names; what cancels is gone. */
function collected(terms: Polynomial): Polynomial {
  const sums = new Map<string, Monomial>();
  for (const term of terms) {
    const key = `${term.lag}|${term.names.join(' ')}`;
    sums.set(key, { ...term, times: term.times + (sums.get(key)?.times ?? 0) });
  }
  return [...sums.values()].filter((term) => term.times !== 0);
}

/** Lags 1, 2, …: one term a lag, shorter products first, those without a seasonal coefficient before the others. */
function pastTerms(terms: Polynomial, value: (name: string) => number): LagTerm[] {
  const lags = [...new Set(terms.map((term) => term.lag))].filter((lag) => lag > 0).sort((a, b) => a - b);
  return lags.map((lag) => {
    const here = terms.filter((term) => term.lag === lag).sort(inReadingOrder);
    return {
      lag,
      weight: here.reduce((sum, term) => sum + term.names.reduce((product, n) => product * value(n), term.times), 0),
      products: here.map(({ times, names }) => ({ times, names })),
    };
  });
}

const inReadingOrder = (a: Product, b: Product): number =>
  a.names.length - b.names.length || Number(isSeasonal(a)) - Number(isSeasonal(b));

const isSeasonal = ({ names }: Product): boolean => names.some((name) => /^[PT]/.test(name));

const negated = (terms: readonly LagTerm[]): LagTerm[] =>
  terms.map(({ lag, weight, products }) => ({
    lag,
    weight: 0 - weight,
    products: products.map(({ times, names }) => ({ times: -times, names })),
  }));

const atOne = (factor: Polynomial, value: (name: string) => number): number =>
  factor.reduce((sum, term) => sum + term.names.reduce((product, n) => product * value(n), term.times), 0);

function valuesByName(model: Expandable): (name: string) => number {
  const families = { phi: model.phi, theta: model.theta, Phi: model.Phi, Theta: model.Theta };
  const values = new Map(
    Object.entries(families).flatMap(([family, values]) => values.map((value, i) => [`${family}${i + 1}`, value])),
  );
  return (name) => values.get(name) ?? 0;
}

/** The weight as a sum of products in TeX, e.g. `\phi_1 - \phi_1\Phi_1`. */
export function weightTex(products: readonly Product[]): string {
  return products
    .map(({ times, names }, i) => {
      const sign = times < 0 ? (i === 0 ? '-' : ' - ') : i === 0 ? '' : ' + ';
      return `${sign}${productTex({ times: Math.abs(times), names })}`;
    })
    .join('');
}

function productTex({ times, names }: Product): string {
  const number = times === 1 && names.length > 0 ? '' : `${times}`;
  return `${number}${names.map(coefficientTex).join('')}`;
}
