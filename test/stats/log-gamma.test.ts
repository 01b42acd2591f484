import { expect, test } from 'vitest';
import { logGamma } from '../../src/stats/log-gamma.js';

test('of a whole number: the factorial before it', () => {
  let factorial = 1;
  for (let n = 1; n <= 20; n++) {
    expect(Math.abs(logGamma(n) - Math.log(factorial))).toBeLessThan(1e-13);
    factorial *= n;
  }
});

test('of a half: √π (Euler)', () => {
  expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.PI) / 2, 13);
});

test.each([0.01, 0.3, 1.7, 4.9, 12.5, 300, 1e5])('Legendre’s duplication at %d', (x) => {
  const doubled = (2 * x - 1) * Math.log(2) - Math.log(Math.PI) / 2 + logGamma(x) + logGamma(x + 0.5);
  expect(Math.abs(logGamma(2 * x) / doubled - 1)).toBeLessThan(1e-13);
});
