/** The axis of a chart over time: a label where a reporting year begins. */
import { type Every, periodIndex, periodText, yearOf } from '../calendar/calendar.js';

export interface TimeSpan {
  readonly every: Every;
  readonly yearStarts: number;
  /** The period that t = 0 stands for. */
  readonly start: string;
  /** First and last t shown. */
  readonly from: number;
  readonly to: number;
  /** The name of the year that a period begins. */
  readonly yearName: (period: string) => string;
}

const MOST_YEARS = 10;

/** A Vega-Lite encoding of `t`, with room at both ends for half a mark. */
export function timeAxis({ every, yearStarts, start, from, to, yearName }: TimeSpan) {
  const first = periodIndex(start, every);
  const year = (t: number) => yearOf(first + t, every, yearStarts);
  const years = Array.from({ length: to - from + 1 }, (_, i) => from + i).filter((t) => year(t) !== year(t - 1));
  const shown = years.filter((_, i) => i % Math.ceil(years.length / MOST_YEARS) === 0);
  const named = shown.map((t) => `datum.value === ${t} ? ${JSON.stringify(yearName(periodText(first + t, every)))} : `);
  return {
    field: 't',
    type: 'quantitative',
    scale: { domain: timeDomain(from, to), nice: false, zero: false },
    axis: { values: shown, labelExpr: `${named.join('')}''`, title: null, domain: true, labelFlush: false },
  } as const;
}

export const timeDomain = (from: number, to: number): [number, number] => [from - 0.4, to + 0.4];
