import fc from 'fast-check';
import { expect, test } from 'vitest';
import { outcomes } from '../../src/decision/outcome.js';
import { withoutOrder } from '../../src/decision/without-order.js';
import { request, walk } from './requests.js';

/** One path of five steps, goods brought back included, with arrivals at any step. */
const single = fc.record({
  matrix: fc.array(fc.integer({ min: -10, max: 50 }), { minLength: 5, maxLength: 5 }).map((d) => Float64Array.from(d)),
  arrives: fc.nat(3),
  inStock: fc.nat(80),
  onOrder: fc.nat(60),
  onOrderArrives: fc.nat(5),
});

test('a path loses max(need − Q, 0), and max(Q − need, 0) more is left over', () => {
  fc.assert(
    fc.property(single, fc.nat(200), ({ matrix, arrives, ...stock }, units) => {
      const order = request({ paths: { matrix, count: 1 }, arrives, covers: 5 - arrives, ...stock });
      const { covered, left } = withoutOrder(order);
      const need = covered.lost[0];
      const walked = walk(order, units);
      expect(walked.lost).toBe(Math.max(need - units, 0));
      expect(walked.leftOver).toBe(left[0] + Math.max(units - need, 0));
    }),
    { numRuns: 1000 },
  );
});

test('sales and lost add up to demand; the expected result is concave in the order', () => {
  fc.assert(
    fc.property(
      single,
      fc.array(fc.double({ min: 0, max: 300, noNaN: true }), { minLength: 3, maxLength: 3 }),
      (path, at) => {
        const { matrix, arrives, ...stock } = path;
        const order = request({ paths: { matrix, count: 1 }, arrives, covers: 5 - arrives, ...stock });
        const standing = withoutOrder(order);
        const outcomeOf = outcomes(standing, order);
        const [a, b, c] = at.sort((x, y) => x - y).map(outcomeOf);
        expect(b.sales + b.lost).toBeCloseTo(standing.covered.demand[0], 9);
        const [left, right] = [b.units - a.units, c.units - b.units];
        const chord = (right * (a.result as number) + left * (c.result as number)) / (left + right || 1);
        if (left + right > 0) expect(b.result).toBeGreaterThanOrEqual(chord - 1e-6);
      },
    ),
  );
});
