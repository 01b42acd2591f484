/**
 * Figures that are only lower bounds: what was sold in a period that sold out.
 *
 * The EM algorithm (Dempster, Laird & Rubin, "Maximum likelihood from incomplete data via the EM algorithm", Journal of
 * the Royal Statistical Society B 39, 1977; for censored normal data Schmee & Hahn, Technometrics 21, 1979; for time
 * series Shumway & Stoffer, "An approach to time series smoothing and forecasting using the EM algorithm", Journal of
 * Time Series Analysis 3, 1982). In turn the demand's distribution given all figures and the bounds, and the estimates
 * that make the expected log-likelihood highest. Missing figures are unknown without a bound.
 */

import { truncateBelow } from '../stats/truncated.js';
import { createArma, expand } from './arma.js';
import { createExpectedEngine, indicator } from './engine.js';
import type { Form } from './form.js';
import { invert } from './information.js';
import { createLikelihood, predictionErrors } from './likelihood.js';
import { type Minimum, minimize } from './minimize.js';
import { factorize, product, solveFactored } from './objective.js';
import type { Prepared } from './prepare.js';
import type { Penalty } from './priors.js';

export interface Demand {
  readonly found: Minimum;
  /** The series with the expected demand in place of every bound, NaN where missing; in the prepared unit. */
  readonly series: Float64Array;
  /** Joint covariance of the demand in the sold-out periods, in the order asked; prepared unit squared. */
  readonly covariance: number[][];
  /** Innovation variance, in the prepared unit squared. */
  readonly variance: number;
  /** Log of the chance that demand reached every bound, given the other figures. */
  readonly logProbability: number;
}

const TOLERANCE = 1e-8;
const MOST_ROUNDS = 500;
/** Rounds end when neither the demand, in innovations, nor any z moves by more than this. */
const STILL = 1e-6;

/** `soldOut`: the periods' indices, ascending. `start`: z to begin with. */
export function fitDemand(
  form: Form,
  prepared: Prepared,
  soldOut: readonly number[],
  penalty: Penalty,
  start: Minimum,
): Demand {
  const { columns, startColumns, gaps } = prepared;
  const n = columns[0].length;
  const unknown = [...gaps, ...soldOut].sort((a, b) => a - b);
  const bounds = Float64Array.from(unknown, (t) => (soldOut.includes(t) ? columns[0][t] : Number.NEGATIVE_INFINITY));
  const indicators = unknown.map((t) => indicator(form, n, t));
  const [series, ...regressors] = startColumns;
  const filled = Float64Array.from(series);
  const level = Float64Array.from(unknown, (_, i) => prepared.filled[unknown[i]]);
  let spreads: Float64Array[] = [];
  let found = start;
  let { evaluations } = start;
  for (let round = 0; ; round++) {
    const engine = createExpectedEngine(form, [filled, ...regressors], spreads, penalty);
    const last = found.z;
    found = minimize(engine.problem, last, TOLERANCE);
    evaluations += found.evaluations;
    engine.problem.evaluate(found.z);
    const variance = engine.concentrated.sumOfSquares / engine.innovations.count;
    const expected = expectation(form, engine.arma.coefficients, [filled, ...indicators, ...regressors], {
      level,
      bounds,
      effects: engine.concentrated.effects,
      variance,
    });
    let moved = 0;
    expected.mean.forEach((value, i) => {
      const by = value - level[i];
      moved = Math.max(moved, Math.abs(by) / Math.sqrt(variance));
      level[i] = value;
      for (let t = 0; t < filled.length; t++) filled[t] += by * indicators[i][t];
    });
    const turned = Math.max(...found.z.map((value, i) => Math.abs(Math.tanh(value) - Math.tanh(last[i]))), 0);
    if (round >= MOST_ROUNDS || (round > 0 && moved < STILL && turned < STILL)) {
      const completed = Float64Array.from(columns[0]);
      unknown.forEach((t, i) => {
        if (soldOut.includes(t)) completed[t] = level[i];
      });
      const at = soldOut.map((t) => unknown.indexOf(t));
      const k = unknown.length;
      return {
        found: { ...found, evaluations, settled: found.settled && round < MOST_ROUNDS },
        series: completed,
        covariance: at.map((i) => at.map((j) => expected.covariance[i * k + j])),
        variance,
        logProbability: expected.logProbability,
      };
    }
    spreads = spreadsOf(expected.covariance, indicators);
  }
}

/** The unknown figures' distribution given all that is known, the estimates taken as true. */
function expectation(
  form: Form,
  coefficients: Float64Array,
  data: readonly Float64Array[],
  known: {
    readonly level: Float64Array;
    readonly bounds: Float64Array;
    readonly effects: Float64Array;
    readonly variance: number;
  },
) {
  const { level, bounds, effects, variance } = known;
  const k = level.length;
  const arma = createArma(form);
  arma.coefficients.set(coefficients);
  expand(arma);
  const space = createLikelihood(arma, data);
  if (!predictionErrors(space)) throw new Error('the fitted model is not stationary');
  const { columns, count } = space;
  const errors = Float64Array.from(columns[0]);
  effects.forEach((effect, i) => {
    for (let t = 0; t < count; t++) errors[t] -= effect * columns[1 + k + i][t];
  });
  const gram = new Float64Array(k * k);
  const shift = new Float64Array(k);
  for (let i = 0; i < k; i++) {
    for (let j = 0; j < k; j++) gram[i * k + j] = product(columns[1 + i], columns[1 + j], 0, count) / variance;
    shift[i] = -product(columns[1 + i], errors, 0, count) / variance;
  }
  const covariance = invert(gram, k);
  if (covariance === null || !factorize(gram, k))
    throw new Error('the sold-out and missing figures leave too little to tell demand from');
  solveFactored(gram, k, shift);
  const mean = level.map((value, i) => value + shift[i]);
  return truncateBelow(mean, covariance, bounds);
}

/** The covariance as a sum of squares: its factor's columns, each as a differenced series. */
function spreadsOf(covariance: Float64Array, indicators: readonly Float64Array[]): Float64Array[] {
  const k = indicators.length;
  const factor = Float64Array.from(covariance);
  if (!factorize(factor, k)) return [];
  return indicators.map((_, j) => {
    const column = new Float64Array(indicators[0].length);
    for (let i = j; i < k; i++)
      for (let t = 0; t < column.length; t++) column[t] += factor[i * k + j] * indicators[i][t];
    return column;
  });
}
