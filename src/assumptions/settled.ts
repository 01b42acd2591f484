/** The estimation ended cleanly. */
import type { Fit } from '../sarima/fit.js';
import { type Assumption, assumption } from './assumption.js';
import { rootsNearOne } from './differencing.js';

/**
 * The search came to rest, the estimates have a covariance, no two polynomials nearly undo each other, and no root lies
 * next to the unit circle (but for those that speak of the differencing, which are told there).
 */
export function checkSettled(fit: Fit): Assumption {
  const { settled, nearlyCancels, covariance, nearUnitRoots } = fit;
  const told = rootsNearOne(fit);
  const roots = nearUnitRoots.filter((name) => !told.includes(name)).length;
  const isDoubtful = nearlyCancels || covariance === null || roots > 0;
  return assumption('settled-fit', {
    status: settled ? (isDoubtful ? 'doubtful' : 'holds') : 'fails',
    details: {
      settled: Number(settled),
      nearlyCancels: Number(nearlyCancels),
      covariance: Number(covariance !== null),
      nearUnitRoots: roots,
    },
  });
}
