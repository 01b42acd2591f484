/** The brief's numbers for a spreadsheet: the past figures as they were used, then the outlook, a row a period. */
import { periodIndex, periodText } from '../calendar/calendar.js';
import { csvRow } from './csv.js';
import type { BriefRecord } from './record.js';

export function figuresCsv({ series, figures, outlook }: BriefRecord): string {
  const first = periodIndex(figures.start, series.every);
  const past = figures.values.map((value, t) => [periodText(first + t, series.every), value, ...noOutlook]);
  const ahead = outlook.periods.map(({ period, expected, middle, range80, range95 }) => [
    period,
    null,
    expected,
    middle,
    ...range80,
    ...range95,
  ]);
  return [heading, ...past, ...ahead].map(csvRow).join('');
}

const heading = ['period', 'figure', 'expected', 'middle', 'low_80', 'high_80', 'low_95', 'high_95'];
const noOutlook = heading.slice(2).map(() => null);
