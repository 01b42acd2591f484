import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { csvRow } from '../../src/record/csv.js';

test('a text that a spreadsheet would run as a formula is defused; a real number is not', () => {
  expect(csvRow(['=1+1', '+44', '-5+2', '@sum', '\tx', -5, '-5.5', 2.5e-7, null])).toBe(
    "'=1+1,'+44,'-5+2,'@sum,'\tx,-5,-5.5,2.5e-7,\n",
  );
});

test('delimiters, quotes and line breaks', () => {
  expect(csvRow(['a,b', 'say "yes"', 'two\r\n lines'])).toBe('"a,b","say ""yes""",two lines\n');
});

test('any row is one line that a CSV reader takes apart into the same cells', () => {
  const text = fc.string({ unit: 'grapheme' }).filter((s) => !/^[=+\-@\t]/.test(s) && !/[\r\n]/.test(s));
  fc.assert(
    fc.property(fc.array(text, { minLength: 2 }), (cells) => {
      const row = csvRow(cells);
      expect(row.split('\n')).toHaveLength(2);
      expect(parse(row, { relax_column_count: true, skip_empty_lines: false })[0] ?? ['']).toEqual(cells);
    }),
  );
});
