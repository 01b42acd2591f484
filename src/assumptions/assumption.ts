/** What a check of one assumption says. */

export type AssumptionId =
  | 'leftover-pattern'
  | 'even-spread'
  | 'normal-surprises'
  | 'odd-quarters'
  | 'stable-over-time'
  | 'enough-history'
  | 'differencing'
  | 'settled-fit';

export type Status = 'holds' | 'doubtful' | 'fails' | 'untested';

/** A period that stands out from what the model makes of the others. */
export interface Outlier {
  /** Its index, from 0; of a level shift, the first period on the new level. */
  readonly period: number;
  readonly kind: 'additive' | 'level-shift';
  /** On the model's scale. */
  readonly size: number;
  /** The size in units of its standard error. */
  readonly t: number;
  /** By how much the next period's middle forecast changes in the user's units when this alone is set aside. */
  readonly forecastChange: number;
}

export interface Assumption {
  readonly id: AssumptionId;
  readonly status: Status;
  /** Of the main test; null where there is none or it can't be computed. */
  readonly statistic: number | null;
  readonly pValue: number | null;
  /** Further numbers that a sentence may need, by name. */
  readonly details: Readonly<Record<string, number>>;
  /** Where single periods stand out. */
  readonly outliers: readonly Outlier[];
}

/** Fewer residuals than this say too little. */
export const FEWEST_RESIDUALS = 12;

const FAILS = 0.01;
const DOUBTFUL = 0.05;

/** `fails` below 0.01, `doubtful` below 0.05. */
export function statusOf(pValue: number): Status {
  return pValue < FAILS ? 'fails' : pValue < DOUBTFUL ? 'doubtful' : 'holds';
}

interface Findings {
  readonly status: Status;
  readonly statistic?: number;
  readonly pValue?: number;
  readonly details?: Readonly<Record<string, number>>;
  readonly outliers?: readonly Outlier[];
}

/** The findings as an assumption: what is no finite number is null, or left out of the details. */
export function assumption(id: AssumptionId, { status, statistic, pValue, details, outliers }: Findings): Assumption {
  const known = (x: number | undefined) => (x !== undefined && Number.isFinite(x) ? x : null);
  return {
    id,
    status,
    statistic: known(statistic),
    pValue: known(pValue),
    details: Object.fromEntries(Object.entries(details ?? {}).filter(([, value]) => Number.isFinite(value))),
    outliers: outliers ?? [],
  };
}

export function untested(id: AssumptionId, details: Readonly<Record<string, number>> = {}): Assumption {
  return assumption(id, { status: 'untested', details });
}

/** The values that are there, in order. */
export function present(values: Float64Array): Float64Array {
  return values.filter((value) => !Number.isNaN(value));
}
