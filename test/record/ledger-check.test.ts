import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { checkLedger } from '../../src/record/ledger-check.js';
import { filedLedger, joined } from './filed-ledger.js';

const { lines, files } = filedLedger(['paint', 'rope', 'oars', 'rope', 'sails', 'flags']);
const faultsOf = (changed: readonly string[]) => checkLedger(joined(changed), files).faults;

const row = fc.integer({ min: 1, max: lines.length - 1 });

test('a ledger that is whole: its rows, no faults, and what was filed', () => {
  const { rows, faults, filed } = checkLedger(joined(lines), files);
  expect([rows, faults]).toEqual([6, []]);
  expect([...filed].sort()).toEqual(files.map(({ brief, sha256 }) => `${brief} ${sha256}`).sort());
});

test('any change to any cell of any row is found, in its line or in its record', () => {
  const cell = fc.integer({ min: 0, max: 13 });
  fc.assert(
    fc.property(row, cell, fc.constantFrom('', 'x', '7', '2026-10-05/paint'), (at, column, text) => {
      const [cells = []] = parse(lines[at] ?? '') as string[][];
      fc.pre(cells[column] !== text);
      const changed = cells.map((each, i) => `"${i === column ? text : each}"`).join(',');
      const faults = faultsOf(lines.map((line, i) => (i === at ? changed : line)));
      expect(faults.length).toBeGreaterThan(0);
      // What is certain is certain: where a row is told as it was, it is that.
      for (const each of faults) if (each.kind === 'changed' && each.row !== null) expect(each.row).toBe(lines[at]);
    }),
  );
});

test('any row taken out is found, and put back as told the ledger is what it was', () => {
  fc.assert(
    fc.property(row, (at) => {
      const left = lines.filter((_, i) => i !== at);
      const [fault, ...others] = faultsOf(left);
      expect(others).toEqual([]);
      const place = fault?.line === null || fault?.line === undefined ? left.length : fault.line - 1;
      expect(left.toSpliced(place, 0, fault?.row ?? '')).toEqual(lines);
    }),
  );
});

test('any row moved is found, and moved as told the ledger is what it was', () => {
  fc.assert(
    fc.property(row, row, (from, to) => {
      fc.pre(from !== to);
      const moved = lines.toSpliced(from, 1).toSpliced(to, 0, lines[from] ?? '');
      const [fault, ...others] = faultsOf(moved);
      expect([fault?.kind, others]).toEqual(['moved', []]);
      const below = Number(/below line (\d+)/.exec(fault?.message ?? '')?.[1] ?? 1);
      const line = moved[(fault?.line ?? 0) - 1] ?? '';
      const rest = moved.filter((each) => each !== line);
      const place = rest.indexOf(moved[below - 1] ?? '') + 1;
      expect(rest.toSpliced(place, 0, line)).toEqual(lines);
    }),
  );
});

test('any row that is there twice is found, and taken out as told the ledger is what it was', () => {
  fc.assert(
    fc.property(row, row, (from, to) => {
      const doubled = lines.toSpliced(to, 0, lines[from] ?? '');
      const [fault, ...others] = faultsOf(doubled);
      expect([fault?.kind, others]).toEqual(['doubled', []]);
      expect(doubled.toSpliced((fault?.line ?? 0) - 1, 1)).toEqual(lines);
    }),
  );
});

test('a foreign row is found wherever it is put in', () => {
  const foreign = `2026-10-05,Ghost,litres,x,a,b,1,1,1,,${'f'.repeat(64)},${'0'.repeat(64)},2026-10-05/ghost,`;
  for (let at = 1; at <= lines.length; at++)
    expect(faultsOf(lines.toSpliced(at, 0, foreign))).toMatchObject([{ kind: 'foreign', line: at + 1 }]);
});

test('a spreadsheet that saved the same cells in its own way is no fault', () => {
  const cells = parse(joined(lines)) as string[][];
  const quoted = cells.map((each) => each.map((cell) => `"${cell.replaceAll('"', '""')}"`).join(','));
  expect(checkLedger(`\uFEFF${quoted.join('\r\n')}`, files)).toMatchObject({ rows: 6, faults: [] });
});

test('a spreadsheet that rewrote every date is told row by row, each with the row as it was', () => {
  const faults = faultsOf(lines.map((line) => line.replace(/^2026-10-05/, '05/10/2026')));
  expect(faults).toHaveLength(6);
  expect(faults.slice(0, -1).map((each) => each.row)).toEqual(lines.slice(1, -1));
  expect(faults[0]?.message).toContain('date is "05/10/2026", and was "2026-10-05"');
});

test('a ledger that is gone or is none', () => {
  expect(checkLedger(null, files).faults).toMatchObject([{ kind: 'unreadable', line: null }]);
  expect(checkLedger(null, []).faults).toEqual([]);
  for (const text of ['', 'date;series\n', 'date,series\n"'])
    expect(checkLedger(text, files).faults).toMatchObject([{ kind: 'unreadable', line: 1 }]);
});
