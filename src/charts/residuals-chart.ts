/** The model's one-step surprises over time, in standard deviations. */
import type { TopLevelSpec } from 'vega-lite';
import { periodIndex, periodText, position } from '../calendar/calendar.js';
import type { BriefRecord } from '../record/record.js';
import type { BarWords } from './bar-chart.js';
import { draw, labelled } from './draw.js';
import { INK, QUIET } from './look.js';
import { niceTicks, tickPlaces } from './ticks.js';

export type ResidualWords = Omit<BarWords, 'axis'> & { readonly yearName: (period: string) => string };

export function residualsChart({ series, figures, fit, plan }: BriefRecord, words: ResidualWords): Promise<string> {
  const first = periodIndex(figures.start, series.every);
  const points = fit.standardizedResiduals.flatMap((value, t) => (value === null ? [] : [{ t, value }]));
  const reach = Math.max(2.5, ...points.map(({ value }) => Math.abs(value)));
  const ticks = niceTicks(-reach, reach, 3);
  const years = fit.standardizedResiduals.flatMap((_, t) =>
    position(first + t, series.every, plan.yearStarts) === 1 ? [t] : [],
  );
  const every = Math.ceil(years.length / 6);
  const name = (t: number) => JSON.stringify(words.yearName(periodText(first + t, series.every)));
  const x = {
    field: 't',
    type: 'quantitative',
    scale: { domain: [-0.6, fit.standardizedResiduals.length - 0.4], nice: false, zero: false },
    axis: {
      values: years.filter((_, i) => i % every === 0),
      labelExpr: `${years.map((t) => `datum.value === ${t} ? ${name(t)}`).join(' : ')}${years.length > 0 ? ' : ' : ''}''`,
      title: null,
      domain: false,
    },
  } as const;
  const y = {
    field: 'value',
    type: 'quantitative',
    scale: { domain: [ticks[0], ticks[ticks.length - 1]], nice: false },
    axis: { values: ticks, labelExpr: labelled(ticks, (value) => words.number(value, tickPlaces(ticks))), title: null },
  } as const;
  const spec = {
    width: 262,
    height: 54,
    layer: [
      { data: { values: [{ value: 0 }] }, mark: { type: 'rule', color: QUIET, strokeWidth: 0.8 }, encoding: { y } },
      {
        data: { values: points },
        mark: { type: 'rule', color: INK, strokeWidth: 0.8 },
        encoding: { x, y, y2: { datum: 0 } },
      },
      {
        data: { values: points },
        mark: { type: 'point', filled: true, color: INK, size: 14, opacity: 1 },
        encoding: { x, y },
      },
    ],
  };
  return draw(spec as unknown as TopLevelSpec, words);
}
