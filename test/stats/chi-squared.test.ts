import { describe, expect, test } from 'vitest';
import { chiSquaredUpperTail } from '../../src/stats/chi-squared.js';
import { normalProbability } from '../../src/stats/normal.js';

describe('closed forms', () => {
  test.each([0.001, 0.5, 2, 3.99, 4.01, 9, 40, 700])('two and six degrees of freedom at %d', (x) => {
    const h = x / 2;
    // The number of Poisson events with mean x/2 (Abramowitz & Stegun, 1964, 26.4.21).
    expect(Math.abs(chiSquaredUpperTail(x, 2) / Math.exp(-h) - 1)).toBeLessThan(1e-12);
    expect(Math.abs(chiSquaredUpperTail(x, 6) / (Math.exp(-h) * (1 + h + (h * h) / 2)) - 1)).toBeLessThan(1e-12);
  });
  test.each([0.01, 1, 2.9, 3.1, 10, 60])('one degree of freedom at %d: a squared normal value', (x) => {
    expect(Math.abs(chiSquaredUpperTail(x, 1) / (2 * normalProbability(-Math.sqrt(x))) - 1)).toBeLessThan(1e-12);
  });
});

// Abramowitz & Stegun, "Handbook of Mathematical Functions", 1964, table 26.8, from memory.
test.each([
  [3.84146, 1, 0.05],
  [18.307, 10, 0.05],
  [23.2093, 10, 0.01],
  [43.773, 30, 0.05],
  [3.9403, 10, 0.95],
])('printed percentage point %d with %d degrees of freedom', (x, freedom, p) => {
  expect(chiSquaredUpperTail(x, freedom)).toBeCloseTo(p, 5);
});

test('at the ends', () => {
  expect(chiSquaredUpperTail(0, 3)).toBe(1);
  expect(chiSquaredUpperTail(Number.POSITIVE_INFINITY, 3)).toBe(0);
  expect(() => chiSquaredUpperTail(1, 0)).toThrow('not 0');
  expect(() => chiSquaredUpperTail(Number.NaN, 1)).toThrow('NaN');
});
