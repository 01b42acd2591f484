/** What an order is expected to bring, or how likely it runs short, against its size: the flat top is the point of it. */
import type { TopLevelSpec } from 'vega-lite';
import type { BriefRecord } from '../record/record.js';
import { draw, labelled } from './draw.js';
import { ACCENT, INK, LABEL, PAPER, QUIET } from './look.js';
import { openTextWidth } from './metrics.js';
import { niceTicks, tickPlaces } from './ticks.js';

export interface OrderWords {
  readonly described: string;
  /** Under the axis. */
  readonly units: string;
  readonly number: (value: number, places: number) => string;
  /** A value of the curve: money, or a share. */
  readonly value: (value: number, places: number) => string;
  /** Beside their marks. */
  readonly best: string;
  readonly decided: string;
}

interface Point {
  readonly units: number;
  readonly result: number | null;
  readonly chanceShort: number;
}

const WIDTH = 560;
const HEIGHT = 118;

export async function orderChart(purchase: NonNullable<BriefRecord['purchase']>, words: OrderWords): Promise<string> {
  const heightOf = ({ result, chanceShort }: Point) => result ?? chanceShort;
  const curve = purchase.curve.map((point) => ({ x: point.units, y: heightOf(point) }));
  const xTicks = niceTicks(curve[0].x, curve[curve.length - 1].x, 8).filter(
    (tick) => tick <= curve[curve.length - 1].x,
  );
  const heights = curve.map(({ y }) => y);
  const [low, high] = [Math.min(...heights), Math.max(...heights)];
  // With room for the labels over the top.
  const yTicks = niceTicks(low, purchase.ratio === null ? high : high + 0.12 * (high - low), 4);
  const x = {
    field: 'x',
    type: 'quantitative',
    scale: { domain: [Math.min(xTicks[0], curve[0].x), curve[curve.length - 1].x], nice: false, zero: false },
    axis: {
      values: xTicks,
      labelExpr: labelled(xTicks, (value) => words.number(value, tickPlaces(xTicks))),
      title: words.units,
      labelFlush: false,
    },
  } as const;
  const y = {
    field: 'y',
    type: 'quantitative',
    scale: { domain: [yTicks[0], yTicks[yTicks.length - 1]], nice: false, zero: false },
    axis: {
      values: yTicks,
      labelExpr: labelled(yTicks, (value) => words.value(value, tickPlaces(yTicks))),
      title: null,
    },
  } as const;
  const width = await openTextWidth();
  const [least, most] = x.scale.domain;
  // Of two marks the left one's label stands on its left; a label also does where its right has no room for it. Labels
  // stand over the curve, but left of a mark on the falling chance, where the curve is above it.
  const mark = (outcome: Point, text: string, { isChosen, isLeft }: { isChosen: boolean; isLeft: boolean }) => {
    const room = ((most - outcome.units) / (most - least)) * WIDTH;
    const toLeft = isLeft || room < width(text, { family: 'sans', size: LABEL, weight: 600 }) + 12;
    const dy = purchase.ratio === null && toLeft ? 7 : -11;
    const data = { values: [{ x: outcome.units, y: heightOf(outcome), text }] };
    const color = isChosen ? ACCENT : INK;
    const fill = isChosen ? ACCENT : PAPER;
    return [
      {
        data,
        mark: { type: 'point', filled: true, size: 52, opacity: 1, fill, stroke: color, strokeWidth: 1.4 },
        encoding: { x, y },
      },
      {
        data,
        mark: { type: 'text', align: toLeft ? 'right' : 'left', dx: toLeft ? -7 : 7, dy, color, fontWeight: 600 },
        encoding: { x, y, text: { field: 'text' } },
      },
    ];
  };
  const { best, decided } = purchase;
  // What is to be ordered is in the accent; where the planner decided otherwise, the best is hollow.
  const marks =
    decided === null
      ? mark(best, words.best, { isChosen: true, isLeft: false })
      : [
          ...mark(best, words.best, { isChosen: false, isLeft: best.units < decided.units }),
          ...mark(decided, words.decided, { isChosen: true, isLeft: decided.units < best.units }),
        ];
  const spec = {
    width: WIDTH,
    height: HEIGHT,
    layer: [
      { data: { values: curve }, mark: { type: 'line', color: INK, strokeWidth: 1.3 }, encoding: { x, y } },
      {
        data: { values: purchase.nearby.map((each) => ({ x: each.units, y: heightOf(each) })) },
        mark: { type: 'point', filled: true, color: QUIET, size: 22, opacity: 1 },
        encoding: { x, y },
      },
      ...marks,
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}
