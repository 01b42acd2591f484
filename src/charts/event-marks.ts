/**
 * Where events are marked on a chart over time: the periods that each is marked over, and a place for its name that is
 * clear of the other names and, if it can be, of the line.
 */

export interface EventSpan {
  readonly what: string;
  /** First and last period, on the chart's axis; one that lasts has no last. */
  readonly from: number;
  readonly to: number | null;
}

export interface Frame {
  /** First and last value of the axis, and pixels for each of its steps. */
  readonly least: number;
  readonly most: number;
  readonly perStep: number;
  /** The plot's height in pixels, and where a period's figure stands in it, from the top; null where there is none. */
  readonly height: number;
  readonly heightOf: (t: number) => number | null;
  /** A name's width in pixels. */
  readonly widthOf: (text: string) => number;
}

export interface EventMark extends EventSpan {
  /** Half a step beyond the periods on both sides; alike where the event lasts. */
  readonly start: number;
  readonly end: number;
  /** The name's middle on the axis, and its baseline in pixels from the top. */
  readonly t: number;
  readonly y: number;
}

/** Pixels from one name to the next above or below it, and from a name to the plot's edge. */
const LINE = 13;
const EDGE = 9;
/** Pixels from the line where a lasting event begins to its name. */
const GAP = 4;

/** Events that touch the axis' span, each with a place for its name, at the top or the bottom, whichever is freer. */
export function eventMarks(events: readonly EventSpan[], frame: Frame): EventMark[] {
  const placed: (EventMark & { readonly half: number })[] = [];
  for (const event of events.filter((each) => touches(each, frame))) {
    const start = Math.max(event.from, frame.least) - 0.5;
    const end = event.to === null ? start : Math.min(event.to, frame.most) + 0.5;
    const half = Math.min(frame.widthOf(event.what) / 2 / frame.perStep, (frame.most - frame.least) / 2);
    const middle = event.to === null ? start + half + GAP / frame.perStep : (start + end) / 2;
    const t = Math.min(Math.max(middle, frame.least + half), frame.most - half);
    const heights = stepsBetween(t - half, t + half).flatMap((step) => frame.heightOf(step) ?? []);
    const isTop = Math.min(...heights, frame.height) > frame.height - Math.max(...heights, 0);
    const rowAt = (row: number) => (isTop ? EDGE + LINE * row : frame.height - EDGE - LINE * row);
    const isFree = (y: number) => placed.every((other) => Math.abs(other.t - t) > other.half + half || other.y !== y);
    let row = 0;
    while (!isFree(rowAt(row))) row++;
    placed.push({ ...event, start, end, t, half, y: rowAt(row) });
  }
  return placed.map(({ half, ...mark }) => mark);
}

const touches = ({ from, to }: EventSpan, { least, most }: Frame): boolean =>
  from <= most && (to === null ? from >= least : to >= least);

const stepsBetween = (from: number, to: number): number[] =>
  Array.from({ length: Math.floor(to) - Math.ceil(from) + 1 }, (_, i) => Math.ceil(from) + i);
