/**
 * The look back: what earlier records of a series said, and what happened.
 *
 *   earlier records -> those that count the same thing -> scores, the last brief, the change since, order, judgement
 *
 * Everything comes from records; the same earlier records give the same look back.
 */
import { periodIndex, periodText } from '../calendar/calendar.js';
import { withoutOrder } from '../decision/without-order.js';
import type { FiledRecord } from './archive.js';
import type { BriefInputs } from './inputs.js';
import type { LookBack } from './looked-back.js';
import type { BriefRecord } from './record.js';
import { type Current, changeSince } from './split-change.js';

/** Null where there is no earlier record. `earlier` may come in any order; later ones than the brief are left out. */
export function lookBackAt(earlier: readonly FiledRecord[], current: Current): LookBack | null {
  const before = earlier
    .filter(({ record }) => record.issued < current.inputs.issued)
    .sort((a, b) => (a.record.issued < b.record.issued ? -1 : 1));
  if (before.length === 0) return null;
  const judged = before.map((filed) => ({ ...filed, reason: unlikeness(filed.record, current.inputs) }));
  const alike = judged.filter(({ reason }) => reason === null);
  const actual = actualOf(current.inputs);
  const outcomes = alike.map(({ record }) => outcomesOf(record, actual));
  const latest = alike.at(-1);
  const all = outcomes.flat();
  return {
    earlier: alike.map(({ record, sha256 }, i) => ({
      brief: record.brief,
      sha256,
      issued: record.issued,
      ...scoreOf(outcomes[i]),
    })),
    unlike: judged.flatMap(({ record, sha256, reason }) =>
      reason === null ? [] : [{ brief: record.brief, sha256, reason }],
    ),
    running: all.length === 0 ? null : runningOf(all),
    next: alike.flatMap(({ record }, i) =>
      outcomes[i].filter(({ period }) => period === record.outlook.periods[0].period),
    ),
    last: outcomes.at(-1) ?? [],
    change: latest === undefined ? null : changeSince(latest.record, current),
    order: alike.flatMap(({ record }) => orderOutcome(record, actual) ?? []).at(-1) ?? null,
    judgement: alike.flatMap(({ record }) => judgementOutcome(record, actual) ?? []).at(-1) ?? null,
  };
}

type Outcome = LookBack['last'][number];

/** Sums of figures that both know, further apart than this, are no corrections: something else is counted. */
const MOST_REVISED = 1.5;

function unlikeness({ series, figures }: BriefRecord, inputs: BriefInputs): 'unit' | 'period' | 'counting' | null {
  if (series.every !== inputs.series.every) return 'period';
  if (series.unit !== inputs.series.unit) return 'unit';
  const now = actualOf(inputs);
  let [was, is] = [0, 0];
  figures.values.forEach((value, t) => {
    const known = now(periodText(periodIndex(figures.start, series.every) + t, series.every));
    if (value === null || known === null) return;
    was += Math.abs(value);
    is += Math.abs(known);
  });
  const ratio = Math.max(was, is) / Math.min(was, is);
  return ratio > MOST_REVISED ? 'counting' : null;
}

/** The figure of a period as it is known now; null where it is missing, sold out or still ahead. */
function actualOf({ figures, series }: BriefInputs): (period: string) => number | null {
  const first = periodIndex(figures.start, series.every);
  return (period) =>
    figures.soldOut.includes(period) ? null : (figures.values[periodIndex(period, series.every) - first] ?? null);
}

function outcomesOf({ brief, issued, outlook }: BriefRecord, actualAt: (period: string) => number | null): Outcome[] {
  return outlook.periods.flatMap(({ period, expected, range80, range95 }) => {
    const actual = actualAt(period);
    return actual === null ? [] : [{ brief, issued, period, expected, range80, range95, actual }];
  });
}

const isInside = (value: number, [low, high]: readonly [number, number]): boolean => value >= low && value <= high;

function scoreOf(outcomes: readonly Outcome[]) {
  return {
    known: outcomes.length,
    inside80: outcomes.filter(({ actual, range80 }) => isInside(actual, range80)).length,
    inside95: outcomes.filter(({ actual, range95 }) => isInside(actual, range95)).length,
    error: outcomes.reduce((sum, { actual, expected }) => sum + Math.abs(actual - expected), 0),
    actual: outcomes.reduce((sum, { actual }) => sum + Math.abs(actual), 0),
  };
}

function runningOf(outcomes: readonly Outcome[]): NonNullable<LookBack['running']> {
  const { known, inside80, inside95, error, actual } = scoreOf(outcomes);
  return { count: known, inside80, inside95, miss: actual > 0 ? error / actual : null };
}

/** Null where a period up to the end of its cover is not known. */
function orderOutcome(record: BriefRecord, actualAt: (period: string) => number | null): LookBack['order'] {
  const { purchase, brief, issued, outlook } = record;
  if (purchase === null) return null;
  const { asked, best, decided, span } = purchase;
  const steps = outlook.periods.slice(0, asked.arrives + asked.covers).map(({ period }) => actualAt(period));
  const demand = steps.filter((value) => value !== null);
  if (demand.length < steps.length) return null;
  const { units } = decided ?? best;
  const standing = withoutOrder({
    ...asked,
    decided: null,
    paths: { matrix: Float64Array.from(demand), count: 1 },
  });
  const need = standing.need[0];
  return {
    brief,
    issued,
    span,
    ordered: units,
    isDecided: decided !== null,
    demand: standing.covered.demand[0],
    leftOver: standing.left[0] + Math.max(units - need, 0),
    lost: Math.max(need - units, 0),
  };
}

/** Over the periods that the judgement changed and that are known; null where there is none. */
function judgementOutcome(record: BriefRecord, actualAt: (period: string) => number | null): LookBack['judgement'] {
  const { judgement, outlook, brief, issued } = record;
  if (judgement === null) return null;
  const known = outlook.periods.flatMap(({ period, expected }, h) => {
    const alone = judgement.alone.periods[h].expected;
    const actual = actualAt(period);
    return actual === null || alone === expected ? [] : [{ period, expected, alone, actual }];
  });
  if (known.length === 0) return null;
  return {
    brief,
    issued,
    what: judgement.entries.map(({ what }) => what),
    periods: known.map(({ period }) => period),
    withIt: known.reduce((sum, { expected, actual }) => sum + Math.abs(expected - actual), 0),
    without: known.reduce((sum, { alone, actual }) => sum + Math.abs(alone - actual), 0),
  };
}
