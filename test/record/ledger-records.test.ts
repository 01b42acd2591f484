import { expect, test } from 'vitest';
import { chainedRows } from '../../src/record/ledger.js';
import { checkLedger } from '../../src/record/ledger-check.js';
import { filedLedger, joined } from './filed-ledger.js';

const { lines, files } = filedLedger(['paint', 'rope', 'oars', 'rope']);
const at = (path: string) => files.find((file) => file.path === path);
const kept = '2026-10-05/replaced/1/rope';

const faultsOf = (known = files, ledger = lines) => checkLedger(joined(ledger), known).faults;

/** The files with one of them otherwise, or gone. */
const withFile = (path: string, change: Partial<(typeof files)[number]> | null) =>
  files.flatMap((file) => (file.path !== path ? [file] : change === null ? [] : [{ ...file, ...change }]));

test('rows and records that belong together, what was replaced too', () => {
  expect(at(kept)?.brief).toBe('2026-10-05/rope');
  expect(faultsOf()).toEqual([]);
});

test.each(['2026-10-05/paint', kept])('the record %s was changed', (path) => {
  const line = path === kept ? 3 : 2;
  const faults = faultsOf(withFile(path, { sha256: 'd'.repeat(64) }));
  expect(faults).toMatchObject([{ kind: 'record-changed', line, path, row: null }]);
  expect(faults[0]?.message).toMatch(/begins with dddddddddddd…, and ledger.csv:\d has [0-9a-f]{12}…\. Put it back/);
  // One that can't be read any more is the same to the ledger.
  expect(faultsOf(withFile(path, { sha256: 'd'.repeat(64), record: null }))).toEqual(faults);
});

test.each(['2026-10-05/oars', kept])('the record %s is gone', (path) => {
  expect(faultsOf(withFile(path, null))).toMatchObject([{ kind: 'record-gone', path, line: path === kept ? 3 : 4 }]);
});

test('the last row was changed: its record says otherwise', () => {
  const changed = [...lines.slice(0, -1), (lines.at(-1) ?? '').replace(',103,', ',3,')];
  expect(faultsOf(files, changed)).toMatchObject([{ kind: 'changed', line: 5, path: '2026-10-05/rope' }]);
  expect(faultsOf(files, changed)[0]?.message).toContain('expected is "3", and the record gives "103"');
});

test('rows taken out at the end: the records are told, with rows that make the ledger whole', () => {
  const faults = faultsOf(files, lines.slice(0, 3));
  expect(faults.map(({ kind, path }) => [kind, path])).toEqual([
    ['record-without-row', '2026-10-05/oars'],
    ['record-without-row', '2026-10-05/rope'],
  ]);
  expect(faultsOf(files, [...lines.slice(0, 3), ...faults.map(({ row }) => row ?? '')])).toEqual([]);
});

test('a record without a row that can’t be read has no row to put back', () => {
  const faults = faultsOf(withFile('2026-10-05/rope', { record: null }), lines.slice(0, -1));
  expect(faults).toMatchObject([{ kind: 'record-without-row', path: '2026-10-05/rope', row: null }]);
});

test('a damaged record that was written anew unchanged: the one beside it is named', () => {
  const { lines, files } = filedLedger(['paint', 'oars']);
  const oars = files[1];
  if (oars === undefined || oars.record === null) throw new Error('two briefs are filed');
  const kept = '2026-10-05/replaced/1/oars';
  const entry = { record: oars.record, sha256: oars.sha256, replaces: `${kept}.json` };
  const ledger = joined(lines) + chainedRows(joined(lines), [entry]).join('');
  const damaged = { ...oars, path: kept, replaced: 1, sha256: 'e'.repeat(64), record: null };
  const { faults } = checkLedger(ledger, [...files, damaged]);
  expect(faults).toMatchObject([{ kind: 'record-changed', line: 3, path: kept }]);
  expect(faults[0]?.message).toContain('2026-10-05/oars.json is the same record: copy it there');
});
