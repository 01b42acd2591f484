/** The picture of page 1: about five years of figures and the outlook with its ranges. */
import type { TopLevelSpec } from 'vega-lite';
import { periodIndex, periodText, position } from '../calendar/calendar.js';
import type { BriefRecord } from '../record/record.js';
import { draw, labelled } from './draw.js';
import { eventMarks } from './event-marks.js';
import { ACCENT, BAND, HAIRLINE, INK, LABEL, PAPER, QUIET } from './look.js';
import { openTextWidth } from './metrics.js';
import { niceTicks, tickPlaces } from './ticks.js';

export interface OutlookWords {
  readonly described: string;
  readonly eight: string;
  readonly nineteen: string;
  readonly lastYear: string;
  readonly number: (value: number, places: number) => string;
  /** A short name for a period ahead, on the rail. */
  readonly railName: (period: string) => string;
  /** The name of the year that a period begins, under the axis. */
  readonly yearName: (period: string) => string;
}

export const WIDTH = 658;
/** The size of the names on the rail, and the room between two of them. */
const RAIL_NAME = LABEL - 1.5;
const RAIL_GAP = 2;
/** Room at the right for the bands' labels. */
const LABELS = 74;

/** Whether the axis starts at zero: where the figures' own span is not small beside their level. */
export function startsAtZero({ figures, outlook }: BriefRecord): boolean {
  const values = [...shownValues(figures.values, 20), ...outlook.periods.flatMap(({ range95 }) => range95)];
  const [low, high] = [Math.min(...values), Math.max(...values)];
  return low < 0 || low < 0.6 * high;
}

const shownValues = (values: readonly (number | null)[], count: number): number[] =>
  values.slice(-count).filter((value) => value !== null);

/** `height` is the plot's, in px. */
export async function outlookChart(record: BriefRecord, words: OutlookWords, height: number): Promise<string> {
  const { series, figures, outlook, printed, plan } = record;
  const { every, season } = series;
  const shown = Math.min(figures.values.length, Math.max(5 * season, 12));
  const first = periodIndex(figures.start, every);
  const n = figures.values.length;
  const text = (t: number) => periodText(first + t, every);

  const history = Array.from({ length: shown }, (_, i) => n - shown + i).map((t) => ({ t, y: figures.values[t] }));
  const ahead = outlook.periods.map(({ expected, range80, range95 }, h) => ({
    t: n + h,
    y: expected,
    low: range80[0],
    high: range80[1],
    least: range95[0],
    most: range95[1],
    before: figures.values[n + h - season] ?? null,
    name: words.railName(text(n + h)),
    label: words.number(printed.periods[h].expected, printed.places),
  }));
  const last = figures.values[n - 1];
  const joined = [{ t: n - 1, y: last, low: last, high: last }, ...ahead];

  const values = [
    ...history.flatMap(({ y }) => (y === null ? [] : [y])),
    ...ahead.flatMap(({ least, most, before }) => [least, most, ...(before === null ? [] : [before])]),
  ];
  const zero = startsAtZero(record);
  const ticks = niceTicks(
    zero ? Math.min(0, ...values) : Math.min(...values),
    Math.max(...values, zero ? 0 : -Infinity),
    5,
  );
  const places = tickPlaces(ticks);

  const years = Array.from({ length: shown + ahead.length }, (_, i) => n - shown + i).filter(
    (t) => position(first + t, every, plan.yearStarts) === 1,
  );
  const yearEvery = Math.ceil(years.length / 10);
  const end = ahead[ahead.length - 1];
  const endLabels = spread(
    [
      { y: end.most, text: words.nineteen, color: QUIET },
      { y: end.high, text: words.eight, color: ACCENT },
      ...(end.before === null ? [] : [{ y: end.before, text: words.lastYear, color: QUIET }]),
    ],
    ticks,
    height,
  ).map((label) => ({ ...label, t: end.t }));

  const steps = shown + ahead.length - 1;
  const x = {
    field: 't',
    type: 'quantitative',
    scale: { domain: [n - shown - 0.4, n - shown + steps + 0.4], nice: false, zero: false },
    axis: {
      values: years.filter((_, i) => i % yearEvery === 0),
      labelExpr: `${years.map((t) => `datum.value === ${t} ? ${JSON.stringify(words.yearName(text(t)))}`).join(' : ')} : ''`,
      title: null,
      domain: true,
      labelFlush: false,
    },
  } as const;
  const y = {
    field: 'y',
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[ticks.length - 1]], nice: false, zero: false },
    axis: { values: ticks, labelExpr: labelled(ticks, (value) => words.number(value, places)), title: null },
  } as const;
  const point = (fields: string) => ({ x, y: { ...y, field: fields } });
  const perStep = (WIDTH - LABELS - 44) / (steps + 0.8);
  const width = await openTextWidth();
  const [bottom, top] = [ticks[0], ticks[ticks.length - 1]];
  const events = eventMarks(
    figures.events.map(({ what, from, to }) => ({
      what,
      from: periodIndex(from, every) - first,
      to: to === null ? null : periodIndex(to, every) - first,
    })),
    {
      least: n - shown,
      most: n - 1,
      perStep,
      height,
      heightOf: (t) => {
        const value = figures.values[t] ?? null;
        return value === null ? null : (height * (top - value)) / (top - bottom);
      },
      widthOf: (what) => width(what, { family: 'sans', size: LABEL, italic: true }),
    },
  );
  // Each period's number stands under it, in two rows where one is too narrow, and its name where that finds room on
  // one row. With many periods every second, third … is shown, with its name.
  const widest = (texts: readonly string[], size: number, weight: number) =>
    Math.max(...texts.map((each) => width(each, { family: 'sans', size, weight }))) + RAIL_GAP;
  const names = widest(
    ahead.map(({ name }) => name),
    RAIL_NAME,
    400,
  );
  const numbers = widest(
    ahead.map(({ label }) => label),
    LABEL,
    600,
  );
  const isNamed = names <= perStep || numbers > 2 * perStep;
  const railLabel = isNamed ? Math.max(names, numbers) : numbers;
  const rows = perStep < railLabel ? 2 : 1;
  const railStep = Math.ceil(railLabel / (perStep * rows));
  const rail = ahead.map((each, h) => ({ ...each, row: Math.floor(h / railStep) % rows, isShown: h % railStep === 0 }));
  const railRows = Array.from({ length: rows }, (_, row) => rail.filter((each) => each.row === row && each.isShown));

  const spec = {
    width: WIDTH - LABELS - 44,
    height,
    autosize: { type: 'pad' },
    layer: [
      {
        data: { values: events.filter(({ to }) => to !== null) },
        mark: { type: 'rect', color: HAIRLINE, opacity: 0.45 },
        encoding: { x: { ...x, field: 'start' }, x2: { field: 'end' }, y: { value: 0 }, y2: { value: height } },
      },
      {
        data: { values: events.filter(({ to }) => to === null) },
        mark: { type: 'rule', color: QUIET, strokeWidth: 0.8 },
        encoding: { x: { ...x, field: 'start' } },
      },
      {
        data: { values: joined },
        mark: { type: 'area', color: BAND },
        encoding: { x, y: { ...y, field: 'low' }, y2: { field: 'high' } },
      },
      {
        data: { values: [{ t: n - 0.5 }] },
        mark: { type: 'rule', color: HAIRLINE, strokeDash: [2, 2] },
        encoding: { x },
      },
      {
        data: { values: ahead },
        mark: { type: 'rule', color: ACCENT, strokeWidth: 0.9 },
        encoding: { x, y: { ...y, field: 'least' }, y2: { field: 'most' } },
      },
      {
        data: { values: ahead.filter(({ before }) => before !== null) },
        mark: { type: 'tick', color: QUIET, thickness: 1.1, size: 13, orient: 'horizontal' },
        encoding: point('before'),
      },
      { data: { values: history }, mark: { type: 'line', color: INK, strokeWidth: 1.3 }, encoding: { x, y } },
      {
        data: { values: history.filter(({ y }) => y !== null) },
        mark: { type: 'point', filled: true, color: INK, size: 15, opacity: 1 },
        encoding: { x, y },
      },
      { data: { values: joined }, mark: { type: 'line', color: ACCENT, strokeWidth: 2 }, encoding: { x, y } },
      {
        data: { values: ahead },
        mark: { type: 'point', filled: true, color: ACCENT, size: 34, opacity: 1, stroke: PAPER, strokeWidth: 1 },
        encoding: { x, y },
      },
      ...events.map((event) => ({
        data: { values: [event] },
        mark: { type: 'text', fontStyle: 'italic', color: QUIET },
        encoding: { x, y: { value: event.y }, text: { field: 'what' } },
      })),
      ...endLabels.map((label) => ({
        data: { values: [label] },
        mark: { type: 'text', align: 'left', dx: 13, dy: label.shift, color: label.color, limit: LABELS - 6 },
        encoding: { x, y, text: { field: 'text' } },
      })),
      ...railRows.flatMap((values, row) => {
        const top = height + 32 + (isNamed ? 28 : 13) * row;
        const text = (field: string, y: number, mark: object) => ({
          data: { values },
          mark: { type: 'text', ...mark },
          encoding: { x, y: { value: y }, text: { field } },
        });
        return [
          ...(isNamed ? [text('name', top, { color: QUIET, fontSize: RAIL_NAME })] : []),
          text('label', isNamed ? top + 13 : top, { color: ACCENT, fontWeight: 600 }),
        ];
      }),
    ],
  };
  return draw(spec as unknown as TopLevelSpec, { described: words.described });
}

/** Labels at the end of the bands, each at least a line below the one above it; `shift` is in px, downwards. */
function spread(
  labels: readonly { y: number; text: string; color: string }[],
  ticks: readonly number[],
  height: number,
) {
  const perPixel = (ticks[ticks.length - 1] - ticks[0]) / height || 1;
  let lowest = Number.NEGATIVE_INFINITY;
  return [...labels]
    .sort((a, b) => b.y - a.y)
    .map((label) => {
      const natural = (ticks[ticks.length - 1] - label.y) / perPixel;
      const placed = Math.max(natural, lowest + LABEL + 2);
      lowest = placed;
      return { ...label, shift: placed - natural };
    });
}
