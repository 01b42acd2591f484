/**
 * Estimates a seasonal ARIMA model.
 *
 *     φ(B)Φ(Bᵐ) [ ∇ᵈ∇ₘᴰ (g(yₜ) − xₜ'β) − c ] = θ(B)Θ(Bᵐ) εₜ
 *
 * Signs as in Box, Jenkins, Reinsel & Ljung, "Time Series Analysis", 5th ed. 2015, but with plus signs on the
 * moving-average side.
 */
import { type Asked, checkEnough, type FitOptions, type FittedBy, normalize } from './asked.js';
import { type Demand, fitDemand } from './censored.js';
import { MISSING, ORDINARY } from './diffuse.js';
import { createEngine, createFilterEngine, type Engine } from './engine.js';
import type { FilterSpace } from './filter.js';
import { type Form, formText } from './form.js';
import { estimateCovariance } from './information.js';
import type { Minimum } from './minimize.js';
import { effectsCovariance, logLikelihoodAt } from './objective.js';
import { fromCoefficients } from './partial.js';
import { type Prepared, prepare, withoutFigures, withSeries } from './prepare.js';
import { noPenalty, type Penalty, type Priors, penaltyOf } from './priors.js';
import { nearlyCancels, nearUnitRoots } from './roots.js';
import { toScale } from './scale.js';
import { search, stay } from './search.js';

export { type FitOptions, type FittedBy, TooFewFigures } from './asked.js';
export type { Prior, Priors } from './priors.js';

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
  /** Half the priors' sum of squares at the estimates, without the ridge; 0 by maximum likelihood. */
  readonly penalty: number;
  /** Akaike's criterion corrected for small samples; null where too few observations are left for it, and shrunk. */
  readonly aicc: number | null;
  /** Observations after differencing. */
  readonly observations: number;
  /** One-step surprises on the model's scale, one a period; NaN at gaps, where sold out, and in the diffuse start. */
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
  /** Indices of the periods that sold out, ascending: their figures are lower bounds. */
  readonly soldOut: readonly number[];
  /** The demand expected in each of them given all figures, on the model's scale, and its joint covariance. */
  readonly demand: readonly number[];
  readonly demandCovariance: readonly (readonly number[])[];
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
  const start = asked.near === null ? null : fromCoefficients(engine.arma.blocks, asked.near);
  const found = start
    ? stay(engine.problem, start)
    : search(engine.arma, engine.problem, prepared.startColumns, penalty.centre);
  const demand = asked.soldOut.length > 0 ? fitDemand(form, prepared, asked.soldOut, penalty, found) : null;
  return report(asked, prepared, penalty, engine, demand?.found ?? found, demand);
}

function report(
  asked: Asked,
  prepared: Prepared,
  penalty: Penalty,
  engine: Engine,
  found: Minimum,
  demand: Demand | null,
): Fit {
  const { form, soldOut } = asked;
  const { p, q, P } = form;
  const { z } = found;
  // Where demand is unknown its periods tell nothing of the estimates' spread: a little wide, never too narrow.
  const informed = demand === null ? engine : createEngine(form, withoutFigures(prepared, soldOut), penalty);
  const information = informationAt(informed, prepared, z);
  const completed = demand === null ? prepared : withSeries(prepared, demand.series);
  const exact =
    completed.gaps.length > 0
      ? createFilterEngine(form, completed, penalty)
      : { ...(demand === null ? engine : createEngine(form, completed, penalty)), filter: null };
  if (!Number.isFinite(exact.problem.evaluate(z)))
    throw new Error(`model ${formText(form)} has no likelihood for these figures: use a simpler model`);
  const { arma, concentrated, innovations } = exact;
  const n = exact.observations - soldOut.length;
  const { unit, unitOf, before } = prepared;
  const effects = Array.from(concentrated.effects, (effect, i) => before[i] + (effect * unit) / unitOf[i]);
  const polynomials = {
    phi: [...arma.coefficients.subarray(0, p)],
    theta: [...arma.coefficients.subarray(p, p + q)],
    Phi: [...arma.coefficients.subarray(p + q, p + q + P)],
    Theta: [...arma.coefficients.subarray(p + q + P)],
  };
  const estimates = [...arma.coefficients, ...effects];
  const sigma = Math.sqrt(demand?.variance ?? concentrated.sumOfSquares / n);
  const logLikelihood =
    (demand === null
      ? logLikelihoodAt(innovations, concentrated)
      : boundedLogLikelihood(
          createFilterEngine(form, withoutFigures(prepared, soldOut), penalty),
          z,
          concentrated.effects,
          demand,
        )) -
    n * Math.log(unit);
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
    penalty: penalty.fill(new Float64Array(penalty.rows), z, arma.coefficients),
    aicc: asked.fittedBy === 'shrunk' ? null : correctedCriterion(logLikelihood, estimates.length + 1, n),
    observations: n,
    ...residualsOf(exact, prepared, sigma, soldOut),
    settled: found.settled || engine.problem.parameters === 0,
    nearUnitRoots: nearUnitRoots(polynomials),
    nearlyCancels: nearlyCancels(polynomials),
    evaluations: found.evaluations,
    values: asked.values,
    regressors: asked.regressors,
    soldOut,
    ...demandOf(prepared, demand, soldOut),
  };
}

/** Expected demand and its covariance on the model's scale, effects included. */
function demandOf(
  { columns, unit, unitOf, before }: Prepared,
  demand: Demand | null,
  soldOut: readonly number[],
): Pick<Fit, 'demand' | 'demandCovariance'> {
  if (demand === null) return { demand: [], demandCovariance: [] };
  return {
    demand: soldOut.map((t) =>
      before.reduce((sum, effect, i) => sum + effect * unitOf[i] * columns[1 + i][t], demand.series[t] * unit),
    ),
    demandCovariance: demand.covariance.map((row) => row.map((value) => value * unit * unit)),
  };
}

/** The log-likelihood of the figures that are known, and of demand having reached every bound. */
function boundedLogLikelihood(known: Engine, z: Float64Array, effects: Float64Array, demand: Demand): number {
  known.problem.evaluate(z);
  const { columns, count, logDeterminant } = known.innovations;
  let sumOfSquares = 0;
  for (let t = 0; t < count; t++) {
    let e = columns[0][t];
    for (let i = 0; i < effects.length; i++) e -= effects[i] * columns[1 + i][t];
    sumOfSquares += e * e;
  }
  const { variance, logProbability } = demand;
  return -0.5 * (count * Math.log(2 * Math.PI * variance) + sumOfSquares / variance + logDeterminant) + logProbability;
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
  soldOut: readonly number[],
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
  for (const t of soldOut) residuals[t] = standardizedResiduals[t] = Number.NaN;
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
