/**
 * The first whole number from 0 at which something holds that goes on holding from there; `end` where it holds at none
 * below. By halving, so that it is asked about log₂(end) times.
 */
export function firstWhere(end: number, holds: (at: number) => boolean): number {
  let [from, to] = [0, end];
  while (from < to) {
    const middle = Math.floor((from + to) / 2);
    if (holds(middle)) to = middle;
    else from = middle + 1;
  }
  return from;
}
