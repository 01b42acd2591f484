/** What a purchase, a budget and a judgement may say, and how what they may not say is refused. */
import { describe, expect, test } from 'vitest';
import { checkModel } from '../../src/commands/check-model.js';
import { InputError } from '../../src/figures/input-error.js';
import { parsePlan } from '../../src/plan/plan.js';

const plan = (part: string, lines: readonly string[], top = 'currency: GBP') =>
  parsePlan(
    `heading: Stores
prepared-for: Saltmarsh Boatyard
issued: 2026-10-05
${top}
ahead: 4
figures:
  file: figures.csv
  period: quarter
  every: quarter
series:
  - name: Paint
    column: paint
    unit: litres
    model: (0,1,1)x(0,1,1)4
    ${part}:
${lines.map((line) => `      ${line}\n`).join('')}`,
    'plan.yaml',
    checkModel,
  ).series[0];

const COSTS = ['unit-cost: 11.20', 'unit-price: 18.50', 'leftover-value: 9'];
const purchase = (...lines: string[]) => plan('purchase', ['covers: 2', 'in-stock: 120', ...lines]).purchase;

const faults = (make: () => unknown): string => {
  try {
    make();
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error('was not refused');
};

test('an order by costs has every default', () => {
  expect(purchase(...COSTS)).toMatchObject({
    covers: 2,
    arrives: 0,
    unitCost: 11.2,
    aim: { kind: 'costs', unitPrice: 18.5, leftoverValue: 9, goodwill: 0 },
    onOrder: 0,
    onOrderArrives: 0,
    pack: 1,
    atLeast: null,
    atMost: null,
    spendAtMost: null,
    decided: null,
  });
});

test.each([
  ['90%', 0.9],
  ['9 in 10', 0.9],
  ['97.5%', 0.975],
])('a chance may be written %s', (typed, chance) => {
  expect(purchase(`not-short: ${typed}`)?.aim).toEqual({ kind: 'not-short', chance });
});

test.each([
  ['12 packs', 288],
  ['1 pack', 24],
  ['300', 300],
  ['0', 0],
])('a decision may be written %s', (typed, units) => {
  expect(purchase('not-short: 90%', 'pack: 24', `decided: ${typed}`, 'because: They had no more')?.decided).toEqual({
    units,
    because: 'They had no more',
  });
});

test('an order that aims at a chance needs no currency', () => {
  expect(plan('purchase', ['covers: 2', 'in-stock: 0', 'not-short: 90%'], 'locale: en-GB').purchase).not.toBeNull();
  expect(faults(() => plan('purchase', ['covers: 2', 'in-stock: 0', ...COSTS], 'locale: en-GB'))).toMatch(/currency/);
});

describe('what can’t be decided is refused with its place and a remedy', () => {
  test.each<[string[], RegExp]>([
    [[], /plan\.yaml:15:5 series "Paint": purchase lacks unit-cost, unit-price, leftover-value; .*not-short: 90%/],
    [['unit-cost: 11.20'], /purchase lacks unit-price, leftover-value/],
    [['not-short: 90%', 'unit-price: 18.50'], /plan\.yaml:19:19 .*unit-price "18\.50" stands beside not-short/],
    [['not-short: 90%', 'goodwill: 2'], /goodwill "2" stands beside not-short/],
    [['not-short: 110%'], /not-short "110%" should lie between 0% and 100%/],
    [['not-short: often'], /not-short "often" should be a chance such as 90% or 9 in 10/],
    [['unit-cost: 11', 'unit-price: 10', 'leftover-value: 1'], /unit-price "10" is not above the unit cost of 11/],
    [
      ['unit-cost: 11', 'unit-price: 8', 'goodwill: 2', 'leftover-value: 1'],
      /unit-price "8" with goodwill 2 is not above the unit cost of 11, so the best order would be none/,
    ],
    [['unit-cost: 11', 'unit-price: 20', 'leftover-value: 11'], /leftover-value "11" is not below .* have no bound/],
    [[...COSTS, 'arrives: 3'], /covers "2" from an arrival 3 ahead is more than the 4 periods/],
    [[...COSTS, 'on-order: 10', 'on-order-arrives: 2'], /on-order-arrives "2" is after the 2 periods/],
    [[...COSTS, 'at-least: 60', 'at-most: 40'], /at-least "60" is above at-most, 40/],
    [[...COSTS, 'pack: 24', 'at-least: 30', 'at-most: 40'], /no whole number of packs of 24 between them/],
    [
      [...COSTS, 'pack: 24', 'at-least: 30', 'spend-at-most: 500'],
      /does not pay for the least order, which costs 537\.6/,
    ],
    [['not-short: 90%', 'spend-at-most: 500'], /spend-at-most "500" needs the unit cost/],
    [[...COSTS, 'decided: 12 packs'], /decided "12 packs" stands without because/],
    [[...COSTS, 'because: We say so'], /because "We say so" explains nothing/],
    [[...COSTS, 'decided: a dozen', 'because: x'], /decided "a dozen" should be a number of packs or units/],
    [[...COSTS, 'in-stock: 5'], /in-stock/],
  ])('%j', (lines, expected) => {
    expect(faults(() => purchase(...lines))).toMatch(expected);
  });

  test('negative stock, a pack of nothing, an unknown key with the nearest known one', () => {
    const text = faults(() => plan('purchase', ['covers: 2', 'in-stock: -1', 'pack: 0', 'at-leest: 4', ...COSTS]));
    expect(text).toMatch(/in-stock "-1" is below zero/);
    expect(text).toMatch(/pack "0" should be above zero/);
    expect(text).toMatch(/at-leest.*at-least/);
  });
});

describe('a budget', () => {
  test('one price, or a price from each period on, in the order of the periods', () => {
    expect(plan('budget', ['price: 18.50']).budget).toMatchObject({
      kind: 'income',
      perUnit: [{ from: null, amount: 18.5 }],
      paidAfter: 0,
    });
    expect(plan('budget', ['cost:', '  2027-Q2: 4', '  2026-Q4: 3', 'paid-after: 1']).budget).toMatchObject({
      kind: 'spending',
      perUnit: [
        { from: '2026-Q4', amount: 3 },
        { from: '2027-Q2', amount: 4 },
      ],
      paidAfter: 1,
    });
  });

  test.each<[string[], RegExp]>([
    [['price: 3', 'cost: 2'], /either a price .* or a cost/],
    [['paid-after: 1'], /either a price .* or a cost/],
    [['price: dear'], /price "dear" should be an amount/],
    [['price:', '  soon: 4'], /price .*should be an amount/],
  ])('%j', (lines, expected) => {
    expect(faults(() => plan('budget', lines))).toMatch(expected);
  });
});
