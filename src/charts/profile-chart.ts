/**
 * The season: a field for each place in the year, in it a mark for each year from left to right and a bar at their
 * median (a seasonal subseries plot: Cleveland & Terpenning, "Graphical methods for seasonal adjustment", Journal of the
 * American Statistical Association 77, 1982).
 */
import type { TopLevelSpec } from 'vega-lite';
import type { SeasonProfile } from '../record/choice.js';
import { draw, labelled } from './draw.js';
import { HAIRLINE, INK, LABEL, PAPER, QUIET } from './look.js';
import { niceTicks } from './ticks.js';

export interface ProfileWords {
  readonly described: string;
  /** A value on the axis, in the profile's own kind. */
  readonly value: (value: number, ticks: readonly number[]) => string;
  /** A short name for a place in the year. */
  readonly place: (period: string) => string;
}

const WIDTH = 610;
const HEIGHT = 96;
/** The widest name under the axis, and a character's width. */
const CHARACTER = 6.2;

export function profileChart({ kind, positions }: SeasonProfile, words: ProfileWords): Promise<string> {
  const base = kind === 'share' ? 1 : 0;
  const all = positions.flatMap(({ byYear }) => byYear);
  const ticks = niceTicks(Math.min(base, ...all), Math.max(base, ...all), 4);
  const field = WIDTH / positions.length;
  const margin = Math.min(14, field * 0.16);
  const centre = (i: number) => (i + 0.5) * field;
  const points = positions.flatMap(({ byYear }, i) =>
    byYear.map((value, y) => ({
      i,
      px: centre(i) + (field / 2 - margin) * (byYear.length > 1 ? (2 * y) / (byYear.length - 1) - 1 : 0),
      value,
      isLatest: y === byYear.length - 1,
    })),
  );
  const medians = positions.map(({ median }, i) => ({
    px: i * field + margin * 0.6,
    end: (i + 1) * field - margin * 0.6,
    value: median,
  }));
  const names = positions.map(({ period }, i) => ({ i, px: centre(i), name: words.place(period) }));
  const widest = Math.max(...names.map(({ name }) => name.length * CHARACTER + 8));
  const step = Math.ceil(widest / field);
  const x = {
    field: 'px',
    type: 'quantitative',
    scale: { domain: [0, WIDTH], nice: false, zero: false },
    axis: null,
  } as const;
  const y = {
    field: 'value',
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[ticks.length - 1]], nice: false, zero: false },
    axis: { values: ticks, labelExpr: labelled(ticks, (value) => words.value(value, ticks)), title: null },
  } as const;
  const size = field < 24 ? 7 : 18;
  const spec = {
    width: WIDTH,
    height: HEIGHT,
    layer: [
      {
        data: { values: [{ value: base }] },
        mark: { type: 'rule', color: QUIET, strokeWidth: 0.8, strokeDash: [3, 3] },
        encoding: { y },
      },
      {
        data: { values: positions.slice(1).map((_, i) => ({ px: (i + 1) * field })) },
        mark: { type: 'rule', color: HAIRLINE, strokeWidth: positions.length > 24 ? 0 : 0.7 },
        encoding: { x },
      },
      {
        data: { values: medians },
        mark: { type: 'rule', color: INK, strokeWidth: 2.4 },
        encoding: { x, x2: { field: 'end' }, y },
      },
      {
        data: { values: points },
        mark: { type: 'line', color: QUIET, strokeWidth: 0.7 },
        encoding: { x, y, detail: { field: 'i' } },
      },
      {
        data: { values: points.filter(({ isLatest }) => !isLatest) },
        mark: { type: 'point', fill: PAPER, stroke: INK, strokeWidth: 1, size, opacity: 1 },
        encoding: { x, y },
      },
      {
        data: { values: points.filter(({ isLatest }) => isLatest) },
        mark: { type: 'point', filled: true, color: INK, size: size * 1.5, opacity: 1 },
        encoding: { x, y },
      },
      {
        data: { values: names.filter(({ i }) => i % step === 0) },
        mark: { type: 'text', color: QUIET, fontSize: LABEL },
        encoding: { x, y: { value: HEIGHT + 14 }, text: { field: 'name' } },
      },
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}
