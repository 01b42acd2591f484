/** Nothing predictable is left in the residuals. */
import type { Fit } from '../sarima/fit.js';
import { polynomialCoefficients } from '../sarima/form.js';
import { autocorrelations } from '../stats/autocorrelation.js';
import { chiSquaredUpperTail } from '../stats/chi-squared.js';
import { ljungBoxTerms } from '../stats/portmanteau.js';
import { type Assumption, assumption, FEWEST_RESIDUALS, present, statusOf, untested } from './assumption.js';

/**
 * The portmanteau test of Ljung & Box, "On a measure of lack of fit in time series models", Biometrika 65 (1978), less a
 * degree of freedom for each coefficient, or for what the coefficients count for where they are shrunk; and the seasonal lag by itself, with one degree of freedom. The worse of the
 * two counts. After a seasonal coefficient the seasonal lag varies less than that (McLeod, "On the distribution of
 * residual autocorrelations in Box–Jenkins models", Journal of the Royal Statistical Society B 40, 1978): lenient there.
 */
export function checkLeftover(fit: Fit): Assumption {
  const residuals = fit.standardizedResiduals;
  const season = fit.season;
  const n = present(residuals).length;
  const k = Math.round(Math.min(polynomialCoefficients(fit.form), fit.effectiveCoefficients));
  const lags = Math.max(k + 3, Math.floor(Math.min(2 * season, n / 5)));
  if (n < FEWEST_RESIDUALS || lags >= n) return untested('leftover-pattern', { residuals: n });

  const r = autocorrelations(residuals, Math.max(lags, season));
  const terms = ljungBoxTerms(residuals, r.length);
  const statistic = terms.subarray(0, lags).reduce((sum, term) => sum + term, 0);
  if (!Number.isFinite(statistic)) return untested('leftover-pattern', { residuals: n });
  const pValue = chiSquaredUpperTail(statistic, lags - k);
  const details = { residuals: n, lags, degreesOfFreedom: lags - k, ...largest(r.subarray(0, lags)) };
  if (season === 1 || n < 2 * season)
    return assumption('leftover-pattern', { status: statusOf(pValue), statistic, pValue, details });

  const seasonalPValue = chiSquaredUpperTail(terms[season - 1], 1);
  return assumption('leftover-pattern', {
    status: statusOf(Math.min(pValue, seasonalPValue)),
    statistic,
    pValue,
    details: {
      ...details,
      seasonalLag: season,
      seasonalAutocorrelation: r[season - 1],
      seasonalStatistic: terms[season - 1],
      seasonalPValue,
    },
  });
}

function largest(r: Float64Array): { largestLag: number; largestAutocorrelation: number } {
  const at = r.reduce((best, value, i) => (Math.abs(value) > Math.abs(r[best]) ? i : best), 0);
  return { largestLag: at + 1, largestAutocorrelation: r[at] };
}
