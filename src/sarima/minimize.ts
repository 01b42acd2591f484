/**
 * Least squares in disguise: minimizes n/2·log Σrᵢ(z)² + ½ Σpⱼ(z)² over z within ±OUTERMOST.
 *
 * Both likelihoods of a model have this shape (Mélard 1984 uses it too), so the search is Levenberg's and Marquardt's
 * (Marquardt, "An algorithm for least-squares estimation of nonlinear parameters", Journal of the Society for
 * Industrial and Applied Mathematics 11, 1963): one forward difference a parameter gives the gradient and a Hessian that
 * is never indefinite. What that Hessian lacks, the rows' own curvature, is learned from how the gradient changes
 * (Dennis, Gay & Welsch, "An adaptive nonlinear least-squares algorithm", ACM Transactions on Mathematical Software 7,
 * 1981): it is what makes the last steps short near the unit circle.
 */
import { factorize, product, solveFactored } from './objective.js';
import { OUTERMOST } from './partial.js';

export interface Problem {
  readonly parameters: number;
  /** n, the weight of log Σr². */
  readonly weight: number;
  /** r(z), as the last call of `evaluate` left it. */
  readonly rows: Float64Array;
  /** p(z), likewise. */
  readonly penalties: Float64Array;
  /** The value to be minimized; Infinity where z has none. Fills `rows` and `penalties`. */
  readonly evaluate: (z: Float64Array) => number;
}

export interface Minimum {
  readonly z: Float64Array;
  readonly value: number;
  readonly evaluations: number;
  /** False where the search had to be broken off while another step still promised something worth having. */
  readonly settled: boolean;
}

const FORWARD = 1e-6;
const LONGEST_STEP = 2;
const MOST_ITERATIONS = 100;

/** A number this far out, and going further, is probably bound for the unit circle. */
const FAR = 2;

/** A search that rounding brings to a halt has settled where the next step promises less log-likelihood than this. */
const NEGLIGIBLE = 1e-4;
const PROBE = 0.01;

/** Searches from `start` until less than `tolerance` is to be gained. */
export function minimize(problem: Problem, start: Float64Array, tolerance: number): Minimum {
  const { parameters: k, weight, rows, penalties, evaluate } = problem;
  const z = start.map(withinBounds);
  let value = evaluate(z);
  let evaluations = 1;
  if (k === 0 || !Number.isFinite(value)) return { z, value, evaluations, settled: k === 0 };

  const base = Float64Array.from(rows);
  const basePenalties = Float64Array.from(penalties);
  const slopes = Array.from({ length: k }, () => new Float64Array(rows.length));
  const penaltySlopes = Array.from({ length: k }, () => new Float64Array(penalties.length));
  const gradient = new Float64Array(k);
  const hessian = new Float64Array(k * k);
  const factor = new Float64Array(k * k);
  const step = new Float64Array(k);
  const trial = new Float64Array(k);
  const shifted = new Float64Array(k);
  const curvature = createCurvature(k);
  const full = new Float64Array(k * k);
  const leapt = new Uint8Array(k);
  let damping = 1e-3;
  let promised = Number.POSITIVE_INFINITY;

  search: for (let iteration = 0; iteration < MOST_ITERATIONS; iteration++) {
    shifted.set(z);
    for (let j = 0; j < k; j++) {
      const h = z[j] > 0 ? -FORWARD : FORWARD;
      shifted[j] = z[j] + h;
      if (!Number.isFinite(evaluate(shifted))) return { z, value, evaluations, settled: false };
      shifted[j] = z[j];
      const slope = slopes[j];
      for (let i = 0; i < rows.length; i++) slope[i] = (rows[i] - base[i]) / h;
      for (let i = 0; i < penalties.length; i++) penaltySlopes[j][i] = (penalties[i] - basePenalties[i]) / h;
    }
    evaluations += k;
    const perSquare = weight / product(base, base, 0, rows.length);
    for (let i = 0; i < k; i++) {
      gradient[i] =
        perSquare * product(slopes[i], base, 0, rows.length) +
        product(penaltySlopes[i], basePenalties, 0, penalties.length);
      for (let j = 0; j <= i; j++)
        hessian[i * k + j] = hessian[j * k + i] =
          perSquare * product(slopes[i], slopes[j], 0, rows.length) +
          product(penaltySlopes[i], penaltySlopes[j], 0, penalties.length);
    }

    learnCurvature(curvature, z, gradient, hessian);
    for (let i = 0; i < k * k; i++) full[i] = hessian[i] + curvature.missing[i];
    const isPositive = dampedStep(z, gradient, full, 0, factor, step) > 0;
    const used = isPositive ? full : hessian;
    promised = dampedStep(z, gradient, used, 0, factor, step);
    if (promised < tolerance) return { z, value, evaluations, settled: true };
    for (;;) {
      const predicted = dampedStep(z, gradient, used, damping, factor, step);
      for (let j = 0; j < k; j++) trial[j] = withinBounds(z[j] + step[j]);
      const reached = evaluate(trial);
      evaluations++;
      const ratio = (value - reached) / predicted;
      if (ratio > 0) {
        damping = ratio > 0.75 ? damping / 8 : ratio < 0.25 ? damping * 3 : damping;
        z.set(trial);
        value = reached;
        base.set(rows);
        basePenalties.set(penalties);
        const far = step.findIndex((by, j) => !leapt[j] && by * z[j] > 0 && Math.abs(z[j]) > FAR);
        if (far >= 0) {
          // On its way to the unit circle: there at once, rather than by ever smaller gains.
          leapt[far] = 1;
          trial.set(z);
          trial[far] = Math.sign(z[far]) * OUTERMOST;
          const beyond = evaluate(trial);
          evaluations++;
          if (beyond <= value) {
            z.set(trial);
            value = beyond;
            base.set(rows);
            basePenalties.set(penalties);
            curvature.known = false;
          }
        }
        break;
      }
      damping = Math.max(damping, 1e-4) * 6;
      if (damping > 1e9) break search;
    }
  }
  const settled = promised < NEGLIGIBLE || isLowest(problem, z, value);
  return { z, value, evaluations, settled };
}

/** Where rounding swamps the slopes: whether a small step in any direction leads lower by more than is negligible. */
function isLowest({ evaluate }: Problem, z: Float64Array, value: number): boolean {
  const trial = Float64Array.from(z);
  return z.every((at, j) => {
    const lowest = Math.min(
      ...[-PROBE, PROBE].map((by) => {
        trial[j] = withinBounds(at + by);
        return evaluate(trial);
      }),
    );
    trial[j] = at;
    return lowest > value - NEGLIGIBLE;
  });
}

interface Curvature {
  /** The part of the Hessian that products of first derivatives do not hold. */
  readonly missing: Float64Array;
  readonly z: Float64Array;
  readonly gradient: Float64Array;
  known: boolean;
}

function createCurvature(k: number): Curvature {
  return { missing: new Float64Array(k * k), z: new Float64Array(k), gradient: new Float64Array(k), known: false };
}

/** Takes in the gradient at a new z, so that the full Hessian sends the step there to the gradient's change. */
function learnCurvature(curvature: Curvature, z: Float64Array, gradient: Float64Array, hessian: Float64Array): void {
  const { missing, z: last, gradient: lastGradient } = curvature;
  const k = z.length;
  if (curvature.known) {
    const s = z.map((value, i) => value - last[i]);
    const y = gradient.map((value, i) => value - lastGradient[i]);
    const wanted = y.map((value, i) => value - product(hessian.subarray(i * k, (i + 1) * k), s, 0, k));
    const along = product(y, s, 0, k);
    if (along > 0) {
      const had = () => s.map((_, i) => product(missing.subarray(i * k, (i + 1) * k), s, 0, k));
      // Sizing: what was learned elsewhere is believed no further than this step bears out.
      const before = Math.abs(product(s, had(), 0, k));
      const share = before === 0 ? 1 : Math.min(1, Math.abs(product(s, wanted, 0, k)) / before);
      for (let i = 0; i < k * k; i++) missing[i] *= share;
      const rest = had().map((value, i) => wanted[i] - value);
      const excess = product(rest, s, 0, k) / along ** 2;
      for (let i = 0; i < k; i++)
        for (let j = 0; j < k; j++)
          missing[i * k + j] += (rest[i] * y[j] + y[i] * rest[j]) / along - excess * y[i] * y[j];
    }
  }
  last.set(z);
  lastGradient.set(gradient);
  curvature.known = true;
}

/**
 * Solves (H + damping·diag H) step = −gradient over the parameters that are free to move, no longer than LONGEST_STEP in
 * any of them. Returns the decrease that the quadratic promises.
 */
function dampedStep(
  z: Float64Array,
  gradient: Float64Array,
  hessian: Float64Array,
  damping: number,
  factor: Float64Array,
  step: Float64Array,
): number {
  const k = z.length;
  let largest = 0;
  for (let i = 0; i < k; i++) largest = Math.max(largest, hessian[i * k + i]);
  if (largest === 0) return 0;
  for (let i = 0; i < k; i++) {
    const held = isHeld(z[i], gradient[i]);
    for (let j = 0; j <= i; j++) factor[i * k + j] = held || isHeld(z[j], gradient[j]) ? 0 : hessian[i * k + j];
    factor[i * k + i] = held ? largest : hessian[i * k + i] * (1 + damping) + 1e-10 * largest;
    step[i] = held ? 0 : -gradient[i];
  }
  if (!factorize(factor, k)) return 0;
  solveFactored(factor, k, step);
  let longest = 0;
  for (let i = 0; i < k; i++) longest = Math.max(longest, Math.abs(step[i]));
  if (longest > LONGEST_STEP) for (let i = 0; i < k; i++) step[i] *= LONGEST_STEP / longest;
  let predicted = 0;
  for (let i = 0; i < k; i++) {
    let curved = 0;
    for (let j = 0; j < k; j++) curved += hessian[i * k + j] * step[j];
    predicted -= step[i] * (gradient[i] + 0.5 * curved);
  }
  return predicted;
}

/** A parameter at its bound that the gradient would push further. */
function isHeld(z: number, slope: number): boolean {
  return (z >= OUTERMOST && slope < 0) || (z <= -OUTERMOST && slope > 0);
}

function withinBounds(z: number): number {
  return Math.min(Math.max(z, -OUTERMOST), OUTERMOST);
}
