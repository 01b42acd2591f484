/** The cover's small line: the last years of a series and its outlook. */
import type { TopLevelSpec } from 'vega-lite';
import type { CoverRecord } from '../record/cover.js';
import { draw } from './draw.js';
import { ACCENT, INK } from './look.js';

export function sparkline(row: CoverRecord['rows'][number], described: string): Promise<string> {
  const past = row.history.map((y, t) => ({ t, y }));
  const ahead = row.outlook.map((y, h) => ({ t: row.history.length + h, y }));
  const joined = [...past.slice(-1), ...ahead];
  const encoding = {
    x: { field: 't', type: 'quantitative', axis: null, scale: { zero: false, nice: false } },
    y: { field: 'y', type: 'quantitative', axis: null, scale: { zero: false, nice: false } },
  } as const;
  const spec = {
    width: 132,
    height: 26,
    layer: [
      { data: { values: past }, mark: { type: 'line', color: INK, strokeWidth: 1 }, encoding },
      { data: { values: joined }, mark: { type: 'line', color: ACCENT, strokeWidth: 1.6 }, encoding },
    ],
  };
  return draw(spec as unknown as TopLevelSpec, { described });
}
