/** Whether values resemble those before them more than chance allows. */
import { autocorrelations } from './autocorrelation.js';

/**
 * What each lag 1 … lags adds to the statistic of Ljung & Box, "On a measure of lack of fit in time series models",
 * Biometrika 65 (1978): n(n + 2) rₕ²/(n − h), about chi-squared with one degree of freedom for values that are not
 * related. With missing values (NaN) n − h is the number of pairs that are there, after Stoffer & Toloi, "A note on the
 * Ljung–Box–Pierce portmanteau statistic with missing data", Statistics & Probability Letters 13 (1992). A lag without a
 * pair adds nothing; NaN where nothing varies.
 */
export function ljungBoxTerms(values: ArrayLike<number>, lags: number): Float64Array {
  const there = Array.from(values, (value) => !Number.isNaN(value));
  const n = there.filter(Boolean).length;
  return autocorrelations(values, lags).map((r, i) => {
    let pairs = 0;
    for (let t = i + 1; t < there.length; t++) if (there[t] && there[t - i - 1]) pairs++;
    return pairs > 0 ? (n * (n + 2) * r * r) / pairs : 0;
  });
}
