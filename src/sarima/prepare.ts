/**
 * A series made ready for the likelihood: regressed once on its regressors by ordinary least squares and put into a
 * unit in which its differences vary by about 1, so that nothing depends on the figures' own size or level.
 */
import { difference } from './difference.js';
import { type Form, formText } from './form.js';
import { concentrate, createConcentrated } from './objective.js';
import { type Regressor, regressionColumns } from './regressors.js';

export interface Prepared {
  /** Series (NaN where missing), constant, regressors; undifferenced, each in its own unit. */
  readonly columns: readonly Float64Array[];
  /** The series with straight lines across its gaps. */
  readonly filled: Float64Array;
  /** The columns differenced, the series from `filled`: good enough to start a search from, and exact where there are none. */
  readonly startColumns: readonly Float64Array[];
  /** Where figures are missing. */
  readonly gaps: readonly number[];
  /** The series' unit. */
  readonly unit: number;
  /** The regression columns' units. */
  readonly unitOf: readonly number[];
  /** Effects that were taken off at the outset, in the user's units. */
  readonly before: readonly number[];
}

/** Differences smaller than this share of the figures are rounding, not variation. */
const ROUNDING = 1e-13;

/**
 * `ridge`: one for each regression column; the effect of a column that has one stays in the series, since the ridge is
 * on the whole of it. Throws an Error where nothing varies or a regressor can't be told from the others.
 */
export function prepare(
  form: Form,
  series: Float64Array,
  constant: boolean,
  regressors: readonly Regressor[],
  ridge: Float64Array,
): Prepared {
  const n = series.length;
  const { d, D, m } = form;
  const size = series.reduce((most, y) => (Number.isNaN(y) ? most : Math.max(most, Math.abs(y))), 0);
  const first = series.find((y) => !Number.isNaN(y)) ?? Number.NaN;
  if (series.every((y) => Number.isNaN(y) || y === first))
    throw new Error(`every figure is the same (on the model's scale ${first}): there is nothing to model`);
  const gaps = [...series.keys()].filter((t) => Number.isNaN(series[t]));
  const filled = gaps.length > 0 ? interpolated(series) : series;

  const raw = regressionColumns(form, constant, regressors, n);
  const names = [...(constant ? ['constant'] : []), ...regressors.map(({ name }) => name)];
  const differenced = raw.map((column) => difference(column, d, D, m));
  const unitOf = differenced.map((column, i) => {
    const spread = rootMeanSquare(column);
    const largest = raw[i].reduce((most, x) => Math.max(most, Math.abs(x)), 0);
    if (!(spread > ROUNDING * largest))
      throw new Error(
        `regressor "${names[i]}" has no effect to measure: the differencing of ${formText(form)} leaves nothing of it`,
      );
    return spread;
  });
  const scaled = differenced.map((column, i) => column.map((x) => x / unitOf[i]));
  const target = difference(filled, d, D, m);

  const start = createConcentrated(target.length, new Float64Array(raw.length));
  const innovations = {
    count: target.length,
    columns: [target, ...scaled],
    starts: new Int32Array(1 + scaled.length),
    root: target,
    logDeterminant: 0,
  };
  if (!concentrate(start, innovations))
    throw new Error(`regressors ${names.map((name) => `"${name}"`).join(', ')} can't be told apart: leave one out`);
  const unit = rootMeanSquare(start.residuals);
  if (!(unit > ROUNDING * size))
    throw new Error(`nothing is left to model: the differences of ${formText(form)} follow a fixed rule exactly`);

  const columns = raw.map((column, i) => column.map((x) => x / unitOf[i]));
  const before = Array.from(start.effects, (effect, i) => (ridge[i] > 0 ? 0 : effect));
  const without = (values: Float64Array, regression: readonly Float64Array[]) =>
    values.map((value, t) => {
      let rest = value;
      for (let i = 0; i < before.length; i++) rest -= before[i] * regression[i][t];
      return rest / unit;
    });
  return {
    columns: [without(series, columns), ...columns],
    filled: without(filled, columns),
    startColumns: [without(target, scaled), ...scaled],
    gaps,
    unit,
    unitOf,
    before: before.map((effect, i) => effect / unitOf[i]),
  };
}

/** The same with another series, in the prepared unit. */
export function withSeries(prepared: Prepared, series: Float64Array): Prepared {
  return { ...prepared, columns: [series, ...prepared.columns.slice(1)] };
}

/** The same with the figures of some periods missing. */
export function withoutFigures(prepared: Prepared, periods: readonly number[]): Prepared {
  const series = prepared.columns[0].map((value, t) => (periods.includes(t) ? Number.NaN : value));
  return { ...withSeries(prepared, series), gaps: [...prepared.gaps, ...periods].sort((a, b) => a - b) };
}

/** ∇ᵈ∇ₘᴰ of every column. */
export function differencedColumns(form: Form, columns: readonly Float64Array[]): Float64Array[] {
  return columns.map((column) => difference(column, form.d, form.D, form.m));
}

/** Gaps bridged by straight lines, for start values only; the likelihood steps over them. */
function interpolated(series: Float64Array): Float64Array {
  const filled = Float64Array.from(series);
  let last = -1;
  for (let t = 0; t <= filled.length; t++) {
    if (t < filled.length && Number.isNaN(filled[t])) continue;
    for (let u = last + 1; u < t; u++) {
      if (last < 0) filled[u] = series[t];
      else if (t === filled.length) filled[u] = series[last];
      else filled[u] = series[last] + ((series[t] - series[last]) * (u - last)) / (t - last);
    }
    last = t;
  }
  return filled;
}

function rootMeanSquare(values: Float64Array): number {
  // By the largest value, so that neither 10⁻²⁰⁰ nor 10²⁰⁰ is lost when squared.
  const largest = values.reduce((most, x) => Math.max(most, Math.abs(x)), 0);
  if (largest === 0) return 0;
  let sum = 0;
  for (const x of values) sum += (x / largest) ** 2;
  return largest * Math.sqrt(sum / values.length);
}
