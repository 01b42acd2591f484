import { expect, test } from 'vitest';
import { PATHS } from '../../src/outlook/expectation.js';
import { judged, type StatedChange } from '../../src/outlook/judge.js';
import { makeOutlook, type Outlook } from '../../src/outlook/outlook.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

const { normal } = createGenerator(3);
const figures = Array.from({ length: 40 }, (_, t) => 100 + t + [-20, 30, 10, -20][t % 4] + 4 * normal());
const steps = [0, 1, 2, 3];
const outlook = makeOutlook(fitModel(figures, { form: '(0,1,1)x(0,1,1)4' }), {
  ahead: 4,
  seed: 1,
  holdAtZero: true,
  spans: [{ kind: 'ahead', year: null, known: 7, steps }],
});
const percent = (value: number, from = 0, to = 3): StatedChange => ({ kind: 'percent', value, from, to });
const amount = (value: number, from = 0, to = 3): StatedChange => ({ kind: 'amount', value, from, to });
const numbers = ({ periods }: Outlook, h: number) => {
  const { expected, middle, range80, range95 } = periods[h];
  return [expected, middle, ...range80, ...range95];
};

test('a change in per cent multiplies everything of its steps and nothing of the others', () => {
  const result = judged(outlook, [percent(8, 2)]);
  for (const h of [0, 1]) expect(numbers(result, h)).toEqual(numbers(outlook, h));
  for (const h of [2, 3])
    numbers(result, h).forEach((value, i) => {
      expect(value).toBeCloseTo(1.08 * numbers(outlook, h)[i], 8);
    });
});

test('an amount shifts everything and leaves the width; the total takes the sum of the shifts, and keeps what is known', () => {
  const result = judged(outlook, [amount(40, 1, 2)]);
  for (const h of [1, 2])
    numbers(result, h).forEach((value, i) => {
      expect(value).toBeCloseTo(numbers(outlook, h)[i] + 40, 8);
    });
  const [before, after] = [outlook.totals[0], result.totals[0]];
  expect(after.expected).toBeCloseTo(before.expected + 80, 6);
  expect(after.range80[0]).toBeCloseTo(before.range80[0] + 80, 6);
  expect(after.known).toBe(7);
  expect(after.expected).toBeCloseTo(7 + result.periods.reduce((sum, { expected }) => sum + expected, 0), 6);
});

test('changes follow one another in the order of the plan', () => {
  const first = judged(outlook, [percent(10), amount(5)]).periods[0].expected;
  const second = judged(outlook, [amount(5), percent(10)]).periods[0].expected;
  expect(first).toBeCloseTo(1.1 * outlook.periods[0].expected + 5, 8);
  expect(second).toBeCloseTo(1.1 * (outlook.periods[0].expected + 5), 8);
});

test('what is held at zero stays there or above, and the outlook it started from stays as it was', () => {
  const before = Float64Array.from(outlook.matrix);
  const result = judged(outlook, [amount(-1e6, 0, 0)]);
  expect(Array.from(result.matrix.subarray(0, PATHS)).every((value) => value === 0)).toBe(true);
  expect(result.periods[0]).toMatchObject({ expected: 0, middle: 0, range80: [0, 0] });
  expect(outlook.matrix).toEqual(before);
});
