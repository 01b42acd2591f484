/**
 * Whether a series keeps to its level: Kwiatkowski, Phillips, Schmidt & Shin, "Testing the null hypothesis of
 * stationarity against the alternative of a unit root", Journal of Econometrics 54 (1992), the statistic η_μ.
 */

/**
 * η_μ = Σ Sₜ²/(n² s²(l)): Sₜ the sums of the values about their mean, s²(l) their long-run variance with Bartlett's
 * weights up to lag `bandwidth` l. Missing values (NaN) are left out of every sum. NaN where nothing varies.
 */
export function kpssStatistic(values: ArrayLike<number>, bandwidth: number): number {
  const there = Array.from(values).filter((value) => !Number.isNaN(value));
  const n = there.length;
  const mean = there.reduce((sum, value) => sum + value, 0) / n;
  const e = Float64Array.from(values, (value) => (Number.isNaN(value) ? 0 : value - mean));
  let S = 0;
  let sumOfSquares = 0;
  for (let t = 0; t < e.length; t++) {
    S += e[t];
    if (!Number.isNaN(values[t])) sumOfSquares += S * S;
  }
  let longRun = 0;
  for (let s = 0; s <= bandwidth; s++) {
    let product = 0;
    for (let t = s; t < e.length; t++) product += e[t] * e[t - s];
    longRun += ((s === 0 ? 1 : 2 * (1 - s / (bandwidth + 1))) * product) / n;
  }
  return sumOfSquares / (n * n * longRun);
}

/** The paper's table 1, upper tail of η_μ; and 1 at zero. */
const CRITICAL: readonly (readonly [statistic: number, p: number])[] = [
  [0, 1],
  [0.347, 0.1],
  [0.463, 0.05],
  [0.574, 0.025],
  [0.739, 0.01],
];

/** The p-value: log p in straight lines through the table, the last of them drawn on beyond it. */
export function kpssPValue(statistic: number): number {
  const last = CRITICAL.length - 1;
  const next = CRITICAL.findIndex(([critical]) => statistic < critical);
  const i = next === -1 ? last : Math.max(next, 1);
  const [below, pBelow] = CRITICAL[i - 1];
  const [above, pAbove] = CRITICAL[i];
  return pBelow * (pAbove / pBelow) ** ((statistic - below) / (above - below));
}
