/** What a fitted model assumes, and whether its series bears that out. */
import type { Fit } from '../sarima/fit.js';
import { type Assumption, type AssumptionId, untested } from './assumption.js';
import { checkDifferencing } from './differencing.js';
import { checkHistory } from './history.js';
import { checkLeftover } from './leftover.js';
import { checkNormality } from './normality.js';
import { checkOutliers } from './outliers.js';
import { checkSettled } from './settled.js';
import { checkSpread } from './spread.js';
import { checkStability } from './stability.js';

export type { Assumption, AssumptionId, Outlier, Status } from './assumption.js';

const CHECKS: readonly (readonly [AssumptionId, (fit: Fit) => Assumption])[] = [
  ['leftover-pattern', checkLeftover],
  ['even-spread', checkSpread],
  ['normal-surprises', checkNormality],
  ['odd-quarters', checkOutliers],
  ['stable-over-time', checkStability],
  ['enough-history', checkHistory],
  ['differencing', checkDifferencing],
  ['settled-fit', checkSettled],
];

/** One of each, always in this order; `untested` where the series is too short for the test or it can't be computed. */
export function checkAssumptions(fit: Fit): readonly Assumption[] {
  return CHECKS.map(([id, check]) => {
    try {
      return check(fit);
    } catch {
      // The filter throws where it can't be run: then nothing can be said, and the forecast still stands.
      return untested(id);
    }
  });
}
