/** The budget on page 2, and what page 1 says of it. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { frequency } from './frequency.js';
import { capital, countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

type Budget = NonNullable<BriefRecord['budget']>;

/** More periods than this go into the annex. */
const MOST_ROWS = 13;

export function budgetView(record: BriefRecord, theme: Theme, formats: Formats) {
  const { budget, series } = record;
  if (budget === null) return null;
  const { asked, periods, totals, printed } = budget;
  const money = (amount: number) => formats.money(amount, printed.places);
  const row = (name: string, price: string, figures: Budget['printed']['totals'][number]) => ({
    name,
    price,
    low: money(figures.low),
    expected: money(figures.expected),
    high: money(figures.high),
  });
  const heads = [
    theme.say(`figures.period.${series.every}`),
    theme.say(`budget.per-unit.${asked.kind}`),
    ...['low', 'expected', 'high'].map((key) => theme.say(`budget.${key}.${asked.kind}`)),
  ];
  const rows = periods.map(({ period, perUnit }, i) =>
    row(formats.period(period, 'short'), formats.price(perUnit), printed.periods[i]),
  );
  const sums = totals.map((total, i) => row(totalName(total, record, theme, formats), '', printed.totals[i]));
  const isLong = rows.length > MOST_ROWS;
  const all = totals.findIndex(({ kind }) => kind === 'ahead');
  return {
    title: theme.say(`budget.title.${asked.kind}`),
    answer: budgetSentence(record, theme, formats),
    table: { heads, rows: isLong ? [] : rows, totals: sums },
    /** Every period's row, where page 2 has room for the totals alone; else null. */
    annex: isLong ? { heads, rows, totals: sums } : null,
    note: [
      theme.say(`budget.chances.${asked.kind}`, chancesOf(totals[all] ?? periods[0], theme, formats)),
      theme.say(`budget.assumes.${asked.kind}`, { unit: series.unit }),
      ...(asked.paidAfter === 0
        ? []
        : [
            theme.say('budget.paid-after', {
              count: countedPeriods(asked.paidAfter, series.every, theme, formats),
            }),
          ]),
    ].join(' '),
    caution: theme.say('budget.caution'),
  };
}

/** One sentence: the figure, and the cautious one. */
export function budgetSentence(record: BriefRecord, theme: Theme, formats: Formats): string {
  const { budget, series } = record;
  const all = budget?.totals.findIndex(({ kind }) => kind === 'ahead') ?? -1;
  if (budget === null || all < 0) return '';
  const { asked, printed } = budget;
  const figures = printed.totals[all];
  const count = budget.periods.length;
  return theme.say(`budget.do.${asked.kind}`, {
    expected: formats.money(figures.expected, printed.places),
    low: formats.money(figures.low, printed.places),
    high: formats.money(figures.high, printed.places),
    ahead: theme.say(`answer.ahead.${count === 1 ? 'one' : 'other'}`, {
      count: theme.has(`count.${count}`) ? theme.say(`count.${count}`) : formats.number(count, 0),
      every: theme.say(`every.${series.every}.${formats.plural(count) === 'one' ? 'one' : 'other'}`),
    }),
  });
}

export const chancesOf = (
  figures: { readonly chanceAboveLow: number; readonly chanceAboveExpected: number; readonly chanceAboveHigh: number },
  theme: Theme,
  formats: Formats,
) => ({
  low: frequency(figures.chanceAboveLow, theme, formats),
  expected: frequency(figures.chanceAboveExpected, theme, formats),
  high: frequency(figures.chanceAboveHigh, theme, formats),
  under: frequency(1 - figures.chanceAboveHigh, theme, formats),
  underExpected: frequency(1 - figures.chanceAboveExpected, theme, formats),
  underLow: frequency(1 - figures.chanceAboveLow, theme, formats),
});

function totalName(
  { kind, year, known }: Budget['totals'][number],
  { budget, series, plan }: BriefRecord,
  theme: Theme,
  formats: Formats,
): string {
  if (kind === 'ahead' || year === null)
    return capital(countedPeriods(budget?.periods.length ?? 0, series.every, theme, formats));
  const name = yearName(kind, year, plan, theme);
  return known === 0
    ? name
    : theme.say('budget.year.part', { name, known: formats.money(known, budget?.printed.places ?? 0) });
}

/** A reporting year that starts in January is the calendar year. */
export const yearName = (kind: string, year: number, { yearStarts }: BriefRecord['plan'], theme: Theme): string =>
  theme.say(`budget.year.${yearStarts === 1 ? 'calendar-year' : kind}`, { year: String(year) });
