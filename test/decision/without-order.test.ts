import { expect, test } from 'vitest';
import { withoutOrder } from '../../src/decision/without-order.js';
import { request, rows } from './requests.js';

test('stock arrives when its step starts, and demand beyond stock is lost for good', () => {
  const { before, covered, atArrival, left, need } = withoutOrder(
    request({ paths: rows([6, 2], [6, 2], [6, 2]), arrives: 1, covers: 2, inStock: 5, onOrder: 4, onOrderArrives: 2 }),
  );
  // First path: 5 of 6 sold, 0 of 6, 4 of 6. Second: 5 − 2 − 2 = 1, 1 + 4 − 2 = 3.
  expect(Array.from(before.lost)).toEqual([1, 0]);
  expect(Array.from(before.demand)).toEqual([6, 2]);
  expect(Array.from(atArrival)).toEqual([0, 3]);
  expect(Array.from(covered.lost)).toEqual([8, 0]);
  expect(Array.from(left)).toEqual([0, 3]);
  expect(Array.from(need)).toEqual([0, 8]);
});

test('what arrives with the order counts as stock, what arrives after the steps covered as nothing', () => {
  const arriving = (onOrderArrives: number) =>
    withoutOrder(request({ paths: rows([1], [1]), arrives: 1, onOrder: 9, onOrderArrives }));
  expect(arriving(1).atArrival[0]).toBe(9);
  expect(arriving(2).left[0]).toBe(0);
});
