/** The size of surprises does not change over time. */
import type { Fit } from '../sarima/fit.js';
import { chiSquaredUpperTail } from '../stats/chi-squared.js';
import { fUpperTail } from '../stats/f.js';
import { ljungBoxTerms } from '../stats/portmanteau.js';
import { type Assumption, assumption, FEWEST_RESIDUALS, present, statusOf, untested } from './assumption.js';

/**
 * Whether large surprises come in clusters, by the portmanteau test on squared residuals (McLeod & Li, "Diagnostic
 * checking ARMA time series models using squared-residual autocorrelations", Journal of Time Series Analysis 4, 1983);
 * and whether they have grown or shrunk, by the ratio of mean squares in the last and first third (Goldfeld & Quandt,
 * "Some tests for homoscedasticity", Journal of the American Statistical Association 60, 1965; two-sided). The smaller
 * of the two p-values counts, doubled, since either could come about by chance (Dunn, "Multiple comparisons among
 * means", Journal of the American Statistical Association 56, 1961).
 */
export function checkSpread(fit: Fit): Assumption {
  const residuals = present(fit.standardizedResiduals);
  const n = residuals.length;
  if (n < FEWEST_RESIDUALS) return untested('even-spread', { residuals: n });
  const lags = Math.max(3, Math.floor(Math.min(2 * fit.season, n / 5)));
  const squares = fit.standardizedResiduals.map((e) => e * e);
  const statistic = ljungBoxTerms(squares, lags).reduce((sum, term) => sum + term, 0);
  const third = Math.floor(n / 3);
  const ratio = sumOfSquares(residuals.subarray(n - third)) / sumOfSquares(residuals.subarray(0, third));
  if (!Number.isFinite(statistic) || !Number.isFinite(ratio)) return untested('even-spread', { residuals: n });
  const pValue = chiSquaredUpperTail(statistic, lags);
  // With equal degrees of freedom the ratio and its inverse have the same distribution.
  const ratioPValue = Math.min(1, 2 * fUpperTail(Math.max(ratio, 1 / ratio), third, third));
  return assumption('even-spread', {
    status: statusOf(2 * Math.min(pValue, ratioPValue)),
    statistic,
    pValue,
    details: { residuals: n, lags, third, ratio, ratioPValue },
  });
}

function sumOfSquares(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value * value, 0);
}
