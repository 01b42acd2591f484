/** Judgement, order and budget as the record holds them, against arithmetic on the outlook they come from. */
import { describe, expect, test } from 'vitest';
import { assemble, assembleWithMoney, moneyOfRecord } from '../../src/record/assemble.js';
import { canonicalJson } from '../../src/record/canonical.js';
import { briefInputs, inputsOfRecord } from '../../src/record/inputs.js';
import { planFaults } from '../../src/record/plan-faults.js';
import { figures, planned } from './planned.js';

const values = Array.from({ length: 20 }, (_, t) =>
  Math.round(200 + t / 3 + 80 * Math.sin((t * Math.PI) / 2) + 9 * Math.sin(t * t)),
);
// Five years from 2021-Q3 on: the last figure is that of 2026-Q2.
const quarters = { ...figures(values), start: '2021-Q3' };
const inputs = (more: string, yearStarts = 1) => {
  const { plan, series } = planned({ model: '(0,1,1)x(0,1,1)4', more });
  return briefInputs({ ...plan, yearStarts }, series, quarters, '0'.repeat(64));
};
const record = (more: string, yearStarts = 1) => assemble(inputs(more, yearStarts), { version: '0.1.0', folder: 'x' });

const JUDGED = `    judgement:
      - { what: A second slip, from: 2026-Q4, to: 2027-Q1, change: +10%, because: It is paid for }
      - { what: A fair, from: 2027-Q1, change: -20, because: It moves away }
`;

describe('judgement', () => {
  const alone = record('');
  const judged = record(JUDGED);

  test('changes the outlook from its period on, and keeps what the figures alone say', () => {
    expect(judged.judgement?.alone.periods).toEqual(alone.outlook.periods);
    expect(judged.judgement?.alone.totals).toEqual(alone.outlook.totals);
    const before = alone.outlook.periods.map(({ expected }) => expected);
    const expected = [before[0], 1.1 * before[1], 1.1 * before[2] - 20, before[3] - 20];
    judged.outlook.periods.forEach((period, h) => {
      expect(period.expected).toBeCloseTo(expected[h], 6);
    });
    // What is not the outlook's is not touched: the sum explains the figures alone.
    expect(judged.equation.workedSum).toEqual(alone.equation.workedSum);
    expect(judged.trackRecord).toEqual(alone.trackRecord);
  });

  test('prints two columns that add up to the brief’s own numbers', () => {
    const { printed } = judged.judgement ?? { printed: null };
    printed?.periods.forEach(({ alone: told, added }, h) => {
      expect(told + added).toBeCloseTo(judged.printed.periods[h].expected, 9);
    });
    expect((printed?.total.alone ?? 0) + (printed?.total.added ?? 0)).toBeCloseTo(judged.printed.total.expected, 9);
    expect(printed?.total.alone).toBeCloseTo(printed?.periods.reduce((sum, row) => sum + row.alone, 0) ?? 0, 9);
  });

  test('is among the caveats, and the same record comes of it again', () => {
    expect(judged.facts.caveats.map(({ id }) => id)).toContain('judgement');
    const again = assemble(inputsOfRecord(judged), { version: '0.1.0', folder: 'x' });
    expect(canonicalJson(again)).toBe(canonicalJson(judged));
  });

  test('outside the outlook it is refused', () => {
    const faults = (more: string) => {
      const { plan, series } = planned({ more: `    judgement:\n      - ${more}\n` });
      return planFaults(plan, series, quarters).map(({ message }) => message);
    };
    expect(faults('{ what: A fair, from: 2026-Q2, change: +5, because: x }')[0]).toMatch(
      /judgement "A fair" lies outside the outlook, which runs from 2026-Q3 to 2027-Q2/,
    );
    expect(faults('{ what: A fair, from: 2026-Q4, to: 2027-Q3, change: +5, because: x }')).toHaveLength(1);
    expect(faults('{ what: A fair, from: 2026-10, change: +5, because: x }')[0]).toMatch(/"2026-10" is not a period/);
  });
});

const PURCHASE = `    purchase:
      { covers: 2, arrives: 1, unit-cost: 3, unit-price: 5, leftover-value: 2, in-stock: 150, pack: 10 }
`;

describe('the order', () => {
  test('is for the periods after its arrival, from the same paths as the ranges', () => {
    const { purchase, outlook } = record(PURCHASE);
    expect(purchase?.span).toEqual(['2026-Q4', '2027-Q1']);
    expect(purchase?.ratio).toBeCloseTo(2 / 3, 12);
    const [, first, second] = outlook.periods;
    expect(purchase?.demand.expected).toBeCloseTo(first.expected + second.expected, 6);
    expect(purchase?.beforeArrival?.demand).toBeCloseTo(outlook.periods[0].expected, 6);
    const { units, packs, cost } = purchase?.best ?? { units: 0, packs: 0, cost: 0 };
    expect([units, cost]).toEqual([10 * packs, 30 * packs]);
  });

  test('takes the planner’s judgement into account, and keeps what was decided instead', () => {
    const more = `${JUDGED}${PURCHASE.replace('pack: 10', 'pack: 10, decided: 40 packs, because: They come by the pallet')}`;
    const judged = record(more);
    const plain = record(PURCHASE);
    const change =
      judged.outlook.periods[1].expected + judged.outlook.periods[2].expected - (plain.purchase?.demand.expected ?? 0);
    expect((judged.purchase?.demand.expected ?? 0) - (plain.purchase?.demand.expected ?? 0)).toBeCloseTo(change, 6);
    expect(judged.purchase?.decided?.units).toBe(400);
    expect(judged.purchase?.asked.decided?.because).toBe('They come by the pallet');
  });

  test('one that runs short often is warned of', () => {
    const few = record(PURCHASE.replace('pack: 10', 'pack: 10, decided: 5, because: Little room'));
    expect(few.facts.caveats[0]?.id).toBe('short-order');
    expect(record(PURCHASE).facts.caveats.map(({ id }) => id)).toContain('short-order');
    const many = record(PURCHASE.replace('pack: 10', 'pack: 10, decided: 900, because: Much room'));
    expect(many.facts.caveats.map(({ id }) => id)).not.toContain('short-order');
  });
});

describe('the budget', () => {
  const BUDGET = '    budget: { price: { 2026-Q3: 2, 2027-Q1: 3 }, paid-after: 1 }\n';

  test('is each period’s price times its units, and a year adds what has happened', () => {
    const { budget, outlook } = record(BUDGET);
    expect(budget?.periods.map(({ perUnit }) => perUnit)).toEqual([2, 2, 3, 3]);
    outlook.periods.forEach(({ expected, range80 }, h) => {
      const { perUnit, ...line } = budget?.periods[h] ?? { perUnit: 0, expected: 0, low: 0, high: 0 };
      expect(line.expected).toBeCloseTo(perUnit * expected, 6);
      expect([line.low, line.high]).toEqual(range80.map((end) => expect.closeTo(perUnit * end, 6)));
    });
    const [ahead, year] = budget?.totals ?? [];
    expect(ahead.expected).toBeCloseTo(budget?.periods.reduce((sum, { expected }) => sum + expected, 0) ?? 0, 6);
    // 2026-Q1 and 2026-Q2 are known, at the first price; 2027 is not covered.
    expect(year).toMatchObject({ kind: 'reporting-year', year: 2026, known: 2 * (values[18] + values[19]) });
    expect(year.expected).toBeCloseTo(
      year.known + (budget?.periods[0].expected ?? 0) + (budget?.periods[1].expected ?? 0),
      6,
    );
  });

  test('tells calendar years apart from reporting years that begin in another month', () => {
    const kinds = record(BUDGET, 7).budget?.totals.map(({ kind, year }) => [kind, year]);
    // 2026-Q3 of a year that begins in July is January to March 2027; four quarters on from there are 2027.
    expect(kinds).toEqual([
      ['ahead', null],
      ['reporting-year', 2026],
      ['calendar-year', 2027],
    ]);
    const april = record(BUDGET, 4).budget?.totals.map(({ kind, year }) => [kind, year]);
    // 2026-Q3 is October to December 2026; the calendar year 2026 is 2025-Q4 to 2026-Q3.
    expect(april).toEqual([
      ['ahead', null],
      ['reporting-year', 2026],
      ['calendar-year', 2026],
    ]);
  });

  test('its money is computed again from the record alone', () => {
    const { record: made, money } = assembleWithMoney(inputs(BUDGET), { version: '0.1.0', folder: 'x' });
    expect(moneyOfRecord(made)).toEqual(money);
    expect(money?.before).toEqual([2 * values[19]]);
  });

  test('printed rows add up to the printed total', () => {
    const { printed, totals } = record(BUDGET).budget ?? { printed: null, totals: [] };
    const all = totals.findIndex(({ kind }) => kind === 'ahead');
    expect(printed?.totals[all].expected).toBeCloseTo(
      printed?.periods.reduce((sum, { expected }) => sum + expected, 0) ?? 0,
      6,
    );
  });
});
