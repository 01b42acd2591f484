import fc from 'fast-check';
import { expect, test } from 'vitest';
import { spaced } from '../../src/charts/candidates-chart.js';

test('labels that have room stay where they are', () => {
  expect(spaced([40, 10, 70], 14, 100)).toEqual([40, 10, 70]);
});

test('labels that meet are moved apart, upwards where the chart ends', () => {
  expect(spaced([50, 50, 51], 14, 100)).toEqual([50, 64, 78]);
  expect(spaced([99, 100], 14, 100)).toEqual([86, 100]);
});

test('labels never meet, keep their order, and none falls below the chart', () => {
  fc.assert(
    fc.property(fc.array(fc.double({ min: 0, max: 170, noNaN: true }), { minLength: 1, maxLength: 4 }), (wanted) => {
      const placed = spaced(wanted, 14, 170);
      const order = wanted.map((_, i) => i).sort((a, b) => wanted[a] - wanted[b] || a - b);
      order.slice(1).forEach((i, k) => {
        expect(placed[i] - placed[order[k]]).toBeGreaterThanOrEqual(14 - 1e-9);
      });
      expect(Math.max(...placed)).toBeLessThanOrEqual(170);
    }),
  );
});
