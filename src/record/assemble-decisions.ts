/** The decisions of a record: judgement on the outlook, the season's order, the budget. */
import { calendarYearOf, periodIndex } from '../calendar/calendar.js';
import { type BudgetLine, makeBudget } from '../decision/budget.js';
import { decideOrder, type OrderDecision } from '../decision/order.js';
import { decimal, minus, roundTo, sum, toNumber } from '../explain/decimals.js';
import { type Printed, placesFor } from '../explain/printed.js';
import { printedMoney } from '../explain/printed-money.js';
import { judged, type StatedChange } from '../outlook/judge.js';
import type { Outlook, Span } from '../outlook/outlook.js';
import type { LineFigures } from './decided.js';
import { type BriefInputs, periodAt } from './inputs.js';
import { currencyPlaces } from './money.js';
import type { BriefRecord } from './record.js';

/** The outlook with the planner's judgement on it; as it is where there is none. */
export function withJudgement(alone: Outlook, inputs: BriefInputs): Outlook {
  return inputs.judgement.length === 0
    ? alone
    : judged(
        alone,
        inputs.judgement.map((entry) => changeOf(entry, inputs)),
      );
}

/** `alone` is what the figures alone say; `printed` the numbers of the brief, with the judgement. */
export function judgementPart(
  alone: NonNullable<BriefRecord['judgement']>['alone'],
  printed: Printed,
  { judgement }: BriefInputs,
): BriefRecord['judgement'] {
  if (judgement.length === 0) return null;
  const places = placesOf(printed.step);
  const shown = Math.max(places, 0);
  const rows = alone.periods.map(({ expected }, h) => {
    const told = decimal(roundTo(expected, places), shown);
    return { alone: toNumber(told), added: toNumber(minus(decimal(printed.periods[h].expected, shown), told)) };
  });
  const summed = (part: 'alone' | 'added') => toNumber(sum(rows.map((row) => decimal(row[part], shown))));
  const total = { alone: summed('alone'), added: summed('added') };
  return {
    entries: [...judgement],
    alone,
    printed: { periods: rows, total, answer: roundTo(total.alone, placesOf(printed.answer.step)) },
  };
}

/** Decimal places of a step that is a power of ten; negative for tens, hundreds … */
const placesOf = (step: number): number => -Math.round(Math.log10(step));

function changeOf({ from, to, change }: BriefInputs['judgement'][number], inputs: BriefInputs): StatedChange {
  const step = (period: string) =>
    periodIndex(period, inputs.series.every) -
    periodIndex(periodAt(inputs, inputs.figures.values.length), inputs.series.every);
  return { from: step(from), to: to === null ? inputs.ahead - 1 : step(to), ...change };
}

export function purchasePart({ matrix, paths }: Outlook, inputs: BriefInputs): BriefRecord['purchase'] {
  const asked = inputs.purchase;
  if (asked === null) return null;
  const { decided, ...request } = asked;
  const decision = decideOrder({ ...request, decided: decided?.units ?? null, paths: { matrix, count: paths } });
  const first = inputs.figures.values.length + asked.arrives;
  return {
    asked,
    span: [periodAt(inputs, first), periodAt(inputs, first + asked.covers - 1)],
    ...decision,
    demand: { ...decision.demand, range80: [...decision.demand.range80] },
    nearby: [...decision.nearby],
    curve: [...decision.curve],
    printed: printedPlaces(decision, inputs),
  };
}

/** Expected units one place finer than page 1 prints demand; results as finely as tells the nearby orders apart. */
function printedPlaces({ demand, nearby }: OrderDecision, { series, plan }: BriefInputs) {
  const results = nearby.flatMap(({ result }) => result ?? []);
  const spread = Math.max(...results) - Math.min(...results);
  return {
    units: Math.min(placesFor(demand.range80[1] - demand.range80[0], series.places) + 1, series.places),
    result: placesFor(spread, currencyPlaces(plan.currency)),
  };
}

/** Money of a series by step ahead on every path, and before them by period known, for budgets of several series. */
export interface Money {
  /** Ahead by paths, row by row. */
  readonly amounts: Float64Array;
  /** Of the last `paidAfter` periods known, the oldest first; null where the figure is missing. */
  readonly before: readonly (number | null)[];
}

export function moneyOf(
  { matrix, paths }: Outlook,
  inputs: BriefInputs,
  asked: NonNullable<BriefInputs['budget']>,
): Money {
  const { values } = inputs.figures;
  const n = values.length;
  const price = pricesOf(asked, inputs);
  const amounts = matrix.map((units, at) => units * price(n + Math.floor(at / paths)));
  const before = Array.from({ length: asked.paidAfter }, (_, i) => {
    const t = n - asked.paidAfter + i;
    const value = values[t] ?? null;
    return value === null ? null : value * price(t);
  });
  return { amounts, before };
}

export function budgetPart(outlook: Outlook, inputs: BriefInputs): BriefRecord['budget'] {
  const asked = inputs.budget;
  if (asked === null) return null;
  const { values } = inputs.figures;
  const price = pricesOf(asked, inputs);
  const perUnit = Array.from({ length: inputs.ahead }, (_, step) => price(values.length + step));
  const spans = budgetSpans(outlook.totals, inputs);
  const lines: BudgetLine[] = [...perUnit.keys()].map((step) => ({ steps: [step], known: 0 }));
  const { lines: figures } = makeBudget({
    paths: { matrix: outlook.matrix, count: outlook.paths },
    perUnit,
    lag: asked.paidAfter,
    before: moneyOf(outlook, inputs, asked).before,
    lines: [...lines, ...spans],
  });
  const periods = perUnit.map((amount, step) => ({
    period: periodAt(inputs, values.length + step),
    perUnit: amount,
    ...figures[step],
  }));
  const totals = spans.map(({ kind, year, steps, known }, i) => ({
    kind,
    year,
    known,
    periods: steps.map((step) => periodAt(inputs, values.length + step)),
    ...figures[perUnit.length + i],
  }));
  return { asked, periods, totals, printed: printedBudget(periods, totals, inputs.plan.currency) };
}

type Range = Pick<LineFigures, 'low' | 'expected' | 'high'>;

/** A budget as it is printed: that of one series, or of several together. */
export function printedBudget(
  periods: readonly Range[],
  totals: readonly (Range & { readonly kind: string })[],
  currency: string,
): NonNullable<BriefRecord['budget']>['printed'] {
  const isAll = totals.map((total) => ({ ...total, isAll: total.kind === 'ahead' }));
  const { places, periods: rows, totals: sums } = printedMoney(periods, isAll, currencyPlaces(currency));
  return { places, periods: [...rows], totals: [...sums] };
}

/** What a unit brings or costs in the period so many after the first. */
function pricesOf({ perUnit }: NonNullable<BriefInputs['budget']>, inputs: BriefInputs): (t: number) => number {
  const first = periodIndex(inputs.figures.start, inputs.series.every);
  const starts = perUnit.map(({ from, amount }) => ({
    t: from === null ? Number.NEGATIVE_INFINITY : periodIndex(from, inputs.series.every) - first,
    amount,
  }));
  return (t) => (starts.findLast((each) => each.t <= t) ?? starts[0]).amount;
}

interface BudgetSpan extends BudgetLine {
  readonly kind: 'ahead' | 'reporting-year' | 'calendar-year';
  readonly year: number | null;
}

/** All periods ahead, each reporting year and, where these are others, each calendar year that is covered in full. */
function budgetSpans(totals: readonly Span[], inputs: BriefInputs): BudgetSpan[] {
  const { series, figures, plan, ahead, budget } = inputs;
  if (budget === null) return [];
  const n = figures.values.length;
  const first = periodIndex(figures.start, series.every);
  const price = pricesOf(budget, inputs);
  const years = Array.from({ length: n + ahead }, (_, t) => calendarYearOf(first + t, series.every, plan.yearStarts));
  const span = (kind: BudgetSpan['kind'], year: number | null, steps: readonly number[], past: readonly number[]) => ({
    kind,
    year,
    steps,
    known: past.reduce((sum, t) => sum + (figures.values[t] ?? Number.NaN) * price(t), 0),
  });
  const spans = totals.flatMap(({ kind, year, steps }): BudgetSpan[] => {
    if (kind === 'year-ahead') return [];
    const past = kind === 'ahead' ? 0 : series.season - steps.length;
    return [
      span(
        kind,
        year,
        steps,
        Array.from({ length: past }, (_, i) => n - past + i),
      ),
    ];
  });
  const calendar = [...new Set(years.slice(n))].flatMap((year): BudgetSpan[] => {
    const of = years.flatMap((each, t) => (each === year ? [t] : []));
    if (year === null || plan.yearStarts === 1 || of.length !== series.season) return [];
    return [
      span(
        'calendar-year',
        year,
        of.filter((t) => t >= n).map((t) => t - n),
        of.filter((t) => t < n),
      ),
    ];
  });
  return [...spans, ...calendar].filter(({ known }) => !Number.isNaN(known));
}
