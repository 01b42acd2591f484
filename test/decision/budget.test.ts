import { describe, expect, test } from 'vitest';
import { type BudgetRequest, cashLow, lineFigures, makeBudget } from '../../src/decision/budget.js';
import { normalQuantile } from '../../src/stats/normal.js';
import { normal, rows } from './requests.js';

const request = (changes: Partial<BudgetRequest>): BudgetRequest => ({
  paths: rows([1, 2], [3, 4], [5, 6]),
  perUnit: [10, 10, 20],
  lag: 0,
  before: [],
  lines: [],
  ...changes,
});

describe('money by step', () => {
  test('units times the step’s price', () => {
    const { amounts, cashFlows } = makeBudget(request({}));
    expect(Array.from(amounts)).toEqual([10, 20, 30, 40, 100, 120]);
    expect(cashFlows).toEqual(amounts);
  });

  test('paid two steps later: first what was sold before', () => {
    const { cashFlows, unknown } = makeBudget(request({ lag: 2, before: [7, 8] }));
    expect(Array.from(cashFlows)).toEqual([7, 7, 8, 8, 10, 20]);
    expect(unknown).toEqual([]);
  });

  test('what is not known stands as zero and is named', () => {
    const { cashFlows, unknown } = makeBudget(request({ lag: 2, before: [null, 8] }));
    expect(Array.from(cashFlows)).toEqual([0, 0, 8, 8, 10, 20]);
    expect(unknown).toEqual([0]);
  });

  test('paid beyond the steps ahead: all of it from before', () => {
    const { cashFlows, unknown } = makeBudget(request({ lag: 4, before: [1, 2, 3, null] }));
    expect(Array.from(cashFlows)).toEqual([1, 1, 2, 2, 3, 3]);
    expect(unknown).toEqual([]);
  });
});

describe('lines', () => {
  test('normal income: the mean, and 1.2816 standard deviations either side', () => {
    const paths = normal(1000, 100);
    const [line] = makeBudget(request({ paths, perUnit: [18.5], lines: [{ steps: [0], known: 500 }] })).lines;
    const reach = normalQuantile(0.9) * 100 * 18.5;
    expect(line.expected).toBeCloseTo(500 + 18_500, 6);
    expect(Math.abs(line.low - (19_000 - reach))).toBeLessThan(1e-5 * reach);
    expect(Math.abs(line.high - (19_000 + reach))).toBeLessThan(1e-5 * reach);
    expect(line.chanceAboveLow).toBeCloseTo(0.9, 9);
    expect(line.chanceAboveExpected).toBeCloseTo(0.5, 9);
    expect(line.chanceAboveHigh).toBeCloseTo(0.1, 9);
  });

  test('a sum over steps is a sum path by path: what rises and falls together cancels', () => {
    const [both, known] = lineFigures(rows([1, 2, 3], [3, 2, 1]), [
      { steps: [0, 1], known: 6 },
      { steps: [], known: 6 },
    ]);
    expect(both).toMatchObject({ low: 10, expected: 10, high: 10, chanceAboveLow: 0 });
    expect(known.expected).toBe(6);
  });
});

describe('the lowest cash', () => {
  test('by step the mean and the quantile at 10%, and the lowest of these', () => {
    const ten = Array.from({ length: 10 }, (_, k) => k + 1);
    const cumulated = rows(
      ten.map((k) => 100 * k),
      ten.map((k) => 100 * k - 300),
      ten.map((k) => 100 * k - 300),
    );
    // Level 0.1 stands half-way between the smallest (0.05) and the next (0.15).
    expect(cashLow(cumulated)).toEqual({
      steps: [
        { expected: 550, cautious: 150 },
        { expected: 250, cautious: -150 },
        { expected: 250, cautious: -150 },
      ],
      lowest: { step: 1, cautious: -150 },
    });
  });

  test('is given where it is above zero too', () => {
    expect(cashLow(rows([5, 5], [3, 3])).lowest).toEqual({ step: 1, cautious: 3 });
  });
});

describe('what doesn’t fit', () => {
  test.each<[Partial<BudgetRequest>, RegExp]>([
    [{ perUnit: [1, 2] }, /2 prices for 3 periods ahead; give one a period/],
    [{ perUnit: [1, Number.NaN, 2] }, /price 2 periods ahead is NaN/],
    [{ lag: -1 }, /money comes -1 periods later; it must be a whole number/],
    [{ lag: 0.5 }, /money comes 0.5 periods later/],
    [{ lag: 2, before: [1] }, /2 periods later, and 1 earlier amounts are given/],
    [{ lag: 2, before: [1, Number.POSITIVE_INFINITY] }, /amount 1 periods ago is Infinity/],
    [{ lines: [{ steps: [3], known: 0 }] }, /a line has step 3; steps run from 0 to 2/],
    [{ lines: [{ steps: [0], known: Number.NaN }] }, /money known of a line is NaN/],
    [{ paths: rows([1, Number.NaN]), perUnit: [1] }, /path 2 has NaN/],
  ])('%j', (changes, message) => {
    expect(() => makeBudget(request(changes))).toThrow(message);
  });
});
