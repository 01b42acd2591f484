/** Page 3 over a grid of forms: every sum, meaning and sentence of whole records, with no slip in it. */
import { beforeAll, describe, expect, test } from 'vitest';
import { meaningRows } from '../../src/page/coefficients.js';
import { formatsOf } from '../../src/page/formats.js';
import { madeOf, sumTable } from '../../src/page/how-made.js';
import { loadTheme, type Theme } from '../../src/page/theme.js';
import type { PlannedSeries } from '../../src/plan/plan.js';
import { assemble } from '../../src/record/assemble.js';
import { briefInputs } from '../../src/record/inputs.js';
import type { BriefRecord } from '../../src/record/record.js';
import { createGenerator } from '../../src/stats/generator.js';
import { planned } from '../record/planned.js';

let theme: Theme;
beforeAll(async () => {
  theme = await loadTheme('en-GB');
});

const { normal } = createGenerator(5);
const seasonal = (season: number, years: number) =>
  Array.from({ length: season * years }, (_, t) =>
    Math.round(300 + 2 * t + 90 * Math.sin((2 * Math.PI * t) / season) + 25 * normal()),
  );
const KINDS = {
  quarter: { start: '2015-Q1', season: 4, values: seasonal(4, 11) },
  month: { start: '2018-01', season: 12, values: seasonal(12, 7) },
  year: { start: '1980', season: 1, values: seasonal(8, 5) },
} as const;

/** The record of made-up figures under a model, as `write` would make it. */
function recordOf(kind: keyof typeof KINDS, changes: Partial<PlannedSeries>): BriefRecord {
  const { start, season, values } = KINDS[kind];
  const { plan, series } = planned({ model: '(0,1,1)', ahead: Math.max(season, 2) });
  const figures = { every: kind, start, values, findings: [] };
  const inputs = briefInputs(plan, { ...series, ...changes }, figures, '0'.repeat(64));
  return assemble(inputs, { version: '0.1.0', folder: '2026-10-05' });
}

const FORMS: readonly (readonly [keyof typeof KINDS, string])[] = [
  ...['(0,1,1)x(0,1,1)4', '(1,0,0)x(0,1,1)4', '(1,0,0)x(1,0,0)4', '(2,1,0)x(1,1,0)4', '(0,0,0)x(0,1,0)4'],
  ...['(0,0,0)', '(1,1,0)', '(0,2,2)', '(0,2,1)x(0,1,1)4', '(0,1,1)x(0,2,1)4', '(0,0,1)x(0,0,1)4', '(0,1,2)x(2,1,0)4'],
].map((form) => ['quarter', form] as const);
const MONTHLY = ['(0,1,1)x(0,1,1)12', '(1,0,2)x(0,1,1)12', '(2,0,0)x(1,0,0)12'].map((form) => ['month', form] as const);
const YEARLY = ['(0,1,1)', '(1,1,0)', '(2,0,1)'].map((form) => ['year', form] as const);

const SLIPS =
  /undefined|NaN|null|Infinity|\{\{|[-−]0(?![\d.,])| {2}| [.,;:]|^\s*$|\b1 (quarters|months|years)\b|\bone later\b/;

describe.each([...FORMS, ...MONTHLY, ...YEARLY])('each %s, %s', (kind, model) => {
  test.each(['plain', 'log', 'box-cox 0.3'])('on the scale %s, with a constant and without', (scale) => {
    const [, d, D] = /\(\d,(\d),\d\)(?:x\(\d,(\d),\d\))?/.exec(model) ?? [];
    for (const constant of Number(d) + Number(D ?? 0) < 2 ? [true, false] : [false]) {
      const record = recordOf(kind, { model, scale, constant });
      const formats = formatsOf(record.plan, record.series.every);
      const made = madeOf(record, theme, formats, (tex) => tex);
      const sum = sumTable(record, theme, formats);
      const meaning = meaningRows(record, theme, formats);
      expect(meaning.rows).toHaveLength(record.fit.coefficients.length);
      const sentences = [made.paragraph, made.notation, made.note, sum.lead, ...meaning.rows.map(({ says }) => says)];
      for (const sentence of sentences) expect(sentence).toMatch(/^(<[^>]+>)*\p{L}.*\.$/su);
      const cells = [...sum.rows, sum.total, ...sum.back, ...meaning.rows].flatMap((row) => Object.values(row));
      for (const text of [...sentences, ...cells].filter((each) => typeof each === 'string' && each !== ''))
        expect(String(text).replace(/<[^>]+>/g, '')).not.toMatch(SLIPS);
      for (const { says, symbol } of meaning.rows) expect(says, symbol).not.toMatch(/\b(-|−)\d+%/);
    }
  });
});

test('the sentences say what the numbers are: a gain carried on, a surprise shared out', () => {
  const record = recordOf('quarter', { model: '(1,0,0)x(0,1,1)4' });
  const [ar, ma] = meaningRows(record, theme, formatsOf(record.plan, 'quarter')).rows;
  const [phi, Theta] = record.fit.coefficients.map(({ value }) => value);
  expect(phi).toBeGreaterThan(0.1);
  expect(ar.says).toContain(
    `About ${Math.round(100 * phi)}% of one quarter’s gain over last year carries into the next.`,
  );
  if (1 + Theta < 0.015) expect(ma.says).toContain('the same in all years');
  else
    expect(ma.says).toContain(
      `About ${Math.round(100 * (1 + Theta))}% of a surprise is taken into the season’s pattern`,
    );
});
