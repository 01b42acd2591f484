/** The search for the likelihood's highest summit, from as many starts as it is likely to have summits. */
import type { Arma } from './arma.js';
import { type Minimum, minimize, type Problem } from './minimize.js';
import { startValues } from './start.js';

/** An unfinished search promises less than this much more log-likelihood when it stops. */
const TOLERANCE = 1e-8;
/** A further start is followed this far before it is asked whether it leads higher. */
const ROUGHLY = 0.03;
/** Closer than this in every partial autocorrelation, a summit is one that is known. */
const SAME = 0.02;

/** A partial autocorrelation beyond 0.96 is near the unit circle. */
const FAR = 2;

/**
 * `startColumns`: what conditional least squares makes a first start from. `centre`: z at the priors' centres, or null;
 * with priors there is hardly ever more than the one summit that they lead to (at most 3 in 1,000 of M1's series).
 */
export function search(
  arma: Arma,
  problem: Problem,
  startColumns: readonly Float64Array[],
  centre: Float64Array | null,
): Minimum {
  let best = minimize(problem, centre ?? startValues(arma, startColumns).z, TOLERANCE);
  let { evaluations } = best;
  if (centre !== null) {
    if (best.settled && best.z.every((value) => Math.abs(value) < FAR)) return best;
    const other = minimize(problem, startValues(arma, startColumns).z, TOLERANCE);
    return { ...(other.value < best.value ? other : best), evaluations: evaluations + other.evaluations };
  }
  for (const start of furtherStarts(arma)) {
    const rough = minimize(problem, start, ROUGHLY);
    evaluations += rough.evaluations;
    if (Number.isFinite(best.value) && (rough.value > best.value + ROUGHLY || isSame(rough.z, best.z))) continue;
    const found = minimize(problem, rough.z, TOLERANCE);
    evaluations += found.evaluations;
    if (!(found.value >= best.value)) best = found;
  }
  return { ...best, evaluations };
}

/** Near a fit that is known: so little log-likelihood is less than a fiftieth of any estimate's standard error. */
const NEARLY = 1e-4;

/** The summit that `start` leads to. A start on the unit circle, where nothing moves, is first brought off it. */
export function stay(problem: Problem, start: Float64Array): Minimum {
  return minimize(
    problem,
    start.map((z) => Math.min(Math.max(z, -FAR), FAR)),
    NEARLY,
  );
}

/**
 * Where a second summit is likely: an autoregressive and a moving-average root that nearly undo each other, at one of
 * several frequencies, as a real root or a pair; and the same in the seasonal polynomials.
 */
function furtherStarts(arma: Arma): Float64Array[] {
  const { p, q, P, Q } = arma.form;
  const isMixed = p > 0 && q > 0;
  const hasPair = p > 1 && q > 1;
  const place = (...partials: (readonly number[])[]) => {
    const z = new Float64Array(arma.coefficients.length);
    arma.blocks.forEach(({ from, order }, block) => {
      for (let i = 0; i < Math.min(order, partials[block].length); i++) z[from + i] = Math.atanh(partials[block][i]);
    });
    return z;
  };
  const starts = isMixed
    ? [place([0.9], [-0.7], [0.1], [-0.5]), place([-0.5], [0.4], [0.1], [-0.5]), place([-0.8], [0.95], [0.1], [-0.5])]
    : p > 1 || q > 1 || P + Q > 0
      ? [place([0.5], [-0.6], [0.1], [-0.6]), place([-0.3], [0.4], [-0.3], [0.2])]
      : [];
  if (hasPair) for (const c of [0.9, 0.5, 0, -0.5, -0.9]) starts.push(place([c, -0.6], [-c, 0.9], [0.1], [-0.5]));
  if (q > 1 && p === 0) starts.push(place([], [-0.5, -0.6], [0.1], [-0.1]));
  if (P > 0) starts.push(place([0.5], [-0.6], [0.9], [-0.8]));
  if (P > 0 && Q > 0) starts.push(place([0.5], [-0.6], [-0.9], [0.8]));
  return starts;
}

function isSame(a: Float64Array, b: Float64Array): boolean {
  return a.every((value, i) => Math.abs(Math.tanh(value) - Math.tanh(b[i])) < SAME);
}
