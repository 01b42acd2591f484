/** Round numbers for an axis. */

/** About `count` ticks at 1, 2 or 5 times a power of ten that cover `low` to `high`. */
export function niceTicks(low: number, high: number, count: number): number[] {
  const span = high > low ? high - low : Math.max(Math.abs(high), 1);
  const rough = span / count;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = ([1, 2, 5, 10].find((factor) => factor * power >= rough * 0.999) ?? 10) * power;
  const first = Math.floor(low / step + 1e-9);
  const last = Math.ceil(high / step - 1e-9);
  return Array.from({ length: last - first + 1 }, (_, i) => Number(((first + i) * step).toPrecision(12)));
}

/** Decimal places that tell the ticks apart. */
export function tickPlaces(ticks: readonly number[]): number {
  const step = (ticks[1] ?? 1) - (ticks[0] ?? 0);
  return Math.max(0, -Math.floor(Math.log10(Math.abs(step) || 1) + 1e-9));
}
