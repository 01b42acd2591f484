/** Which past figures count: the next forecast as a weighted sum of them. */
import type { Fit } from '../sarima/fit.js';
import { predict } from '../sarima/predict.js';

/** A figure so many periods before the forecast, and its weight on the model's scale. */
export interface PastWeight {
  readonly lag: number;
  readonly weight: number;
}

/**
 * The weights over the last three years, or as far as the figures go; a missing figure has none. They are those of
 * this very history, read off the filter by forecasting from a single figure of 1 among zeros, and not those of an
 * unending past, from which they differ where a moving-average root is near one.
 */
export function pastWeights(fit: Fit, season: number): PastWeight[] {
  const n = fit.values.length;
  const bare = { ...fit, scale: 'plain', constant: false, constantValue: 0, effects: [], regressors: [] };
  const zeros = fit.values.map((value) => (Number.isNaN(value) ? value : 0));
  return Array.from({ length: Math.min(Math.max(3 * season, 8), n) }, (_, i) => {
    const at = n - 1 - i;
    if (Number.isNaN(zeros[at])) return { lag: i + 1, weight: 0 };
    const values = Float64Array.from(zeros);
    values[at] = 1;
    return { lag: i + 1, weight: predict({ ...bare, values }, 1).mean[0] };
  });
}
