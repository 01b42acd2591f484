/** No single period drives the result. */
import type { Fit } from '../sarima/fit.js';
import { polynomialCoefficients } from '../sarima/form.js';
import { effectsOf, filtered, predict } from '../sarima/predict.js';
import { regressionColumns } from '../sarima/regressors.js';
import { parseScale } from '../sarima/scale.js';
import { fUpperTail } from '../stats/f.js';
import { type Assumption, assumption, FEWEST_RESIDUALS, type Outlier, present, untested } from './assumption.js';
import { refit } from './refit.js';

const MOST = 5;
/** An outlier's chance of having come about without one, all periods and both kinds taken together, is below this. */
const UNLIKELY = 0.05;
const VERY_UNLIKELY = 0.01;
/** The next forecast, moved by so many of its standard errors, is driven by what moved it. */
const DRIVEN = 0.5;
/** A trace in the surprises this small is none. */
const NO_TRACE = 1e-6;

interface Candidate {
  readonly period: number;
  readonly kind: Outlier['kind'];
}

interface Found extends Candidate {
  readonly size: number;
  readonly t: number;
  readonly pValue: number;
}

/**
 * Additive outliers and level shifts, one after the other: Chen & Liu, "Joint estimation of model parameters and outlier
 * effects in time series", Journal of the American Statistical Association 88 (1993). The one with the largest t ratio
 * becomes a regressor and everything is estimated again, until none stands out; then those are taken out again that no
 * longer do. As critical value serves Bonferroni's bound over all periods and both kinds (Dunn, "Multiple comparisons
 * among means", Journal of the American Statistical Association 56, 1961): a t ratio of 3.8 on 44 figures, 4.0 on 300.
 * An outlier makes the assumption doubtful; it fails where setting one aside moves the next forecast by more than half
 * its standard error.
 */
export function checkOutliers(fit: Fit): Assumption {
  const residuals = present(fit.standardizedResiduals).length;
  const strongest = residuals < FEWEST_RESIDUALS ? null : standsOutMost(fit);
  if (strongest === null) return untested('odd-quarters', { residuals });
  const { t: statistic, pValue } = strongest;
  const found = findOutliers(fit, strongest);
  if (found === null) return untested('odd-quarters', { residuals });
  const moves = forecastMoves(fit, found);
  const largestMove = Math.max(0, ...moves.map(({ standardErrors }) => Math.abs(standardErrors)));
  const fails = found.some(
    (outlier, i) => outlier.pValue < VERY_UNLIKELY && Math.abs(moves[i].standardErrors) > DRIVEN,
  );
  return assumption('odd-quarters', {
    status: fails ? 'fails' : found.length > 0 ? 'doubtful' : 'holds',
    statistic,
    pValue,
    details: { residuals, largestMove },
    outliers: found.map(({ period, kind, size, t }, i) => ({ period, kind, size, t, forecastChange: moves[i].units })),
  });
}

/** Null where the first can't be made a regressor. */
function findOutliers(fit: Fit, strongest: Found): Found[] | null {
  let found: Found[] = [];
  let next: Found | null = strongest;
  while (next !== null && next.pValue < UNLIKELY && found.length < MOST) {
    const joint = withOutliers(fit, [...found, next]);
    if (joint === null) return found.length > 0 ? found : null;
    found = estimated(joint, [...found, next]);
    next = standsOutMost(joint);
  }
  for (;;) {
    const weakest = found.reduce((least, { t }, i) => (Math.abs(t) < Math.abs(found[least].t) ? i : least), 0);
    if (found.length === 0 || found[weakest].pValue < UNLIKELY) return found;
    const rest = found.toSpliced(weakest, 1);
    const joint = rest.length > 0 ? withOutliers(fit, rest) : null;
    found = joint === null ? rest : estimated(joint, rest);
  }
}

/**
 * The candidate with the largest t ratio, the polynomials' coefficients held: the surprises regressed on the trace that
 * it leaves in them, which the filter gives, beside those of the constant and the regressors. The variance is taken
 * with the candidate's own effect set aside. Null where none leaves a trace.
 */
function standsOutMost(fit: Fit): Found | null {
  const n = fit.values.length;
  const values = fit.values.map((y, t) => (fit.soldOut.includes(t) ? Number.NaN : y));
  const known = regressionColumns(fit.form, fit.constant, fit.regressors, n);
  const candidates = candidatesIn(values);
  const { columns, count } = filtered({ ...fit, values, soldOut: [] }, effectsOf(fit, n), {
    beside: [...known, ...candidates.map((candidate) => columnOf(candidate, n))],
  });
  const freedom = freedomOf(fit, count) - 1;
  const [e, ...traces] = columns;
  const basis: Float64Array[] = [];
  for (const x of traces.slice(0, known.length)) if (setAside(x, basis) > NO_TRACE) basis.push(x);
  const ee = product(e, e);
  let best: Found | null = null;
  for (const [i, candidate] of candidates.entries()) {
    const x = traces[known.length + i];
    const left = setAside(x, basis);
    const xx = product(x, x);
    if (!(left > NO_TRACE && xx > NO_TRACE)) continue;
    const size = product(x, e) / xx;
    const t = size / Math.sqrt((ee - size * size * xx) / (freedom * xx));
    if (best === null || Math.abs(t) > Math.abs(best.t))
      best = { ...candidate, size, t, pValue: pValueOf(t, freedom, candidates.length) };
  }
  return best;
}

/** Takes orthogonal columns out of another, in place, and says what share of its squares is left. */
function setAside(x: Float64Array, basis: readonly Float64Array[]): number {
  const before = product(x, x);
  for (const column of basis) {
    const share = product(x, column) / product(column, column);
    for (let i = 0; i < x.length; i++) x[i] -= share * column[i];
  }
  return product(x, x) / before;
}

/** A level shift at the last figure is an additive outlier; one at the first figure is no shift. */
function candidatesIn(values: Float64Array): Candidate[] {
  const periods = [...values.keys()].filter((t) => !Number.isNaN(values[t]));
  return [
    ...periods.map((period) => ({ period, kind: 'additive' as const })),
    ...periods.slice(1, -1).map((period) => ({ period, kind: 'level-shift' as const })),
  ];
}

function columnOf({ period, kind }: Candidate, length: number): Float64Array {
  return Float64Array.from({ length }, (_, t) => (t === period || (kind === 'level-shift' && t > period) ? 1 : 0));
}

/** The same model with outliers as its last regressors, reaching over the next period. */
function withOutliers(fit: Fit, outliers: readonly Candidate[]): Fit | null {
  const columns = outliers.map((outlier) => ({
    name: `${outlier.kind} at ${outlier.period}`,
    values: columnOf(outlier, fit.values.length + 1),
  }));
  return refit(fit, { regressors: [...fit.regressors, ...columns] });
}

/** The outliers with their sizes as the joint fit estimates them; its last regressors are theirs. */
function estimated(joint: Fit, outliers: readonly Found[]): Found[] {
  const own = joint.coefficients.slice(-outliers.length);
  const freedom = freedomOf(joint, joint.observations);
  const candidates = candidatesIn(joint.values).length;
  return outliers.map((outlier, i) => {
    const { value, standardError } = own[i];
    const t = standardError === null ? outlier.t : value / standardError;
    return { ...outlier, size: value, t, pValue: pValueOf(t, freedom, candidates) };
  });
}

/** By how much the next forecast moves when one outlier is set aside. */
function forecastMoves(fit: Fit, outliers: readonly Candidate[]): { units: number; standardErrors: number }[] {
  if (outliers.length === 0) return [];
  const now = nextForecast(fit);
  return outliers.map((outlier) => {
    const without = withOutliers(fit, [outlier]);
    const then = without === null ? now : nextForecast(without);
    return { units: then.middle - now.middle, standardErrors: (then.mean - now.mean) / now.standardError };
  });
}

/** On the model's scale, and its middle in the user's units. A regressor that ends with the figures counts as 0. */
function nextForecast(fit: Fit): { mean: number; standardError: number; middle: number } {
  const length = fit.values.length + 1;
  const regressors = fit.regressors.map(({ name, values }) => ({
    name,
    values: Float64Array.from({ length }, (_, t) => values[t] ?? 0),
  }));
  const { mean, standardError } = predict({ ...fit, regressors }, 1);
  const middle = parseScale(fit.scale).from(mean[0]);
  const isHeldAtZero = fit.values.every((value) => !(value < 0));
  return { mean: mean[0], standardError: standardError[0], middle: isHeldAtZero ? Math.max(0, middle) : middle };
}

/** Of the t ratio that is the largest of so many. */
function pValueOf(t: number, freedom: number, candidates: number): number {
  return Math.min(1, candidates * fUpperTail(t * t, 1, freedom));
}

function freedomOf(fit: Fit, surprises: number): number {
  return Math.max(1, surprises - polynomialCoefficients(fit.form) - fit.regressors.length - (fit.constant ? 1 : 0));
}

function product(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
