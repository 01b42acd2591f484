/**
 * Autocovariances of an ARMA process in O(r²), and from them the covariance of its first state with its first value.
 *
 * γ(z) = θ(z)θ(1/z) / (φ(z)φ(1/z)) is split into b(z)/φ(z) + b(1/z)/φ(1/z). The polynomial b comes from stepping φ
 * down one degree at a time: Wilson, "Some efficient computational procedures for high order ARMA models", Journal of
 * Statistical Computation and Simulation 8 (1979); Demeure & Mullis, "The Euclid algorithm and the fast computation
 * of cross-covariance and autocovariance sequences", IEEE Transactions on Acoustics, Speech and Signal Processing 37
 * (1989).
 */
import type { Arma } from './arma.js';

export interface AutocovarianceSpace {
  /** γ₀ … γᵣ for unit innovation variance. */
  readonly gamma: Float64Array;
  /** ψ₀ … ψ_q. */
  readonly psi: Float64Array;
  /** The polynomial that is stepped down, and the reflection taken at each degree. */
  readonly down: Float64Array;
  readonly reflection: Float64Array;
  readonly split: Float64Array;
}

export function createAutocovarianceSpace(r: number): AutocovarianceSpace {
  const array = () => new Float64Array(r + 1);
  return { gamma: array(), psi: array(), down: array(), reflection: array(), split: array() };
}

/** Fills `space.gamma` with γ₀ … γ_r. False where φ is not stationary. */
export function autocovariances(arma: Arma, space: AutocovarianceSpace): boolean {
  const { p, q, r, ar, arLags } = arma;
  const { gamma, down, reflection, split } = space;
  movingAverageAutocovariances(arma, split);
  if (p === 0) {
    gamma.set(split);
    return true;
  }

  // a(z) = φ(z) as 1 + a₁z + …; b's image c loses one degree at every step down of a.
  down[0] = 1;
  for (let k = 1; k <= p; k++) down[k] = -ar[k - 1];
  for (let j = q; j > p; j--) {
    // Above degree p the reflection is zero: c_j = s_j, and s_{j−i} loses s_j a_i.
    const top = split[j];
    for (let i = 0; i < arLags.length; i++) {
      const k = arLags[i];
      if (k < j) split[j - k] -= top * down[k];
    }
  }
  for (let degree = p; degree >= 1; degree--) {
    const k = down[degree];
    const rest = 1 - k * k;
    if (!(rest > 0)) return false;
    reflection[degree] = k;
    for (let i = 1, j = degree - 1; i <= j; i++, j--) {
      const a = down[i];
      const b = down[j];
      down[i] = (a - k * b) / rest;
      down[j] = (b - k * a) / rest;
    }
    const top = split[degree];
    if (top !== 0) for (let j = 1; j < degree; j++) split[j] -= top * down[degree - j];
  }
  split[0] /= 2;
  for (let degree = 1; degree <= p; degree++) {
    const k = reflection[degree];
    const rest = 1 - k * k;
    for (let i = 0, j = degree; i <= j; i++, j--) {
      const a = split[i];
      const b = split[j];
      split[i] = (a - k * b) / rest;
      split[j] = (b - k * a) / rest;
    }
  }

  // γ_k is the coefficient of z^k in b(z)/φ(z); γ₀ counts both halves.
  for (let k = 0; k <= r; k++) {
    let value = split[k];
    for (let i = 0; i < arLags.length; i++) {
      const lag = arLags[i];
      if (lag > k) break;
      value += ar[lag - 1] * gamma[k - lag];
    }
    gamma[k] = value;
  }
  gamma[0] *= 2;
  return gamma[0] > 0;
}

/** Σᵢ θᵢθᵢ₊ₖ for k = 0 … r. */
function movingAverageAutocovariances(arma: Arma, target: Float64Array): void {
  const { ma, maLags } = arma;
  target.fill(0);
  target[0] = 1;
  for (let i = 0; i < maLags.length; i++) {
    const theta = ma[maLags[i] - 1];
    target[0] += theta * theta;
    target[maLags[i]] += theta;
    for (let j = 0; j < i; j++) target[maLags[i] - maLags[j]] += theta * ma[maLags[j] - 1];
  }
}

/**
 * The covariance of the stationary state with its first element, which is the process itself: the first column of the
 * state's covariance matrix, r values, for unit innovation variance. The state is Harvey's, αᵢ,ₜ = Σ_{k>i} φₖ yₜ₊ᵢ₋ₖ +
 * Σ_{k≥i} θₖ εₜ₊ᵢ₋ₖ (Harvey, "Forecasting, structural time series models and the Kalman filter", 1989). False where φ
 * is not stationary.
 */
export function firstColumn(arma: Arma, space: AutocovarianceSpace, column: Float64Array): boolean {
  const { q, r, ar, ma, arLags, maLags } = arma;
  const { gamma, psi } = space;
  if (!autocovariances(arma, space)) return false;
  if (arLags.length === 0) {
    for (let i = 0; i < r; i++) column[i] = gamma[i];
    return true;
  }
  weights(ar, ma, arLags, q, psi);
  for (let i = 0; i < r; i++) column[i] = 0;
  for (let l = 0; l < arLags.length; l++) {
    const k = arLags[l];
    const phi = ar[k - 1];
    for (let i = 1; i < k; i++) column[i] += phi * gamma[k - i];
  }
  for (let l = 0; l < maLags.length; l++) {
    const k = maLags[l];
    const theta = ma[k - 1];
    for (let i = 1; i <= k; i++) column[i] += theta * psi[k - i];
  }
  column[0] = gamma[0];
  return true;
}

/** ψ₀ … ψ_count: the expansion of θ(B)/φ(B). */
export function weights(
  ar: Float64Array,
  ma: Float64Array,
  arLags: Int32Array,
  count: number,
  psi: Float64Array,
): void {
  psi[0] = 1;
  for (let j = 1; j <= count; j++) {
    let value = j <= ma.length ? ma[j - 1] : 0;
    for (let l = 0; l < arLags.length; l++) {
      const k = arLags[l];
      if (k > j) break;
      value += ar[k - 1] * psi[j - k];
    }
    psi[j] = value;
  }
}
