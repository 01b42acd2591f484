/** Forecasts of the bare model: means, and the joint covariance of their errors, exact from the filter. */
import { type Arma, createArma, expand } from './arma.js';
import { createFilter, type FilterSpace, filterErrors } from './filter.js';
import type { Fit } from './fit.js';
import { product } from './objective.js';
import { checkRegressors, regressionColumns } from './regressors.js';
import { toScale } from './scale.js';
import { psiWeights } from './weights.js';

export interface Prediction {
  /** On the model's scale, regressors' effects included. */
  readonly mean: Float64Array;
  readonly standardError: Float64Array;
  /** Joint covariance of the forecast errors, ahead by ahead, row by row. */
  readonly covariance: Float64Array;
}

/** The means alone, which cost a fraction of it. */
export function predictMeans(fit: Fit, ahead: number): Float64Array {
  const n = fit.values.length;
  const known = effectsOf(fit, n + ahead);
  const { arma, s, delta, deltaLags, states } = filtered(fit, known);
  const { r, ar, arLags } = arma;
  const a = Float64Array.from(states[0]);
  const mean = new Float64Array(ahead);
  for (let h = 0; h < ahead; h++) {
    let y = a[0];
    for (let l = 0; l < deltaLags.length; l++) y += delta[deltaLags[l]] * a[r + deltaLags[l]];
    mean[h] = y + known[n + h];
    const u = a[0];
    a.copyWithin(0, 1, r);
    a[r - 1] = 0;
    for (let l = 0; l < arLags.length; l++) a[arLags[l] - 1] += ar[arLags[l] - 1] * u;
    if (s > 0) {
      a.copyWithin(r + 1, r, r + s - 1);
      a[r] = y;
    }
  }
  return mean;
}

/** Forecasts `ahead` periods. Throws where a regressor does not reach that far. */
export function predict(fit: Fit, ahead: number): Prediction {
  const n = fit.values.length;
  checkRegressors(fit.regressors, n + ahead, `a forecast of ${ahead} periods`);
  const known = effectsOf(fit, n + ahead);
  // Demand in a sold-out period spreads over the forecasts as its own column does, run through the filter.
  const filter = filtered(fit, known, {
    beside: fit.soldOut.map((period) => Float64Array.from({ length: n }, (_, t) => (t === period ? 1 : 0))),
  });
  const { arma, size, s, delta, deltaLags, P, lagsUncertain, states } = filter;
  const { r, ar } = arma;

  // gₕ is the row that reads step h's figure off the state after the last one: g₁ = Z, gₕ₊₁ = gₕT.
  const readings: Float64Array[] = [];
  let g = new Float64Array(size);
  g[0] = 1;
  g.set(delta, r);
  for (let h = 0; h < ahead; h++) {
    readings.push(g);
    const next = new Float64Array(size);
    for (let i = 0; i < r; i++) next[0] += g[i] * ar[i];
    for (let i = 0; i < r - 1; i++) next[i + 1] += g[i];
    if (s > 0) {
      next[0] += g[r];
      for (let l = 0; l < deltaLags.length; l++) next[r + deltaLags[l]] += g[r] * delta[deltaLags[l]];
      for (let k = 0; k < s - 1; k++) next[r + k] += g[r + k + 1];
    }
    g = next;
  }

  const used = lagsUncertain ? size : r;
  const spread = readings.map((reading) => {
    const row = new Float64Array(used);
    for (let i = 0; i < used; i++)
      for (let j = 0; j < used; j++) row[i] += reading[j] * P[i <= j ? i * size + j : j * size + i];
    return row;
  });
  const demandShare = readings.map((reading) => states.slice(1).map((state) => product(reading, state, 0, size)));
  const psi = psiWeights(fit, ahead);
  const mean = new Float64Array(ahead);
  const standardError = new Float64Array(ahead);
  const covariance = new Float64Array(ahead * ahead);
  for (let h = 0; h < ahead; h++) {
    let value = known[n + h];
    for (let i = 0; i < size; i++) value += readings[h][i] * states[0][i];
    mean[h] = value;
    for (let j = 0; j <= h; j++) {
      let sum = 0;
      for (let i = 0; i < used; i++) sum += spread[h][i] * readings[j][i];
      // The surprises after the first step ahead, which P already holds.
      for (let l = 1; l <= j; l++) sum += psi[h - l] * psi[j - l];
      const demand = fit.demandCovariance.reduce(
        (total, row, a) =>
          total + demandShare[h][a] * row.reduce((part, value, b) => part + value * demandShare[j][b], 0),
        0,
      );
      covariance[h * ahead + j] = covariance[j * ahead + h] = sum * fit.innovationVariance + demand;
    }
    standardError[h] = Math.sqrt(covariance[h * ahead + h]);
  }
  return { mean, standardError, covariance };
}

/** The fit with one of its coefficients moved, counted as in `fit.coefficients`. */
export function movedBy(fit: Fit, index: number, step: number): Fit {
  const { phi, theta, Phi, Theta, constant, constantValue, effects } = fit;
  const all = [...phi, ...theta, ...Phi, ...Theta, ...(constant ? [constantValue] : []), ...effects];
  all[index] += step;
  const take = (count: number) => all.splice(0, count);
  return {
    ...fit,
    phi: take(phi.length),
    theta: take(theta.length),
    Phi: take(Phi.length),
    Theta: take(Theta.length),
    constantValue: constant ? take(1)[0] : 0,
    effects: take(effects.length),
  };
}

/** The constant's and the regressors' part of every period, on the model's scale. */
export function effectsOf(fit: Fit, length: number): Float64Array {
  const columns = regressionColumns(fit.form, fit.constant, fit.regressors, length);
  const effects = fit.constant ? [fit.constantValue, ...fit.effects] : fit.effects;
  const total = new Float64Array(length);
  columns.forEach((column, i) => {
    for (let t = 0; t < length; t++) total[t] += effects[i] * column[t];
  });
  return total;
}

/** The expanded polynomials of a fitted model. */
export function armaOf(fit: Fit): Arma {
  const arma = createArma(fit.form);
  arma.coefficients.set([...fit.phi, ...fit.theta, ...fit.Phi, ...fit.Theta]);
  expand(arma);
  return arma;
}

/** The figures on the model's scale, NaN where missing; where sold out, the demand that is expected. */
export function modelled(fit: Fit): Float64Array {
  const values = toScale(fit.values, fit.scale);
  fit.soldOut.forEach((t, i) => {
    values[t] = fit.demand[i];
  });
  return values;
}

/**
 * The filter, run over the figures less `known`; `traced` for the smoother, `before` periods unknown put in front,
 * other columns `beside`.
 */
export function filtered(
  fit: Fit,
  known: Float64Array,
  { traced = false, before = 0, beside = [] as readonly Float64Array[] } = {},
): FilterSpace {
  const scaled = modelled(fit);
  const series = new Float64Array(before + scaled.length).fill(Number.NaN);
  for (let t = 0; t < scaled.length; t++) series[before + t] = scaled[t] - known[t];
  const filter = createFilter(armaOf(fit), [series, ...beside], traced);
  if (!filterErrors(filter)) throw new Error('the fitted model is not stationary');
  return filter;
}
