import fc from 'fast-check';
import { expect, test } from 'vitest';
import { compare, TOLERANCE } from '../../src/record/compare.js';

test('equal documents', () => {
  fc.assert(
    fc.property(fc.jsonValue(), (value) => {
      expect(compare(value, structuredClone(value))).toEqual({ differences: [], apart: 0 });
    }),
  );
});

test('each difference is told with its place and both values', () => {
  const filed = { fit: { aicc: null, names: ['a', 'b'] }, periods: [{ expected: 100 }, { expected: 50 }], extra: 1 };
  const again = { fit: { aicc: 3, names: ['a', 'c'] }, periods: [{ expected: 125 }, { expected: 50 }], more: [] };
  expect(compare(filed, again).differences).toEqual([
    { path: 'fit.aicc', filed: null, recomputed: 3, relative: null },
    { path: 'fit.names[1]', filed: 'b', recomputed: 'c', relative: null },
    // A fifth of the larger one.
    { path: 'periods[0].expected', filed: 100, recomputed: 125, relative: 0.2 },
    { path: 'extra', filed: 1, recomputed: undefined, relative: null },
    { path: 'more', filed: undefined, recomputed: [], relative: null },
  ]);
});

test('lists of different lengths are one difference', () => {
  expect(compare({ values: [1, 2, 3] }, { values: [2, 3] }).differences).toEqual([
    { path: 'values.length', filed: 3, recomputed: 2, relative: null },
  ]);
});

test('numbers within the tolerance count as the same, and how far apart they are is told', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 1e-3, max: 1e9, noNaN: true }),
      fc.double({ min: 1e-15, max: 1e-6, noNaN: true }),
      (value, share) => {
        const { differences, apart } = compare([value], [value * (1 + share)]);
        fc.pre(Math.abs(share / TOLERANCE - 1) > 1e-3);
        if (share > TOLERANCE) expect(differences).toHaveLength(1);
        else {
          expect(differences).toEqual([]);
          // To within the rounding of the two numbers themselves.
          expect(Math.abs(apart - share)).toBeLessThan(1e-15);
        }
      },
    ),
  );
});

test('what is left of two equal numbers is compared as parts of a millionth', () => {
  expect(compare(1e-17, -3e-17).differences).toEqual([]);
  expect(compare(0, 1e-16).differences).toEqual([]);
  expect(compare(0, 1e-14).differences).toHaveLength(1);
});
