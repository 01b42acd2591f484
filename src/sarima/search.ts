/** The search for the likelihood's highest summit, from as many starts as it is likely to have summits. */
import type { Arma } from './arma.js';
import { type Minimum, minimize, type Problem } from './minimize.js';
import { firstGuess, guess, startValues } from './start.js';

/** An unfinished search promises less than this much more log-likelihood when it stops. */
const TOLERANCE = 1e-8;
/** A further start is followed this far before it is asked whether it leads higher. */
const ROUGHLY = 1e-2;

/** Near the unit circle: partial autocorrelations beyond 0.96. */
const SUSPICIOUS = 2;
/** A first partial autocorrelation of 0.9. */
const PERSISTENT = 1.5;

/** `start`: where to begin and stay, or the columns that conditional least squares makes a first start from. */
export function search(arma: Arma, problem: Problem, startColumns: readonly Float64Array[]): Minimum {
  let best = minimize(problem, startValues(arma, startColumns).z, TOLERANCE);
  let { evaluations } = best;
  for (const start of furtherStarts(arma, best)) {
    const rough = minimize(problem, start, ROUGHLY);
    evaluations += rough.evaluations;
    if (rough.value > best.value - 2 * ROUGHLY && Number.isFinite(best.value)) continue;
    const found = minimize(problem, rough.z, TOLERANCE);
    evaluations += found.evaluations;
    best = found;
  }
  return { ...best, evaluations };
}

/** A likelihood with both sides, or with a seasonal autoregression, often has a second summit. */
function furtherStarts(arma: Arma, { settled, z }: Minimum): Float64Array[] {
  const { p, q, P } = arma.form;
  const isPlain = settled && z.every((value) => Math.abs(value) < SUSPICIOUS);
  const isMixed = p > 0 && q > 0;
  return [
    ...(isPlain ? [] : [firstGuess(arma)]),
    ...(isMixed || P > 0 ? [guess(arma, { ar: PERSISTENT, ma: -PERSISTENT / 2 })] : []),
    ...(isMixed ? [guess(arma, { ar: -PERSISTENT / 3, ma: PERSISTENT / 3 })] : []),
  ];
}
