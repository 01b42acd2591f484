import { expect, test } from 'vitest';
import { shelved } from '../../src/record/ledger-again.js';
import { followChain } from '../../src/record/ledger-chain.js';
import { orderedRows } from '../../src/record/ledger-order.js';
import { filedLedger, joined } from './filed-ledger.js';

const { lines, files } = filedLedger(['paint', 'rope', 'oars', 'rope', 'sails', 'flags']);

const faultsOf = (changed: readonly string[], known = files) =>
  followChain(orderedRows(joined(changed)), shelved(known)).faults;

/** The ledger with one line changed, counted as in the file. */
const withLine = (line: number, change: (text: string) => string) =>
  lines.map((text, i) => (i === line - 1 ? change(text) : text));

test('a chain that is whole has no faults', () => {
  expect(faultsOf(lines)).toEqual([]);
  expect(faultsOf(lines, [])).toEqual([]);
});

test.each([
  ['a figure', (text: string) => text.replace(',102,', ',999,'), 'expected is "999", and was "102"'],
  ['a name', (text: string) => text.replace('The oars', 'The ores'), 'series is "The ores", and was "The oars"'],
  ['the brief', (text: string) => text.replace('5/oars', '5/ores'), 'brief is "2026-10-05/ores"'],
  ['the record', (text: string) => text.replace(files[2]?.sha256 ?? '', 'a'.repeat(64)), 'record_sha256 is "aaaa'],
  [
    'the row before',
    (text: string) => text.replace(/[0-9a-f]{64}(?=,2026)/, 'b'.repeat(64)),
    'previous_sha256 is "bbbb',
  ],
] as const)('%s that was changed is found, and the row told as it was', (_, change, told) => {
  const [fault, ...others] = faultsOf(withLine(4, change));
  expect(others).toEqual([]);
  expect(fault).toMatchObject({ kind: 'changed', line: 4, row: lines[3] });
  expect(fault?.message).toContain(told);
});

test('a replacement whose row was changed is told with what it replaced', () => {
  const [fault] = faultsOf(withLine(5, (text) => text.replace('2026-10-05/replaced/1/rope.json', '')));
  expect(fault).toMatchObject({ kind: 'changed', line: 5, row: lines[4] });
});

test.each([
  ['one', [3]],
  ['the first', [2]],
  ['a replacement', [5]],
  ['two that stood together', [3, 4]],
  ['two apart', [3, 6]],
] as const)('rows taken out are told as they were, line for line: %s', (_, taken) => {
  const faults = faultsOf(lines.filter((_, i) => !(taken as readonly number[]).includes(i + 1)));
  expect(faults.map(({ kind, row }) => [kind, row])).toEqual(taken.map((line) => ['missing', lines[line - 1]]));
});

test('a break is told where the records cannot say what was there', () => {
  const unreadable = files.map((file) => ({ ...file, record: null }));
  expect(faultsOf([...lines.slice(0, 2), ...lines.slice(3)], unreadable)).toMatchObject([{ kind: 'broken', line: 3 }]);
});

test('a row of no brief at the end is foreign', () => {
  const strange = (lines[3] ?? '').replaceAll('oars', 'ghost').replace(/[0-9a-f]{64}/, 'c'.repeat(64));
  expect(faultsOf([...lines, strange])).toMatchObject([{ kind: 'foreign', line: 8 }]);
});
