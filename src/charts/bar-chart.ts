/** Bars from zero at whole steps: weights of past figures, the echo of a surprise, autocorrelations. */
import type { TopLevelSpec } from 'vega-lite';
import { draw, labelled } from './draw.js';
import { ACCENT, HAIRLINE, INK, QUIET } from './look.js';
import { niceTicks, tickPlaces } from './ticks.js';

export interface BarWords {
  readonly described: string;
  /** What is counted along the axis. */
  readonly axis: string;
  readonly number: (value: number, places: number) => string;
}

export interface Bars {
  readonly bars: readonly { readonly step: number; readonly value: number }[];
  /** Dashed lines at plus and minus this. */
  readonly bound?: number;
  /** Bars of the outlook's own kind are drawn in the accent. */
  readonly ahead?: boolean;
  /** Of the plot, in px; half a page unless given. */
  readonly width?: number;
}

export function barChart({ bars, bound, ahead = false, width = 262 }: Bars, words: BarWords): Promise<string> {
  const values = bars.map(({ value }) => value);
  // With bounds on both sides the axis reaches as far on both.
  const reach = bound === undefined ? 0 : Math.max(bound, ...values.map(Math.abs));
  const ticks = niceTicks(Math.min(0, ...values, -reach), Math.max(0, ...values, reach), 4);
  const places = tickPlaces(ticks);
  const every = Math.ceil(bars.length / (width / 22));
  const steps = bars.map(({ step }) => step);
  const x = {
    field: 'step',
    type: 'quantitative',
    scale: { domain: [Math.min(...steps) - 0.6, Math.max(...steps) + 0.6], nice: false, zero: false },
    axis: {
      values: steps.filter((step) => step % every === 0),
      title: words.axis,
      labelExpr: 'datum.value',
      domain: false,
      ticks: false,
    },
  } as const;
  const y = {
    field: 'value',
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[ticks.length - 1]], nice: false },
    axis: { values: ticks, labelExpr: labelled(ticks, (value) => words.number(value, places)), title: null },
  } as const;
  const lines = bound === undefined ? [0] : [0, bound, -bound];
  const spec = {
    width,
    height: 54,
    layer: [
      ...lines.map((value) => ({
        data: { values: [{ value }] },
        mark:
          value === 0
            ? { type: 'rule', color: QUIET, strokeWidth: 0.8 }
            : { type: 'rule', color: QUIET, strokeDash: [3, 3], strokeWidth: 0.8 },
        encoding: { y },
      })),
      {
        data: { values: bars },
        mark: {
          type: 'bar',
          color: ahead ? ACCENT : INK,
          width: Math.min(9, 160 / bars.length),
          stroke: HAIRLINE,
          strokeWidth: 0,
        },
        encoding: { x, y },
      },
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}
