/**
 * Decimal numbers as they are printed: whole units of 10^-places, so that printed columns multiply and add exactly.
 * A number counts as the shortest decimal that stands for it (0.285, not the binary fraction beside it), and halves
 * are rounded away from zero, as people do it by hand.
 */
export interface Decimal {
  readonly units: bigint;
  readonly places: number;
}

/** `number` rounded to `places` decimal places; with -2 to whole hundreds. Throws on what is not finite. */
export function decimal(number: number, places: number): Decimal {
  const exact = exactDecimal(number);
  if (places >= 0) return rounded(exact, places);
  const coarse = 10n ** BigInt(-places);
  return { units: divide(exact.units, 10n ** BigInt(exact.places) * coarse) * coarse, places: 0 };
}

/** The number that prints as this decimal; never -0. */
export function toNumber({ units, places }: Decimal): number {
  return Number(`${units}e-${places}`);
}

export function roundTo(number: number, places: number): number {
  return toNumber(decimal(number, places));
}

/** The fewest decimal places that show `number` in full, but not more than `most`. */
export function placesOf(number: number, most: number): number {
  return Math.min(exactDecimal(number).places, most);
}

/** How many digits stand before the decimal point of `number`; 0 below 1. */
export function leadingDigits(number: number): number {
  const digits = exactDecimal(Math.trunc(Math.abs(number))).units.toString();
  return digits === '0' ? 0 : digits.length;
}

export function times(a: Decimal, b: Decimal): Decimal {
  return { units: a.units * b.units, places: a.places + b.places };
}

export function plus(a: Decimal, b: Decimal): Decimal {
  const places = Math.max(a.places, b.places);
  return { units: widened(a, places) + widened(b, places), places };
}

export function minus(a: Decimal, b: Decimal): Decimal {
  return plus(a, { units: -b.units, places: b.places });
}

export function sum(terms: readonly Decimal[]): Decimal {
  return terms.reduce(plus, { units: 0n, places: 0 });
}

/** a / b to `places` places. Throws where b is zero. */
export function quotient(a: Decimal, b: Decimal, places: number): Decimal {
  const numerator = a.units * 10n ** BigInt(b.places + places);
  return { units: divide(numerator, b.units * 10n ** BigInt(a.places)), places };
}

export function rounded(a: Decimal, places: number): Decimal {
  if (places >= a.places) return { units: widened(a, places), places };
  return { units: divide(a.units, 10n ** BigInt(a.places - places)), places };
}

export function equal(a: Decimal, b: Decimal): boolean {
  return minus(a, b).units === 0n;
}

const widened = (a: Decimal, places: number): bigint => a.units * 10n ** BigInt(places - a.places);

/** To the nearest whole number, halves away from zero. */
function divide(numerator: bigint, denominator: bigint): bigint {
  const negative = numerator < 0n !== denominator < 0n;
  const [n, d] = [magnitude(numerator), magnitude(denominator)];
  const whole = (2n * n + d) / (2n * d);
  return negative ? -whole : whole;
}

const magnitude = (a: bigint): bigint => (a < 0n ? -a : a);

/** The shortest decimal that stands for the number. */
function exactDecimal(number: number): Decimal {
  const [, sign, whole, fraction = '', exponent = '0'] =
    /^(-?)(\d+)(?:\.(\d+))?(?:e([+-]\d+))?$/.exec(`${number}`) ?? [];
  if (whole === undefined) throw new RangeError(`a printed number must be finite, but here stands ${number}`);
  const units = BigInt(`${sign}${whole}${fraction}`);
  const places = fraction.length - Number(exponent);
  return places >= 0 ? { units, places } : { units: units * 10n ** BigInt(-places), places: 0 };
}
