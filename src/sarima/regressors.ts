/** The columns that stand beside the series: the constant, then the regressors, on the figures' own time. */
import type { Form } from './form.js';

export interface Regressor {
  readonly name: string;
  /** One number a period, the n past ones and as many ahead as are to be forecast. */
  readonly values: ArrayLike<number>;
}

/**
 * The constant's column over `length` periods: what must be added to the figures so that the differenced series rises
 * by c. 1 without differences, t with a plain one, t/m with a seasonal one.
 */
export function constantColumn(form: Form, length: number): Float64Array {
  const { d, D, m } = form;
  return Float64Array.from({ length }, (_, t) => (d === 1 ? t + 1 : D === 1 ? (t + 1) / m : 1));
}

/** All columns over the first `length` periods. */
export function regressionColumns(
  form: Form,
  constant: boolean,
  regressors: readonly Regressor[],
  length: number,
): Float64Array[] {
  const columns = regressors.map(({ values }) => Float64Array.from({ length }, (_, t) => values[t]));
  return constant ? [constantColumn(form, length), ...columns] : columns;
}

/** Throws where a regressor has too few numbers for `length` periods, or one that is no number. */
export function checkRegressors(regressors: readonly Regressor[], length: number, purpose: string): void {
  const seen = new Set<string>();
  for (const { name, values } of regressors) {
    if (seen.has(name)) throw new Error(`two regressors are called "${name}"`);
    seen.add(name);
    if (values.length < length)
      throw new Error(`regressor "${name}" has ${values.length} values; ${purpose} needs ${length}`);
    for (let t = 0; t < length; t++)
      if (!Number.isFinite(values[t])) throw new Error(`regressor "${name}" has ${values[t]} at period ${t + 1}`);
  }
}
