/** Enough full years for the season to be learned. */
import type { Fit } from '../sarima/fit.js';
import { type Assumption, assumption } from './assumption.js';

const FEWEST_YEARS = 3;
const ENOUGH_YEARS = 4;

/** Years count as full as often as the rarest period of the season has a figure: a gap takes one away. */
export function checkHistory(fit: Fit): Assumption {
  const { season, values } = fit;
  const seen = new Array<number>(season).fill(0);
  for (let t = 0; t < values.length; t++) if (!Number.isNaN(values[t])) seen[t % season]++;
  const years = Math.min(...seen);
  return assumption('enough-history', {
    status: years < FEWEST_YEARS ? 'fails' : years < ENOUGH_YEARS ? 'doubtful' : 'holds',
    statistic: years,
    details: { years, season, figures: seen.reduce((sum, count) => sum + count, 0) },
  });
}
