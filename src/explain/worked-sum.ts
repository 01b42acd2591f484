/**
 * The next period's forecast as a sum that a reader can check with a calculator.
 *
 * On the plain scale it runs in the figures themselves, elsewhere in the differenced variable. Past surprises are their
 * conditional expectations given the whole history, so the sum equals the exact forecast. Each printed product is the
 * printed weight times the printed value, with two digits more than the result; a last line takes up the rounding.
 */
import type { Fit } from '../sarima/fit.js';
import { parseScale, type Scale } from '../sarima/scale.js';
import { smooth } from '../sarima/smooth.js';
import { decimal, leadingDigits, minus, placesOf, rounded, roundTo, sum, times, toNumber } from './decimals.js';
import { type Expansion, expand, expandDifferenced, type LagTerm, undoDifferences } from './expand.js';

export interface WorkedTerm {
  readonly kind: 'past' | 'surprise' | 'constant' | 'earlier' | 'effect-off' | 'effect-on' | 'floor' | 'rounding';
  readonly lag: number | null;
  readonly period: string | null;
  readonly value: number | null;
  readonly weight: number | null;
  readonly decimals: { readonly value: number; readonly weight: number };
  readonly product: number;
  readonly smoothed: boolean;
  readonly coefficient: string | null;
}

export interface BackLine {
  readonly kind: 'base' | 'effect' | 'growth' | 'transformed' | 'middle' | 'to-expected' | 'expected';
  readonly period: string | null;
  readonly power: number | null;
  readonly value: number;
  readonly decimals: number;
  readonly smoothed: boolean;
  readonly coefficient: string | null;
}

export interface WorkedSum {
  readonly period: string;
  readonly variable: 'value' | 'difference';
  readonly unit: 'units' | 'log-hundredths' | 'transformed';
  readonly decimals: { readonly product: number; readonly total: number };
  readonly terms: readonly WorkedTerm[];
  readonly total: number;
  readonly back: readonly BackLine[];
  readonly expected: number;
}

/** What the sum leads to (the first period's middle and mean, in units) and how it is printed. */
export interface WorkedTarget {
  readonly middle: number;
  readonly expected: number;
  /** Whether the paths were held at zero or above. */
  readonly heldAtZero: boolean;
  readonly places: number;
  /** SDMX text of every period from the first figure to the first ahead. */
  readonly periods: readonly string[];
}

export function workedSum(fit: Fit, target: WorkedTarget): WorkedSum {
  const past = pastOf(fit);
  const scale = parseScale(fit.scale);
  if (scale.kind === 'plain') return plainSum(fit, past, target);
  const middle = roundTo(target.middle, target.places);
  const most = mostPlaces(scale, target);
  const fewest = Math.min(fewestPlaces(scale, target), most);
  for (let places = fewest; ; places++) {
    const body = differencedSum(fit, past, target, places);
    const back = scale.kind === 'log' ? backFromLog(fit, past, target, body) : backFromPower(fit, past, target, body);
    // A middle close to a half can need a digit more to come out on its own side of it.
    const isReached = back.some(({ kind, value }) => kind === 'middle' && value === middle);
    if (isReached || places === Math.min(fewest + MOST_EXTRA, most))
      return {
        period: target.periods[past.n],
        variable: 'difference',
        unit: scale.kind === 'log' ? 'log-hundredths' : 'transformed',
        ...body,
        back,
        expected: roundTo(target.expected, target.places),
      };
  }
}

/** Places of the sum with which the middle is right to within a twentieth of its last digit. */
function fewestPlaces({ kind, lambda }: Scale, { middle, places }: WorkedTarget): number {
  if (kind === 'log') return Math.max(2, leadingDigits(middle) + places - 1);
  // A step dy of the figures is y^(λ−1) dy of the scale.
  const size = Math.max(middle, 10 ** -places);
  return Math.max(2, Math.ceil(places + 1 + (1 - lambda) * Math.log10(size)));
}

/** Places of the sum with which a double still holds the products, two places finer: 15 digits in all. */
function mostPlaces({ kind, to }: Scale, { middle }: WorkedTarget): number {
  const transformed = middle > 0 ? to(middle) : 0;
  return 13 - leadingDigits(kind === 'log' ? 100 * transformed : transformed);
}

const MOST_EXTRA = 4;

/** What the sum draws on, by how many periods before the forecast: lag 1 is the last figure. */
interface Past {
  readonly n: number;
  /** On the model's scale, effects included. */
  readonly scaled: (lag: number) => number;
  readonly surprise: (lag: number) => number;
  /** A regressor's number; lag 0 is the period that is forecast. */
  readonly regressor: (index: number, lag: number) => number;
  readonly isMissing: (lag: number) => boolean;
}

function pastOf(fit: Fit): Past {
  const n = fit.values.length;
  const { values, surprises, earlier } = smooth(fit);
  const before = earlier.values.length;
  const at = (main: Float64Array, early: Float64Array) => (lag: number) =>
    lag <= n ? main[n - lag] : early[before + n - lag];
  return {
    n,
    scaled: at(values, earlier.values),
    surprise: at(surprises, earlier.surprises),
    regressor: (index, lag) => (lag <= n ? fit.regressors[index].values[n - lag] : 0),
    isMissing: (lag) => lag > n || Number.isNaN(fit.values[n - lag]) || fit.soldOut.includes(n - lag),
  };
}

/** A line before rounding: a weight on a value, or a product alone. */
interface RawTerm {
  readonly kind: WorkedTerm['kind'];
  readonly lag?: number;
  readonly value: number | null;
  readonly valuePlaces?: number;
  readonly weight: number;
  readonly smoothed?: boolean;
  readonly coefficient?: string;
}

type Body = Pick<WorkedSum, 'decimals' | 'terms' | 'total'>;

function plainSum(fit: Fit, past: Past, target: WorkedTarget): WorkedSum {
  const expansion = expand(fit);
  const terms = [
    ...expansion.lags.map((term) => pastTerm(term, past.scaled(term.lag), past, target.places)),
    ...effectTerms(fit, past, expansion),
    ...constantTerm(fit, expansion),
    ...surpriseTerms(expansion, past, 1),
  ];
  const floor = target.expected - exact(terms);
  const isHeld = target.heldAtZero && roundTo(floor, target.places + 2) !== 0;
  const all = isHeld ? [...terms, { kind: 'floor' as const, value: null, weight: floor }] : terms;
  const body = printedBody(all, target.expected, target.places, past, target);
  return {
    period: target.periods[past.n],
    variable: 'value',
    unit: 'units',
    ...body,
    back: [],
    expected: body.total,
  };
}

/** The sum in z to so many places, on the log scale in hundredths. */
function differencedSum(fit: Fit, past: Past, target: WorkedTarget, places: number): Body {
  const per = parseScale(fit.scale).kind === 'log' ? 100 : 1;
  const expansion = expandDifferenced(fit);
  const terms = [
    ...expansion.lags.map((term) => {
      const { value, smoothed } = differenceAt(fit, past, term.lag);
      return { kind: 'past' as const, lag: term.lag, value: per * value, weight: term.weight, smoothed };
    }),
    ...(fit.constant ? [{ kind: 'constant' as const, value: per * fit.constantValue, weight: atOne(fit) }] : []),
    ...surpriseTerms(expansion, past, per),
  ];
  return printedBody(terms, exact(terms), places, past, target);
}

/** z so many periods before the forecast: the figures' differences, effects taken off. */
function differenceAt(fit: Fit, past: Past, lag: number): { value: number; smoothed: boolean } {
  const parts = [{ lag: 0, weight: -1 }, ...undoDifferences(fit.form)];
  let value = 0;
  for (const part of parts) value -= part.weight * withoutEffects(fit, past, lag + part.lag);
  return { value, smoothed: parts.some((part) => past.isMissing(lag + part.lag)) };
}

function withoutEffects(fit: Fit, past: Past, lag: number): number {
  // What comes from before the first figure is free of effects already.
  if (lag > past.n) return past.scaled(lag);
  return fit.effects.reduce((value, effect, i) => value - effect * past.regressor(i, lag), past.scaled(lag));
}

function pastTerm({ lag, weight }: LagTerm, value: number, past: Past, places: number): RawTerm {
  const smoothed = past.isMissing(lag);
  return { kind: 'past', lag, value, valuePlaces: smoothed ? places + 2 : placesOf(value, 10), weight, smoothed };
}

function surpriseTerms({ surprises }: Expansion, past: Past, per: number): RawTerm[] {
  return surprises.map(({ lag, weight }) => ({ kind: 'surprise', lag, value: per * past.surprise(lag), weight }));
}

/** φ(1)Φ(1) c. */
function constantTerm(fit: Fit, { constant }: Expansion): RawTerm[] {
  if (!fit.constant) return [];
  const weight = atOne(fit);
  return [{ kind: 'constant', value: fit.constantValue, weight: fit.constantValue === 0 ? constant : weight }];
}

function atOne({ phi, Phi }: Fit): number {
  const one = (coefficients: readonly number[]) => coefficients.reduce((value, phi) => value - phi, 1);
  return one(phi) * one(Phi);
}

/** Each effect taken off the past figures in the sum, and put on the period that is forecast. */
function effectTerms(fit: Fit, past: Past, { lags }: Expansion): RawTerm[] {
  return fit.regressors.flatMap(({ name }, i): RawTerm[] => {
    const off = lags.reduce((total, { lag, weight }) => total - weight * past.regressor(i, lag), 0);
    const on = past.regressor(i, 0);
    return [
      ...(off === 0 ? [] : [{ kind: 'effect-off' as const, value: fit.effects[i], weight: off, coefficient: name }]),
      ...(on === 0 ? [] : [{ kind: 'effect-on' as const, value: fit.effects[i], weight: on, coefficient: name }]),
    ];
  });
}

const exact = (terms: readonly RawTerm[]): number =>
  terms.reduce((total, { value, weight }) => total + (value === null ? weight : value * weight), 0);

/** The lines as printed, and the line that takes up the rounding; the total is `target` to `places` places. */
function printedBody(raw: readonly RawTerm[], aim: number, places: number, past: Past, target: WorkedTarget): Body {
  const productPlaces = places + 2;
  const terms = raw.map((term) => printedTerm(term, productPlaces, past, target));
  const total = decimal(aim, places);
  const rest = minus(total, sum(terms.map(({ product }) => decimal(product, productPlaces))));
  const rounding: WorkedTerm = {
    kind: 'rounding',
    lag: null,
    period: null,
    value: null,
    weight: null,
    decimals: { value: 0, weight: 0 },
    product: toNumber(rest),
    smoothed: false,
    coefficient: null,
  };
  return {
    decimals: { product: productPlaces, total: places },
    terms: rest.units === 0n ? terms : [...terms, rounding],
    total: toNumber(total),
  };
}

function printedTerm(term: RawTerm, productPlaces: number, past: Past, { periods }: WorkedTarget): WorkedTerm {
  const lag = term.lag ?? null;
  const base = {
    kind: term.kind,
    lag,
    period: lag === null || lag > past.n ? null : periods[past.n - lag],
    smoothed: term.smoothed ?? false,
    coefficient: term.coefficient ?? null,
  };
  if (term.value === null) {
    const product = roundTo(term.weight, productPlaces);
    return { ...base, value: null, weight: null, decimals: { value: 0, weight: 0 }, product };
  }
  const value = decimal(term.value, term.valuePlaces ?? productPlaces);
  const weightPlaces = Math.min(placesOf(term.weight, 15), weightPlacesFor(term.value, productPlaces));
  const weight = decimal(term.weight, weightPlaces);
  return {
    ...base,
    value: toNumber(value),
    weight: toNumber(weight),
    decimals: { value: value.places, weight: weightPlaces },
    product: toNumber(rounded(times(weight, value), productPlaces)),
  };
}

/** Four places of a weight, more where its product's last digit but one would not be right. */
const weightPlacesFor = (value: number, productPlaces: number): number =>
  Math.max(4, leadingDigits(value) + productPlaces - 1);

const backLine = (kind: BackLine['kind'], value: number, decimals: number, rest: Partial<BackLine> = {}): BackLine => ({
  kind,
  period: null,
  power: null,
  value: roundTo(value, decimals),
  decimals,
  smoothed: false,
  coefficient: null,
  ...rest,
});

/** Base figures times effects times e^(sum/100) is the middle; the last line leads on to the expected value. */
function backFromLog(
  fit: Fit,
  past: Past,
  target: WorkedTarget,
  { total, decimals: { total: places } }: Body,
): BackLine[] {
  // A factor is as fine as the sum: a hundredth of a log is about 0.01.
  const factorPlaces = places + 2;
  const bases = undoDifferences(fit.form).map(({ lag, weight }) => {
    const smoothed = past.isMissing(lag);
    const value = smoothed ? Math.exp(past.scaled(lag)) : fit.values[past.n - lag];
    const decimals = smoothed ? target.places + 3 : placesOf(value, 10);
    return backLine('base', value, decimals, { power: weight, smoothed, period: periodAt(past, target, lag) });
  });
  const effects = netEffects(fit, past).map(({ coefficient, net }) =>
    backLine('effect', Math.exp(net), factorPlaces, { power: 1, coefficient }),
  );
  const multiplied = [...bases, ...effects].reduce((product, { value, power }) => product * value ** (power ?? 1), 1);
  const growth = backLine('growth', Math.exp(total / 100), factorPlaces, { power: 1 });
  return [...bases, ...effects, growth, ...toExpected(multiplied * growth.value, target)];
}

/** Transformed base figures plus effects plus the sum is `transformed`; undoing the power gives the middle. */
function backFromPower(fit: Fit, past: Past, target: WorkedTarget, { total, decimals }: Body): BackLine[] {
  const places = decimals.total;
  const bases = undoDifferences(fit.form).map(({ lag, weight }) =>
    backLine('base', past.scaled(lag), places, {
      power: weight,
      smoothed: past.isMissing(lag),
      period: periodAt(past, target, lag),
    }),
  );
  const effects = netEffects(fit, past).map(({ coefficient, net }) =>
    backLine('effect', net, places, { power: 1, coefficient }),
  );
  const added = [...bases, ...effects].reduce((sum, { value, power }) => sum + value * (power ?? 1), total);
  const transformed = backLine('transformed', added, places);
  return [...bases, ...effects, transformed, ...toExpected(parseScale(fit.scale).from(transformed.value), target)];
}

/** What each effect adds, on the model's scale, beside the base figures: its own part less what these already hold. */
function netEffects(fit: Fit, past: Past): { coefficient: string; net: number }[] {
  return fit.regressors.flatMap(({ name }, i) => {
    const share = undoDifferences(fit.form).reduce(
      (rest, { lag, weight }) => rest - weight * past.regressor(i, lag),
      past.regressor(i, 0),
    );
    return share === 0 ? [] : [{ coefficient: name, net: share * fit.effects[i] }];
  });
}

/** `reached` is what the printed lines above come to; the middle is it, rounded. */
function toExpected(reached: number, { expected, places }: WorkedTarget): BackLine[] {
  const middle = decimal(reached, places);
  const end = decimal(expected, places);
  return [
    backLine('middle', toNumber(middle), places),
    backLine('to-expected', toNumber(minus(end, middle)), places),
    backLine('expected', toNumber(end), places),
  ];
}

const periodAt = (past: Past, { periods }: WorkedTarget, lag: number): string | null =>
  lag > past.n ? null : periods[past.n - lag];
