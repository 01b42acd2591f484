import { describe, expect, test } from 'vitest';
import { goalOf, type OrderRequest } from '../../src/decision/request.js';
import { request, rows } from './requests.js';

test('Cu = price − cost + goodwill, Co = cost − leftover value, and their ratio', () => {
  const { costs, level } = goalOf(
    request({ unitCost: 12, aim: { kind: 'costs', unitPrice: 18, leftoverValue: 9, goodwill: 3 } }),
  );
  expect([costs?.short, costs?.leftOver, level]).toEqual([9, 3, 0.75]);
});

test('a stated chance needs no costs, and goods may cost something to be rid of', () => {
  expect(goalOf(request({ unitCost: null, aim: { kind: 'not-short', chance: 0.9 } }))).toEqual({
    costs: null,
    level: 0.9,
  });
  const { costs } = goalOf(request({ aim: { kind: 'costs', unitPrice: 5, leftoverValue: -2, goodwill: 0 } }));
  expect(costs?.leftOver).toBe(5);
});

const aim = (changes: object) => ({
  aim: { kind: 'costs', unitPrice: 5, leftoverValue: 1, goodwill: 0, ...changes } as const,
});

describe('what can’t be decided from', () => {
  test.each<[Partial<OrderRequest>, RegExp]>([
    [aim({ leftoverValue: 3 }), /leftover value 3 is not below the unit cost 3: .*; give what/],
    [aim({ unitPrice: 2, goodwill: 1 }), /unit price 2 with goodwill 1 is not above the unit cost 3: .*; check/],
    [aim({ goodwill: -1 }), /goodwill lost is -1; it must be a number of 0 or more/],
    [aim({ unitPrice: Number.NaN }), /unit price is NaN; it must be/],
    [aim({ leftoverValue: Number.NEGATIVE_INFINITY }), /leftover value is -Infinity; it must be a number/],
    [{ unitCost: null }, /no unit cost; give it, or state a chance/],
    [{ unitCost: Number.POSITIVE_INFINITY }, /unit cost is Infinity; it must be/],
    [{ inStock: -5 }, /stock in hand is -5; it must be/],
    [{ onOrder: -1 }, /on order is -1; it must be/],
    [{ decided: -24 }, /decided on is -24; it must be/],
    [{ atLeast: Number.NaN }, /least to order is NaN; it must be/],
    [{ atMost: -1 }, /most to order is -1; it must be/],
    [{ spendAtMost: -1 }, /most to spend is -1; it must be/],
    [{ pack: 0 }, /a pack holds 0 units; it must hold more than 0/],
    [{ pack: Number.NaN }, /a pack holds NaN units/],
    [{ arrives: 0.5 }, /the order arrives 0.5 periods ahead; it must be a whole number/],
    [{ onOrderArrives: -1 }, /what is on order arrives -1 periods ahead/],
    [{ covers: 0 }, /covers 0 periods; it must cover/],
    [
      { covers: 2, arrives: 3 },
      /arrives 3 periods ahead and covers 2 needs an outlook of 5 periods, and it has 1; look/,
    ],
    [{ aim: { kind: 'not-short', chance: 1 } }, /chance of not running short is 1; it must lie between 0 and 1/],
    [{ aim: { kind: 'not-short', chance: 0 } }, /is 0; it must lie between/],
    [{ aim: { kind: 'not-short', chance: Number.NaN } }, /is NaN; it must lie between/],
    [
      { aim: { kind: 'not-short', chance: 0.9 }, unitCost: null, spendAtMost: 50 },
      /most to spend is 50, but there is no/,
    ],
    [{ paths: rows([1, Number.NaN]) }, /path 2 has NaN at step 1 ahead/],
  ])('%j', (changes, message) => {
    expect(() => goalOf(request(changes))).toThrow(message);
  });
});
