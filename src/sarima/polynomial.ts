/** Polynomials in the backshift operator B, as arrays of coefficients from lag 0 upwards. */

/** The product of two polynomials. */
export function multiply(a: ArrayLike<number>, b: ArrayLike<number>): number[] {
  const product = new Array<number>(a.length + b.length - 1).fill(0);
  for (let i = 0; i < a.length; i++) for (let j = 0; j < b.length; j++) product[i + j] += a[i] * b[j];
  return product;
}

/** ∇ᵈ∇ₘᴰ = (1 − B)ᵈ (1 − Bᵐ)ᴰ. */
export function differencePolynomial(d: number, D: number, m: number): number[] {
  const seasonal = new Array<number>(m + 1).fill(0);
  seasonal[0] = 1;
  seasonal[m] -= 1;
  let polynomial = [1];
  for (let i = 0; i < d; i++) polynomial = multiply(polynomial, [1, -1]);
  for (let i = 0; i < D; i++) polynomial = multiply(polynomial, seasonal);
  return polynomial;
}

/** δ in yₜ = ∇ᵈ∇ₘᴰyₜ + Σ δₖ yₜ₋ₖ, δ₁ first. */
export function differenceWeights({
  d,
  D,
  m,
}: {
  readonly d: number;
  readonly D: number;
  readonly m: number;
}): Float64Array {
  return Float64Array.from(differencePolynomial(d, D, m).slice(1), (weight) => -weight);
}

/** 1 + sign·Σ coefficientsⱼ B^(j·spacing): φ(B) with sign −1, θ(B) with sign 1, the seasonal ones with spacing m. */
export function polynomial(coefficients: ArrayLike<number>, sign: 1 | -1, spacing = 1): number[] {
  const result = new Array<number>(coefficients.length * spacing + 1).fill(0);
  result[0] = 1;
  for (let j = 0; j < coefficients.length; j++) result[(j + 1) * spacing] = sign * coefficients[j];
  return result;
}
