/** A known event as a column of numbers beside the figures: 1 where it has its effect, else 0. */
import { type Every, periodIndex } from '../calendar/calendar.js';

export interface EventSpan {
  readonly from: string;
  /** Null where the effect is lasting: from then on, the periods ahead included. */
  readonly to: string | null;
}

/** One number a period, `length` of them from `start` on. */
export function eventRegressor({ from, to }: EventSpan, every: Every, start: string, length: number): number[] {
  const first = periodIndex(start, every);
  const begins = periodIndex(from, every) - first;
  const ends = to === null ? length - 1 : periodIndex(to, every) - first;
  return Array.from({ length }, (_, t) => (t >= begins && t <= ends ? 1 : 0));
}
