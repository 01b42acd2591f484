/**
 * The budgets of several series as one, with a range that takes account of how the series move together.
 *
 *   money of each series -> correlations of their surprises -> joint draws -> lines, totals, cash
 */
import { periodIndex } from '../calendar/calendar.js';
import { cashLow, lineFigures } from '../decision/budget.js';
import { jointDraws, jointSum, residualCorrelations } from '../decision/joint.js';
import { placesFor } from '../explain/printed.js';
import { seedOf } from '../stats/generator.js';
import { mean } from '../stats/sample.js';
import { type Money, printedBudget } from './assemble-decisions.js';
import type { CoverRecord } from './cover.js';
import { currencyPlaces } from './money.js';
import type { BriefRecord } from './record.js';

/** A series that has a budget: its record, and its money on every path. */
export interface Budgeted {
  readonly record: BriefRecord;
  readonly money: Money;
}

/**
 * Null where no series has a budget. Series that look ahead over other periods than the first one does are named, and
 * left out of the sums. `orders`: the records whose orders are paid for from the same cash.
 */
export function jointBudget(
  issued: string,
  budgeted: readonly Budgeted[],
  orders: readonly BriefRecord[],
): CoverRecord['budget'] {
  const [model] = budgeted;
  if (model === undefined) return null;
  const periods = periodsOf(model.record);
  const joined = budgeted.filter(({ record }) => periodsOf(record).join() === periods.join());
  const sides = joined.map(({ record }) => sideOf(record));
  const { matrix, lambda } = residualCorrelations(alignedResiduals(joined.map(({ record }) => record)));
  const seed = seedOf(`${issued}/cover`);
  const count = model.record.outlook.paths;
  const draws = jointDraws(matrix, joined.map(spreadOf), count, seed);
  const lines = linesOf(model.record);
  const rows = lines.map((line) => joined.map((each) => sumOver(each, line.steps, knownOf(each.record, line.label))));
  const figures = (row: readonly Float64Array[], wanted: (side: number) => boolean, sign: 1 | -1) => {
    const chosen = sides.flatMap((side, s) => (wanted(side) ? [s] : []));
    if (chosen.length === 0) return null;
    const sum = jointSum(
      chosen.map((s) => draws[s]),
      chosen.map((s) => row[s]),
      chosen.map((s) => (sign === 1 ? 1 : sides[s])),
    );
    return lineFigures({ matrix: sum, count }, [{ steps: [0], known: 0 }])[0];
  };
  const isMixed = new Set(sides).size > 1;
  const shown = lines.map((line, i) => ({
    ...line.label,
    income: figures(rows[i], (side) => side === 1, 1),
    spending: figures(rows[i], (side) => side === -1, 1),
    net: isMixed ? figures(rows[i], () => true, -1) : null,
  }));
  const size = joined.length;
  const [shownPeriods, shownTotals] = [shown.slice(0, periods.length), shown.slice(periods.length)];
  const { currency } = model.record.plan;
  const printed = (kind: 'income' | 'spending' | 'net') => {
    const rows = shownPeriods.flatMap((line) => line[kind] ?? []);
    const totals = shownTotals.flatMap((line) =>
      line[kind] === null ? [] : [{ ...line[kind], kind: line.kind ?? '' }],
    );
    return rows.length === 0 ? null : printedBudget(rows, totals, currency);
  };
  const cash = cashOf(joined, sides, draws, paidOrders(orders, periods));
  return {
    seed,
    lambda,
    correlations: Array.from({ length: size }, (_, s) => Array.from(matrix.subarray(s * size, (s + 1) * size))),
    series: joined.map(({ record }) => record.brief),
    apart: budgeted.filter((each) => !joined.includes(each)).map(({ record }) => record.series.name),
    periods: shownPeriods.map(({ kind, year, ...rest }, step) => ({ period: periods[step], ...rest })),
    totals: shownTotals.map(({ kind, year, ...rest }) => ({
      kind: kind ?? 'ahead',
      year,
      isPartKnown: joined.some(({ record }) => knownOf(record, { kind, year }) !== 0),
      ...rest,
    })),
    printed: {
      income: printed('income'),
      spending: printed('spending'),
      net: printed('net'),
      cash: cashPlaces(cash, currencyPlaces(currency)),
    },
    cash,
  };
}

const periodsOf = ({ outlook }: BriefRecord): string[] => outlook.periods.map(({ period }) => period);

/** What its money counts for in cash. */
const sideOf = ({ budget }: BriefRecord): 1 | -1 => (budget?.asked.kind === 'spending' ? -1 : 1);

/** One row a series, one column a period from the first of any to the last. */
function alignedResiduals(records: readonly BriefRecord[]): (number | null)[][] {
  const starts = records.map(({ figures, series }) => periodIndex(figures.start, series.every));
  const first = Math.min(...starts);
  const end = Math.max(...records.map(({ figures }, s) => starts[s] + figures.values.length));
  return records.map(({ fit }, s) =>
    Array.from({ length: end - first }, (_, i) => fit.standardizedResiduals[first + i - starts[s]] ?? null),
  );
}

/** The standard deviation of a series' money over all periods ahead: the draws are to lie evenly along their sum. */
function spreadOf(budgeted: Budgeted): number {
  const sums = sumOver(budgeted, [...budgeted.record.outlook.periods.keys()], 0);
  const centre = mean(sums);
  return Math.sqrt(mean(sums.map((sum) => (sum - centre) ** 2)));
}

function sumOver({ record, money }: Budgeted, steps: readonly number[], known: number): Float64Array {
  const count = record.outlook.paths;
  const sum = new Float64Array(count).fill(known);
  for (const step of steps) for (let i = 0; i < count; i++) sum[i] += money.amounts[step * count + i];
  return sum;
}

type Label = { readonly kind: BudgetTotal['kind'] | null; readonly year: number | null };
type BudgetTotal = NonNullable<BriefRecord['budget']>['totals'][number];

interface Line {
  readonly label: Label;
  readonly steps: readonly number[];
}

/** A line for each period ahead, then one for each total that the series' own budgets have. */
function linesOf({ budget, outlook }: BriefRecord): Line[] {
  const at = new Map(outlook.periods.map(({ period }, step) => [period, step]));
  return [
    ...outlook.periods.map((_, step) => ({ label: { kind: null, year: null }, steps: [step] })),
    ...(budget?.totals ?? []).map(({ kind, year, periods }) => ({
      label: { kind, year },
      steps: periods.map((period) => at.get(period) ?? 0),
    })),
  ];
}

/** The money of a line that has already happened; nothing where the series' own budget can't tell. */
const knownOf = ({ budget }: BriefRecord, label: Label): number =>
  budget?.totals.find(({ kind, year }) => kind === label.kind && year === label.year)?.known ?? 0;

/** By step, what is paid for orders that stand in no spending budget of their own. */
function paidOrders(orders: readonly BriefRecord[], periods: readonly string[]): number[] {
  const paid = periods.map(() => 0);
  for (const { purchase, budget } of orders) {
    const cost = (purchase?.decided ?? purchase?.best)?.cost ?? 0;
    const step = periods.indexOf(purchase?.span[0] ?? '');
    if (step >= 0 && budget?.asked.kind !== 'spending') paid[step] += cost;
  }
  return paid;
}

/** Cash from nothing in hand at the start; null where nothing is paid out. */
function cashOf(
  joined: readonly Budgeted[],
  sides: readonly (1 | -1)[],
  draws: readonly Uint32Array[],
  paid: readonly number[],
): NonNullable<CoverRecord['budget']>['cash'] {
  if (!sides.includes(-1) && paid.every((cost) => cost === 0)) return null;
  const periods = periodsOf(joined[0].record);
  const count = joined[0].record.outlook.paths;
  const cumulated = new Float64Array(periods.length * count);
  let orders = 0;
  periods.forEach((_, step) => {
    orders += paid[step];
    const rows = joined.map((each) => paidBy(each, step));
    const sum = jointSum(draws, rows, sides);
    for (let i = 0; i < count; i++) cumulated[step * count + i] = sum[i] - orders;
  });
  const { steps, lowest } = cashLow({ matrix: cumulated, count });
  return {
    periods: steps.map((figures, step) => ({ period: periods[step], ...figures })),
    lowest: { period: periods[lowest.step], cautious: lowest.cautious },
    hasUnknown: joined.some(({ money }) => money.before.includes(null)),
  };
}

/** As fine as a tenth of the gap between what is expected and what is cautious warrants. */
function cashPlaces(cash: NonNullable<CoverRecord['budget']>['cash'], places: number): number {
  if (cash === null) return places;
  return placesFor(Math.min(...cash.periods.map(({ expected, cautious }) => expected - cautious)), places);
}

/** A series' money that has moved by the end of a step: what was due before, and what the lag lets through. */
function paidBy(each: Budgeted, step: number): Float64Array {
  const lag = each.money.before.length;
  const due = each.money.before.slice(0, step + 1).reduce<number>((sum, amount) => sum + (amount ?? 0), 0);
  const steps = Array.from({ length: Math.max(0, step + 1 - lag) }, (_, i) => i);
  return sumOver(each, steps, due);
}
