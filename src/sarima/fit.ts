/**
 * Estimates a seasonal ARIMA model.
 *
 *     φ(B)Φ(Bᵐ) [ ∇ᵈ∇ₘᴰ (g(yₜ) − xₜ'β) − c ] = θ(B)Θ(Bᵐ) εₜ
 *
 * Signs as in Box, Jenkins, Reinsel & Ljung, "Time Series Analysis", 5th ed. 2015, but with plus signs on the
 * moving-average side.
 */
import { MISSING, ORDINARY } from './diffuse.js';
import { createEngine, createFilterEngine, type Engine } from './engine.js';
import type { FilterSpace } from './filter.js';
import { type Form, formText, lostToDifferencing, parseForm, polynomialCoefficients } from './form.js';
import { estimateCovariance } from './information.js';
import type { Minimum } from './minimize.js';
import { effectsCovariance, logLikelihoodAt } from './objective.js';
import { type Prepared, prepare } from './prepare.js';
import { defaultPriors, noPenalty, type Penalty, type Priors, penaltyOf } from './priors.js';
import { checkRegressors, type Regressor } from './regressors.js';
import { nearlyCancels, nearUnitRoots } from './roots.js';
import { parseScale, toScale } from './scale.js';
import { search } from './search.js';

export type { Prior, Priors } from './priors.js';
export type FittedBy = 'maximum-likelihood' | 'shrunk';

export interface FitOptions {
  readonly form: string | Form;
  /** `plain` (unless given), `log`, or `box-cox λ`. */
  readonly scale?: string;
  /** Whether the differenced series has a mean of its own; unless given, where nothing is differenced. */
  readonly constant?: boolean;
  readonly fittedBy?: FittedBy;
  /** What `shrunk` pulls towards; `defaultPriors` unless given. */
  readonly priors?: Priors | null;
  readonly regressors?: readonly Regressor[];
  /** Indices of periods whose figure is only a lower bound. */
  readonly soldOut?: readonly number[];
  /** The series' season; the form's m unless given. */
  readonly season?: number;
}

export interface Coefficient {
  /** phi1 …, theta1 …, Phi1 …, Theta1 …, constant, then the regressors by name. */
  readonly name: string;
  readonly symbol: string;
  readonly value: number;
  /** Null where the information has none: not positive definite, or the estimate on the unit circle. */
  readonly standardError: number | null;
}

export interface Fit {
  readonly form: Form;
  readonly season: number;
  readonly scale: string;
  readonly constant: boolean;
  readonly fittedBy: FittedBy;
  readonly priors: Priors | null;
  readonly coefficients: readonly Coefficient[];
  /** In the coefficients' order; a fixed coefficient has zeros. Null where the information is not positive definite. */
  readonly covariance: readonly (readonly number[])[] | null;
  readonly phi: readonly number[];
  readonly theta: readonly number[];
  readonly Phi: readonly number[];
  readonly Theta: readonly number[];
  /** c, the mean of the differenced series; 0 without a constant. */
  readonly constantValue: number;
  /** β, in the regressors' order. */
  readonly effects: readonly number[];
  /** σ² of ε on the model's scale, by maximum likelihood. */
  readonly innovationVariance: number;
  /** Of the figures on the model's scale, without the scale's Jacobian. */
  readonly logLikelihood: number;
  /** What the coefficients count for: their number, or less where they are shrunk. */
  readonly effectiveCoefficients: number;
  /** Akaike's criterion corrected for small samples; null where too few observations are left for it, and shrunk. */
  readonly aicc: number | null;
  /** Observations after differencing. */
  readonly observations: number;
  /** One-step surprises on the model's scale, one a period; NaN at gaps and in the diffuse start. */
  readonly residuals: Float64Array;
  /** The same in units of their own predicted standard deviation. */
  readonly standardizedResiduals: Float64Array;
  /** Whether the search came to rest. */
  readonly settled: boolean;
  /** The polynomials with a root within 0.01 of the unit circle: `phi`, `theta`, `Phi`, `Theta`. */
  readonly nearUnitRoots: readonly string[];
  /** Whether an autoregressive and a moving-average root nearly undo each other. */
  readonly nearlyCancels: boolean;
  /** Evaluations of the likelihood that the search took. */
  readonly evaluations: number;
  /** The figures as given, NaN where missing. */
  readonly values: Float64Array;
  readonly regressors: readonly { readonly name: string; readonly values: Float64Array }[];
}

/**
 * Fits a model to figures (NaN where missing). Throws an Error that says what is wrong where the figures or the options
 * can't be used: too few figures, a figure off the scale, nothing that varies, regressors that can't be told apart.
 */
export function fitModel(values: ArrayLike<number>, options: FitOptions): Fit {
  const asked = normalize(values, options);
  const series = toScale(asked.values, asked.scale);
  checkEnough(asked, series);
  const { form, constant, regressors, priors } = asked;
  const columns = regressors.length + (constant ? 1 : 0);
  const penalty = priors === null ? noPenalty(columns) : penaltyOf(form, priors, constant, columns);
  const prepared = prepare(form, series, constant, regressors, penalty.ridge);
  const engine = createEngine(form, prepared, penalty);
  const found = search(engine.arma, engine.problem, prepared.startColumns, penalty.centre);
  return report(asked, prepared, penalty, engine, found);
}

interface Asked {
  readonly values: Float64Array;
  readonly form: Form;
  readonly season: number;
  readonly scale: string;
  readonly constant: boolean;
  readonly fittedBy: FittedBy;
  readonly priors: Priors | null;
  readonly regressors: Fit['regressors'];
}

function normalize(values: ArrayLike<number>, options: FitOptions): Asked {
  const form = typeof options.form === 'string' ? parseForm(options.form) : options.form;
  const differences = form.d + form.D;
  const constant = options.constant ?? differences === 0;
  if (constant && differences > 1)
    throw new Error(
      `model ${formText(form)} can't have a constant: it is differenced ${differences} times; leave the constant out`,
    );
  const fittedBy = options.fittedBy ?? 'maximum-likelihood';
  if ((options.soldOut ?? []).length > 0) throw new Error('periods that were sold out are not available yet');
  const given = Float64Array.from(values);
  const odd = given.findIndex((x) => !Number.isFinite(x) && !Number.isNaN(x));
  if (odd >= 0) throw new Error(`figure ${odd + 1} of ${given.length} is ${given[odd]}`);
  const scale = options.scale ?? 'plain';
  parseScale(scale);
  const regressors = options.regressors ?? [];
  checkRegressors(regressors, given.length, 'the past');
  return {
    values: given,
    form,
    season: options.season ?? form.m,
    scale,
    constant,
    fittedBy,
    priors: fittedBy === 'shrunk' ? (options.priors ?? defaultPriors(form, scale, constant)) : null,
    regressors: regressors.map(({ name, values: column }) => ({ name, values: Float64Array.from(column) })),
  };
}

/** Shrunk, a model can do with this many differences. */
const FEWEST_SHRUNK = 8;

function checkEnough({ form, fittedBy, constant, regressors }: Asked, series: Float64Array): void {
  const there = series.reduce((count, y) => count + (Number.isNaN(y) ? 0 : 1), 0);
  const lost = lostToDifferencing(form);
  const coefficients = polynomialCoefficients(form);
  const columns = regressors.length + (constant ? 1 : 0);
  const needed =
    coefficients === 0
      ? lost + 2 + columns
      : fittedBy === 'shrunk'
        ? lost + Math.max(FEWEST_SHRUNK, columns + 3)
        : Math.max(2 * form.m + coefficients + lost + 3, 12, lost + coefficients + columns + 3);
  if (there < needed)
    throw new Error(
      `model ${formText(form)} needs at least ${needed} figures; there are ${there}: use a shorter model`,
    );
}

function report(asked: Asked, prepared: Prepared, penalty: Penalty, engine: Engine, found: Minimum): Fit {
  const { form } = asked;
  const { p, q, P } = form;
  const { z } = found;
  const information = informationAt(engine, prepared, z);
  const exact = prepared.gaps.length > 0 ? createFilterEngine(form, prepared, penalty) : { ...engine, filter: null };
  if (!Number.isFinite(exact.problem.evaluate(z)))
    throw new Error(`model ${formText(form)} has no likelihood for these figures: use a simpler model`);
  const { arma, concentrated, observations: n } = exact;
  const { unit, unitOf, before } = prepared;
  const effects = Array.from(concentrated.effects, (effect, i) => before[i] + (effect * unit) / unitOf[i]);
  const polynomials = {
    phi: [...arma.coefficients.subarray(0, p)],
    theta: [...arma.coefficients.subarray(p, p + q)],
    Phi: [...arma.coefficients.subarray(p + q, p + q + P)],
    Theta: [...arma.coefficients.subarray(p + q + P)],
  };
  const estimates = [...arma.coefficients, ...effects];
  const logLikelihood = logLikelihoodAt(exact.innovations, concentrated) - n * Math.log(unit);
  const sigma = Math.sqrt(concentrated.sumOfSquares / n);
  return {
    form,
    season: asked.season,
    scale: asked.scale,
    constant: asked.constant,
    fittedBy: asked.fittedBy,
    priors: asked.priors,
    coefficients: namesOf(asked).map(({ name, symbol }, i) => {
      const variance = information.covariance?.[i][i] ?? 0;
      return { name, symbol, value: estimates[i], standardError: variance > 0 ? Math.sqrt(variance) : null };
    }),
    ...information,
    ...polynomials,
    constantValue: asked.constant ? effects[0] : 0,
    effects: asked.constant ? effects.slice(1) : effects,
    innovationVariance: (sigma * unit) ** 2,
    logLikelihood,
    aicc: asked.fittedBy === 'shrunk' ? null : correctedCriterion(logLikelihood, estimates.length + 1, n),
    observations: n,
    ...residualsOf(exact, prepared, sigma),
    settled: found.settled || engine.problem.parameters === 0,
    nearUnitRoots: nearUnitRoots(polynomials),
    nearlyCancels: nearlyCancels(polynomials),
    evaluations: found.evaluations,
    values: asked.values,
    regressors: asked.regressors,
  };
}

/** Covariance of coefficients and effects, the effects in the user's units, and what the coefficients count for. */
function informationAt(
  { arma, concentrated, observations, problem }: Engine,
  { unit, unitOf }: Prepared,
  z: Float64Array,
): Pick<Fit, 'covariance' | 'effectiveCoefficients'> {
  const { covariance, effective } = estimateCovariance(
    {
      blocks: arma.blocks,
      evaluate: problem.evaluate,
      penalties: problem.penalties,
      effects: concentrated.effects.subarray(concentrated.unknowns),
      effectsCovariance: (at) => {
        problem.evaluate(at);
        return effectsCovariance(concentrated, observations);
      },
      ridge: concentrated.ridge.subarray(concentrated.unknowns),
      variance: () => concentrated.sumOfSquares / observations,
    },
    z,
  );
  const units = [...z.map(() => 1), ...unitOf.map((own) => unit / own)];
  return {
    covariance: covariance?.map((row, i) => row.map((value, j) => value * units[i] * units[j])) ?? null,
    effectiveCoefficients: effective,
  };
}

function residualsOf(
  { innovations, concentrated, filter }: Engine & { readonly filter: FilterSpace | null },
  { unit, columns }: Prepared,
  sigma: number,
): Pick<Fit, 'residuals' | 'standardizedResiduals'> {
  const n = columns[0].length;
  const residuals = new Float64Array(n).fill(Number.NaN);
  const standardizedResiduals = new Float64Array(n).fill(Number.NaN);
  const lost = n - innovations.count;
  let row = 0;
  for (let t = 0; t < n; t++) {
    const kind = filter === null ? (t < lost ? MISSING : ORDINARY) : filter.diffuse.kind[t];
    if (kind !== ORDINARY) continue;
    residuals[t] = concentrated.residuals[row] * innovations.root[row] * unit;
    standardizedResiduals[t] = concentrated.residuals[row] / sigma;
    row++;
  }
  return { residuals, standardizedResiduals };
}

/** Hurvich & Tsai, "Regression and time series model selection in small samples", Biometrika 76 (1989). */
function correctedCriterion(logLikelihood: number, parameters: number, n: number): number | null {
  const left = n - parameters - 1;
  return left > 0 ? -2 * logLikelihood + 2 * parameters + (2 * parameters * (parameters + 1)) / left : null;
}

function namesOf({ form, constant, regressors }: Asked): { name: string; symbol: string }[] {
  const numbered = (name: string, symbol: string, count: number) =>
    Array.from({ length: count }, (_, i) => ({ name: `${name}${i + 1}`, symbol: `${symbol}${subscript(i + 1)}` }));
  return [
    ...numbered('phi', 'φ', form.p),
    ...numbered('theta', 'θ', form.q),
    ...numbered('Phi', 'Φ', form.P),
    ...numbered('Theta', 'Θ', form.Q),
    ...(constant ? [{ name: 'constant', symbol: 'c' }] : []),
    ...regressors.map(({ name }, i) => ({ name, symbol: `β${subscript(i + 1)}` })),
  ];
}

function subscript(index: number): string {
  return [...String(index)].map((digit) => String.fromCodePoint(0x2080 + Number(digit))).join('');
}
