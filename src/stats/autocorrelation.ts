/** How values resemble those some periods before. */

/**
 * Sample autocorrelations at lags 1 … lags, about the mean, over the values that are not missing (NaN): the sum of the
 * products that are there over the sum of all squares (Parzen, "On spectral analysis with missing observations and
 * amplitude modulation", Sankhyā A 25, 1963). NaN where nothing varies.
 */
export function autocorrelations(values: ArrayLike<number>, lags: number): Float64Array {
  const n = values.length;
  let count = 0;
  let total = 0;
  for (let t = 0; t < n; t++)
    if (!Number.isNaN(values[t])) {
      count++;
      total += values[t];
    }
  const mean = total / count;
  const centred = Float64Array.from({ length: n }, (_, t) => (Number.isNaN(values[t]) ? 0 : values[t] - mean));
  const square = centred.reduce((sum, x) => sum + x * x, 0);
  return Float64Array.from({ length: lags }, (_, i) => {
    let sum = 0;
    for (let t = i + 1; t < n; t++) sum += centred[t] * centred[t - i - 1];
    return sum / square;
  });
}
