import { describe, expect, test } from 'vitest';
import { decimal, toNumber } from '../../src/explain/decimals.js';
import { printedNumbers } from '../../src/explain/printed.js';
import type { Outlook } from '../../src/outlook/outlook.js';

const row = (expected: number, half: number) => ({
  expected,
  middle: expected,
  range80: [expected - half, expected + half] as [number, number],
  range95: [expected - 1.6 * half, expected + 1.6 * half] as [number, number],
  standardError: half / 1.28,
});

const outlookOf = (rows: readonly ReturnType<typeof row>[], totalHalf: number): Outlook => ({
  seed: 0,
  paths: 0,
  matrix: new Float64Array(0),
  calibration: {
    spread: new Float64Array(0),
    freedom: 12,
    factors: { freedom: 1, recent: 1, estimates: [], horizon: [] },
  },
  periods: rows,
  totals: [
    {
      kind: 'ahead',
      year: null,
      known: 0,
      steps: rows.map((_, h) => h),
      ...row(
        rows.reduce((sum, { expected }) => sum + expected, 0),
        totalHalf,
      ),
    },
  ],
  heldAtZero: true,
});

describe('the rule of rounding: a power of ten not above a tenth of the narrowest range', () => {
  test.each([
    // half width, places, step: a tenth of the full width is 2.7, 12, 120, 0.03, and the plan's places bound it.
    [13.5, 0, 1],
    [60, 0, 10],
    [600, 0, 100],
    [0.15, 2, 0.01],
    [0.15, 1, 0.1],
    [0.15, 0, 1],
  ])('half width %d at %i places: step %d', (half, places, step) => {
    const printed = printedNumbers(outlookOf([row(1234.567, half), row(2345.678, half * 3)], half * 4), places, [
      null,
      null,
    ]);
    expect(printed.step).toBeCloseTo(step, 12);
    for (const { expected } of printed.periods) expect(expected / step).toBeCloseTo(Math.round(expected / step), 6);
    expect(printed.total.expected).toBeCloseTo(printed.periods[0].expected + printed.periods[1].expected, 9);
  });

  test('changes are in per cent of the printed numbers; nothing to compare with gives none', () => {
    const { periods, total } = printedNumbers(outlookOf([row(110.4, 20), row(90, 20)], 30), 0, [100, null]);
    expect(periods.map(({ change }) => change)).toEqual([10, null]);
    expect(total).toMatchObject({ lastYear: null, change: null });
    const negative = printedNumbers(outlookOf([row(-0.2, 20)], 20), 0, [-5]);
    expect(Object.is(negative.periods[0].expected, -0)).toBe(false);
    expect(negative.periods[0].change).toBeNull();
  });
});

test('decimals are rounded as by hand, halves away from zero, also to tens and hundreds', () => {
  for (const [number, places, expected] of [
    [0.285, 2, 0.29],
    [-0.285, 2, -0.29],
    [1250, -2, 1300],
    [-1250, -2, -1300],
    [1e21, 0, 1e21],
    [1.5e-7, 7, 2e-7],
  ] as const)
    expect(toNumber(decimal(number, places))).toBe(expected);
});

test('a number is rounded to the plan’s places before it is rounded on, as the worked sum prints it', () => {
  // 314.96 prints as 315 on the worked sum; whoever rounds that to tens gets 320.
  const { periods, answer, total } = printedNumbers(outlookOf([row(314.96, 60), row(200, 60)], 90), 0, [287.4, 210]);
  expect(periods[0]).toMatchObject({ expected: 320, lastYear: 287, change: 11 });
  // The answer is the printed total, so that the sentence and the table agree.
  expect([total.expected, answer.expected]).toEqual([520, 520]);
  expect(total.lastYear).toBe(497);
});
