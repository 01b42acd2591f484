/** The cover's record from those of the briefs. */
import type { FiledRecord } from './archive.js';
import type { Money } from './assemble-decisions.js';
import { jointBudget } from './assemble-joint.js';
import { type CoverRecord, coverSchema } from './cover.js';
import type { BriefRecord } from './record.js';

/**
 * One row a brief in the order given, which must hold at least one period ahead each. `moneyOf` gives the money of a
 * record that has a budget.
 */
export function assembleCover(
  issued: string,
  plan: BriefRecord['plan'],
  software: BriefRecord['software'],
  briefs: readonly FiledRecord[],
  moneyOf: (record: BriefRecord) => Money,
): CoverRecord {
  const records = briefs.map(({ record }) => record);
  const budgeted = records
    .filter(({ budget }) => budget !== null)
    .map((record) => ({ record, money: moneyOf(record) }));
  return coverSchema.parse({
    format: 'seasonbrief-cover/1',
    issued,
    software,
    plan,
    rows: briefs.map(rowOf),
    orders: records.flatMap(orderOf),
    budget: jointBudget(issued, budgeted, records),
  });
}

function orderOf({ brief, series, purchase }: BriefRecord): CoverRecord['orders'] {
  if (purchase === null) return [];
  const { asked, best, decided, span } = purchase;
  const { packs, units, cost } = decided ?? best;
  return [
    {
      brief,
      series,
      packs,
      pack: asked.pack,
      units,
      unitCost: asked.unitCost,
      cost,
      isDecided: decided !== null,
      arrives: span[0],
    },
  ];
}

const historyYears = 5;

const rowOf = ({ record, sha256 }: FiledRecord) => ({
  brief: record.brief,
  sha256,
  series: record.series,
  history: record.figures.values.slice(-historyYears * record.series.season),
  outlook: record.outlook.periods.map(({ expected }) => expected),
  span: [record.outlook.periods[0]?.period, record.outlook.periods.at(-1)?.period],
  answer: record.printed.answer,
  caveats: record.facts.caveats,
  trackRecord: trackOf(record),
});

function trackOf({ trackRecord }: BriefRecord): CoverRecord['rows'][number]['trackRecord'] {
  if (trackRecord === null) return null;
  const { count, miss, inside80 } = trackRecord;
  return { count, miss, inside80 };
}
