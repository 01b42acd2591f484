import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type WorkedSum, workedSum } from '../../src/explain/worked-sum.js';
import { makeOutlook } from '../../src/outlook/outlook.js';
import { type Fit, fitModel } from '../../src/sarima/fit.js';
import { formText } from '../../src/sarima/form.js';
import { predict } from '../../src/sarima/predict.js';
import { parseScale } from '../../src/sarima/scale.js';
import { smooth } from '../../src/sarima/smooth.js';
import { createGenerator } from '../../src/stats/generator.js';

/** A product or sum of printed numbers in whole units of 10^-places, as a reader with a calculator would get it. */
const units = (number: number, places: number): bigint => {
  const text = number.toFixed(places);
  return BigInt(text.replace('.', ''));
};

/** Halves away from zero. */
const shortened = (value: bigint, digits: number): bigint => {
  const unit = 10n ** BigInt(digits);
  const size = value < 0n ? -value : value;
  const whole = (2n * size + unit) / (2n * unit);
  return value < 0n ? -whole : whole;
};

/** Every line multiplies and the column adds, to the last printed digit. */
function expectToAddUp(sum: WorkedSum): void {
  const { product, total } = sum.decimals;
  let column = 0n;
  for (const term of sum.terms) {
    column += units(term.product, product);
    if (term.value === null || term.weight === null) continue;
    const { value, weight } = term.decimals;
    const exact = units(term.value, value) * units(term.weight, weight);
    const printed =
      value + weight > product
        ? shortened(exact, value + weight - product)
        : exact * 10n ** BigInt(product - value - weight);
    expect(units(term.product, product)).toBe(printed);
  }
  expect(column).toBe(units(sum.total, total) * 10n ** BigInt(product - total));
}

/** What the printed back lines lead to, worked out anew. */
function middleOf(sum: WorkedSum, scale: string): number {
  const leading = sum.back.filter(({ kind }) => ['base', 'effect', 'growth'].includes(kind));
  if (sum.unit === 'log-hundredths')
    return leading.reduce((product, { value, power }) => product * value ** (power ?? 1), 1);
  const transformed = leading.reduce((total, { value, power }) => total + value * (power ?? 1), sum.total);
  return parseScale(scale).from(Number(transformed.toFixed(sum.decimals.total)));
}

const line = (sum: WorkedSum, kind: string) => sum.back.find((each) => each.kind === kind);

interface Case {
  readonly size: number;
  readonly places: number;
  readonly form: Fit['form'];
  readonly scale: string;
  readonly constant: boolean;
  readonly event: 'none' | 'passing' | 'lasting';
  readonly gaps: boolean;
  readonly seed: number;
}

/** An invented series: a season, a trend and noise, of the wanted size. */
function fitOf({ size, form, scale, constant, event, gaps, seed }: Case): Fit {
  const { normal } = createGenerator(seed);
  const n = 3 * form.m + form.p + form.q + (form.P + form.Q + form.D) * form.m + form.d + 24;
  const values = Array.from({ length: n }, (_, t) => {
    const season = 0.3 * Math.sin((2 * Math.PI * t) / Math.max(form.m, 2.5));
    return Number((size * (1 + season + 0.004 * t) * Math.exp(0.08 * normal())).toPrecision(6));
  });
  if (gaps) for (const t of [Math.floor(n / 2), n - 2]) values[t] = Number.NaN;
  const shift = Array.from({ length: n + 1 }, (_, t) => ((event === 'passing' ? t === n - 3 : t >= n - 5) ? 1 : 0));
  const regressors = event === 'none' ? [] : [{ name: 'event1', values: shift }];
  return fitModel(values, { form, scale, constant, regressors });
}

const PLAIN: Case = {
  size: 1240,
  places: 0,
  form: { p: 0, d: 1, q: 1, P: 0, D: 1, Q: 1, m: 4 },
  scale: 'plain',
  constant: false,
  event: 'none',
  gaps: false,
  seed: 5,
};

function checked(fit: Fit, places: number, heldAtZero = false) {
  const { middle, expected } = makeOutlook(fit, {
    ahead: 1,
    seed: 1,
    holdAtZero: heldAtZero,
    spans: [{ kind: 'ahead', year: null, known: 0, steps: [0] }],
  }).periods[0];
  const periods = Array.from({ length: fit.values.length + 1 }, (_, t) => `${2000 + t}`);
  const sum = workedSum(fit, { middle, expected, heldAtZero, places, periods });
  return { sum, middle, expected };
}

const cases: fc.Arbitrary<Case> = fc
  .record({
    size: fc.constantFrom(0.001, 0.37, 12, 1240, 98_765, 10_000_000),
    places: fc.integer({ min: 0, max: 6 }),
    form: fc
      .record({
        p: fc.integer({ min: 0, max: 2 }),
        d: fc.integer({ min: 0, max: 2 }),
        q: fc.integer({ min: 0, max: 2 }),
        P: fc.integer({ min: 0, max: 1 }),
        D: fc.integer({ min: 0, max: 1 }),
        Q: fc.integer({ min: 0, max: 1 }),
        m: fc.constantFrom(1, 2, 4, 12),
      })
      .map((form) => (form.m === 1 ? { ...form, P: 0, D: 0, Q: 0 } : form)),
    scale: fc.constantFrom('plain', 'log', 'box-cox 0.3', 'box-cox -0.4'),
    constant: fc.boolean(),
    event: fc.constantFrom('none' as const, 'passing' as const, 'lasting' as const),
    gaps: fc.boolean(),
    seed: fc.integer({ min: 1, max: 1000 }),
  })
  .map((each) => {
    const differences = each.form.d + each.form.D;
    // Off the plain scale a level of its own is needed, or the mean runs into numbers that no one would print.
    return {
      ...each,
      constant: differences === 0 ? each.constant || each.scale !== 'plain' : differences === 1 && each.constant,
    };
  });

describe('the worked sum', () => {
  test('adds up to the printed forecast for any form, scale, size, constant, event and gap', () => {
    fc.assert(
      fc.property(cases, (each) => {
        const { places, scale, form } = each;
        const fit = fitOf(each);
        // A negative power may have no upper end to its range; that is told before anything is explained.
        const { mean, standardError } = predict(fit, 1);
        fc.pre(scale !== 'box-cox -0.4' || mean[0] + 3.1 * standardError[0] < 1 / 0.4);
        const { sum, middle, expected } = checked(fit, places);
        const note = `${formText(form)} ${scale}`;
        const unit = 10 ** -places;

        expectToAddUp(sum);
        expect(Math.abs(sum.expected - expected), note).toBeLessThan(0.5000001 * unit + 1e-12 * expected);
        // The last line takes up the rounding of the total and of a few lines, and nothing else.
        const rounding = sum.terms.find(({ kind }) => kind === 'rounding')?.product ?? 0;
        const allowed = (0.5 + 0.06 * sum.terms.length) * 10 ** -sum.decimals.total;
        // Near a unit root smoother and filter agree to about nine digits.
        const agreement = scale === 'plain' ? 1e-8 * Math.abs(expected) : 0;
        expect(Math.abs(rounding), note).toBeLessThanOrEqual(allowed + agreement);

        if (scale === 'plain') {
          expect(sum.back).toEqual([]);
          expect(sum.expected).toBe(sum.total);
          return;
        }
        const printedMiddle = line(sum, 'middle')?.value ?? Number.NaN;
        const shown = middleOf(sum, scale);
        expect(Math.abs(printedMiddle - shown), note).toBeLessThan(0.5000001 * unit + 1e-12 * shown);
        expect(Math.abs(printedMiddle - middle), note).toBeLessThan(0.5000001 * unit + 1e-8 * middle);
        const step = line(sum, 'to-expected')?.value ?? Number.NaN;
        expect(units(printedMiddle, places) + units(step, places), note).toBe(units(sum.expected, places));
      }),
      { numRuns: 400, seed: 20261201 },
    );
  });

  test('on the plain scale its exact lines come to the exact forecast, however the past is weighed', () => {
    // A moving-average root close to one, where one-step residuals differ from the surprises given all figures.
    const fit = fitOf({ ...PLAIN, form: { p: 0, d: 1, q: 1, P: 0, D: 1, Q: 1, m: 4 } });
    const { sum } = checked(fit, 6);
    expect(Math.abs(sum.total - predict(fit, 1).mean[0])).toBeLessThan(1e-6);
  });

  test('a gap stands with the smoothed value, and says so', () => {
    const fit = fitOf({ ...PLAIN, form: { ...PLAIN.form, p: 2 }, gaps: true });
    const gap = checked(fit, 2).sum.terms.find(({ kind, lag }) => kind === 'past' && lag === 2);
    expect(gap).toMatchObject({ smoothed: true });
    expect(gap?.value).toBeCloseTo(smooth(fit).values[fit.values.length - 2], 4);
  });

  test('where holding at zero moves the mean, a line says by how much', () => {
    const { normal } = createGenerator(3);
    const values = Array.from({ length: 40 }, () => Math.max(0, 2 * normal()));
    const fit = fitModel(values, { form: '(0,1,1)', scale: 'plain' });
    const { sum, expected } = checked(fit, 1, true);
    const floor = sum.terms.find(({ kind }) => kind === 'floor');
    expect(floor?.product).toBeCloseTo(expected - predict(fit, 1).mean[0], 3);
    expectToAddUp(sum);
    expect(Math.abs(sum.expected - expected)).toBeLessThanOrEqual(0.05);
  });

  test('the constant’s line is c times φ(1)Φ(1); an effect is taken off the past and put on the period ahead', () => {
    const fit = fitOf({
      ...PLAIN,
      form: { p: 2, d: 0, q: 0, P: 1, D: 0, Q: 0, m: 4 },
      constant: true,
      event: 'lasting',
    });
    const { terms } = checked(fit, 2).sum;
    const [phi1, phi2] = fit.phi;
    const one = (1 - phi1 - phi2) * (1 - fit.Phi[0]);
    const constant = terms.find(({ kind }) => kind === 'constant');
    expect(constant?.value).toBeCloseTo(fit.constantValue, 3);
    expect(constant?.weight).toBeCloseTo(one, 3);
    // The event holds in the last five periods: lags 1 to 5 of (1 − φ₁B − φ₂B²)(1 − Φ₁B⁴), less the sixth.
    const off = terms.find(({ kind }) => kind === 'effect-off');
    expect(off?.weight).toBeCloseTo(-(phi1 + phi2 + fit.Phi[0] - phi1 * fit.Phi[0]), 3);
    expect(terms.find(({ kind }) => kind === 'effect-on')).toMatchObject({ weight: 1, value: off?.value });
  });
});
