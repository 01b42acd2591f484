/** What a fit is asked for: read, completed and checked against the figures. */
import { type Form, formText, lostToDifferencing, parseForm, polynomialCoefficients } from './form.js';
import { defaultPriors, type Priors } from './priors.js';
import { checkRegressors, type Regressor } from './regressors.js';
import { parseScale } from './scale.js';

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
  /** A fit of the same form to most of the same figures: the search starts there and stays on its summit. */
  readonly near?: Fitted;
}

interface Fitted {
  readonly phi: readonly number[];
  readonly theta: readonly number[];
  readonly Phi: readonly number[];
  readonly Theta: readonly number[];
}

/** The options with everything filled in. */
export interface Asked {
  readonly values: Float64Array;
  readonly form: Form;
  readonly season: number;
  readonly scale: string;
  readonly constant: boolean;
  readonly fittedBy: FittedBy;
  readonly priors: Priors | null;
  readonly regressors: readonly { readonly name: string; readonly values: Float64Array }[];
  readonly soldOut: readonly number[];
  /** φ, θ, Φ, Θ to start from; null where the search finds its own starts. */
  readonly near: readonly number[] | null;
}

/** Throws an Error where an option can't be used. */
export function normalize(values: ArrayLike<number>, options: FitOptions): Asked {
  const form = typeof options.form === 'string' ? parseForm(options.form) : options.form;
  const differences = form.d + form.D;
  const constant = options.constant ?? differences === 0;
  if (constant && differences > 1)
    throw new Error(
      `model ${formText(form)} can't have a constant: it is differenced ${differences} times; leave the constant out`,
    );
  const fittedBy = options.fittedBy ?? 'maximum-likelihood';
  const given = Float64Array.from(values);
  const odd = given.findIndex((x) => !Number.isFinite(x) && !Number.isNaN(x));
  if (odd >= 0) throw new Error(`figure ${odd + 1} of ${given.length} is ${given[odd]}`);
  const soldOut = [...new Set(options.soldOut ?? [])].sort((a, b) => a - b);
  const unsold = soldOut.find((t) => !(given[t] > Number.NEGATIVE_INFINITY));
  if (unsold !== undefined) throw new Error(`period ${unsold + 1} is said to have sold out, but has no figure`);
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
    soldOut,
    near: options.near ? [options.near.phi, options.near.theta, options.near.Phi, options.near.Theta].flat() : null,
  };
}

/** Shrunk, a model can do with this many differences. */
const FEWEST_SHRUNK = 8;

/** A model that needs more figures than there are; how many is in it as numbers too. */
export class TooFewFigures extends Error {
  override readonly name = 'TooFewFigures';
  readonly needed: number;
  /** Periods that sold out do not count. */
  readonly there: number;

  constructor(form: Form, needed: number, there: number, hasSoldOut: boolean) {
    const which = hasSoldOut ? 'figures from periods that did not sell out' : 'figures';
    super(`model ${formText(form)} needs at least ${needed} ${which}; there are ${there}: use a shorter model`);
    this.needed = needed;
    this.there = there;
  }
}

/** Throws a TooFewFigures that says how many figures the model needs where there are fewer. */
export function checkEnough({ form, fittedBy, constant, regressors, soldOut }: Asked, series: Float64Array): void {
  const there = series.reduce((count, y) => count + (Number.isNaN(y) ? 0 : 1), -soldOut.length);
  const lost = lostToDifferencing(form);
  const coefficients = polynomialCoefficients(form);
  const columns = regressors.length + (constant ? 1 : 0);
  const needed =
    coefficients === 0
      ? lost + 2 + columns
      : fittedBy === 'shrunk'
        ? lost + Math.max(FEWEST_SHRUNK, columns + 3)
        : Math.max(2 * form.m + coefficients + lost + 3, 12, lost + coefficients + columns + 3);
  if (there < needed) throw new TooFewFigures(form, needed, there, soldOut.length > 0);
}
