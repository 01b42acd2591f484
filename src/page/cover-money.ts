/** The cover's order list, and all budgets as one. */
import type { CoverRecord } from '../record/cover.js';
import { yearName } from './budget.js';
import type { Formats } from './formats.js';
import { capital, countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

export function ordersTable({ orders }: CoverRecord, theme: Theme, formats: Formats) {
  if (orders.length === 0) return null;
  const costs = orders.flatMap(({ cost }) => cost ?? []);
  return {
    title: theme.say('cover.orders.title'),
    heads: ['item', 'packs', 'units', 'unit-cost', 'cost', 'by', 'note'].map((key) =>
      theme.say(`cover.orders.heads.${key}`),
    ),
    rows: orders.map(({ series, packs, pack, units, unitCost, cost, arrives, isDecided }) => ({
      item: series.name,
      packs:
        pack === 1
          ? ''
          : theme.say('cover.orders.packs', {
              packs: formats.amount(packs, Number.isInteger(packs) ? 0 : 1),
              pack: formats.amount(pack, 0),
            }),
      units: `${formats.amount(units, series.places)} ${series.unit}`,
      unitCost: unitCost === null ? '' : formats.price(unitCost),
      cost: cost === null ? '' : formats.price(cost),
      by: formats.period(arrives, 'short'),
      note: isDecided ? theme.say('cover.orders.decided') : '',
    })),
    total:
      costs.length < 2
        ? null
        : {
            name: theme.say('cover.orders.total'),
            cost: formats.price(costs.reduce((sum, cost) => sum + cost, 0)),
          },
  };
}

type Kind = 'income' | 'spending' | 'net';

/** Wider than this, each kind has a table of its own. */
const MOST_CHARACTERS = 72;

export function budgetTables({ budget, rows, plan }: CoverRecord, theme: Theme, formats: Formats) {
  if (budget === null) return null;
  const { printed, periods, totals, series, cash } = budget;
  const every = rows.find(({ brief }) => brief === series[0])?.series.every ?? 'quarter';
  const kinds = (['income', 'spending', 'net'] as const).filter((kind) => printed[kind] !== null);
  const names = [
    ...periods.map(({ period }) => formats.period(period, 'short')),
    ...totals.map(({ kind, year, isPartKnown }) => {
      if (year === null) return capital(countedPeriods(periods.length, every, theme, formats));
      const name = yearName(kind, year, plan, theme);
      return isPartKnown ? theme.say('cover.budget.part', { name }) : name;
    }),
  ];
  const cells = (kind: Kind, i: number) => {
    const money = printed[kind];
    if (money === null) return [];
    const { low, expected, high } = [...money.periods, ...money.totals][i];
    return [low, expected, high].map((amount) => formats.money(amount, money.places));
  };
  const table = (shown: readonly Kind[]) => ({
    groups: shown.map((kind) => theme.say(`cover.budget.heads.${kind}`)),
    heads: shown.flatMap(() => ['low', 'expected', 'high'].map((key) => theme.say(`cover.budget.heads.${key}`))),
    period: theme.say(`figures.period.${every}`),
    rows: names.slice(0, periods.length).map((name, i) => ({ name, cells: shown.flatMap((kind) => cells(kind, i)) })),
    totals: names.slice(periods.length).map((name, i) => ({
      name,
      cells: shown.flatMap((kind) => cells(kind, periods.length + i)),
    })),
  });
  const widest = Math.max(
    ...names.flatMap((_, i) => kinds.flatMap((kind) => cells(kind, i).map((text) => text.length))),
  );
  return {
    title: theme.say('cover.budget.title'),
    tables: 3 * kinds.length * widest > MOST_CHARACTERS ? kinds.map((kind) => table([kind])) : [table(kinds)],
    notes: [
      theme.say(`cover.budget.note.${formats.plural(series.length) === 'one' ? 'one' : 'other'}`, {
        names: formats.list(series.flatMap((brief) => rows.find((row) => row.brief === brief)?.series.name ?? [])),
      }),
      ...togetherSentences(budget, theme, formats),
      theme.say('cover.budget.between'),
      ...(budget.apart.length === 0 ? [] : [theme.say('cover.budget.apart', { names: budget.apart.join(', ') })]),
    ],
    cash: cash === null ? null : cashTable(cash, printed.cash, every, theme, formats),
  };
}

function cashTable(
  { periods, lowest, hasUnknown }: NonNullable<NonNullable<CoverRecord['budget']>['cash']>,
  places: number,
  every: CoverRecord['rows'][number]['series']['every'],
  theme: Theme,
  formats: Formats,
) {
  const money = (amount: number) => formats.moneyTo(amount, places);
  return {
    title: theme.say('cover.budget.cash.title'),
    heads: [
      theme.say(`figures.period.${every}`),
      ...['expected', 'cautious'].map((key) => theme.say(`cover.budget.cash.heads.${key}`)),
    ],
    rows: periods.map(({ period, expected, cautious }) => ({
      name: formats.period(period, 'short'),
      expected: money(expected),
      cautious: money(cautious),
    })),
    note: [
      theme.say('cover.budget.cash.lowest', {
        lowest: money(lowest.cautious),
        period: formats.period(lowest.period, 'short'),
      }),
      theme.say('cover.budget.cash.counts'),
      ...(hasUnknown ? [theme.say('cover.budget.cash.unknown')] : []),
    ].join(' '),
  };
}

/** Whether the series' surprises go together, and how closely at most. */
function togetherSentences(
  { correlations }: NonNullable<CoverRecord['budget']>,
  theme: Theme,
  formats: Formats,
): string[] {
  if (correlations.length < 2) return [];
  const most = Math.max(...correlations.flatMap((row, i) => row.slice(0, i).map(Math.abs)));
  return [
    most < 0.005
      ? theme.say('cover.budget.independent')
      : theme.say('cover.budget.together', { most: formats.number(most, 2) }),
  ];
}
