import { mkdtemp, open, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { readText as read, refusal, wanted } from './read-text.js';

describe('what is read', () => {
  test('a wide file, with a byte-order mark, spaces round names, an empty cell and a row left out', async () => {
    const figures = await read('\uFEFFquarter, paint ,rope\n2024-Q1,218,1\n2024-Q2,,2\n2024-Q4,237.5,3\n');
    expect(figures.get('paint')).toEqual({
      every: 'quarter',
      start: '2024-Q1',
      values: [218, null, null, 237.5],
      findings: [{ id: 'missing', periods: ['2024-Q2', '2024-Q3'], done: 'left-missing' }],
    });
  });

  test('a long file', async () => {
    const figures = await read(
      'quarter,item,sold\n2024-Q1,paint,1\n2024-Q1,rope,5\n2024-Q2,paint,-2\n2024-Q2,rope,6\n',
      {
        series: 'item',
        value: 'sold',
      },
    );
    expect(figures.get('paint')?.values).toEqual([1, -2]);
  });

  test.each([
    ['2024-03-31,1\n2024-06-30,2\n2024-09-30,3\n', 'quarter', '2024-Q1'],
    ['2024-01,1\n2024-02,2\n', 'month', '2024-01'],
    ['2024-S1,1\n2024-S2,2\n', 'half-year', '2024-S1'],
    ['2024-01-31,1\n2024-02-29,2\n2024-03-31,3\n', 'month', '2024-01'],
  ])('periods %j are %s figures', async (rows, every, start) => {
    const figures = await read(`quarter,paint\n${rows}`);
    expect(figures.get('paint')).toMatchObject({ every, start });
  });

  test('dates fall into the reporting year’s quarters', async () => {
    const figures = await read('quarter,paint\n2024-04-30,1\n2024-07-31,2\n', { yearStarts: 4, every: 'quarter' });
    expect(figures.get('paint')).toMatchObject({ start: '2024-Q1', values: [1, 2] });
  });

  test('an unfinished last period is left out and told', async () => {
    const figures = await read('quarter,paint\n2026-Q2,1\n2026-Q3,2\n2026-Q4,3\n');
    expect(figures.get('paint')).toMatchObject({
      values: [1, 2],
      findings: [{ id: 'unfinished-left-out', periods: ['2026-Q4'], done: 'left-out' }],
    });
  });

  test('each way to write a missing figure; a young series starts at its first', async () => {
    const figures = await read(
      'quarter,paint\n2024-Q1,\n2024-Q2,5\n2024-Q3,-\n2024-Q4,n/a\n2025-Q1,.\n2025-Q2,6\n2025-Q3,\n',
    );
    expect(figures.get('paint')).toMatchObject({ start: '2024-Q2', values: [5, null, null, null, 6] });
  });

  test('any table of figures is read back as it was written', async () => {
    const value = fc.option(fc.double({ noNaN: true, noDefaultInfinity: true }), { nil: null });
    await fc.assert(
      fc.asyncProperty(fc.array(value, { minLength: 1, maxLength: 30 }), async (values) => {
        const all = [1, ...values, 2];
        const rows = all.map((v, i) => `${2000 + Math.floor(i / 4)}-Q${(i % 4) + 1},${v ?? ''}`);
        // 1.125 alone could be a thousand and some.
        const figures = await read(`quarter,paint\r\n${rows.join('\r\n')}`, { decimal: 'point' });
        expect(figures.get('paint')?.values).toEqual(all.map((v) => (v === null ? null : v + 0)));
      }),
      { numRuns: 60 },
    );
  });
});

describe('what is refused, with its place and a remedy', () => {
  test.each([
    ['quarter,paint\n2024-Q1,lots\n', /figures\.csv:2:2 "lots" stands where a number belongs/],
    ['quarter,paint\n31/03/2024,1\n', /no spacing of their own; write "every: quarter"/],
    ['quarter,paint\nspring,1\n', /figures\.csv:2:1 "spring" is not a period.*write 2024-Q1/],
    ['quarter,paint\n2024-Q1,1\n2024-03,2\n', /several kinds/],
    ['quarter,paint\n2024-Q1,1\n2024-Q1,2\n', /figures\.csv:3:2 the period "2024-Q1" stands here and in line 2/],
    ['quarter,piant\n2024-Q1,1\n', /column "paint" is not in figures\.csv.*did you mean "piant"/],
    ['quarter,paint,paint\n2024-Q1,1,2\n', /stands twice/],
    ['', /the file is empty/],
    ['quarter,paint\n', /no figures under them/],
    ['quarter,paint\n2024-Q1,"1\n', /quotes/],
    ['quarter,paint\n2030-Q1,1\n', /holds no figure up to 2026-10-05/],
  ])('%j', async (text, expected) => {
    expect(await refusal(text)).toMatch(expected);
  });

  test('a number and a period that the plan’s words exclude', async () => {
    expect(await refusal('quarter;paint\n2024-Q1;1,5\n', { decimal: 'point' })).toMatch(
      /:2:2 "1,5" is no number with a decimal point, which the plan says/,
    );
    expect(await refusal('quarter,paint\n2024-03,1\n', { every: 'quarter' })).toMatch(/:2:1 "2024-03" is out of step/);
  });

  test('all faults in one go, and no more than twenty', async () => {
    const rows = Array.from({ length: 30 }, (_, i) => `${2000 + i},x${i}`).join('\n');
    const message = await refusal(`quarter,paint\n${rows}\n`);
    expect(message.split('\n')).toHaveLength(21);
    expect(message).toMatch(/and 10 more/);
  });
});

describe('what would take too long or too much', () => {
  const megabyte = 1_000_000;

  test('a large file is refused unread', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'figures-'));
    const file = join(folder, 'large.csv');
    try {
      const handle = await open(file, 'w');
      await handle.truncate(200 * megabyte);
      await handle.close();
      expect(await refusal('', { file })).toMatch(/has 200 megabytes, and 20 are the most.*leave out/);
      expect(await refusal('', { file: folder })).toMatch(/is a folder/);
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  test.each([
    ['a cell of ten megabytes', `quarter,paint\n2024-Q1,"${'a'.repeat(10 * megabyte)}"\n`, /longer than 100000 bytes/],
    ['a million columns', `quarter,paint${',a'.repeat(megabyte)}\n2024-Q1,1\n`, /longer than 100000 bytes/],
    [
      'a number of many digits',
      `quarter,paint\n2024-Q1,${'9'.repeat(90_000)}\n`,
      /:2:2 "9{60}…" is not a number that can be counted/,
    ],
    ['separators without end', `quarter,paint\n2024-Q1,${"1' ".repeat(30_000)}\n`, /:2:2/],
    ['a period without end', `quarter,paint\n${'1 '.repeat(40_000)},1\n`, /:2:1 "(1 ){30}…" is not a period/],
    ['a million rows', `quarter,paint\n${'x,1\n'.repeat(megabyte)}`, /more than 500000 rows/],
    ['quotes in every cell', `quarter,paint\n${'a"b,'.repeat(100_000)}\n`, /:2 the quotes of a cell in this row/],
  ])('%s', async (_, text, expected) => {
    const start = performance.now();
    expect(await refusal(text)).toMatch(expected);
    expect(performance.now() - start).toBeLessThan(10_000);
  });

  test('fifty thousand rows in ten series, in a second or so', async () => {
    const names = Array.from({ length: 10 }, (_, i) => `item ${i}`);
    const rows = Array.from({ length: 50_000 }, (_, i) => {
      const month = Math.floor(i / 10);
      return `${String((month % 12) + 1).padStart(2, '0')}/${1600 + Math.floor(month / 12)};${names[i % 10]};1.${100 + (i % 900)},${i % 90}5`;
    });
    const start = performance.now();
    const figures = await read(`month;item;sold\n${rows.join('\n')}\n`, {
      period: 'month',
      series: 'item',
      value: 'sold',
      wanted: names.map(wanted),
    });
    expect(figures.get('item 3')).toMatchObject({ start: '1600-01', values: { length: 5000 } });
    // A good deal more than it takes, as tests run side by side.
    expect(performance.now() - start).toBeLessThan(5000);
  });
});
