/** The order list and the budget of a dated folder for a spreadsheet. */
import type { CoverRecord } from './cover.js';
import { type Cell, csvRow } from './csv.js';
import type { LineFigures } from './decided.js';
import { currencyPlaces } from './money.js';
import type { BriefRecord } from './record.js';

/** A row for each item to be ordered; null where there is none. */
export function ordersCsv({ orders, plan }: CoverRecord): string | null {
  if (orders.length === 0) return null;
  const heading = [
    'item',
    'packs',
    'units_a_pack',
    'units',
    'unit',
    'unit_cost',
    'cost',
    'currency',
    'there_by',
    'brief',
  ];
  const rows = orders.map(({ series, packs, pack, units, unitCost, cost, arrives, brief }): Cell[] => [
    series.name,
    packs,
    pack,
    units,
    series.unit,
    unitCost,
    cost === null ? null : inCurrency(cost, plan.currency),
    cost === null ? null : plan.currency,
    arrives,
    brief,
  ]);
  return [heading, ...rows].map(csvRow).join('');
}

/** A row for each series and period, then the same for all series together; null where no series has a budget. */
export function budgetCsv({ budget, plan }: CoverRecord, records: readonly BriefRecord[]): string | null {
  if (budget === null) return null;
  const heading = ['series', 'kind', 'over', 'per_unit', 'low', 'expected', 'high', 'currency'];
  const row = (series: string, kind: string, over: string, perUnit: number | null, figures: LineFigures): Cell[] => [
    series,
    kind,
    over,
    perUnit,
    inCurrency(figures.low, plan.currency),
    inCurrency(figures.expected, plan.currency),
    inCurrency(figures.high, plan.currency),
    plan.currency,
  ];
  const own = records.flatMap((record) => {
    const { name } = record.series;
    const of = record.budget;
    if (of === null) return [];
    return [
      ...of.periods.map(({ period, perUnit, ...figures }) => row(name, of.asked.kind, period, perUnit, figures)),
      ...of.totals.map(({ kind, year, ...figures }) => row(name, of.asked.kind, totalName(kind, year), null, figures)),
    ];
  });
  const all = [...budget.periods, ...budget.totals].flatMap((line) => {
    const over = 'period' in line ? line.period : totalName(line.kind, line.year);
    return (['income', 'spending', 'net'] as const).flatMap((kind) => {
      const figures = line[kind];
      return figures === null ? [] : [row('all together', kind, over, null, figures)];
    });
  });
  return [heading, ...own, ...all].map(csvRow).join('');
}

const totalName = (kind: string, year: number | null): string => (year === null ? kind : `${kind} ${year}`);

/** Money to the currency's own places, as a spreadsheet's reader wants it; the records have it in full. */
const inCurrency = (amount: number, currency: string): number => Number(amount.toFixed(currencyPlaces(currency)));
