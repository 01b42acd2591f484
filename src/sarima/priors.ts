/**
 * What shrunk estimates are pulled towards: the posterior mode under stated normal priors, or, read the other way, a
 * penalized likelihood.
 *
 * The centres come from a study of how short business series are best forecast; they are shrinkage in the sense of
 * Litterman, "Forecasting with Bayesian vector autoregressions", Journal of Business & Economic Statistics 4 (1986).
 */
import { type Form, polynomialCoefficients } from './form.js';
import { blocksOf, clampPartial, fromCoefficients } from './partial.js';

export interface Prior {
  readonly centre: number;
  readonly spread: number;
  /** Whether centre and spread are those of the coefficient or of the partial autocorrelation in its place. */
  readonly on: 'coefficient' | 'partial';
}

/** What an estimate is pulled towards, and how strongly. */
export interface Priors {
  /** By the coefficient's name, phi1 …; one that is not named has centre 0 and spread 0.3 on its partial value. */
  readonly coefficients: Readonly<Record<string, Prior>>;
  /** The weight λ of the constant's ridge: so many observations' worth of a constant of zero. */
  readonly ridge: number;
}

/** Priors as rows of a least squares problem. */
export interface Penalty {
  /** How many rows `fill` fills. */
  readonly rows: number;
  /** Fills the rows and returns half their sum of squares. */
  readonly fill: (rows: Float64Array, z: Float64Array, coefficients: Float64Array) => number;
  /** The ridge on each regression column, the constant's first. */
  readonly ridge: Float64Array;
  /** z at the centres; null without priors. */
  readonly centre: Float64Array | null;
}

/** No centre, whatever the data say: where nothing else is stated. */
const UNSTATED: Prior = { centre: 0, spread: 0.3, on: 'partial' };

/** Keeps z off infinity where a prior leaves it free: ½·0.004 z² of log-likelihood. */
const LEASH = Math.sqrt(0.004);

/** The names of a form's coefficients, in the order φ, θ, Φ, Θ. */
export function coefficientNames(form: Form): string[] {
  return blocksOf(form).flatMap(({ kind, order }) => Array.from({ length: order }, (_, i) => `${kind}${i + 1}`));
}

export const NO_PRIORS: Priors = { coefficients: {}, ridge: 0 };

/** A planner's own priors over the default ones; every coefficient of the form is named, so that a record tells all. */
export function statedPriors(
  form: Form,
  usual: Priors,
  own: { readonly coefficients: Priors['coefficients']; readonly ridge: number | null } | null,
): Priors {
  const unstated = Object.fromEntries(coefficientNames(form).map((name) => [name, UNSTATED]));
  return {
    coefficients: { ...unstated, ...usual.coefficients, ...own?.coefficients },
    ridge: own?.ridge ?? usual.ridge,
  };
}

/** No penalty at all. `columns`: the constant and the regressors. */
export function noPenalty(columns: number): Penalty {
  return { rows: 0, fill: () => 0, ridge: new Float64Array(columns), centre: null };
}

/** Throws an Error where a prior is none or belongs to no coefficient of the form. */
export function penaltyOf(form: Form, priors: Priors, constant: boolean, columns: number): Penalty {
  const names = coefficientNames(form);
  for (const [name, { centre, spread }] of Object.entries(priors.coefficients)) {
    if (!names.includes(name))
      throw new Error(`a prior for "${name}": the model's coefficients are ${names.join(', ') || 'none'}`);
    if (!Number.isFinite(centre) || !(spread > 0))
      throw new Error(`the prior for "${name}" needs a centre and a spread above zero; it has ${centre} and ${spread}`);
  }
  if (!(priors.ridge >= 0 && Number.isFinite(priors.ridge)))
    throw new Error(`the constant's ridge is ${priors.ridge}; it should be 0 or above`);
  const stated = names.map((name) => priors.coefficients[name] ?? UNSTATED);
  const k = polynomialCoefficients(form);
  const ridge = new Float64Array(columns);
  if (constant) ridge[0] = priors.ridge;
  return {
    rows: 2 * k,
    ridge,
    centre: centreOf(form, stated),
    fill: (rows, z, coefficients) => {
      let sum = 0;
      for (let i = 0; i < k; i++) {
        const { centre, spread, on } = stated[i];
        const value = on === 'coefficient' ? coefficients[i] : Math.tanh(z[i]);
        rows[2 * i] = (value - centre) / spread;
        rows[2 * i + 1] = LEASH * z[i];
        sum += rows[2 * i] ** 2 + rows[2 * i + 1] ** 2;
      }
      return sum / 2;
    },
  };
}

/** A little off zero, where an autoregressive and a moving-average part could not be told apart. */
const OFF = 0.01;

function centreOf(form: Form, stated: readonly Prior[]): Float64Array {
  const blocks = blocksOf(form);
  const z = fromCoefficients(
    blocks,
    stated.map(({ centre, on }) => (on === 'coefficient' ? centre : 0)),
  );
  for (const { from, order, sign } of blocks)
    for (let i = from; i < from + order; i++) {
      if (stated[i].on === 'partial') z[i] = Math.atanh(clampPartial(stated[i].centre));
      if (z[i] === 0) z[i] = sign * OFF;
    }
  return z;
}

/**
 * The priors for a form and scale: tuned centres for (1,0,2)x(0,1,1) with a drift and (0,1,2)x(1,0,1), one rule in the
 * season's length s = m^−½ beyond quarters and months, and for every other coefficient none but its distance from 0.
 */
export function defaultPriors(form: Form, scale: string, constant: boolean): Priors {
  const { p, d, q, P, D, Q, m } = form;
  const orders = [p, d, q, P, D, Q].join();
  const isLog = scale !== 'plain';
  if (orders === '1,0,2,0,1,1' && m > 1) {
    const { ridge, ...coefficients } = driftPriors(m, isLog);
    return { coefficients, ridge: constant ? ridge : 0 };
  }
  if (orders === '0,1,2,1,0,1' && m > 1) {
    const { theta1, theta2 } = driftPriors(m, isLog);
    const Phi1 = m === 12 ? prior(0.98, 0.05) : prior(0.97, 0.05);
    const Theta1 = m === 12 ? prior(-0.8, 0.3) : prior(-0.75, 0.25);
    return { coefficients: { theta1, theta2, Phi1, Theta1 }, ridge: constant ? RIDGE : 0 };
  }
  // A level (no differences) is no drift: there is nothing that it should be pulled towards.
  return { coefficients: {}, ridge: constant && d + D > 0 ? (D > 0 ? m ** 2 / 4 : RIDGE) : 0 };
}

/** (1,0,2)x(0,1,1): tuned on the quarterly and monthly series of Makridakis et al., Journal of Forecasting 1 (1982). */
function driftPriors(m: number, isLog: boolean) {
  if (m === 4)
    return {
      phi1: prior(0.88, 0.03),
      theta1: prior(-0.3, 0.3),
      theta2: prior(0.1, 0.2),
      Theta1: prior(isLog ? -0.75 : -0.85, 0.2),
      ridge: isLog ? 4 : 1,
    };
  if (m === 12)
    return {
      phi1: prior(0.95, 0.02),
      theta1: prior(-0.65, 0.15),
      theta2: prior(0.1, 0.1),
      Theta1: prior(-0.7, 0.15),
      ridge: isLog ? 16 : 32,
    };
  const s = m ** -0.5;
  return {
    phi1: prior(1 - 0.19 * s, 0.1 * s),
    theta1: prior(-1 + 1.3 * s, 0.55 * s),
    theta2: prior(0.25 * s, 0.4 * s),
    Theta1: prior(-0.75, 0.2),
    ridge: m ** 2 / 4,
  };
}

const prior = (centre: number, spread: number): Prior => ({ centre, spread, on: 'coefficient' });

/** A drift per period is worth so many observations of none. */
const RIDGE = 4;
