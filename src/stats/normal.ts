/** The standard normal distribution. */

/**
 * Its quantile at probability p, to about 16 digits.
 *
 * Wichura, "Algorithm AS 241: the percentage points of the normal distribution", Applied Statistics 37 (1988), routine
 * PPND16, with the coefficients printed there.
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) throw new Error(`a probability lies between 0 and 1, not ${p}`);
  if (p === 0) return Number.NEGATIVE_INFINITY;
  if (p === 1) return Number.POSITIVE_INFINITY;
  const q = p - 0.5;
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q;
    return (q * horner(CENTRE_ABOVE, r)) / horner(CENTRE_BELOW, r);
  }
  const r = Math.sqrt(-Math.log(q < 0 ? p : 1 - p));
  const size =
    r <= 5
      ? horner(MIDDLE_ABOVE, r - 1.6) / horner(MIDDLE_BELOW, r - 1.6)
      : horner(TAIL_ABOVE, r - 5) / horner(TAIL_BELOW, r - 5);
  return q < 0 ? -size : size;
}

/**
 * The probability of a value at or below x, to about 15 digits.
 *
 * By the series of the error function near zero and by the continued fraction of its complement beyond (Abramowitz &
 * Stegun, "Handbook of Mathematical Functions", 1964, 26.2.11 and 26.2.14).
 */
export function normalProbability(x: number): number {
  if (Number.isNaN(x)) throw new Error('a probability needs a number, not NaN');
  const size = Math.abs(x);
  if (size > 40) return x < 0 ? 0 : 1;
  const density = Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
  if (size < 3) {
    let term = x;
    let sum = x;
    for (let k = 1; Math.abs(term) > 1e-17 * Math.abs(sum); k++) {
      term *= (x * x) / (2 * k + 1);
      sum += term;
    }
    return 0.5 + density * sum;
  }
  let fraction = 0;
  for (let k = 200; k >= 1; k--) fraction = k / (size + fraction);
  const tail = density / (size + fraction);
  return x < 0 ? tail : 1 - tail;
}

function horner(coefficients: readonly number[], x: number): number {
  let value = 0;
  for (let i = coefficients.length - 1; i >= 0; i--) value = value * x + coefficients[i];
  return value;
}

const CENTRE_ABOVE = [
  3.3871328727963665, 133.14166789178438, 1971.5909503065513, 13731.69376550946, 45921.95393154987, 67265.7709270087,
  33430.57558358813, 2509.0809287301227,
];
const CENTRE_BELOW = [
  1, 42.31333070160091, 687.1870074920579, 5394.196021424751, 21213.794301586597, 39307.89580009271, 28729.085735721943,
  5226.495278852854,
];
const MIDDLE_ABOVE = [
  1.4234371107496835, 4.630337846156546, 5.769497221460691, 3.6478483247632045, 1.2704582524523684, 0.2417807251774506,
  0.022723844989269184, 0.0007745450142783414,
];
const MIDDLE_BELOW = [
  1, 2.053191626637759, 1.6763848301838038, 0.6897673349851, 0.14810397642748008, 0.015198666563616457,
  0.0005475938084995345, 1.0507500716444169e-9,
];
const TAIL_ABOVE = [
  6.657904643501103, 5.463784911164114, 1.7848265399172913, 0.29656057182850487, 0.026532189526576124,
  0.0012426609473880784, 2.7115555687434876e-5, 2.0103343992922881e-7,
];
const TAIL_BELOW = [
  1, 0.599832206555888, 0.1369298809227358, 0.014875361290850615, 0.0007868691311456133, 1.8463183175100548e-5,
  1.421511758316446e-7, 2.0442631033899397e-15,
];
