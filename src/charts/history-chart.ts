/** All past figures as a line with a mark at each period; events named, sold-out periods hollow. */
import type { TopLevelSpec } from 'vega-lite';
import { periodIndex } from '../calendar/calendar.js';
import type { ChoiceSheet } from '../record/choice.js';
import { draw, labelled } from './draw.js';
import { INK, LABEL, PAPER, QUIET } from './look.js';
import { niceTicks, tickPlaces } from './ticks.js';
import { timeAxis } from './time-axis.js';

export interface HistoryWords {
  readonly described: string;
  readonly number: (value: number, places: number) => string;
  readonly yearName: (period: string) => string;
}

const WIDTH = 610;
const HEIGHT = 118;
/** How wide a character of a label is, about. */
const CHARACTER = 5.6;
/** Beyond this many figures a mark at each would hide the line. */
const MOST_MARKS = 160;

export function historyChart({ series, figures, plan }: ChoiceSheet, words: HistoryWords): Promise<string> {
  const { every } = series;
  const first = periodIndex(figures.start, every);
  const n = figures.values.length;
  const soldOut = new Set(figures.soldOut.map((period) => periodIndex(period, every) - first));
  const points = figures.values.map((y, t) => ({ t, y }));
  const there = points.filter(({ y }) => y !== null);
  const values = there.flatMap(({ y }) => (y === null ? [] : [y]));
  const ticks = niceTicks(lowEnd(values), Math.max(0, ...values), 4);
  const height = (y: number) => (HEIGHT * (ticks[ticks.length - 1] - y)) / (ticks[ticks.length - 1] - ticks[0] || 1);
  const events = figures.events.flatMap(({ what, from, to }) => {
    const [start, end] = [periodIndex(from, every) - first, to === null ? n - 1 : periodIndex(to, every) - first];
    const seen = there.filter(({ t }) => t >= start && t <= end);
    if (seen.length === 0) return [];
    // Clear of the line over the label's whole width: below it where there is room, else above.
    const reach = ((what.length * CHARACTER) / 2 / WIDTH) * n;
    const middle = Math.min(Math.max((seen[0].t + seen[seen.length - 1].t) / 2, reach), Math.max(n - 1 - reach, reach));
    const near = there.flatMap(({ t, y }) => (y !== null && Math.abs(t - middle) <= reach + 1 ? [height(y)] : []));
    const below = Math.max(...near) + LABEL + 2;
    const py = below <= HEIGHT - LABEL / 2 ? below : Math.min(...near) - LABEL;
    return [{ t: middle, py, what }];
  });
  const x = timeAxis({
    every,
    yearStarts: plan.yearStarts,
    start: figures.start,
    from: 0,
    to: n - 1,
    yearName: words.yearName,
  });
  const y = {
    field: 'y',
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[ticks.length - 1]], nice: false, zero: false },
    axis: {
      values: ticks,
      labelExpr: labelled(ticks, (value) => words.number(value, tickPlaces(ticks))),
      title: null,
    },
  } as const;
  const marks = there.length > MOST_MARKS ? there.filter(({ t }) => soldOut.has(t)) : there;
  const spec = {
    width: WIDTH,
    height: HEIGHT,
    layer: [
      { data: { values: points }, mark: { type: 'line', color: INK, strokeWidth: 1.3 }, encoding: { x, y } },
      {
        data: { values: marks.filter(({ t }) => !soldOut.has(t)) },
        mark: { type: 'point', filled: true, color: INK, size: 13, opacity: 1 },
        encoding: { x, y },
      },
      {
        data: { values: marks.filter(({ t }) => soldOut.has(t)) },
        mark: { type: 'point', fill: PAPER, stroke: INK, strokeWidth: 1.2, size: 24, opacity: 1 },
        encoding: { x, y },
      },
      ...events.map((event) => ({
        data: { values: [event] },
        mark: { type: 'text', fontStyle: 'italic', color: QUIET, limit: 220 },
        encoding: { x, y: { value: event.py }, text: { field: 'what' } },
      })),
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}

/** Zero, unless the figures' own span is small beside their level. */
export function lowEnd(values: readonly number[]): number {
  const [low, high] = [Math.min(...values), Math.max(...values)];
  return low < 0 || low >= 0.6 * high ? low : 0;
}
