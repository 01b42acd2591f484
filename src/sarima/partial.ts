/**
 * From numbers without bounds to coefficients of a stationary (or invertible) polynomial and back: each number's tanh
 * is a partial autocorrelation, and these give the coefficients by the Durbin–Levinson recursion.
 *
 * Jones, "Maximum likelihood fitting of ARMA models to time series with missing observations", Technometrics 22 (1980);
 * Monahan, "A note on enforcing stationarity in autoregressive-moving average models", Biometrika 71 (1984).
 *
 * The four polynomials are mapped separately. For a moving average the signs are such that with order 1 the partial
 * value is θ₁ itself.
 */
import type { Form } from './form.js';

/** Beyond this tanh is 1 to within 2·10⁻⁶: close enough to the unit circle to be called on it, far enough to compute. */
export const OUTERMOST = 7;

/** The free numbers z of a form lie in the order φ, θ, Φ, Θ; so do the coefficients. */
export interface Block {
  readonly kind: 'phi' | 'theta' | 'Phi' | 'Theta';
  readonly from: number;
  readonly order: number;
  /** −1 for the moving-average side, whose coefficients are those of an autoregression with the sign turned. */
  readonly sign: 1 | -1;
}

/** The four polynomials' places in the vector of coefficients. */
export function blocksOf(form: Form): readonly Block[] {
  const { p, q, P, Q } = form;
  return [
    { kind: 'phi', from: 0, order: p, sign: 1 },
    { kind: 'theta', from: p, order: q, sign: -1 },
    { kind: 'Phi', from: p + q, order: P, sign: 1 },
    { kind: 'Theta', from: p + q + P, order: Q, sign: -1 },
  ];
}

/** z to coefficients, both in the order φ, θ, Φ, Θ. Writes into `coefficients`. */
export function toCoefficients(blocks: readonly Block[], z: Float64Array, coefficients: Float64Array): void {
  for (const { from, order, sign } of blocks)
    for (let k = 0; k < order; k++) {
      const partial = sign * Math.tanh(z[from + k]);
      // φ⁽ᵏ⁾ⱼ = φ⁽ᵏ⁻¹⁾ⱼ − r φ⁽ᵏ⁻¹⁾ₖ₋ⱼ, on coefficients that are kept with the block's sign.
      for (let i = from, j = from + k - 1; i <= j; i++, j--) {
        const a = coefficients[i];
        const b = coefficients[j];
        coefficients[i] = a - partial * b;
        coefficients[j] = b - partial * a;
      }
      coefficients[from + k] = sign * partial;
    }
}

/** Coefficients to z; those on or outside the unit circle come out at ±OUTERMOST. */
export function fromCoefficients(blocks: readonly Block[], coefficients: ArrayLike<number>): Float64Array {
  const z = Float64Array.from(coefficients);
  for (const { from, order, sign } of blocks)
    for (let k = order - 1; k >= 0; k--) {
      const partial = sign * clampPartial(z[from + k]);
      const rest = 1 - partial * partial;
      for (let i = from, j = from + k - 1; i <= j; i++, j--) {
        const a = z[i];
        const b = z[j];
        z[i] = (a + partial * b) / rest;
        z[j] = (b + partial * a) / rest;
      }
      z[from + k] = Math.atanh(sign * partial);
    }
  return z;
}

const LARGEST_PARTIAL = Math.tanh(OUTERMOST);

/** Held off the unit circle, as z is. */
export function clampPartial(partial: number): number {
  return Math.min(Math.max(partial, -LARGEST_PARTIAL), LARGEST_PARTIAL);
}
