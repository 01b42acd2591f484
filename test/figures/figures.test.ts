import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { type FiguresRequest, readFigures } from '../../src/figures/figures.js';
import { InputError } from '../../src/figures/input-error.js';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'figures-'));
});
afterAll(() => rm(folder, { recursive: true }));

const at = { file: 'plan.yaml', line: 1, column: 1 };

async function read(text: string | Uint8Array, asked: Partial<FiguresRequest> = {}) {
  const file = join(folder, 'figures.csv');
  await writeFile(file, text);
  return readFigures({
    file,
    fileTyped: 'figures.csv',
    at,
    period: 'quarter',
    periodAt: at,
    every: null,
    series: null,
    seriesAt: at,
    value: null,
    valueAt: at,
    issued: '2026-10-05',
    yearStarts: 1,
    wanted: [{ slug: 'paint', name: 'Paint', column: 'paint', columnAt: at }],
    ...asked,
  });
}

const refusal = async (text: string | Uint8Array, asked: Partial<FiguresRequest> = {}): Promise<string> => {
  try {
    await read(text, asked);
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error('was not refused');
};

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
        const figures = await read(`quarter,paint\r\n${rows.join('\r\n')}`);
        expect(figures.get('paint')?.values).toEqual(all.map((v) => (v === null ? null : v + 0)));
      }),
      { numRuns: 60 },
    );
  });
});

describe('what is refused, with its place and a remedy', () => {
  test.each([
    ['quarter;paint\n2024-Q1;1\n', /figures\.csv:1 .*divided by ";".*commas/],
    ['quarter\tpaint\n2024-Q1\t1\n', /divided by tabs/],
    ['quarter,paint\n2024-Q1,"1,234"\n', /figures\.csv:2:2 "1,234" has a comma.*decimal point/],
    ['quarter,paint\n2024-Q1,1.234.567\n', /figures\.csv:2:2 "1\.234\.567" is not a plain number/],
    ['quarter,paint\n2024-Q1,£12\n', /figures\.csv:2:2 "£12"/],
    ['quarter,paint\n2024-Q1,lots\n', /figures\.csv:2:2 "lots" stands where a number belongs/],
    ['quarter,paint\nQ1 2024,1\n', /figures\.csv:2:1 "Q1 2024" is not a period/],
    ['quarter,paint\n31/03/2024,1\n', /figures\.csv:2:1 "31\/03\/2024" is not a period/],
    ['quarter,paint\n2024-Q1,1\n2024-03,2\n', /several kinds/],
    ['quarter,paint\n2024-Q1,1\n2024-Q1,2\n', /figures\.csv:3:2 the period "2024-Q1" stands here and in line 2/],
    ['quarter,paint\n2024-Q2,1\n2024-Q1,2\n', /figures\.csv:3:2 .*sort the rows/],
    ['quarter,piant\n2024-Q1,1\n', /column "paint" is not in figures\.csv.*did you mean "piant"/],
    ['quarter,paint,paint\n2024-Q1,1,2\n', /stands twice/],
    ['', /the file is empty/],
    ['quarter,paint\n', /no figures under them/],
    ['quarter,paint\n2024-Q1,"1\n', /quotes/],
    ['quarter,paint\n2030-Q1,1\n', /holds no figure up to 2026-10-05/],
  ])('%j', async (text, expected) => {
    expect(await refusal(text)).toMatch(expected);
  });

  test('other encodings and other kinds of file', async () => {
    expect(await refusal(Buffer.from('\uFEFFquarter,paint\n', 'utf16le'))).toMatch(/UTF-16/);
    expect(await refusal(Buffer.from('quarter,pa\xefnt\n2024-Q1,1\n', 'latin1'))).toMatch(/not in UTF-8 \(byte 1\d /);
    expect(await refusal(Buffer.from([0x50, 0x4b, 3, 4, 0, 0]))).toMatch(/spreadsheet/);
  });

  test('all faults in one go, and no more than twenty', async () => {
    const rows = Array.from({ length: 30 }, (_, i) => `${2000 + i},x${i}`).join('\n');
    const message = await refusal(`quarter,paint\n${rows}\n`);
    expect(message.split('\n')).toHaveLength(21);
    expect(message).toMatch(/and 10 more/);
  });
});
