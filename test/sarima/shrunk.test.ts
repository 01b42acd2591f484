import { describe, expect, test } from 'vitest';
import { fitModel } from '../../src/sarima/fit.js';
import { parseForm } from '../../src/sarima/form.js';
import { defaultPriors, type Priors } from '../../src/sarima/priors.js';
import { denseLogLikelihood } from './dense.js';
import { simulate } from './simulate.js';

const y = simulate(8, 40, { phi: 0.6, theta: -0.2, Phi: 0, Theta: -0.5, m: 4, d: 0, D: 1 });
const form = '(1,0,1)x(0,1,1)4';
const coefficient = (centre: number, spread: number) => ({ centre, spread, on: 'coefficient' as const });
const priors: Priors = {
  coefficients: { phi1: coefficient(0.9, 0.05), theta1: coefficient(-0.4, 0.3), Theta1: coefficient(-0.8, 0.2) },
  ridge: 0,
};

test('shrunk estimates are the mode of the dense density times the priors', () => {
  const fit = fitModel(y, { form, fittedBy: 'shrunk', priors });
  const posterior = (phi: number, theta: number, Theta: number) => {
    const at = { phi: [phi], theta: [theta], Phi: [], Theta: [Theta] };
    const drawn = ((phi - 0.9) / 0.05) ** 2 + ((theta + 0.4) / 0.3) ** 2 + ((Theta + 0.8) / 0.2) ** 2;
    // The leash on z: ½·0.004 z², z the inverse hyperbolic tangent.
    const leash = 0.004 * (Math.atanh(phi) ** 2 + Math.atanh(theta) ** 2 + Math.atanh(Theta) ** 2);
    return denseLogLikelihood(parseForm(form), at, y) - (drawn + leash) / 2;
  };
  const [phi, theta, Theta] = [fit.phi[0], fit.theta[0], fit.Theta[0]];
  const top = posterior(phi, theta, Theta);
  for (const by of [-0.003, 0.003]) {
    expect(posterior(phi + by, theta, Theta)).toBeLessThan(top);
    expect(posterior(phi, theta + by, Theta)).toBeLessThan(top);
    expect(posterior(phi, theta, Theta + by)).toBeLessThan(top);
  }
});

test('the reported log-likelihood is the figures’ own, without the priors', () => {
  const fit = fitModel(y, { form, fittedBy: 'shrunk', priors });
  expect(fit.logLikelihood).toBeCloseTo(denseLogLikelihood(fit.form, fit, y), 6);
});

describe('between the data and the centres', () => {
  const free = fitModel(y, { form });
  const spread = (by: number): Priors => ({
    coefficients: { phi1: coefficient(0.3, by), theta1: coefficient(0.2, by), Theta1: coefficient(-0.1, by) },
    ridge: 0,
  });
  test('narrow priors give their centres, and the coefficients count for nothing', () => {
    const fit = fitModel(y, { form, fittedBy: 'shrunk', priors: spread(1e-4) });
    expect(fit.phi[0]).toBeCloseTo(0.3, 3);
    expect(fit.theta[0]).toBeCloseTo(0.2, 3);
    expect(fit.Theta[0]).toBeCloseTo(-0.1, 3);
    expect(fit.effectiveCoefficients).toBeCloseTo(0, 3);
  });
  test('wide priors give the maximum likelihood, and the coefficients count in full', () => {
    const fit = fitModel(y, { form, fittedBy: 'shrunk', priors: spread(100) });
    expect(free.logLikelihood - fit.logLikelihood).toBeLessThan(0.05);
    expect(fit.effectiveCoefficients).toBeGreaterThan(2.9);
    expect(free.effectiveCoefficients).toBe(3);
  });
  test('a ridge pulls the constant to zero', () => {
    const rising = y.map((value, t) => value + t);
    const at = (ridge: number) =>
      fitModel(rising, { form, constant: true, fittedBy: 'shrunk', priors: { ...priors, ridge } }).constantValue;
    expect(at(0)).toBeGreaterThan(3);
    expect(at(1)).toBeLessThan(at(0));
    expect(Math.abs(at(1e9))).toBeLessThan(1e-3);
  });
  test('the ridge’s constant is Σeu/(Σu² + λ) where nothing else is estimated', () => {
    // (0,0,0)x(0,1,0)4 with a drift: the errors are the yearly differences themselves.
    const differences = y.slice(4).map((value, t) => value - y[t]);
    const sum = differences.reduce((a, b) => a + b);
    const fit = fitModel(y, {
      form: '(0,0,0)x(0,1,0)4',
      constant: true,
      fittedBy: 'shrunk',
      priors: { coefficients: {}, ridge: 5 },
    });
    expect(fit.constantValue).toBeCloseTo(sum / (differences.length + 5), 9);
  });
});

test('twelve figures will do, and eight differences are the least', () => {
  expect(fitModel(y.slice(0, 12), { form, fittedBy: 'shrunk' }).observations).toBe(8);
  expect(() => fitModel(y.slice(0, 11), { form, fittedBy: 'shrunk' })).toThrow(/at least 12 figures/);
});

test('priors that belong to no coefficient, or are none, are refused', () => {
  const fitWith = (own: Priors) => () => fitModel(y, { form, fittedBy: 'shrunk', priors: own });
  expect(fitWith({ coefficients: { phi2: coefficient(0, 1) }, ridge: 0 })).toThrow(/phi2.*phi1, theta1, Theta1/);
  expect(fitWith({ coefficients: { phi1: coefficient(0, 0) }, ridge: 0 })).toThrow(/spread above zero/);
  expect(fitWith({ coefficients: {}, ridge: -1 })).toThrow(/ridge/);
});

test('one rule in the season’s length leads from the quarters’ centres to the months’', () => {
  const at = (m: number) => defaultPriors(parseForm(`(1,0,2)x(0,1,1)${m}`), 'plain', true).coefficients.phi1.centre;
  expect(at(2)).toBeLessThan(at(4));
  expect(at(4)).toBeLessThan(at(12));
  expect(at(13)).toBeCloseTo(at(12), 2);
});
