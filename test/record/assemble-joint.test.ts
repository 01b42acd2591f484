/** Several budgets as one: totals and cash against hand arithmetic, the lists for spreadsheets. */
import { parse } from 'csv-parse/sync';
import { describe, expect, test } from 'vitest';
import { assembleWithMoney } from '../../src/record/assemble.js';
import { assembleCover } from '../../src/record/assemble-cover.js';
import type { Money } from '../../src/record/assemble-decisions.js';
import { budgetCsv, ordersCsv } from '../../src/record/cover-csv.js';
import { briefInputs } from '../../src/record/inputs.js';
import type { BriefRecord } from '../../src/record/record.js';
import { createGenerator } from '../../src/stats/generator.js';
import { figures, planned } from './planned.js';

/** Ten years of quarters to 2026-Q2 with a season, and surprises of their own or another's. */
function series(seed: number, sign = 1) {
  const { normal } = createGenerator(seed);
  return Array.from({ length: 40 }, (_, t) => 300 + 60 * [-1, 0.4, 1, -0.4][t % 4] + sign * 10 * normal());
}

interface Made {
  readonly record: BriefRecord;
  readonly money: Money | null;
}

function make(name: string, values: readonly number[], more: string, ahead = 4): Made {
  const { plan, series: one } = planned({ model: '(0,0,0)x(0,1,1)4', ahead, more });
  const named = { ...one, name, slug: name.toLowerCase().replace(/\W+/g, '-') };
  const own = { ...figures(values), start: '2016-Q3' };
  return assembleWithMoney(briefInputs(plan, named, own, '0'.repeat(64)), {
    version: '0.1.0',
    folder: '2026-10-05',
  });
}

function cover(...made: readonly Made[]) {
  const money = new Map(made.map((each) => [each.record.brief, each.money]));
  const briefs = made.map(({ record }) => ({ record, sha256: 'a'.repeat(64) }));
  return assembleCover('2026-10-05', briefs[0].record.plan, briefs[0].record.software, briefs, ({ brief }) => {
    const own = money.get(brief);
    if (own === undefined || own === null) throw new Error(`${brief} has no money`);
    return own;
  });
}

const INCOME = '    budget: { price: 2 }\n';
const width = ({ low, high }: { low: number; high: number }) => high - low;

describe('ranges of totals', () => {
  const one = series(1);
  const a = make('A', one, INCOME);
  const widthsOf = (...made: Made[]) => {
    const budget = cover(...made).budget;
    return budget?.periods.map(({ income }) => (income === null ? 0 : width(income))) ?? [];
  };
  const own = a.record.budget?.periods.map(width) ?? [];

  test('of one series they are its own', () => {
    expect(cover(a).budget?.periods.map(({ income }) => income)).toEqual(
      a.record.budget?.periods.map(({ period, perUnit, ...figures }) => figures),
    );
  });

  test('of a series and its twin they add; with a stranger they are narrower than that', () => {
    const twins = widthsOf(a, make('B', one, INCOME));
    twins.forEach((each, h) => {
      // Shrunk by λ = 0, as r is 1: the sum's range is the sum of the ranges.
      expect(each / (2 * own[h])).toBeCloseTo(1, 3);
    });
    const b = make('B', series(2), INCOME);
    const strangers = widthsOf(a, b);
    strangers.forEach((each, h) => {
      const other = width(b.record.budget?.periods[h] ?? { low: 0, high: 0 });
      expect(each).toBeLessThan(0.85 * (own[h] + other));
      // Student's tails: a root of the sum of squares but for a few per cent.
      expect(Math.abs(each / Math.hypot(own[h], other) - 1)).toBeLessThan(0.12);
    });
  });

  test('of a series and its mirror image they all but cancel', () => {
    const mirrored = widthsOf(a, make('B', series(1, -1), INCOME));
    mirrored.forEach((each, h) => {
      expect(each).toBeLessThan(0.05 * own[h]);
    });
  });

  test('what is expected is the sum of what the series expect', () => {
    const b = make('B', series(2), INCOME);
    const budget = cover(a, b).budget;
    budget?.periods.forEach(({ income }, h) => {
      const sum = (a.record.budget?.periods[h].expected ?? 0) + (b.record.budget?.periods[h].expected ?? 0);
      expect(income?.expected).toBeCloseTo(sum, 6);
    });
  });
});

test('income less spending: the net is what is left of the means, and has a range of its own', () => {
  const earned = make('A', series(1), INCOME);
  const spent = make('B', series(2), '    budget: { cost: 1 }\n');
  const budget = cover(earned, spent).budget;
  budget?.periods.forEach(({ income, spending, net }) => {
    expect(net?.expected).toBeCloseTo((income?.expected ?? 0) - (spending?.expected ?? 0), 6);
    expect(width(net ?? { low: 0, high: 0 })).toBeGreaterThan(width(income ?? { low: 0, high: 0 }));
  });
});

test('cash adds up what has moved by each period: late receipts, prompt payments, the order as it arrives', () => {
  const values = series(1);
  const earned = make('A', values, '    budget: { price: 2, paid-after: 1 }\n');
  const spent = make('B', series(2), '    budget: { cost: 1 }\n');
  const ordered = make(
    'C',
    series(3),
    '    purchase: { covers: 1, arrives: 1, not-short: 90%, unit-cost: 4, in-stock: 0, decided: 50, because: x }\n',
  );
  const budget = cover(earned, spent, ordered).budget;
  const [income, cost] = [earned, spent].map(
    ({ record }) => record.budget?.periods.map(({ expected }) => expected) ?? [],
  );
  // The first receipt is for the last figure known.
  const received = [2 * values[39], income[0], income[1], income[2]];
  let cash = 0;
  budget?.cash?.periods.forEach(({ expected, cautious }, h) => {
    cash += received[h] - cost[h] - (h === 1 ? 50 * 4 : 0);
    expect(expected).toBeCloseTo(cash, 6);
    expect(cautious).toBeLessThan(expected);
  });
  const lowest = Math.min(...(budget?.cash?.periods.map(({ cautious }) => cautious) ?? []));
  expect(budget?.cash?.lowest.cautious).toBe(lowest);
  expect(budget?.cash?.hasUnknown).toBe(false);
});

test('no cash line where nothing is paid out; a series that looks further ahead is named and left out', () => {
  const longer = make('Long', series(4), INCOME, 6);
  const budget = cover(make('A', series(1), INCOME), longer).budget;
  expect(budget?.cash).toBeNull();
  expect(budget?.apart).toEqual(['Long']);
  expect(budget?.series).toEqual(['2026-10-05/a']);
  expect(cover(make('A', series(1), '')).budget).toBeNull();
});

describe('lists for a spreadsheet', () => {
  const PURCHASE = '    purchase: { covers: 1, not-short: 90%, unit-cost: 0.03, in-stock: 0, pack: 10 }\n';

  test('the order list: whole packs, their cost, and names that are no formulas', () => {
    const made = make('=cmd()|A1', series(1), PURCHASE);
    const [row] = parse(ordersCsv(cover(made)) ?? '', { columns: true }) as Record<string, string>[];
    const best = made.record.purchase?.best;
    expect(row).toMatchObject({
      item: "'=cmd()|A1",
      packs: String(best?.packs),
      units: String(10 * (best?.packs ?? 0)),
      unit_cost: '0.03',
      cost: String(Number((0.3 * (best?.packs ?? 0)).toFixed(2))),
      currency: 'GBP',
      there_by: '2026-Q3',
    });
    expect(ordersCsv(cover(make('A', series(1), '')))).toBeNull();
  });

  test('the budget: each series’ rows, then all together', () => {
    const made = [make('A', series(1), INCOME), make('B', series(2), INCOME)];
    const rows = parse(
      budgetCsv(
        cover(...made),
        made.map(({ record }) => record),
      ) ?? '',
      { columns: true },
    ) as Record<string, string>[];
    const over = (name: string) => rows.filter((row) => row.series === name && row.over === '2026-Q3');
    const [a, b, all] = ['A', 'B', 'all together'].map((name) => Number(over(name)[0]?.expected));
    expect(all).toBeCloseTo(a + b, 1);
    expect(over('A')[0]).toMatchObject({ kind: 'income', per_unit: '2', currency: 'GBP' });
  });
});
