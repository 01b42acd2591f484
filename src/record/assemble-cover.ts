/** The cover's record from those of the briefs. */
import type { FiledRecord } from './archive.js';
import { type CoverRecord, coverSchema } from './cover.js';
import type { BriefRecord } from './record.js';

/** One row a brief in the order given, which must hold at least one period ahead each. */
export function assembleCover(
  issued: string,
  plan: BriefRecord['plan'],
  software: BriefRecord['software'],
  briefs: readonly FiledRecord[],
): CoverRecord {
  return coverSchema.parse({
    format: 'seasonbrief-cover/1',
    issued,
    software,
    plan,
    rows: briefs.map(rowOf),
  });
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
