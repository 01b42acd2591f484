/** For each coefficient the facts that its sentence is chosen by, and how much hangs on its exact value. */
import type { Coefficient, Fit } from '../sarima/fit.js';
import { movedBy, predictMeans } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';

export type Role =
  | 'ar'
  | 'ma'
  | 'seasonal-ar'
  | 'seasonal-ma'
  | 'constant'
  | 'passing-event'
  | 'lasting-event'
  | 'regressor';

export interface Meaning {
  readonly coefficient: string;
  readonly role: Role;
  readonly lag: number;
  readonly value: number;
  readonly range: [number, number] | null;
  readonly size: 'none' | 'small' | 'medium' | 'large';
  /** What an effect or a drift amounts to in per cent, on the log scale. */
  readonly percent: number | null;
  /** What an effect, a drift or a level amounts to in the series' unit, where the scale lets that be said. */
  readonly units: number | null;
  /** The share of a surprise that stays for good, where one coefficient alone decides it. */
  readonly lasting: number | null;
  readonly sensitivity: number | null;
}

const FAMILIES = { phi: 'ar', theta: 'ma', Phi: 'seasonal-ar', Theta: 'seasonal-ma' } as const;

/** `lasting`: the names of the regressors that stand for lasting events; `passing` likewise. */
export function meanings(fit: Fit, lasting: ReadonlySet<string>, passing: ReadonlySet<string>): Meaning[] {
  return fit.coefficients.map((coefficient, index): Meaning => {
    const { name, value, standardError } = coefficient;
    const { role, lag } = roleOf(name, fit.form.m, lasting, passing);
    return {
      coefficient: name,
      role,
      lag,
      value,
      range: standardError === null ? null : rangeOf(fit, role, value, standardError),
      size: sizeOf(value, role),
      ...amountOf(fit, role, value),
      lasting: lastingOf(fit, role, value),
      sensitivity: sensitivity(fit, coefficient, index),
    };
  });
}

function roleOf(name: string, m: number, lasting: ReadonlySet<string>, passing: ReadonlySet<string>) {
  const [, family, index] = /^(phi|theta|Phi|Theta)(\d+)$/.exec(name) ?? [];
  if (family !== undefined && index !== undefined) {
    const role: Role = FAMILIES[family as keyof typeof FAMILIES];
    return { role, lag: Number(index) * (role.startsWith('seasonal') ? m : 1) };
  }
  const role: Role =
    name === 'constant'
      ? 'constant'
      : lasting.has(name)
        ? 'lasting-event'
        : passing.has(name)
          ? 'passing-event'
          : 'regressor';
  return { role, lag: 0 };
}

/** A coefficient that is alone in its polynomial lies between −1 and 1, and so does its range. */
function rangeOf({ form }: Fit, role: Role, value: number, standardError: number): [number, number] {
  const orders: Partial<Record<Role, number>> = {
    ar: form.p,
    ma: form.q,
    'seasonal-ar': form.P,
    'seasonal-ma': form.Q,
  };
  const limit = orders[role] === 1 ? 1 : Number.POSITIVE_INFINITY;
  return [Math.max(value - 1.96 * standardError, -limit), Math.min(value + 1.96 * standardError, limit)];
}

function amountOf({ form, scale }: Fit, role: Role, value: number): Pick<Meaning, 'percent' | 'units'> {
  const { kind, from } = parseScale(scale);
  if (role === 'constant' && form.d + form.D === 0) return { percent: null, units: from(value) };
  if (isShare(role) || kind === 'box-cox') return { percent: null, units: null };
  return kind === 'log' ? { percent: 100 * Math.expm1(value), units: null } : { percent: null, units: value };
}

/** With one difference undone by one moving-average coefficient, and nothing autoregressive, 1 + θ stays. */
function lastingOf({ form }: Fit, role: Role, value: number): number | null {
  const { p, d, q, P, D, Q } = form;
  const decides =
    role === 'ma' ? p === 0 && d === 1 && q === 1 : role === 'seasonal-ma' && P === 0 && D === 1 && Q === 1;
  return decides ? 1 + value : null;
}

/** Common practice: under a tenth a coefficient of a polynomial hardly matters; from a third it shows, from two thirds it rules. */
function sizeOf(value: number, role: Role): Meaning['size'] {
  if (!isShare(role)) return value === 0 ? 'none' : 'medium';
  const size = Math.abs(value);
  return size < 0.1 ? 'none' : size < 1 / 3 ? 'small' : size < 2 / 3 ? 'medium' : 'large';
}

const isShare = (role: Role): boolean => ['ar', 'ma', 'seasonal-ar', 'seasonal-ma'].includes(role);

/**
 * How far the first forecast's middle moves, in units, for one standard error more: by the delta method, as a whole
 * standard error can lie beyond the region where the model is stationary and invertible.
 */
function sensitivity(fit: Fit, { standardError }: Coefficient, index: number): number | null {
  if (standardError === null) return null;
  const { from } = parseScale(fit.scale);
  const at = (step: number) => from(predictMeans(movedBy(fit, index, step), 1)[0]);
  const step = standardError / 1000;
  try {
    const moved = ((at(step) - at(-step)) / (2 * step)) * standardError;
    return Number.isFinite(moved) ? moved : null;
  } catch {
    // Even so small a step leaves the stationary region: there is nothing to say.
    return null;
  }
}
