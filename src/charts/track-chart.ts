/** How forecasts one step ahead turned out: each one's range and what happened, as shares of what was expected. */
import type { TopLevelSpec } from 'vega-lite';
import { draw, labelled } from './draw.js';
import { BAND, INK, PAPER, QUIET } from './look.js';
import { niceTicks } from './ticks.js';

export interface TrackWords {
  readonly described: string;
  /** A share of what was expected: +0.1 is a tenth more. */
  readonly share: (share: number) => string;
  readonly periodName: (period: string) => string;
}

/** More forecasts than this are left out, the oldest first. */
const MOST = 12;

/** Null where a share has no meaning: something expected at or below zero, or nothing to show. */
/** A forecast one step ahead, and what happened. */
export interface Tracked {
  readonly period: string;
  readonly expected: number;
  readonly range80: readonly [number, number];
  readonly actual: number;
}

export function trackChart(forecasts: readonly Tracked[], words: TrackWords): Promise<string> | null {
  const shown = forecasts.slice(-MOST);
  if (shown.length === 0 || shown.some(({ expected }) => !(expected > 0))) return null;
  const points = shown.map(({ expected, range80, actual }, i) => ({
    i,
    low: range80[0] / expected - 1,
    high: range80[1] / expected - 1,
    actual: actual / expected - 1,
    isInside: actual >= range80[0] && actual <= range80[1],
  }));
  const ends = points.flatMap(({ low, high, actual }) => [low, high, actual]);
  const reach = niceTicks(0, Math.max(...ends.map(Math.abs)), 2);
  const ticks = [-reach[reach.length - 1], 0, reach[reach.length - 1]];
  const last = points.length - 1;
  const names = [0, last].map((i) => `datum.value === ${i} ? ${JSON.stringify(words.periodName(shown[i].period))}`);
  const x = {
    field: 'i',
    type: 'quantitative',
    scale: { domain: [-0.8, last + 0.8], nice: false, zero: false },
    axis: { values: [0, last], labelExpr: `${names.join(' : ')} : ''`, title: null, domain: false, ticks: false },
  } as const;
  const y = {
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[2]], nice: false },
    axis: { values: ticks, labelExpr: labelled(ticks, words.share), title: null },
  } as const;
  const dot = { type: 'point', filled: true, size: 22, opacity: 1, stroke: INK, strokeWidth: 1 } as const;
  const spec = {
    width: 262,
    height: 44,
    layer: [
      {
        data: { values: [{ y: 0 }] },
        mark: { type: 'rule', color: QUIET, strokeWidth: 0.8 },
        encoding: { y: { ...y, field: 'y' } },
      },
      {
        data: { values: points },
        mark: { type: 'bar', color: BAND, width: 7 },
        encoding: { x, y: { ...y, field: 'low' }, y2: { field: 'high' } },
      },
      // Filled inside its range, hollow outside: told apart without colour.
      ...[true, false].map((isInside) => ({
        data: { values: points.filter((point) => point.isInside === isInside) },
        mark: { ...dot, fill: isInside ? INK : PAPER },
        encoding: { x, y: { ...y, field: 'actual' } },
      })),
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}
