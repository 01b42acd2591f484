/** Neither too little nor too much differencing. */
import { difference } from '../sarima/difference.js';
import type { Fit } from '../sarima/fit.js';
import { effectsOf, modelled } from '../sarima/predict.js';
import { kpssPValue, kpssStatistic } from '../stats/kpss.js';
import { type Assumption, assumption, FEWEST_RESIDUALS, present, statusOf, untested } from './assumption.js';

/** A polynomial is this small at B = 1 where its root next to the unit circle lies at one. */
const NEAR_ZERO = 0.05;

/**
 * Too little: the differenced series, regressors' effects taken off, wanders from its level (Kwiatkowski, Phillips,
 * Schmidt & Shin, "Testing the null hypothesis of stationarity against the alternative of a unit root", Journal of
 * Econometrics 54, 1992), or an autoregressive root lies at one. Too much: a moving-average root at one undoes a
 * difference. Of the paper's bandwidths the longest, 12(n/100)^¼, the only one that seldom takes a slowly returning
 * series for a wandering one.
 */
export function checkDifferencing(fit: Fit): Assumption {
  const { d, D, m } = fit.form;
  const effects = effectsOf(fit, fit.values.length);
  const w = difference(
    modelled(fit).map((y, t) => y - effects[t]),
    d,
    D,
    m,
  );
  const n = present(w).length;
  if (n < FEWEST_RESIDUALS) return untested('differencing', { differences: n });
  const bandwidth = Math.floor(12 * (n / 100) ** 0.25);
  const statistic = kpssStatistic(w, bandwidth);
  if (!Number.isFinite(statistic)) return untested('differencing', { differences: n });
  const pValue = kpssPValue(statistic);
  const roots = rootsNearOne(fit);
  const status = statusOf(pValue);
  return assumption('differencing', {
    status: status === 'holds' && roots.length > 0 ? 'doubtful' : status,
    statistic,
    pValue,
    details: {
      differences: n,
      bandwidth,
      ...Object.fromEntries(['phi', 'theta', 'Phi', 'Theta'].map((name) => [name, Number(roots.includes(name))])),
    },
  });
}

/**
 * The polynomials with a root next to one: `phi` and `Phi` ask for another difference, `theta` and `Theta` for one less
 * where there is one that they undo.
 */
export function rootsNearOne(fit: Fit): string[] {
  const { d, D } = fit.form;
  const at1 = (coefficients: readonly number[], sign: 1 | -1) =>
    Math.abs(coefficients.reduce((sum, coefficient) => sum + sign * coefficient, 1)) < NEAR_ZERO;
  const isNearOne: Readonly<Record<string, boolean>> = {
    phi: at1(fit.phi, -1),
    theta: d + D > 0 && at1(fit.theta, 1),
    Phi: at1(fit.Phi, -1),
    Theta: D > 0 && at1(fit.Theta, 1),
  };
  return fit.nearUnitRoots.filter((name) => isNearOne[name]);
}
