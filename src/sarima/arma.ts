/**
 * The expanded ARMA polynomials of a form, φ(B)Φ(Bᵐ) and θ(B)Θ(Bᵐ), in arrays that are made once and filled again for
 * every set of coefficients, together with the few lags that are not zero.
 */
import type { Form } from './form.js';
import { polynomialCoefficients } from './form.js';
import { type Block, blocksOf } from './partial.js';

export interface Arma {
  readonly form: Form;
  readonly blocks: readonly Block[];
  /** Highest lag of the expanded autoregressive side, p + mP. */
  readonly p: number;
  /** Highest lag of the expanded moving-average side, q + mQ. */
  readonly q: number;
  /** Length of the state: max(p, q + 1). */
  readonly r: number;
  /** y_t = Σ ar[k−1] y_{t−k} + …; length r, zero beyond p. */
  readonly ar: Float64Array;
  /** … + ε_t + Σ ma[k−1] ε_{t−k}; length r, zero beyond q. */
  readonly ma: Float64Array;
  /** The lags of `ar` that may differ from zero, ascending. */
  readonly arLags: Int32Array;
  /** The lags of `ma` that may differ from zero, ascending. */
  readonly maLags: Int32Array;
  /** φ, θ, Φ, Θ in this order, as last expanded. */
  readonly coefficients: Float64Array;
}

export function createArma(form: Form): Arma {
  const p = form.p + form.m * form.P;
  const q = form.q + form.m * form.Q;
  const r = Math.max(p, q + 1);
  return {
    form,
    blocks: blocksOf(form),
    p,
    q,
    r,
    ar: new Float64Array(r),
    ma: new Float64Array(r),
    arLags: productLags(form.p, form.P, form.m),
    maLags: productLags(form.q, form.Q, form.m),
    coefficients: new Float64Array(polynomialCoefficients(form)),
  };
}

/** Fills `ar` and `ma` from `coefficients`. */
export function expand(arma: Arma): void {
  const { form, coefficients, ar, ma } = arma;
  const { p, q, P, Q, m } = form;
  const theta = p;
  const Phi = p + q;
  const Theta = p + q + P;
  ar.fill(0);
  ma.fill(0);
  for (let i = 0; i < p; i++) ar[i] = coefficients[i];
  for (let i = 0; i < q; i++) ma[i] = coefficients[theta + i];
  for (let j = 0; j < P; j++) {
    const lag = m * (j + 1);
    const seasonal = coefficients[Phi + j];
    ar[lag - 1] += seasonal;
    for (let i = 0; i < p; i++) ar[lag + i] -= seasonal * coefficients[i];
  }
  for (let j = 0; j < Q; j++) {
    const lag = m * (j + 1);
    const seasonal = coefficients[Theta + j];
    ma[lag - 1] += seasonal;
    for (let i = 0; i < q; i++) ma[lag + i] += seasonal * coefficients[theta + i];
  }
}

function productLags(plain: number, seasonal: number, m: number): Int32Array {
  const lags = new Set<number>();
  for (let j = 0; j <= seasonal; j++) for (let i = 0; i <= plain; i++) if (i + j > 0) lags.add(i + m * j);
  return Int32Array.from([...lags].sort((a, b) => a - b));
}
