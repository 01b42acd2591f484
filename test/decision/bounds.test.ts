import { describe, expect, test } from 'vitest';
import { heldWithin, packBounds } from '../../src/decision/bounds.js';
import type { OrderRequest } from '../../src/decision/request.js';
import { request } from './requests.js';

const bounds = (changes: Partial<OrderRequest>) => packBounds(request(changes));

test('no bounds: from none to any number', () => {
  expect(bounds({})).toEqual({ fewest: 0, most: Number.POSITIVE_INFINITY, mostBy: 'at-most' });
});

test('whole packs within the bounds, and the tighter of the two upper ones', () => {
  expect(bounds({ pack: 24, atLeast: 25, atMost: 100 })).toEqual({ fewest: 2, most: 4, mostBy: 'at-most' });
  // Three packs at 72 are 216.
  expect(bounds({ pack: 24, atMost: 100, spendAtMost: 287 })).toEqual({ fewest: 0, most: 3, mostBy: 'spend-at-most' });
  expect(bounds({ unitCost: 0, spendAtMost: 0 }).most).toBe(Number.POSITIVE_INFINITY);
});

test('a bound that is a whole number of packs is reached whatever the rounding', () => {
  // 0.3/0.1 and 0.7/0.1 fall short of 3 and 7 in binary, 0.6/0.1 does too.
  for (const packs of [3, 6, 7]) {
    const units = Number((packs / 10).toFixed(1));
    expect(bounds({ pack: 0.1, atLeast: units, atMost: units })).toMatchObject({ fewest: packs, most: packs });
  }
});

test('the bound that holds an order, and none where it is within', () => {
  const between = { fewest: 2, most: 5, mostBy: 'spend-at-most' } as const;
  expect([1, 2, 5, 6].map((packs) => heldWithin(packs, between))).toEqual([
    { packs: 2, by: 'at-least' },
    { packs: 2, by: null },
    { packs: 5, by: null },
    { packs: 5, by: 'spend-at-most' },
  ]);
});

describe('bounds that leave nothing', () => {
  test.each<[Partial<OrderRequest>, RegExp]>([
    [{ atLeast: 10, atMost: 9 }, /least to order, 10, is above the most to order, 9; change one/],
    [{ pack: 24, atLeast: 25, atMost: 47 }, /no whole number of packs of 24 lies from 25 to 47; change/],
    [
      { atLeast: 10, spendAtMost: 29 },
      /most to spend, 29, does not pay .* 10 units are 10 packs of 1 at 3 a unit, 30 in all/,
    ],
    [
      { pack: 24, atLeast: 1, spendAtMost: 71 },
      /71, does not pay .* 1 packs? of 24 at 3 a unit, 72 in all; allow more/,
    ],
  ])('%j', (changes, message) => {
    expect(() => bounds(changes)).toThrow(message);
  });
});
