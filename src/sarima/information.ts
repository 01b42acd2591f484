/**
 * The estimates' covariance from the observed information: the Hessian of minus the log-likelihood at its minimum.
 *
 * In the free numbers z the Hessian is taken by central differences; with the effects β concentrated out it is the
 * Schur complement of the joint one, so that its inverse is z's block of the joint covariance, and
 * cov(β) = (n/S V'V)⁻¹ + (∂β/∂z) cov(z) (∂β/∂z)'. The coefficients' own covariance follows by the delta method.
 *
 * Shrunk, the Hessian H is that of the penalized likelihood, of which the penalties make up H₀; the coefficients then
 * count for tr(H⁻¹(H − H₀)) (Hastie & Tibshirani, "Generalized Additive Models", 1990, section 3.5).
 */
import { factorize, product, solveFactored } from './objective.js';
import { type Block, OUTERMOST, toCoefficients } from './partial.js';

export interface Profile {
  readonly blocks: readonly Block[];
  /** Minus the log-likelihood (with penalties where shrunk); leaves the effects at z in `effects`. */
  readonly evaluate: (z: Float64Array) => number;
  readonly effects: Float64Array;
  /** The penalties' rows, as the last evaluation left them. */
  readonly penalties: Float64Array;
  /** The effects' covariance with z held fixed, k by k. */
  readonly effectsCovariance: (z: Float64Array) => Float64Array;
  /** The ridge on each effect in units of the variance, and the variance at the last evaluation. */
  readonly ridge: Float64Array;
  readonly variance: () => number;
}

export interface Information {
  /** Joint covariance of coefficients and effects (rows of zeros for what is fixed), or null where not positive. */
  readonly covariance: number[][] | null;
  readonly effective: number;
}

const STEP = 2e-3;
/** A free number this far out is on the unit circle as far as figures can tell, and counts as fixed there. */
const ON_THE_CIRCLE = OUTERMOST - 1.5;

export function estimateCovariance(profile: Profile, at: Float64Array): Information {
  const { blocks, evaluate, effects, penalties, ridge } = profile;
  const free = [...at.keys()].filter((i) => Math.abs(at[i]) < ON_THE_CIRCLE);
  const f = free.length;
  const k = effects.length;
  const z = Float64Array.from(at);
  const centre = evaluate(z);
  const up = new Float64Array(f);
  const down = new Float64Array(f);
  const drift = free.map(() => new Float64Array(k));
  const pull = free.map(() => new Float64Array(penalties.length));
  const moved = (i: number, di: number, j = i, dj = 0) => {
    z[free[i]] += di;
    z[free[j]] += dj;
    const value = evaluate(z);
    z.set(at);
    return value;
  };
  for (let i = 0; i < f; i++) {
    up[i] = moved(i, STEP);
    for (let l = 0; l < k; l++) drift[i][l] = effects[l];
    pull[i].set(penalties);
    down[i] = moved(i, -STEP);
    for (let l = 0; l < k; l++) drift[i][l] = (drift[i][l] - effects[l]) / (2 * STEP);
    for (let l = 0; l < penalties.length; l++) pull[i][l] = (pull[i][l] - penalties[l]) / (2 * STEP);
  }
  const hessian = new Float64Array(f * f);
  for (let i = 0; i < f; i++) {
    hessian[i * f + i] = (up[i] - 2 * centre + down[i]) / STEP ** 2;
    for (let j = 0; j < i; j++) {
      const both = moved(i, STEP, j, STEP) + moved(i, -STEP, j, -STEP);
      hessian[i * f + j] = (both - up[i] - down[i] - up[j] - down[j] + 2 * centre) / (2 * STEP ** 2);
      hessian[j * f + i] = hessian[i * f + j];
    }
  }
  const ofZ = invert(hessian, f);
  const ofEffects = profile.effectsCovariance(at);
  if (ofZ === null) return { covariance: null, effective: at.length + k };
  let effective = at.length + k;
  for (let i = 0; i < f; i++)
    for (let j = 0; j < f; j++) effective -= ofZ[i * f + j] * product(pull[i], pull[j], 0, penalties.length);
  const variance = profile.variance();
  for (let i = 0; i < k; i++) effective -= (ridge[i] * ofEffects[i * k + i]) / variance;

  // Every estimate's slope in the free z: coefficients by the transform, effects by their drift.
  const slopes = coefficientSlopes(blocks, at, free);
  for (let l = 0; l < k; l++) slopes.push(drift.map((d) => d[l]));
  const c = at.length;
  const covariance = slopes.map((a, i) =>
    slopes.map((b, j) => {
      let sum = i >= c && j >= c ? ofEffects[(i - c) * k + j - c] : 0;
      for (let u = 0; u < f; u++) for (let v = 0; v < f; v++) sum += a[u] * ofZ[u * f + v] * b[v];
      return sum;
    }),
  );
  return { covariance, effective };
}

/** ∂coefficient/∂z over the free z, by central differences of the transform. */
function coefficientSlopes(blocks: readonly Block[], at: Float64Array, free: readonly number[]): number[][] {
  const h = 1e-5;
  const slopes = Array.from(at, () => new Array<number>(free.length).fill(0));
  const z = Float64Array.from(at);
  const above = new Float64Array(at.length);
  const below = new Float64Array(at.length);
  free.forEach((index, u) => {
    z[index] = at[index] + h;
    toCoefficients(blocks, z, above);
    z[index] = at[index] - h;
    toCoefficients(blocks, z, below);
    z[index] = at[index];
    for (let i = 0; i < at.length; i++) slopes[i][u] = (above[i] - below[i]) / (2 * h);
  });
  return slopes;
}

/** Inverse of a symmetric positive definite matrix, or null. */
export function invert(matrix: Float64Array, k: number): Float64Array | null {
  const factor = Float64Array.from(matrix);
  if (!factorize(factor, k)) return null;
  const inverse = new Float64Array(k * k);
  const unit = new Float64Array(k);
  for (let j = 0; j < k; j++) {
    unit.fill(0);
    unit[j] = 1;
    solveFactored(factor, k, unit);
    for (let i = 0; i < k; i++) inverse[i * k + j] = unit[i];
  }
  return inverse;
}
