/** What was judged, ordered and budgeted: the parts of a record that hold the planner's decisions and their sums. */
import { z } from 'zod';

const number = z.number();
const missable = number.nullable();
const count = z.int().min(0);
const period = z.string();
const share = number.min(0).max(1);

/** What the planner changes in the outlook, and why. */
export const judgementEntry = z.strictObject({
  what: z.string(),
  from: period,
  /** Null: to the end of the outlook. */
  to: period.nullable(),
  /** Per cent, or units in each period. */
  change: z.strictObject({ kind: z.enum(['percent', 'amount']), value: number }),
  because: z.string(),
});

/** What the plan asks of an order. Quantities in the series' unit, money in the plan's currency. */
export const orderAsked = z.strictObject({
  /** Periods that the order must last, from its arrival, and periods until it arrives. */
  covers: count,
  arrives: count,
  unitCost: missable,
  aim: z.discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('costs'), unitPrice: number, leftoverValue: number, goodwill: number }),
    z.strictObject({ kind: z.literal('not-short'), chance: share }),
  ]),
  inStock: number,
  onOrder: number,
  onOrderArrives: count,
  pack: number,
  atLeast: missable,
  atMost: missable,
  spendAtMost: missable,
  /** What the planner ordered instead, in units, and why. */
  decided: z.strictObject({ units: number, because: z.string() }).nullable(),
});

/** What to expect of an order of some size; sales, left over and lost over the periods covered. */
const outcome = z.strictObject({
  packs: number,
  units: number,
  cost: missable,
  sales: number,
  leftOver: number,
  lost: number,
  /** Money, from now to the end of the periods covered; null where the aim is a chance. */
  result: missable,
  chanceShort: share,
  chanceLeft: share,
});

export const purchase = z.strictObject({
  asked: orderAsked,
  /** The first and last period that the order covers. */
  span: z.tuple([period, period]),
  /** Money a unit, and the critical ratio; null where the aim is a chance. */
  shortCost: missable,
  leftOverCost: missable,
  ratio: missable,
  /** Demand over the periods covered; `target` is its quantile at the ratio or the chance. */
  demand: z.strictObject({ expected: number, middle: number, range80: z.tuple([number, number]), target: number }),
  /** Before the order arrives; null where it is there at once. */
  beforeArrival: z.strictObject({ demand: number, lost: number, chanceShort: share }).nullable(),
  stockAtArrival: number,
  best: outcome,
  /** The best without the plan's bounds, and the bound that keeps `best` from it. */
  unbound: outcome,
  heldBy: z.enum(['at-least', 'at-most', 'spend-at-most']).nullable(),
  decided: outcome.nullable(),
  nearby: z.array(outcome),
  curve: z.array(z.strictObject({ units: number, result: missable, chanceShort: share })),
  /** Decimal places (negative: tens, hundreds) that expected units and expected results are printed to. */
  printed: z.strictObject({ units: z.int(), result: z.int() }),
});

/** What the plan asks of a budget. */
export const budgetAsked = z.strictObject({
  kind: z.enum(['income', 'spending']),
  /** Money a unit, each amount from its period on; the first also before. */
  perUnit: z.array(z.strictObject({ from: period.nullable(), amount: number })).min(1),
  /** Periods from the sale or use until the money moves. */
  paidAfter: count,
});

/** Money: its quantile at 10%, its mean, its quantile at 90%, and the chance of more than each. */
export const lineFigures = z.strictObject({
  low: number,
  expected: number,
  high: number,
  chanceAboveLow: share,
  chanceAboveExpected: share,
  chanceAboveHigh: share,
});

export const budgetTotal = lineFigures.extend({
  kind: z.enum(['ahead', 'reporting-year', 'calendar-year']),
  /** The year that it is, or starts in; null for all periods ahead. */
  year: z.int().nullable(),
  periods: z.array(period),
  /** The money in it that has already happened. */
  known: number,
});

const moneyRange = z.strictObject({ low: number, expected: number, high: number });

/** Money as it is printed, a row a period and a row a total, in their order; what is expected adds up. */
export const printedMoney = z.strictObject({
  places: count,
  periods: z.array(moneyRange),
  totals: z.array(moneyRange),
});

export const budget = z.strictObject({
  asked: budgetAsked,
  periods: z.array(lineFigures.extend({ period, perUnit: number })),
  totals: z.array(budgetTotal),
  printed: printedMoney,
});

export type LineFigures = z.infer<typeof lineFigures>;
