import { join } from 'node:path';
import { expect, test } from 'vitest';
import { recheckLines } from '../../src/commands/recheck-lines.js';
import type { Rechecked, RecheckResult } from '../../src/commands/rechecked.js';

const agreeing = (path: string): Rechecked => ({
  path,
  verdict: 'agrees',
  version: '0.1.0',
  apart: 0,
  differences: [],
  faults: [],
  notes: [],
});

const differing: Rechecked = {
  ...agreeing('2026-10-05/oars'),
  verdict: 'differs',
  faults: [{ file: '2026-10-05/oars.csv', message: 'is not there. Put it back from a copy' }],
};

const result = (changes: Partial<RecheckResult> = {}): RecheckResult => ({
  folder: join(process.cwd(), 'out'),
  agrees: true,
  briefs: [agreeing('2026-10-05/rope'), { ...agreeing('2026-10-05/paint'), notes: ['made by version 0.0.9'] }],
  covers: [agreeing('2026-10-05/cover')],
  ledger: { rows: 2, faults: [] },
  ...changes,
});

test('where everything agrees, a line a brief and a summary; nothing where only faults are asked for', () => {
  expect(recheckLines(result(), { onlyFaults: false })).toEqual([
    '2026-10-05/rope: agrees',
    '2026-10-05/paint: agrees; made by version 0.0.9',
    '2026-10-05/cover: agrees',
    'ledger.csv: agrees, 2 rows',
    '2 briefs: 2 agree. 1 cover: 1 agrees. The ledger agrees.',
  ]);
  expect(recheckLines(result(), { onlyFaults: true })).toEqual([]);
});

test('faults stand below what they are of, with the file’s path', () => {
  const found = result({ agrees: false, briefs: [agreeing('2026-10-05/rope'), differing], covers: [] });
  expect(recheckLines(found, { onlyFaults: true })).toEqual([
    '2026-10-05/oars: differs',
    '  out/2026-10-05/oars.csv is not there. Put it back from a copy.',
    '2 briefs: 1 agrees, 1 differs. The ledger agrees.',
  ]);
});

test('a row to put back stands on a line of its own; of many faults the first ten are told', () => {
  const fault = { kind: 'missing', line: 3, path: '2026-10-05/oars', message: 'is gone', row: 'a,b' } as const;
  const without = { ...fault, kind: 'record-without-row', line: null } as const;
  const ledger = { rows: 2, faults: [fault, without, ...Array.from({ length: 10 }, () => ({ ...fault, row: null }))] };
  const lines = recheckLines(result({ agrees: false, ledger }), { onlyFaults: true });
  expect(lines.slice(0, 5)).toEqual([
    'ledger.csv: differs',
    '  out/ledger.csv:3 is gone:',
    '    a,b',
    '  out/2026-10-05/oars.json is gone:',
    '    a,b',
  ]);
  expect(lines.slice(-2)).toEqual(['  and 2 faults more', '2 briefs: 2 agree. 1 cover: 1 agrees. The ledger differs.']);
});
