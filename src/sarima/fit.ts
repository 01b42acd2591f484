/**
 * Estimates a seasonal ARIMA model.
 *
 *     φ(B)Φ(Bᵐ) [ ∇ᵈ∇ₘᴰ (g(yₜ) − xₜ'β) − c ] = θ(B)Θ(Bᵐ) εₜ
 *
 * Signs as in Box, Jenkins, Reinsel & Ljung, "Time Series Analysis", 5th ed. 2015, but with plus signs on the
 * moving-average side.
 */
import { type Arma, createArma, expand } from './arma.js';
import { MISSING, ORDINARY } from './diffuse.js';
import { createFilter, type FilterSpace, filterErrors } from './filter.js';
import { type Form, formText, lostToDifferencing, parseForm, polynomialCoefficients } from './form.js';
import { estimateCovariance, invert } from './information.js';
import { createLikelihood, type Innovations, predictionErrors } from './likelihood.js';
import { type Minimum, minimize, type Problem } from './minimize.js';
import { type ConcentratedSpace, concentrate, createConcentrated, minusLogLikelihood } from './objective.js';
import { toCoefficients } from './partial.js';
import { differencedColumns, type Prepared, prepare } from './prepare.js';
import { checkRegressors, type Regressor } from './regressors.js';
import { nearlyCancels, nearUnitRoots } from './roots.js';
import { parseScale, toScale } from './scale.js';
import { firstGuess, guess, startValues } from './start.js';

export type FittedBy = 'maximum-likelihood' | 'shrunk';

/** What an estimate is pulled towards, and how strongly. */
export interface Priors {
  readonly coefficients: Readonly<
    Record<string, { readonly centre: number; readonly spread: number; readonly on: 'coefficient' | 'partial' }>
  >;
  /** The weight λ of the constant's ridge: so many observations' worth of a constant of zero. */
  readonly ridge: number;
}

export interface FitOptions {
  readonly form: string | Form;
  /** `plain` (unless given), `log`, or `box-cox λ`. */
  readonly scale?: string;
  /** Whether the differenced series has a mean of its own; unless given, where nothing is differenced. */
  readonly constant?: boolean;
  readonly fittedBy?: FittedBy;
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
  /** Akaike's criterion corrected for small samples; null where too few observations are left for it. */
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

/** An unfinished search promises less than this much more log-likelihood when it stops. */
const TOLERANCE = 1e-8;

/**
 * Fits a model to figures (NaN where missing). Throws an Error that says what is wrong where the figures or the options
 * can't be used: too few figures, a figure off the scale, nothing that varies, regressors that can't be told apart.
 */
export function fitModel(values: ArrayLike<number>, options: FitOptions): Fit {
  const asked = normalize(values, options);
  const series = toScale(asked.values, asked.scale);
  checkEnough(asked, series);
  const prepared = prepare(asked.form, series, asked.constant, asked.regressors);
  const engine = createEngine(asked.form, prepared);
  const found = search(engine, prepared);
  return report(asked, prepared, engine, found);
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
  if (fittedBy !== 'maximum-likelihood') throw new Error(`fitting "${fittedBy}" is not available yet`);
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
    priors: null,
    regressors: regressors.map(({ name, values: column }) => ({ name, values: Float64Array.from(column) })),
  };
}

function checkEnough({ form, constant, regressors }: Asked, series: Float64Array): void {
  const there = series.reduce((count, y) => count + (Number.isNaN(y) ? 0 : 1), 0);
  const lost = lostToDifferencing(form);
  const coefficients = polynomialCoefficients(form);
  const columns = regressors.length + (constant ? 1 : 0);
  const needed =
    coefficients === 0
      ? lost + 2 + columns
      : Math.max(2 * form.m + coefficients + lost + 3, 12, lost + coefficients + columns + 3);
  if (there < needed)
    throw new Error(
      `model ${formText(form)} needs at least ${needed} figures; there are ${there}: use a shorter model`,
    );
}

/** The likelihood of one prepared series, as a function of z. */
interface Engine {
  readonly arma: Arma;
  readonly innovations: Innovations;
  readonly concentrated: ConcentratedSpace;
  /** The filter, where the series has gaps. */
  readonly filter: FilterSpace | null;
  readonly problem: Problem;
}

function createEngine(form: Form, prepared: Prepared): Engine {
  const arma = createArma(form);
  const filter = prepared.hasGaps ? createFilter(arma, prepared.columns) : null;
  if (filter !== null && !filter.diffuse.settled)
    throw new Error(
      `model ${formText(form)}: the figures leave a part of the season unknown; every position of the season needs a figure`,
    );
  const fast = filter === null ? createLikelihood(arma, differencedColumns(form, prepared.columns)) : null;
  const innovations: Innovations = filter ?? (fast as Innovations);
  const regressors = prepared.columns.length - 1;
  const concentrated = createConcentrated(innovations.count, regressors, new Float64Array(regressors));
  const rows = new Float64Array(concentrated.residuals.length);
  const run = fast === null ? () => filterErrors(filter as FilterSpace) : () => predictionErrors(fast);
  const evaluate = (z: Float64Array) => {
    toCoefficients(arma.blocks, z, arma.coefficients);
    expand(arma);
    if (!run() || !concentrate(concentrated, innovations)) return Number.POSITIVE_INFINITY;
    // log Σ(e/√f)² + mean log f as the log of one sum of squares.
    const share = Math.exp(innovations.logDeterminant / (2 * innovations.count));
    const { residuals } = concentrated;
    for (let t = 0; t < rows.length; t++) rows[t] = residuals[t] * share;
    return minusLogLikelihood(innovations, concentrated.sumOfSquares);
  };
  return {
    arma,
    innovations,
    concentrated,
    filter,
    problem: {
      parameters: arma.coefficients.length,
      weight: innovations.count,
      rows,
      penalties: new Float64Array(0),
      evaluate,
    },
  };
}

/** Near the unit circle: partial autocorrelations beyond 0.96. */
const SUSPICIOUS = 2;

function search({ arma, problem }: Engine, prepared: Prepared): Minimum {
  const { form } = arma;
  let best = minimize(problem, startValues(arma, prepared.startColumns).z, TOLERANCE);
  const isPlain = best.settled && best.z.every((value) => Math.abs(value) < SUSPICIOUS);
  const isMixed = form.p > 0 && form.q > 0;
  // A likelihood with both sides, or with a seasonal autoregression, often has a second summit.
  const others = [
    ...(isPlain ? [] : [firstGuess(arma)]),
    ...(isMixed || form.P > 0 ? [guess(arma, { ar: PERSISTENT, ma: -PERSISTENT / 2 })] : []),
    ...(isMixed ? [guess(arma, { ar: -PERSISTENT / 3, ma: PERSISTENT / 3 })] : []),
  ];
  let { evaluations } = best;
  for (const start of others) {
    const found = minimize(problem, start, TOLERANCE);
    evaluations += found.evaluations;
    if (found.value < best.value || !Number.isFinite(best.value)) best = found;
  }
  return { ...best, evaluations };
}

/** A first partial autocorrelation of 0.9. */
const PERSISTENT = 1.5;

function report(asked: Asked, prepared: Prepared, engine: Engine, found: Minimum): Fit {
  const { form } = asked;
  const { arma, innovations, concentrated, problem } = engine;
  const { p, q, P } = form;
  const covariance = covarianceOf(engine, prepared, found.z);
  if (!Number.isFinite(problem.evaluate(found.z)))
    throw new Error(`model ${formText(form)} has no likelihood for these figures: use a simpler model`);
  const n = innovations.count;
  const { unit, unitOf, before } = prepared;
  const effects = Array.from(concentrated.effects, (effect, i) => before[i] + (effect * unit) / unitOf[i]);
  const polynomials = {
    phi: [...arma.coefficients.subarray(0, p)],
    theta: [...arma.coefficients.subarray(p, p + q)],
    Phi: [...arma.coefficients.subarray(p + q, p + q + P)],
    Theta: [...arma.coefficients.subarray(p + q + P)],
  };
  const estimates = [...arma.coefficients, ...effects];
  const logLikelihood = -minusLogLikelihood(innovations, concentrated.sumOfSquares) - n * Math.log(unit);
  const sigma = Math.sqrt(concentrated.sumOfSquares / n);
  const { residuals, standardizedResiduals } = residualsOf(engine, prepared, sigma);
  return {
    form,
    season: asked.season,
    scale: asked.scale,
    constant: asked.constant,
    fittedBy: asked.fittedBy,
    priors: asked.priors,
    coefficients: coefficientNames(asked).map(({ name, symbol }, i) => {
      const variance = covariance?.[i][i] ?? 0;
      return { name, symbol, value: estimates[i], standardError: variance > 0 ? Math.sqrt(variance) : null };
    }),
    covariance,
    ...polynomials,
    constantValue: asked.constant ? effects[0] : 0,
    effects: asked.constant ? effects.slice(1) : effects,
    innovationVariance: (sigma * unit) ** 2,
    logLikelihood,
    aicc: correctedCriterion(logLikelihood, estimates.length + 1, n),
    observations: n,
    residuals,
    standardizedResiduals,
    settled: found.settled || problem.parameters === 0,
    nearUnitRoots: nearUnitRoots(polynomials),
    nearlyCancels: nearlyCancels(polynomials),
    evaluations: found.evaluations,
    values: asked.values,
    regressors: asked.regressors,
  };
}

/** Covariance of coefficients and effects, the effects in the user's units. */
function covarianceOf(engine: Engine, prepared: Prepared, z: Float64Array): number[][] | null {
  const { arma, innovations, concentrated, problem } = engine;
  const k = concentrated.effects.length;
  const joint = estimateCovariance(
    {
      blocks: arma.blocks,
      evaluate: problem.evaluate,
      effects: concentrated.effects,
      effectsCovariance: (at) => {
        problem.evaluate(at);
        const variance = concentrated.sumOfSquares / innovations.count;
        const gram = new Float64Array(k * k);
        for (let i = 0; i < k; i++)
          for (let j = 0; j < k; j++) {
            const a = innovations.columns[i + 1];
            const b = innovations.columns[j + 1];
            for (let t = 0; t < innovations.count; t++) gram[i * k + j] += (a[t] * b[t]) / variance;
          }
        return invert(gram, k);
      },
    },
    z,
  );
  if (joint === null) return null;
  const units = [...z.map(() => 1), ...prepared.unitOf.map((own) => prepared.unit / own)];
  return joint.map((row, i) => row.map((value, j) => value * units[i] * units[j]));
}

function residualsOf(
  { innovations, concentrated, filter }: Engine,
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

function coefficientNames({ form, constant, regressors }: Asked): { name: string; symbol: string }[] {
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
