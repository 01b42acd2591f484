import { parse } from 'csv-parse/sync';
import { expect, test } from 'vitest';
import { assemble } from '../../src/record/assemble.js';
import { canonicalJson } from '../../src/record/canonical.js';
import { figuresCsv } from '../../src/record/figures-csv.js';
import { briefInputs, inputsOfRecord, sameInputs } from '../../src/record/inputs.js';
import { recordSchema } from '../../src/record/record.js';
import { type Changes, figures, planned } from './planned.js';

const templates = '0'.repeat(64);
const inputs = (changes: Changes = {}, values?: readonly (number | null)[]) => {
  const { plan, series } = planned(changes);
  return briefInputs(plan, series, figures(values), templates);
};
const origin = { version: '0.1.0', folder: '2026-10-05' };

test('last year’s figure plus nothing: the record says so, and reads back as itself', () => {
  const record = assemble(inputs(), origin);
  // (0,0,0)x(0,1,0)4 forecasts last year's same quarter: the last four figures, in order.
  expect(record.outlook.periods.map(({ middle }) => middle)).toEqual([
    expect.closeTo(36, 9),
    expect.closeTo(12, 9),
    expect.closeTo(13, 9),
    expect.closeTo(25, 9),
  ]);
  expect(record.outlook.periods.map(({ period }) => period)).toEqual(['2026-Q3', '2026-Q4', '2027-Q1', '2027-Q2']);
  // σ² is the mean square of the eight yearly changes.
  const changes = [3, -1, 2, 1, 3, 2, -1, 4];
  expect(record.fit.innovationVariance).toBeCloseTo(changes.reduce((sum, x) => sum + x * x, 0) / 8, 9);
  expect(record.fit.residuals.slice(0, 4)).toEqual([null, null, null, null]);
  const text = canonicalJson(record);
  expect(canonicalJson(recordSchema.parse(JSON.parse(text)))).toBe(text);
});

test('the same inputs, or those of a filed record, give the same record to the byte', () => {
  const record = assemble(inputs({ model: '(1,0,0)x(0,1,0)4' }, wobbly), origin);
  const again = assemble(inputsOfRecord(recordSchema.parse(JSON.parse(canonicalJson(record)))), origin);
  expect(canonicalJson(again)).toBe(canonicalJson(record));
});

/** Five years of quarters: a season, a slow rise, and something that is neither. */
const wobbly = Array.from({ length: 20 }, (_, t) => 20 + t / 3 + 8 * Math.sin((t * Math.PI) / 2) + 3 * Math.sin(t * t));

test('a reporting year that figures and outlook cover adds what has happened', () => {
  const { totals } = assemble(inputs(), origin).outlook;
  expect(totals.map(({ kind, year, periods, known }) => [kind, year, periods.length, known])).toEqual([
    ['ahead', null, 4, 0],
    // 2026-Q1 and 2026-Q2, 13 and 25, are known; 2027 is not covered to its end.
    ['reporting-year', 2026, 2, 38],
  ]);
  const periods = assemble(inputs(), origin).outlook.periods;
  const ahead = periods.reduce((sum, { expected }) => sum + expected, 0);
  expect(totals[0]?.expected).toBeCloseTo(ahead, 9);
  expect(totals[1]?.expected).toBeCloseTo(38 + (periods[0]?.expected ?? 0) + (periods[1]?.expected ?? 0), 9);
});

test('a reporting year with a gap in it is not totalled', () => {
  const values = [30, 11, 12, 20, 33, 10, 14, 21, 36, 12, null, 25];
  const { totals } = assemble(inputs({}, values), origin).outlook;
  expect(totals.map(({ kind }) => kind)).toEqual(['ahead']);
});

test('inputs differ where the plan or a figure does, and not with the templates', () => {
  const { plan, series } = planned();
  expect(sameInputs(inputs(), briefInputs(plan, series, figures(), '1'.repeat(64)))).toBe(true);
  expect(sameInputs(inputs(), inputs({ ahead: 8 }))).toBe(false);
  expect(sameInputs(inputs(), inputs({ model: '(0,0,0)×(0,1,0) 4' }))).toBe(true);
  expect(sameInputs(inputs(), inputs({}, [30, 11, 12, 20, 33, 10, 14, 21, 36, 12, 13, 26]))).toBe(false);
});

test('events stand beside the figures as columns of ones, the lasting ones to the end of the outlook', () => {
  const { figures: used } = inputs({
    more: `    events:
      - { what: Slipway closed, from: 2024-Q1, to: 2024-Q2, effect: passing }
      - { what: New pontoon, from: 2026-Q1, effect: lasting }
`,
  });
  const marked = used.regressors.map(({ name, values }) => [name, values.join('')]);
  expect(marked).toEqual([
    ['event1', '0011000000000000'],
    ['event2', '0000000000111111'],
  ]);
  expect(used.events.map(({ coefficient }) => coefficient)).toEqual(['event1', 'event2']);
});

test('the CSV holds every figure and every period ahead', () => {
  const record = assemble(inputs({}, [30, 11, 12, null, 33, 10, 14, 21, 36, 12, 13, 25]), origin);
  const rows = parse(figuresCsv(record), { columns: true }) as Record<string, string>[];
  expect(rows.map(({ period }) => period)).toHaveLength(16);
  expect(rows[3]).toMatchObject({ period: '2024-Q2', figure: '', expected: '' });
  expect(rows[11]).toMatchObject({ period: '2026-Q2', figure: '25' });
  const [first] = record.outlook.periods;
  expect(rows[12]).toEqual({
    period: '2026-Q3',
    figure: '',
    expected: String(first?.expected),
    middle: String(first?.middle),
    low_80: String(first?.range80[0]),
    high_80: String(first?.range80[1]),
    low_95: String(first?.range95[0]),
    high_95: String(first?.range95[1]),
  });
});

test('too few figures for the model is an error that says how many it needs', () => {
  expect(() => assemble(inputs({ model: '(0,1,1)x(0,1,1)4' }), origin)).toThrow(
    /needs at least \d+ figures; there are 12/,
  );
});

test('shrunk: the record names every prior, and keeps the estimates that are free of them', () => {
  const more =
    '    fitted-by: shrunk\n    priors:\n      coefficients:\n        theta1: { centre: -0.3, spread: 0.1 }\n';
  const { model, fit } = assemble(inputs({ model: '(0,1,1)x(0,1,1)4', more }, wobbly), origin);
  expect(model.priors?.coefficients.theta1).toEqual({ centre: -0.3, spread: 0.1, on: 'coefficient' });
  expect(Object.keys(model.priors?.coefficients ?? {})).toEqual(['theta1', 'Theta1']);
  const free = assemble(inputs({ model: '(0,1,1)x(0,1,1)4' }, wobbly), origin).fit;
  expect(fit.unrestricted?.map(({ value }) => value)).toEqual(free.coefficients.map(({ value }) => value));
  expect(Math.abs(fit.coefficients[0].value + 0.3)).toBeLessThan(Math.abs(free.coefficients[0].value + 0.3));
  expect(free.unrestricted).toBeNull();
});

test('sold out: demand lies above what was sold, no surprise is read into it, and the forecast rises with it', () => {
  const sold = wobbly.map((value, t) => (t === 13 ? value - 6 : value));
  const before = assemble(inputs({ model: '(0,1,1)x(0,1,1)4' }, sold), origin);
  const record = assemble(inputs({ model: '(0,1,1)x(0,1,1)4', more: '    sold-out: [2026-Q4]\n' }, sold), origin);
  expect(record.fit.demand.map(({ period }) => period)).toEqual(['2026-Q4']);
  expect(record.fit.demand[0].middle).toBeGreaterThan(sold[13]);
  expect(record.fit.residuals[13]).toBeNull();
  expect(before.fit.residuals[13]).not.toBeNull();
  expect(record.facts.caveats.map(({ id }) => id)).toContain('sold-out');
});
