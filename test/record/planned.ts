/** A made-up plan of Saltmarsh Boatyard with one series, as the plan's reader would give it. */
import type { SeriesFigures } from '../../src/figures/figures.js';
import { type Plan, type PlannedSeries, parsePlan } from '../../src/plan/plan.js';

const text = `heading: Stores outlook
prepared-for: Saltmarsh Boatyard
issued: 2026-10-05
currency: GBP
ahead: AHEAD
figures:
  file: figures.csv
  period: quarter
series:
  - name: Rope
    column: rope
    unit: metres
    model: MODEL
`;

export interface Changes {
  readonly model?: string;
  readonly ahead?: number;
  /** Lines of the series, indented as it is. */
  readonly more?: string;
}

export function planned({ model = '(0,0,0)x(0,1,0)4', ahead = 4, more = '' }: Changes = {}): {
  readonly plan: Plan;
  readonly series: PlannedSeries;
} {
  const plan = parsePlan(text.replace('AHEAD', String(ahead)).replace('MODEL', model) + more, 'plan.yaml', () => []);
  const [series] = plan.series;
  if (series === undefined) throw new Error('the plan has one series');
  return { plan, series };
}

/** Three years of quarters from 2023-Q3 on, the last known being 2026-Q2. */
export const figures = (values: readonly (number | null)[] = threeYears): SeriesFigures => ({
  ...planlessFigures,
  values,
});

const threeYears = [30, 11, 12, 20, 33, 10, 14, 21, 36, 12, 13, 25];
const planlessFigures: Omit<SeriesFigures, 'values'> = {
  every: 'quarter',
  start: '2023-Q3',
  findings: [],
};
