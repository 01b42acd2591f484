import { createHash } from 'node:crypto';
import { parse } from 'csv-parse/sync';
import { expect, test } from 'vitest';
import { chainedRows, rowsOf, withRows } from '../../src/record/ledger.js';
import { sampleRecord } from './sample.js';

const entry = (slug: string, expected = 240) => ({
  record: sampleRecord({ slug, expected }),
  sha256: 'a'.repeat(64),
  replaces: null,
});

const sha = (text: string) => createHash('sha256').update(text).digest('hex');

test('a row holds what was said, and each row the SHA-256 of the line before it', () => {
  const ledger = withRows(null, chainedRows(null, [entry('paint'), entry('rope', -12.5)]));
  const rows = parse(ledger, { columns: true }) as Record<string, string>[];
  expect(rows[1]).toMatchObject({
    date: '2026-10-05',
    series: 'Antifouling paint',
    model: '(0,0,0)x(0,1,0)4',
    from: '2026-Q1',
    to: '2026-Q1',
    expected: '-12.5',
    low_80: '200',
    high_80: '280',
    order: '',
    record_sha256: 'a'.repeat(64),
    brief: '2026-10-05/rope',
    replaces: '',
  });
  const [heading, first] = ledger.split('\n');
  expect(rows.map((row) => row.previous_sha256)).toEqual([sha(heading ?? ''), sha(first ?? '')]);
});

test('a later write goes on from the last row', () => {
  const first = withRows(null, chainedRows(null, [entry('paint')]));
  const second = withRows(first, chainedRows(first, [entry('rope')]));
  expect(second.startsWith(first)).toBe(true);
  expect(rowsOf(second).at(-1)?.[11]).toBe(sha(first.trimEnd().split('\n').at(-1) ?? ''));
});

test('rows that are there already are not written again', () => {
  const rows = chainedRows(null, [entry('paint'), entry('rope')]);
  const half = withRows(null, rows.slice(0, 1));
  const whole = withRows(half, rows);
  expect(whole).toBe(withRows(null, rows));
  expect(withRows(whole, rows)).toBe(whole);
});

test('a spreadsheet that saves the same cells in its own way does not break the chain', () => {
  const rows = chainedRows(null, [entry('paint', -3)]);
  const ledger = withRows(null, rows);
  const cells = parse(ledger) as string[][];
  const quoted = cells.map((row) => row.map((cell) => `"${cell.replaceAll('"', '""')}"`).join(','));
  const resaved = `\uFEFF${quoted.join('\r\n')}`;
  expect(withRows(resaved, rows)).toBe(resaved);
  expect(chainedRows(resaved, [entry('rope')])).toEqual(chainedRows(ledger, [entry('rope')]));
  expect(withRows(resaved, chainedRows(resaved, [entry('rope')])).split('\n')).toHaveLength(4);
});

test('a file that is no ledger is refused, with what stands there', () => {
  expect(() => chainedRows('date;series\n', [entry('paint')])).toThrow('ledger.csv:1 begins with "date;series"');
});

test('a series name cannot smuggle a formula into the ledger', () => {
  const record = sampleRecord({ name: '=HYPERLINK("x")' });
  const [row] = chainedRows(null, [{ record, sha256: 'a'.repeat(64), replaces: null }]);
  expect(parse(row ?? '')[0][1]).toBe('\'=HYPERLINK("x")');
});
