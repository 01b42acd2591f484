/**
 * The form of a model in the textbook notation, `(p,d,q)x(P,D,Q)m`.
 *
 * Between the brackets an `x`, `X`, `×` or nothing may stand, and spaces anywhere. Without a second bracket the model
 * has no season and m is 1.
 */

export interface Form {
  /** Order of the autoregressive polynomial. */
  readonly p: number;
  /** Number of plain differences. */
  readonly d: number;
  /** Order of the moving-average polynomial. */
  readonly q: number;
  /** Order of the seasonal autoregressive polynomial. */
  readonly P: number;
  /** Number of seasonal differences. */
  readonly D: number;
  /** Order of the seasonal moving-average polynomial. */
  readonly Q: number;
  /** Periods in a season, 1 where the model has none. */
  readonly m: number;
}

const LONGEST_SEASON = 53;
const HIGHEST_ORDER = 12;
const EXAMPLE = 'e.g. (0,1,1)x(0,1,1)4';

const BRACKET = String.raw`\(([^()]*)\)`;
const NOTATION = new RegExp(`^${BRACKET}(?:[xX×]?${BRACKET}(.*))?$`);

/** Reads a model's notation. Throws an Error that says what is wrong with the text and shows a correct one. */
export function parseForm(text: string): Form {
  const match = NOTATION.exec(text.replaceAll(/\s/g, ''));
  if (match === null) throw new Error(`model "${text}" is not in the notation (p,d,q)x(P,D,Q)m, ${EXAMPLE}`);
  const [, first, second, after] = match;
  const [p, d, q] = orders(text, first ?? '');
  if (second === undefined) return { p, d, q, P: 0, D: 0, Q: 0, m: 1 };
  const [P, D, Q] = orders(text, second);
  return { p, d, q, P, D, Q, m: seasonLength(text, after ?? '', `(${p},${d},${q})x(${P},${D},${Q})`) };
}

/** A form's canonical text: `(0,1,1)x(0,1,1)4`, or `(1,1,0)` where it has no season. */
export function formText(form: Form): string {
  const { p, d, q, P, D, Q, m } = form;
  return m === 1 ? `(${p},${d},${q})` : `(${p},${d},${q})x(${P},${D},${Q})${m}`;
}

/** Figures that differencing uses up: d + mD. */
export function lostToDifferencing(form: Form): number {
  return form.d + form.m * form.D;
}

/** The coefficients of the four polynomials: p + q + P + Q. */
export function polynomialCoefficients(form: Form): number {
  return form.p + form.q + form.P + form.Q;
}

function orders(text: string, inside: string): [number, number, number] {
  const parts = inside.split(',');
  const [a, b, c] = parts.map((part) => (/^\d+$/.test(part) ? Number(part) : Number.NaN));
  if (parts.length !== 3 || a === undefined || b === undefined || c === undefined)
    throw new Error(`model "${text}": (${inside}) should hold three whole numbers, ${EXAMPLE}`);
  for (const order of [a, b, c]) {
    if (Number.isNaN(order))
      throw new Error(`model "${text}": (${inside}) should hold three whole numbers, ${EXAMPLE}`);
    if (order > HIGHEST_ORDER)
      throw new Error(`model "${text}": (${inside}) has the order ${order}; the highest is ${HIGHEST_ORDER}`);
  }
  return [a, b, c];
}

function seasonLength(text: string, after: string, brackets: string): number {
  if (after === '')
    throw new Error(`model "${text}" needs the season's length after the second bracket, e.g. ${brackets}4`);
  const m = /^\d+$/.test(after) ? Number(after) : Number.NaN;
  if (!(m >= 1 && m <= LONGEST_SEASON))
    throw new Error(
      `model "${text}": the season's length "${after}" should be a whole number from 1 to ${LONGEST_SEASON}, e.g. ${brackets}4`,
    );
  if (m === 1)
    throw new Error(
      `model "${text}": a season of 1 period is no season; leave out the second bracket, e.g. ${brackets.slice(0, brackets.indexOf('x'))}`,
    );
  return m;
}
