import { expect, test } from 'vitest';
import { normalQuantile } from '../../src/stats/normal.js';
import { studentQuantile } from '../../src/stats/student.js';

test.each([
  // Abramowitz & Stegun, "Handbook of Mathematical Functions", 1964, table 26.10, to its last printed digit.
  [0.9, 1, 3.078],
  [0.975, 1, 12.706],
  [0.9, 5, 1.476],
  [0.975, 5, 2.571],
  [0.9, 12, 1.356],
  [0.975, 12, 2.179],
  [0.995, 12, 3.055],
  [0.975, 30, 2.042],
])('the quantile at %d with %i degrees of freedom is %d', (p, freedom, printed) => {
  expect(studentQuantile(p, freedom)).toBeCloseTo(printed, 3);
  expect(studentQuantile(1 - p, freedom)).toBeCloseTo(-printed, 3);
});

test('with two degrees of freedom it has a closed form, far out as well', () => {
  // F(t) = ½ + t/(2√(2 + t²)).
  for (const p of [1e-9, 0.001, 0.3, 0.5, 0.9999]) {
    const a = 2 * p - 1;
    expect(studentQuantile(p, 2) / (a * Math.sqrt(2 / (1 - a * a)) || 1)).toBeCloseTo(p === 0.5 ? 0 : 1, 6);
  }
});

test('with ever more degrees of freedom it is the normal quantile', () => {
  expect(studentQuantile(0.9, 1e7)).toBeCloseTo(normalQuantile(0.9), 6);
  expect(studentQuantile(0.9, Number.POSITIVE_INFINITY)).toBe(normalQuantile(0.9));
});

test('freedom between whole numbers lies between their quantiles', () => {
  expect(studentQuantile(0.9, 4.5)).toBeLessThan(studentQuantile(0.9, 4));
  expect(studentQuantile(0.9, 4.5)).toBeGreaterThan(studentQuantile(0.9, 5));
});
