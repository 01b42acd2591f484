/** A model's weights over time: ψ, what a surprise adds later, and π, what the next forecast takes of past figures. */
import type { Fit } from './fit.js';
import { differencePolynomial, multiply, polynomial } from './polynomial.js';

/** The expanded polynomials of a fitted model from lag 0 upwards. */
export function expandedPolynomials(fit: Pick<Fit, 'form' | 'phi' | 'theta' | 'Phi' | 'Theta'>): {
  /** φ(B)Φ(Bᵐ). */
  ar: number[];
  /** φ(B)Φ(Bᵐ)∇ᵈ∇ₘᴰ. */
  full: number[];
  /** θ(B)Θ(Bᵐ). */
  ma: number[];
} {
  const { d, D, m } = fit.form;
  const ar = multiply(polynomial(fit.phi, -1), polynomial(fit.Phi, -1, m));
  const ma = multiply(polynomial(fit.theta, 1), polynomial(fit.Theta, 1, m));
  return { ar, full: multiply(ar, differencePolynomial(d, D, m)), ma };
}

/** ψ₀ … ψ_{count−1}: the effect of one surprise on the figures so many periods later (model's scale). */
export function psiWeights(fit: Pick<Fit, 'form' | 'phi' | 'theta' | 'Phi' | 'Theta'>, count: number): Float64Array {
  const { full, ma } = expandedPolynomials(fit);
  return quotient(ma, full, count);
}

/** π₁ … π_count: yₜ₊₁ is forecast as Σ πⱼ yₜ₊₁₋ⱼ (plus the constant's share), from an unending past. */
export function piWeights(fit: Pick<Fit, 'form' | 'phi' | 'theta' | 'Phi' | 'Theta'>, count: number): Float64Array {
  const { full, ma } = expandedPolynomials(fit);
  return quotient(full, ma, count + 1)
    .slice(1)
    .map((weight) => -weight);
}

/** The first `count` coefficients of the power series above(B)/below(B), both with 1 at lag 0. */
function quotient(above: readonly number[], below: readonly number[], count: number): Float64Array {
  const series = new Float64Array(count);
  for (let j = 0; j < count; j++) {
    let value = j < above.length ? above[j] : 0;
    for (let k = 1; k < below.length && k <= j; k++) if (below[k] !== 0) value -= below[k] * series[j - k];
    series[j] = value;
  }
  return series;
}
