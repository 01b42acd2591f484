import fc from 'fast-check';
import { expect, test } from 'vitest';
import { firstWhere } from '../../src/decision/first-where.js';

test('the first number from which it holds, or the end', () => {
  fc.assert(
    fc.property(fc.nat(1e12), fc.nat(1e12), (end, first) => {
      let asked = 0;
      const found = firstWhere(end, (at) => {
        asked++;
        return at >= first;
      });
      expect(found).toBe(Math.min(first, end));
      expect(asked).toBeLessThanOrEqual(41);
    }),
  );
});
