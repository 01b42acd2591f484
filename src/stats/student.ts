/** Student's t distribution. */
import { fUpperTail } from './f.js';
import { logGamma } from './log-gamma.js';
import { normalQuantile } from './normal.js';

/**
 * Its quantile at probability p with `freedom` degrees of freedom (1 or more, whole or not; Infinity is the normal), to about 12 digits: Newton's
 * steps on the distribution function, from the normal quantile's expansion (Abramowitz & Stegun, "Handbook of
 * Mathematical Functions", 1964, 26.7.5).
 */
export function studentQuantile(p: number, freedom: number): number {
  if (!(p > 0 && p < 1)) throw new Error(`a quantile needs a probability between 0 and 1, not ${p}`);
  if (!(freedom >= 1)) throw new Error(`degrees of freedom are 1 or more, not ${freedom}`);
  if (p === 0.5) return 0;
  if (freedom === Number.POSITIVE_INFINITY) return normalQuantile(p);
  if (p > 0.5) return -studentQuantile(1 - p, freedom);
  if (freedom === 1) return -1 / Math.tan(Math.PI * p);
  const logScale = logGamma((freedom + 1) / 2) - logGamma(freedom / 2) - 0.5 * Math.log(freedom * Math.PI);
  let t = Math.max(-firstGuess(-normalQuantile(p), freedom), -1e8);
  for (let round = 0; round < 100; round++) {
    const density = Math.exp(logScale - ((freedom + 1) / 2) * Math.log1p((t * t) / freedom));
    const tail = fUpperTail(t * t, 1, freedom) / 2;
    // Newton on the logarithm of the tail, which is nearly straight, cannot overshoot the centre.
    const step = (Math.log(p / tail) * tail) / density;
    t = Math.min(t + step, -1e-300);
    if (Math.abs(step) < 1e-13 * Math.max(1, Math.abs(t))) break;
  }
  return t;
}

function firstGuess(z: number, n: number): number {
  const square = z * z;
  return (
    z +
    (z * (square + 1)) / (4 * n) +
    (z * ((5 * square + 16) * square + 3)) / (96 * n * n) +
    (z * (((3 * square + 19) * square + 17) * square - 15)) / (384 * n ** 3)
  );
}
