/**
 * The scale that a model works on: the figures themselves, their logarithms, or a power of them.
 *
 * Box & Cox, "An analysis of transformations", Journal of the Royal Statistical Society B 26 (1964): with exponent λ,
 * g(x) = (x^λ − 1)/λ, and the logarithm at λ = 0.
 */

export interface Scale {
  readonly kind: 'plain' | 'log' | 'box-cox';
  /** The exponent: 1 for plain, 0 for log. */
  readonly lambda: number;
  /** From the user's units to the model's scale; NaN where the figure has no place on it. */
  readonly to: (x: number) => number;
  /** From the model's scale back to the user's units. */
  readonly from: (z: number) => number;
  /** log |dg/dx| at a figure: its share of the Jacobian that makes likelihoods comparable across scales. */
  readonly logDerivative: (x: number) => number;
}

const PLAIN: Scale = { kind: 'plain', lambda: 1, to: (x) => x, from: (z) => z, logDerivative: () => 0 };

const LOG: Scale = {
  kind: 'log',
  lambda: 0,
  to: (x) => (x > 0 ? Math.log(x) : Number.NaN),
  from: Math.exp,
  logDerivative: (x) => -Math.log(x),
};

/** Reads `plain`, `log` or `box-cox 0.3`. Throws an Error that names the three. */
export function parseScale(text: string): Scale {
  const words = text.trim().split(/\s+/);
  if (words.length === 1 && words[0] === 'plain') return PLAIN;
  if (words.length === 1 && words[0] === 'log') return LOG;
  const lambda = words.length === 2 && words[0] === 'box-cox' ? Number(words[1]) : Number.NaN;
  if (!Number.isFinite(lambda))
    throw new Error(`scale "${text}" is not known; write plain, log, or box-cox and an exponent, e.g. box-cox 0.3`);
  if (Math.abs(lambda) > 3) throw new Error(`scale "${text}": the exponent should lie between -3 and 3`);
  return lambda === 0 ? LOG : boxCox(lambda);
}

function boxCox(lambda: number): Scale {
  return {
    kind: 'box-cox',
    lambda,
    to: (x) => (x > 0 || (x === 0 && lambda > 0) ? (x ** lambda - 1) / lambda : Number.NaN),
    // Beyond the end of the scale the figure is the end itself: zero, or without bound where λ is negative.
    from: (z) => Math.max(lambda * z + 1, 0) ** (1 / lambda),
    logDerivative: (x) => (lambda - 1) * Math.log(x),
  };
}

/**
 * The figures on the model's scale, NaN where missing. Throws an Error that names the first figure that has no place
 * on it.
 */
export function toScale(values: ArrayLike<number>, text: string): Float64Array {
  const scale = parseScale(text);
  const scaled = new Float64Array(values.length);
  for (let t = 0; t < values.length; t++) {
    const x = values[t];
    scaled[t] = scale.to(x);
    if (Number.isNaN(scaled[t]) && !Number.isNaN(x))
      throw new Error(
        `scale ${text} needs figures above zero; figure ${t + 1} of ${values.length} is ${x}: use scale plain`,
      );
  }
  return scaled;
}
