/**
 * Two documents compared key by key: a record as it is filed, and the same computed again.
 *
 * Another processor or another Node may round the last digits of a logarithm otherwise, so numbers that are nearly the
 * same count as the same; how far apart they are is told.
 */

/** Numbers further apart than this, as a share of the larger one, differ. */
export const TOLERANCE = 1e-9;

/** What is left of two equal numbers taken from each other has no digits to compare: below this, shares are of it. */
const SMALLEST = 1e-6;

export interface Difference {
  /** Where it stands, such as `outlook.periods[2].expected`. */
  readonly path: string;
  /** `undefined` where there is nothing. */
  readonly filed: unknown;
  readonly recomputed: unknown;
  /** How far apart two numbers are, as a share of the larger one; null where these are not two numbers. */
  readonly relative: number | null;
}

export interface Comparison {
  readonly differences: readonly Difference[];
  /** How far apart the numbers are that count as the same; 0 where they are the same to the last digit. */
  readonly apart: number;
}

export function compare(filed: unknown, recomputed: unknown): Comparison {
  const unequal = differencesAt('', filed, recomputed);
  const isSame = ({ relative }: Difference): boolean => relative !== null && relative <= TOLERANCE;
  return {
    differences: unequal.filter((each) => !isSame(each)),
    apart: Math.max(0, ...unequal.filter(isSame).map(({ relative }) => relative ?? 0)),
  };
}

function differencesAt(path: string, filed: unknown, recomputed: unknown): Difference[] {
  if (filed === recomputed) return [];
  if (Array.isArray(filed) && Array.isArray(recomputed)) {
    if (filed.length !== recomputed.length)
      return [{ path: `${path}.length`, filed: filed.length, recomputed: recomputed.length, relative: null }];
    return filed.flatMap((value, i) => differencesAt(`${path}[${i}]`, value, recomputed[i]));
  }
  if (isObject(filed) && isObject(recomputed)) {
    const keys = new Set([...Object.keys(filed), ...Object.keys(recomputed)]);
    return [...keys].flatMap((key) => differencesAt(path === '' ? key : `${path}.${key}`, filed[key], recomputed[key]));
  }
  return [{ path, filed, recomputed, relative: relativeDifference(filed, recomputed) }];
}

function relativeDifference(a: unknown, b: unknown): number | null {
  if (typeof a !== 'number' || typeof b !== 'number') return null;
  return Math.abs(a - b) / Math.max(Math.abs(a), Math.abs(b), SMALLEST);
}

const isObject = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
