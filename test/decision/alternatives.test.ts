import { describe, expect, test } from 'vitest';
import { curveUnits, nearbyPacks } from '../../src/decision/alternatives.js';

const unbounded = { fewest: 0, most: Number.POSITIVE_INFINITY, mostBy: 'at-most' } as const;

describe('neighbours of the best', () => {
  test.each([
    // A sixth of the width, rounded down to 1, 2 or 5 with noughts, is the step.
    ['pack 1 and demand about 1240', 1240, 600, 0, 9999, [940, 1040, 1140, 1240, 1340, 1440, 1540]],
    ['a width of 1.3 thousand: 200 apart', 1240, 1300, 0, 9999, [640, 840, 1040, 1240, 1440, 1640, 1840]],
    ['large packs: one apart', 3, 2, 0, 9999, [0, 1, 2, 3, 4, 5, 6]],
    ['none is the best: four more', 0, 60, 0, 9999, [0, 10, 20, 30, 40]],
    ['less than a step above none', 4, 60, 0, 9999, [0, 4, 14, 24, 34]],
    ['demand that is known', 7, 0, 0, 9999, [4, 5, 6, 7, 8, 9, 10]],
    ['held at the most', 29, 20, 0, 29, [21, 23, 25, 27, 29]],
    ['between close bounds: a step that leaves five', 15, 600, 10, 30, [10, 15, 20, 25, 30]],
  ])('%s', (_, best, width, fewest, most, packs) => {
    expect(nearbyPacks(best, width, { fewest, most, mostBy: 'at-most' })).toEqual(packs);
  });

  test('beyond bounds that hold fewer than five whole packs', () => {
    expect(nearbyPacks(10, 12, { fewest: 10, most: 12, mostBy: 'at-most' })).toEqual([4, 6, 8, 10, 12, 14, 16]);
  });

  test('a bound on the way is shown', () => {
    expect(nearbyPacks(50, 60, { ...unbounded, fewest: 27, most: 73 })).toEqual([27, 30, 40, 50, 60, 70, 73]);
  });
});

describe('the curve', () => {
  const need = Float64Array.from({ length: 100 }, (_, k) => 1_000_000 + k);

  test('runs from before to after what is shown and needed, the best among its points', () => {
    const units = curveUnits(1_000_050, [1_000_050, 1_000_120], need);
    expect(units).toContain(1_000_050);
    expect(units).toEqual([...units].sort((a, b) => a - b));
    expect(units[0]).toBeGreaterThan(999_900);
    expect(units[0]).toBeLessThan(1_000_000);
    expect(units.at(-1)).toBeGreaterThan(1_000_120);
  });

  test('never starts below none', () => {
    expect(curveUnits(3, [3, 200], Float64Array.of(0, 0, 5))[0]).toBe(0);
  });
});
