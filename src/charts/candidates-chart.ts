/** The forecasts of the best few candidates side by side, each named at the end of its line. */
import type { TopLevelSpec } from 'vega-lite';
import type { ChoiceSheet, SheetCandidate } from '../record/choice.js';
import { draw, labelled } from './draw.js';
import { lowEnd } from './history-chart.js';
import { ACCENT, HAIRLINE, INK, LABEL, PAPER, QUIET } from './look.js';
import { niceTicks, tickPlaces } from './ticks.js';
import { timeAxis, timeDomain } from './time-axis.js';

export interface CandidatesWords {
  readonly described: string;
  readonly number: (value: number, places: number) => string;
  readonly yearName: (period: string) => string;
  readonly name: (candidate: SheetCandidate) => string;
}

const WIDTH = 470;
const HEIGHT = 170;
/** From the end of the lines to the labels. */
const LEADER = 34;
const LABELS = 146;

/** Told apart without colour: by dash and by mark. */
const STYLES = [
  { color: ACCENT, dash: [1, 0], width: 2.2, shape: 'circle', fill: ACCENT, size: 34 },
  { color: INK, dash: [6, 3], width: 1.1, shape: 'square', fill: PAPER, size: 24 },
  { color: INK, dash: [1.5, 2.5], width: 1.3, shape: 'triangle-up', fill: PAPER, size: 26 },
  { color: QUIET, dash: [9, 3, 2, 3], width: 1.1, shape: 'diamond', fill: PAPER, size: 28 },
] as const;

export function candidatesChart(sheet: ChoiceSheet, words: CandidatesWords): Promise<string> {
  const { series, figures, plan, ahead } = sheet;
  const n = figures.values.length;
  const shown = Math.min(n, Math.max(2 * series.season, 8));
  const history = figures.values.slice(n - shown).map((y, i) => ({ t: n - shown + i, y }));
  const last = history[history.length - 1];
  const lines = sheet.candidates
    .filter(({ isDrawn }) => isDrawn)
    .map((candidate, i) => ({
      ...STYLES[Math.min(i, STYLES.length - 1)],
      name: words.name(candidate),
      points: candidate.middles.map((y, h) => ({ t: n + h, y })),
    }));
  const values = [...history, ...lines.flatMap(({ points }) => points)].flatMap(({ y }) => (y === null ? [] : [y]));
  const ticks = niceTicks(lowEnd(values), Math.max(0, ...values), 5);
  const [bottom, top] = [ticks[0], ticks[ticks.length - 1]];
  const [from, to] = timeDomain(n - shown, n + ahead.length - 1);
  const endX = ((n + ahead.length - 1 - from) / (to - from)) * WIDTH;
  const endYs = lines.map(({ points }) => ((top - points[points.length - 1].y) / (top - bottom || 1)) * HEIGHT);
  const labelYs = spaced(endYs, LABEL + 3, HEIGHT);

  const x = timeAxis({
    every: series.every,
    yearStarts: plan.yearStarts,
    start: figures.start,
    from: n - shown,
    to: n + ahead.length - 1,
    yearName: words.yearName,
  });
  const y = {
    field: 'y',
    type: 'quantitative',
    scale: { domain: [bottom, top], nice: false, zero: false },
    axis: {
      values: ticks,
      labelExpr: labelled(ticks, (value) => words.number(value, tickPlaces(ticks))),
      title: null,
    },
  } as const;
  const marksFit = ahead.length <= 26;
  // The recommended one is drawn last, over the others.
  const order = lines.map((line, i) => ({ ...line, endY: endYs[i], labelY: labelYs[i] })).reverse();
  const spec = {
    width: WIDTH,
    height: HEIGHT,
    layer: [
      {
        data: { values: [{ t: n - 0.5 }] },
        mark: { type: 'rule', color: HAIRLINE, strokeDash: [2, 2] },
        encoding: { x },
      },
      ...order.flatMap(({ points, color, dash, width }) => ({
        data: { values: [last, ...points] },
        mark: { type: 'line', color, strokeDash: dash, strokeWidth: width },
        encoding: { x, y },
      })),
      ...order.flatMap(({ points, color, shape, fill, size }) => ({
        data: { values: marksFit ? points : points.slice(-1) },
        mark: { type: 'point', shape, stroke: color, fill, size, strokeWidth: 1.1, opacity: 1 },
        encoding: { x, y },
      })),
      { data: { values: history }, mark: { type: 'line', color: INK, strokeWidth: 1.3 }, encoding: { x, y } },
      {
        data: { values: history.filter(({ y: value }) => value !== null) },
        mark: { type: 'point', filled: true, color: INK, size: 13, opacity: 1 },
        encoding: { x, y },
      },
      ...order.flatMap(({ name, color, dash, endY, labelY }, i) => [
        {
          data: { values: [{}] },
          // In the line's own dash, so that the label stands for it without colour.
          mark: { type: 'rule', color, strokeDash: dash, strokeWidth: 0.9 },
          encoding: {
            x: { value: endX + 6 },
            x2: { value: WIDTH + LEADER - 4 },
            y: { value: endY },
            y2: { value: labelY },
          },
        },
        {
          data: { values: [{ name }] },
          mark: {
            type: 'text',
            align: 'left',
            baseline: 'middle',
            color,
            fontWeight: i === order.length - 1 ? 600 : 400,
            limit: LABELS,
          },
          encoding: { x: { value: WIDTH + LEADER }, y: { value: labelY }, text: { field: 'name' } },
        },
      ]),
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}

/** Heights as near as they may be to those wanted, in the same order, at least `gap` apart and none below `most`. */
export function spaced(wanted: readonly number[], gap: number, most: number): number[] {
  const order = wanted.map((_, i) => i).sort((a, b) => wanted[a] - wanted[b] || a - b);
  const placed = [...wanted];
  order.forEach((i, k) => {
    if (k > 0) placed[i] = Math.max(placed[i], placed[order[k - 1]] + gap);
  });
  [...order].reverse().forEach((i, k) => {
    const limit = k === 0 ? most : placed[order[order.length - k]] - gap;
    placed[i] = Math.min(placed[i], limit);
  });
  return placed;
}
