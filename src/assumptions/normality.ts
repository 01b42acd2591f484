/** Surprises are roughly normal, which bears on the ranges only. */
import type { Fit } from '../sarima/fit.js';
import { type Assumption, assumption, FEWEST_RESIDUALS, present, statusOf, untested } from './assumption.js';

/**
 * Skewness and kurtosis taken together: Jarque & Bera, "Efficient tests for normality, homoscedasticity and serial
 * independence of regression residuals", Economics Letters 6 (1980).
 */
export function checkNormality(fit: Fit): Assumption {
  const residuals = present(fit.standardizedResiduals);
  const n = residuals.length;
  if (n < FEWEST_RESIDUALS) return untested('normal-surprises', { residuals: n });
  const { statistic, skewness, excessKurtosis } = jarqueBera(residuals);
  if (!Number.isFinite(statistic)) return untested('normal-surprises', { residuals: n });
  const pValue = jarqueBeraPValue(statistic, n);
  return assumption('normal-surprises', {
    status: statusOf(pValue),
    statistic,
    pValue,
    details: { residuals: n, skewness, excessKurtosis },
  });
}

/** n/6 (S² + K²/4), S and K from the moments about the mean. */
export function jarqueBera(values: Float64Array): { statistic: number; skewness: number; excessKurtosis: number } {
  const n = values.length;
  const mean = values.reduce((sum, x) => sum + x, 0) / n;
  let [m2, m3, m4] = [0, 0, 0];
  for (const x of values) {
    const square = (x - mean) ** 2;
    m2 += square / n;
    m3 += (square * (x - mean)) / n;
    m4 += (square * square) / n;
  }
  const skewness = m3 / m2 ** 1.5;
  const excessKurtosis = m4 / m2 ** 2 - 3;
  return { statistic: (n / 6) * (skewness ** 2 + excessKurtosis ** 2 / 4), skewness, excessKurtosis };
}

const LEVELS = [1, 0.5, 0.2, 0.1, 0.05, 0.025, 0.01, 0.001];

/**
 * The statistic's quantiles at these upper levels for so many independent normal values, from 10 million simulated
 * samples each (2 million from 200 values on). On few values the chi-squared limit is far off: on 40 values 4.76 and
 * 12.02 stand in the place of its 5.99 and 9.21.
 */
const CRITICAL: readonly (readonly [n: number, statistics: readonly number[]])[] = [
  [12, [0, 0.74, 1.24, 1.82, 2.87, 4.36, 6.88, 14.81]],
  [15, [0, 0.79, 1.38, 2.05, 3.29, 5.06, 8.22, 19.55]],
  [20, [0, 0.86, 1.56, 2.35, 3.8, 5.91, 9.77, 25.01]],
  [30, [0, 0.95, 1.82, 2.74, 4.4, 6.82, 11.34, 30.6]],
  [40, [0, 1, 2, 3, 4.76, 7.3, 12.02, 32.61]],
  [70, [0, 1.1, 2.31, 3.43, 5.23, 7.82, 12.53, 33.15]],
  [100, [0, 1.16, 2.49, 3.67, 5.43, 7.95, 12.49, 31.64]],
  [200, [0, 1.24, 2.76, 4.04, 5.68, 7.93, 11.86, 27.37]],
  [500, [0, 1.31, 2.99, 4.33, 5.86, 7.71, 10.79, 21.81]],
  [1000, [0, 1.34, 3.09, 4.46, 5.93, 7.58, 10.12, 18.78]],
];

/** Interpolated in log n between the rows and in log p along a row, whose last stretch is drawn on beyond it. */
export function jarqueBeraPValue(statistic: number, n: number): number {
  const size = Math.min(Math.max(n, CRITICAL[0][0]), CRITICAL[CRITICAL.length - 1][0]);
  const row = Math.max(
    1,
    CRITICAL.findIndex(([rowSize]) => size <= rowSize),
  );
  const [[below, lower], [above, upper]] = [CRITICAL[row - 1], CRITICAL[row]];
  const weight = Math.log(size / below) / Math.log(above / below);
  const critical = lower.map((value, i) => value + weight * (upper[i] - value));
  const next = critical.findIndex((value) => statistic < value);
  const i = next === -1 ? critical.length - 1 : Math.max(next, 1);
  const along = (statistic - critical[i - 1]) / (critical[i] - critical[i - 1]);
  return LEVELS[i - 1] * (LEVELS[i] / LEVELS[i - 1]) ** along;
}
