import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { decideOrder } from '../../src/decision/order.js';
import type { OrderRequest } from '../../src/decision/request.js';
import { normalProbability, normalQuantile } from '../../src/stats/normal.js';
import { levels, normal, request, rows, walk } from './requests.js';

describe('published and closed-form orders', () => {
  // METHODS.md section 9: normal demand, mean 3192, s.d. 1181, Cu 80, Co 20, order 4186. Values from memory.
  const example = request({
    paths: normal(3192, 1181),
    unitCost: 110,
    aim: { kind: 'costs', unitPrice: 190, leftoverValue: 90, goodwill: 0 },
  });

  test('the worked example: critical ratio 0.8, order 4186', () => {
    const { shortCost, leftOverCost, ratio, best, heldBy } = decideOrder(example);
    expect([shortCost, leftOverCost, ratio, heldBy]).toEqual([80, 20, 0.8, null]);
    expect(Math.abs(best.units - 4186)).toBeLessThanOrEqual(1);
    // At the best order the expected result is Cu μ − (Cu + Co) σ φ(z), with z the ratio's normal quantile.
    const z = normalQuantile(0.8);
    const density = Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
    expect(Math.abs((best.result as number) - (80 * 3192 - 100 * 1181 * density))).toBeLessThan(0.0005 * 80 * 3192);
    expect(best.chanceShort).toBeCloseTo(0.2, 3);
  });

  test('demand over the step covered: mean, median, range and target', () => {
    const { demand } = decideOrder(example);
    expect(demand.expected).toBeCloseTo(3192, 6);
    expect(demand.middle).toBeCloseTo(3192, 6);
    expect(demand.range80[0]).toBeCloseTo(3192 - 1181 * normalQuantile(0.9), 2);
    expect(demand.range80[1]).toBeCloseTo(3192 + 1181 * normalQuantile(0.9), 2);
    expect(demand.target).toBeCloseTo(3192 + 1181 * normalQuantile(0.8), 2);
  });

  test('the same by a stated chance of 0.8', () => {
    const { best, ratio, shortCost, leftOverCost } = decideOrder({
      ...example,
      unitCost: null,
      aim: { kind: 'not-short', chance: 0.8 },
    });
    expect(Math.abs(best.units - 4186)).toBeLessThanOrEqual(1);
    expect([ratio, shortCost, leftOverCost, best.result, best.cost]).toEqual([null, null, null, null, null]);
    expect(best.chanceShort).toBeLessThanOrEqual(0.2);
  });

  test.each([
    // The unit normal loss function as handbooks print it.
    [0, 0.3989],
    [0.5, 0.1978],
    [1, 0.0833],
    [1.5, 0.0293],
    [2, 0.0085],
  ])('an order %d standard deviations above the mean loses %d of one', (z, loss) => {
    const { decided } = decideOrder({ ...example, decided: 3192 + z * 1181 });
    expect(Math.abs((decided?.lost as number) / 1181 / loss - 1)).toBeLessThan(0.005);
    expect(decided?.chanceShort).toBeCloseTo(1 - normalProbability(z), 3);
    expect(decided?.packs).toBe(3192 + z * 1181);
  });

  test('uniform demand on (0, b): Q = b Cu/(Cu + Co), and b Cu²/(2(Cu + Co)) expected', () => {
    // ∫ min(d, Q) dd / b = Q − Q²/(2b), so the result is Cu Q − (Cu + Co) Q²/(2b), at its highest where Q = b ratio.
    const { best, demand } = decideOrder(
      request({
        paths: levels((p) => 1000 * p),
        unitCost: 6,
        aim: { kind: 'costs', unitPrice: 9, leftoverValue: 5, goodwill: 0 },
      }),
    );
    expect(best.units).toBe(750);
    expect(demand.target).toBeCloseTo(750, 9);
    expect(best.result).toBeCloseTo((1000 * 3 ** 2) / (2 * 4), 3);
    expect(best.sales).toBeCloseTo(750 - 750 ** 2 / 2000, 3);
    expect(best.leftOver).toBeCloseTo(750 ** 2 / 2000, 3);
  });

  test('a year of a newsstand’s weekly sales: 15 copies', () => {
    // Nahmias, "Production and Operations Analysis", the newsvendor example: bought at 0.25, sold at 0.75, taken back at
    // 0.10; 52 weekly demands with mean 11.73, critical ratio 0.77, best order 15. From memory.
    const weeks: Record<number, number> = {
      ...{ 0: 1, 4: 3, 5: 1, 6: 2, 7: 2, 8: 4, 9: 6, 10: 2, 11: 5, 12: 4 },
      ...{ 13: 1, 14: 5, 15: 5, 16: 1, 17: 3, 18: 3, 19: 3, 22: 1 },
    };
    const demand = Object.entries(weeks).flatMap(([copies, times]) => Array<number>(times).fill(Number(copies)));
    expect(demand).toHaveLength(52);
    const decision = decideOrder(
      request({
        paths: rows(demand),
        unitCost: 0.25,
        aim: { kind: 'costs', unitPrice: 0.75, leftoverValue: 0.1, goodwill: 0 },
      }),
    );
    expect(decision.demand.expected).toBeCloseTo(11.73, 2);
    expect(decision.ratio).toBeCloseTo(0.77, 2);
    expect(decision.best.units).toBe(15);
  });

  test('with pack 1, ten million units of demand are decided at once and to the unit', () => {
    const paths = levels((p) => 1e7 + Math.ceil(10_000 * p));
    const decision = decideOrder(
      request({ paths, aim: { kind: 'costs', unitPrice: 6, leftoverValue: 2, goodwill: 0 } }),
    );
    // The ratio is 3/4, and a share k/10000 of the paths stands at or below 10 million and k.
    expect(decision.best.units).toBe(1e7 + 7500);
  });
});

/** Requests of whole numbers, on which sums are exact; costs in quarters. */
const wholeRequest = fc
  .record({
    ahead: fc.integer({ min: 1, max: 4 }),
    count: fc.integer({ min: 1, max: 12 }),
    most: fc.constantFrom(0, 3, 40, 900),
    pack: fc.constantFrom(1, 2, 24, 500),
    stock: fc.constantFrom(0, 5, 60, 5000),
    onOrder: fc.constantFrom(0, 7, 300),
  })
  .chain(({ ahead, count, most, pack, stock, onOrder }) =>
    fc
      .record({
        demand: fc.array(fc.integer({ min: 0, max: most }), { minLength: ahead * count, maxLength: ahead * count }),
        arrives: fc.integer({ min: 0, max: ahead - 1 }),
        onOrderArrives: fc.integer({ min: 0, max: ahead }),
        short: fc.integer({ min: 1, max: 8 }),
        leftOver: fc.integer({ min: 1, max: 8 }),
        goodwill: fc.integer({ min: 0, max: 8 }),
        chance: fc.constantFrom(null, 0.5, 0.75, 0.9),
        lasts: fc.nat(3),
        bounds: fc.option(fc.tuple(fc.nat(3), fc.nat(3), fc.nat(6)), { nil: null }),
        decided: fc.option(fc.nat(1000), { nil: null }),
      })
      .map(({ demand, arrives, onOrderArrives, short, leftOver, goodwill, chance, lasts, bounds, decided }) => {
        const [leftoverValue, unitCost] = [0.5, 0.5 + leftOver / 4];
        const unitPrice = Math.max(unitCost + short / 4 - goodwill / 4, 0);
        const fewest = bounds?.[0] ?? 0;
        return request({
          paths: { matrix: Float64Array.from(demand), count },
          arrives,
          covers: 1 + (lasts % (ahead - arrives)),
          inStock: stock,
          onOrder,
          onOrderArrives,
          pack,
          unitCost,
          atLeast: bounds && fewest * pack,
          atMost: bounds && (fewest + bounds[1]) * pack + 0.5,
          spendAtMost: bounds && (fewest + bounds[2]) * pack * unitCost,
          aim:
            chance === null
              ? { kind: 'costs', unitPrice, leftoverValue, goodwill: goodwill / 4 }
              : { kind: 'not-short', chance },
          decided,
        });
      }),
  );

/** The first order that is best, of all from `fewest` to `most` packs. */
function bestOfAll(order: OrderRequest, fewest: number, most: number): number {
  const { aim, pack, paths } = order;
  let best = fewest;
  for (let packs = fewest; packs <= most; packs++) {
    const [found, highest] = [walk(order, packs * pack), walk(order, best * pack)];
    if (aim.kind === 'costs' && found.result > highest.result) best = packs;
    if (aim.kind === 'not-short' && highest.pathsShort > (1 - aim.chance) * paths.count + 1e-9) best = packs;
  }
  return best;
}

describe('every order tried', () => {
  test('the best is the best of all whole packs, of equals the fewest, within bounds and without', () => {
    fc.assert(
      fc.property(wholeRequest, (order) => {
        const { pack, unitCost, atLeast, atMost, spendAtMost } = order;
        const enough = Math.ceil((4 * 900) / pack) + 1;
        const byUnits = atMost === null ? enough : Math.floor(atMost / pack);
        const bySpend = spendAtMost === null ? enough : Math.floor(spendAtMost / ((unitCost as number) * pack));
        const fewest = (atLeast ?? 0) / pack;
        const most = Math.min(byUnits, bySpend);
        const decision = decideOrder(order);
        const unbound = bestOfAll(order, 0, enough);
        expect(decision.unbound.packs).toBe(unbound);
        expect(decision.best.packs).toBe(bestOfAll(order, fewest, most));
        const by = bySpend < byUnits ? 'spend-at-most' : 'at-most';
        expect(decision.heldBy).toBe(unbound < fewest ? 'at-least' : unbound > most ? by : null);
      }),
      { numRuns: 1000 },
    );
  });

  test('outcomes are what walking every path step by step gives', () => {
    fc.assert(
      fc.property(wholeRequest, (order) => {
        const { best, unbound, decided, nearby } = decideOrder(order);
        const { count } = order.paths;
        for (const outcome of [best, unbound, ...nearby, ...(decided === null ? [] : [decided])]) {
          const walked = walk(order, outcome.units);
          expect(outcome.packs * order.pack).toBeCloseTo(outcome.units, 9);
          expect(outcome.cost).toBe((order.unitCost as number) * outcome.units);
          expect(outcome.sales).toBeCloseTo(walked.sales / count, 7);
          expect(outcome.leftOver).toBeCloseTo(walked.leftOver / count, 7);
          expect(outcome.lost).toBeCloseTo(walked.lost / count, 7);
          expect(outcome.chanceShort).toBeCloseTo(walked.pathsShort / count, 12);
          expect(outcome.chanceLeft).toBeCloseTo(walked.pathsLeft / count, 12);
          if (order.aim.kind === 'costs') expect(outcome.result).toBeCloseTo(walked.result / count, 6);
          else expect(outcome.result).toBeNull();
        }
      }),
      { numRuns: 300 },
    );
  });

  test('figures that are not whole, and goods brought back: no whole number of packs does better', () => {
    const demand = fc.double({ min: -20, max: 400, noNaN: true });
    fc.assert(
      fc.property(fc.array(demand, { minLength: 30, maxLength: 30 }), fc.constantFrom(0.1, 1, 7.5), (matrix, pack) => {
        const order = request({
          paths: { matrix: Float64Array.from(matrix), count: 10 },
          covers: 2,
          arrives: 1,
          inStock: 33.3,
          pack,
          unitCost: 11.2,
          aim: { kind: 'costs', unitPrice: 18.5, leftoverValue: 9, goodwill: 0.7 },
        });
        const { best } = decideOrder(order);
        const own = walk(order, best.units).result;
        for (const packs of [best.packs - 1, best.packs + 1, best.packs - 10, best.packs + 10])
          if (packs >= 0) expect(walk(order, packs * pack).result).toBeLessThanOrEqual(own + 1e-7);
      }),
    );
  });
});

describe('before the order arrives', () => {
  // Two paths of three steps. In stock 10, 5 on order for the second step, the order arrives in the third.
  const order = request({
    paths: rows([4, 12], [3, 6], [20, 10]),
    arrives: 2,
    inStock: 10,
    onOrder: 5,
    onOrderArrives: 1,
  });

  test('demand, lost sales and stock by hand', () => {
    // First path: 10 − 4 = 6, 6 + 5 − 3 = 8. Second: 12 wanted of 10, 2 lost; 6 wanted of 5, 1 lost, 0 left.
    const { beforeArrival, stockAtArrival, best } = decideOrder(order);
    expect(beforeArrival).toEqual({ demand: 12.5, lost: 1.5, chanceShort: 0.5 });
    expect(stockAtArrival).toBe(4);
    // Needs of 20 − 8 = 12 and 10, ratio one half: the fewest of equals is 10.
    expect(best.units).toBe(10);
    expect(best.lost).toBe(1);
    // 7 + 15 sold before, 18 + 10 after, at 5; none left; 10 bought at 3.
    expect(best.result).toBe((5 * (7 + 15 + 18 + 10)) / 2 - 30);
  });

  test('null where it is there at once', () => {
    expect(decideOrder(request({})).beforeArrival).toBeNull();
  });

  test('stock beyond all demand: order none', () => {
    const { best, nearby } = decideOrder(request({ inStock: 100 }));
    expect([best.units, best.lost, best.leftOver]).toEqual([0, 0, 97.5]);
    expect(nearby[0].units).toBe(0);
  });
});

describe('bounds that hold the order back', () => {
  const order = request({ paths: normal(1000, 200), pack: 24 });

  test.each([
    [{ atMost: 700 }, 'at-most', 29],
    [{ atLeast: 1100 }, 'at-least', 46],
    [{ spendAtMost: 3000 }, 'spend-at-most', 41],
    [{ spendAtMost: 0 }, 'spend-at-most', 0],
    [{ atMost: 700, spendAtMost: 1400 }, 'spend-at-most', 19],
    [{ atMost: 2000, atLeast: 10, spendAtMost: 1e6 }, null, 42],
  ] as const)('%j', (bounds, heldBy, packs) => {
    // Without bounds the median of demand, 1000, in packs of 24: 41 (984) or 42 (1008), which is nearer.
    const decision = decideOrder({ ...order, ...bounds });
    expect(decision.heldBy).toBe(heldBy);
    expect(decision.best.packs).toBe(packs);
    expect(decision.best.units).toBe(packs * 24);
    expect(decision.unbound.packs).toBe(42);
  });

  test('a chance that the bounds don’t allow: the most allowed', () => {
    const { best, heldBy, unbound } = decideOrder({ ...order, aim: { kind: 'not-short', chance: 0.9 }, atMost: 700 });
    expect([best.packs, heldBy]).toEqual([29, 'at-most']);
    expect(best.chanceShort).toBeGreaterThan(0.1);
    expect(unbound.chanceShort).toBeLessThanOrEqual(0.1);
  });
});

describe('what is shown beside the best', () => {
  test('nearby orders keep to the middle of demand, the bounds and whole packs', () => {
    fc.assert(
      fc.property(wholeRequest, (order) => {
        const { nearby, best } = decideOrder(order);
        const packs = nearby.map((outcome) => outcome.packs);
        expect(packs.length).toBeGreaterThanOrEqual(5);
        expect(packs.length).toBeLessThanOrEqual(7);
        expect(packs).toContain(best.packs);
        expect(packs[0]).toBeGreaterThanOrEqual(0);
        expect(packs.every(Number.isInteger)).toBe(true);
        expect(packs).toEqual([...new Set(packs)].sort((a, b) => a - b));
      }),
    );
  });

  test('the curve rises to the best and falls beyond it', () => {
    const paths = levels((p) => Math.max(3192 + 1000 * normalQuantile(p), 0));
    const { curve, best } = decideOrder(request({ paths, pack: 24 }));
    expect(Math.abs(curve.length - 60)).toBeLessThanOrEqual(1);
    const top = curve.findIndex(({ units }) => units === best.units);
    expect(curve[top].result).toBe(best.result);
    expect(curve[0].units).toBe(0);
    expect(curve[0].result).toBeCloseTo(0, 9);
    expect(curve.at(-1)?.units).toBeGreaterThan(best.units + 2 * 1000);
    // Beyond all demand a unit more loses cost less leftover value, 2.
    const [before, last] = curve.slice(-2);
    expect(((last.result as number) - (before.result as number)) / (last.units - before.units)).toBeCloseTo(-2, 1);
  });

  test('the curve of a stated chance falls from nearly certain to hardly any', () => {
    const { curve } = decideOrder(request({ paths: normal(3192, 500), aim: { kind: 'not-short', chance: 0.9 } }));
    expect(curve[0].chanceShort).toBeGreaterThan(0.99);
    expect(curve.at(-1)?.chanceShort).toBeLessThan(0.01);
    expect(curve.every(({ result }) => result === null)).toBe(true);
  });
});
