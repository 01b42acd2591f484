import { expect, test } from 'vitest';
import { ljungBoxTerms } from '../../src/stats/portmanteau.js';

test('by hand: n(n + 2) r²/(n − h)', () => {
  // About their mean 0: squares 10, products at lag 1: 2 − 1 + 1·… written out.
  const values = [2, 1, -1, -2, 0];
  const r1 = (2 * 1 + 1 * -1 + -1 * -2 + -2 * 0) / 10;
  const r2 = (2 * -1 + 1 * -2 + -1 * 0) / 10;
  const [first, second] = ljungBoxTerms(values, 2);
  expect(first).toBeCloseTo((5 * 7 * r1 * r1) / 4, 14);
  expect(second).toBeCloseTo((5 * 7 * r2 * r2) / 3, 14);
});

test('a gap takes its pairs away', () => {
  const gap = Number.NaN;
  // Mean 0, squares 10; one pair at lag 1, one at lag 2, one at lag 3, two at lag 4, one at lag 5.
  const [first, , , , fifth] = ljungBoxTerms([2, 1, gap, gap, -1, -2], 5);
  expect(first).toBeCloseTo((4 * 6 * ((2 * 1 + -1 * -2) / 10) ** 2) / 2, 14);
  expect(fifth).toBeCloseTo(4 * 6 * (-4 / 10) ** 2, 14);
});

test('missing values before the first and after the last change nothing', () => {
  const values = [0.3, -1.2, 0.8, 0.1, 1.4, -0.6];
  const padded = [Number.NaN, Number.NaN, ...values, Number.NaN];
  ljungBoxTerms(padded, 3).forEach((term, i) => {
    expect(term).toBeCloseTo(ljungBoxTerms(values, 3)[i], 14);
  });
});

test('a lag without a pair adds nothing', () => {
  expect(ljungBoxTerms([1, -1, 2], 5)[4]).toBe(0);
});
