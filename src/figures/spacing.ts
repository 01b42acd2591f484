/** Which kind of period a column of dates speaks of, by how far apart they lie. */
import { dayOf, type Every } from '../calendar/calendar.js';

/** Days between neighbours. Four weeks and February are told apart by the other months. */
const SPACINGS: readonly (readonly [Every, number, number])[] = [
  ['week', 7, 7],
  ['four-weeks', 28, 28],
  ['month', 28, 31],
  ['quarter', 89, 92],
  ['half-year', 181, 184],
  ['year', 365, 366],
];

/** Null where the dates, all ISO 8601, have no one spacing; gaps of whole periods are allowed for in one of five. */
export function everyOfDates(dates: readonly string[]): Every | null {
  const days = [...new Set(dates.map(dayOf))].sort((a, b) => a - b);
  const steps = days.slice(1).map((day, i) => day - days[i]);
  // One step of 28 days can be four weeks, or a month from the end of January or the start of February.
  if (steps.length === 1 && steps[0] === 28) return null;
  for (const [every, least, most] of SPACINGS) {
    const fitting = steps.filter((step) => step >= least && step <= most).length;
    const shorter = steps.some((step) => step < least);
    if (steps.length > 0 && !shorter && fitting >= 0.8 * steps.length) return every;
  }
  return null;
}
