import { expect, test } from 'vitest';
import { orderedRows } from '../../src/record/ledger-order.js';
import { filedLedger, joined } from './filed-ledger.js';

const { lines } = filedLedger(['paint', 'rope', 'oars', 'sails', 'flags']);
const [heading = '', paint = '', rope = '', oars = '', sails = '', flags = ''] = lines;

const found = (...rows: string[]) => {
  const { misplaced, doubled, foreign, rows: ordered } = orderedRows(joined([heading, ...rows]));
  return {
    misplaced: misplaced.map(({ row, after }) => [row.line, after.line]),
    doubled: doubled.map(({ row, of }) => [row.line, of.line]),
    foreign: foreign.map(({ line }) => line),
    order: ordered.map(({ text }) => text),
  };
};

test('rows as they were written', () => {
  const rows = [paint, rope, oars, sails, flags];
  expect(found(...rows)).toEqual({ misplaced: [], doubled: [], foreign: [], order: rows });
  expect(found()).toEqual({ misplaced: [], doubled: [], foreign: [], order: [] });
});

test('of two rows that changed places one is to be moved', () => {
  const { misplaced, order } = found(paint, oars, rope, sails, flags);
  expect(misplaced).toEqual([[3, 4]]);
  expect(order).toEqual([paint, rope, oars, sails, flags]);
});

test('a row far from its place is the only one to be moved', () => {
  expect(found(rope, oars, sails, flags, paint).misplaced).toEqual([[6, 1]]);
  expect(found(flags, paint, rope, oars, sails).misplaced).toEqual([[2, 6]]);
});

test('a row that is there twice is told with the one it repeats: the one that stands where it was written', () => {
  expect(found(paint, rope, rope, oars, sails, flags).doubled).toEqual([[4, 3]]);
  expect(found(paint, sails, rope, oars, sails, flags).doubled).toEqual([[3, 6]]);
});

test('a row put in between two that follow on each other is foreign, and so are several', () => {
  const strange = rope.replace('100', '999').replace('rope', 'ghost');
  expect(found(paint, strange, rope, oars, sails, flags)).toMatchObject({ foreign: [3], misplaced: [] });
  const other = strange.replace('ghost', 'spook');
  expect(found(paint, rope, strange, other, oars, sails, flags)).toMatchObject({ foreign: [4, 5], misplaced: [] });
});

test('lines are counted in the file, blank ones too', () => {
  const { rows } = orderedRows(`\uFEFF${heading}\r\n\r\n${paint}\r\n\r\n${rope}`);
  expect(rows.map(({ line }) => line)).toEqual([3, 5]);
});
