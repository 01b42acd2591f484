/** The chi-squared distribution. */
import { logGamma } from './log-gamma.js';

const ENOUGH = 1e-16;

/**
 * The probability of a value above x with `freedom` degrees of freedom, to about 12 digits: the regularized incomplete
 * gamma function Q(freedom/2, x/2), by its series below the mean and by Legendre's continued fraction above it
 * (Abramowitz & Stegun, "Handbook of Mathematical Functions", 1964, 6.5.29 and 6.5.31).
 */
export function chiSquaredUpperTail(x: number, freedom: number): number {
  if (!(freedom > 0)) throw new Error(`degrees of freedom are above zero, not ${freedom}`);
  if (Number.isNaN(x)) throw new Error('a probability needs a number, not NaN');
  if (x <= 0) return 1;
  if (x === Number.POSITIVE_INFINITY) return 0;
  const a = freedom / 2;
  const z = x / 2;
  const factor = Math.exp(a * Math.log(z) - z - logGamma(a));
  return z < a + 1 ? 1 - factor * lowerSeries(a, z) : factor / upperFraction(a, z);
}

/** Σ zᵏ / (a(a + 1)…(a + k)). */
function lowerSeries(a: number, z: number): number {
  let term = 1 / a;
  let sum = term;
  for (let k = 1; term > ENOUGH * sum; k++) {
    term *= z / (a + k);
    sum += term;
  }
  return sum;
}

/**
 * z + 1 − a − 1(1 − a)/(z + 3 − a − 2(2 − a)/(z + 5 − a − …)), from the front: Lentz, "Generating Bessel functions in
 * Mie scattering calculations using continued fractions", Applied Optics 15 (1976). No denominator is zero for z > a.
 */
function upperFraction(a: number, z: number): number {
  let b = z + 1 - a;
  let value = b;
  let above = b;
  let below = 0;
  for (let k = 1; ; k++) {
    const numerator = -k * (k - a);
    b += 2;
    below = 1 / (b + numerator * below);
    above = b + numerator / above;
    const change = above * below;
    value *= change;
    if (Math.abs(change - 1) < ENOUGH * 4 || k > 10_000) return value;
  }
}
