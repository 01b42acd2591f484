/** Fisher's F distribution. */
import { logGamma } from './log-gamma.js';

const ENOUGH = 1e-15;
/** In the place of a zero denominator (Thompson & Barnett, Journal of Computational Physics 64, 1986). */
const TINY = 1e-300;

/**
 * The probability of a value above x with `above` and `below` degrees of freedom, to about 11 digits: the regularized
 * incomplete beta function I(below/2, above/2) at below/(below + above·x) (Abramowitz & Stegun, "Handbook of
 * Mathematical Functions", 1964, 26.6.2).
 */
export function fUpperTail(x: number, above: number, below: number): number {
  if (!(above > 0 && below > 0)) throw new Error(`degrees of freedom are above zero, not ${above} and ${below}`);
  if (Number.isNaN(x)) throw new Error('a probability needs a number, not NaN');
  if (x <= 0) return 1;
  if (x === Number.POSITIVE_INFINITY) return 0;
  const y = below / (below + above * x);
  const a = below / 2;
  const b = above / 2;
  const factor = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(y) + b * Math.log1p(-y));
  // The fraction is quick on this side of the mean; on the other I(a, b, y) = 1 − I(b, a, 1 − y).
  return y < (a + 1) / (a + b + 2)
    ? (factor * betaFraction(a, b, y)) / a
    : 1 - (factor * betaFraction(b, a, 1 - y)) / b;
}

/**
 * 1/(1 + d₁/(1 + d₂/(1 + …))) (Abramowitz & Stegun 26.5.8), from the front: Lentz, "Generating Bessel functions in Mie
 * scattering calculations using continued fractions", Applied Optics 15 (1976).
 */
function betaFraction(a: number, b: number, y: number): number {
  let value = 1;
  let above = 1;
  let below = 0;
  for (let k = 1; k <= 20_000; k++) {
    const j = k >> 1;
    const numerator = k % 2 === 0 ? j * (b - j) : -(a + j) * (a + b + j);
    const d = (numerator * y) / ((a + k - 1) * (a + k));
    below = 1 / (1 + d * below || TINY);
    above = 1 + d / above || TINY;
    const change = above * below;
    value *= change;
    if (Math.abs(change - 1) < ENOUGH) break;
  }
  return 1 / value;
}
