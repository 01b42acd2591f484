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
  readonly percent: number | null;
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
      range: standardError === null ? null : [value - 1.96 * standardError, value + 1.96 * standardError],
      size: sizeOf(value, role),
      percent: parseScale(fit.scale).kind === 'log' && lag === 0 ? 100 * Math.expm1(value) : null,
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

/** Common practice: under a tenth a coefficient of a polynomial hardly matters; from a third it shows, from two thirds it rules. */
function sizeOf(value: number, role: Role): Meaning['size'] {
  const isShare = role === 'ar' || role === 'ma' || role === 'seasonal-ar' || role === 'seasonal-ma';
  if (!isShare) return value === 0 ? 'none' : 'medium';
  const size = Math.abs(value);
  return size < 0.1 ? 'none' : size < 1 / 3 ? 'small' : size < 2 / 3 ? 'medium' : 'large';
}

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
