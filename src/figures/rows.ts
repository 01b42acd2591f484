/** From text to rows of cells, given the sign that stands between them (RFC 4180). */
import { CsvError, type Options, parse } from 'csv-parse/sync';
import { InputError } from './input-error.js';

/** A row with the number of the line that it begins on; cells as they stand. */
export interface Row {
  readonly line: number;
  readonly cells: readonly string[];
}

export const delimiters = [',', ';', '\t', '|'] as const;
export type Delimiter = (typeof delimiters)[number];

/** Limits that no real file of figures comes near. */
const MOST_ROWS = 500_000;
const LONGEST_ROW = 100_000;

/** A fault of the file as a whole or of a line of it. */
export const failure = (file: string, line: number | null, message: string): InputError =>
  new InputError([{ file, line, column: null, message }]);

/** The first rows, or null where quotes don't fit this delimiter. */
export function headRows(text: string, delimiter: Delimiter, most: number): readonly Row[] | null {
  try {
    return located(parse(text, { ...optionsFor(delimiter), to: most }));
  } catch (error) {
    if (error instanceof CsvError) return null;
    throw error;
  }
}

/** Every row. Throws an InputError where quotes don't close or where there is more than any table has. */
export function rowsOf(text: string, delimiter: Delimiter, file: string): readonly Row[] {
  try {
    const rows = located(parse(text, { ...optionsFor(delimiter), to: MOST_ROWS + 1 }));
    if (rows.length <= MOST_ROWS) return rows;
    throw failure(file, null, `there are more than ${MOST_ROWS} rows; leave out those that the plan does not need`);
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    throw brokenRow(error, file);
  }
}

/** The parser's own words are left out: they repeat the whole cell, however long it is. */
function brokenRow({ code, lines }: CsvError, file: string): InputError {
  const line = typeof lines === 'number' ? lines : null;
  if (code === 'CSV_MAX_RECORD_SIZE')
    return failure(
      file,
      line,
      `this row is longer than ${LONGEST_ROW} bytes; is a quote left open, or is it no table?`,
    );
  if (code === 'CSV_QUOTE_NOT_CLOSED')
    return failure(file, null, 'the quotes of a cell are opened and never closed; close them, or take them away');
  const remedy = 'put quotes round the whole cell and double those inside it, or take them away';
  return failure(file, line, `the quotes of a cell in this row don’t stand at its two ends; ${remedy}`);
}

const optionsFor = (delimiter: Delimiter): Options => ({
  delimiter,
  record_delimiter: '\n',
  relax_column_count: true,
  skip_empty_lines: false,
  // A space before an opening quote is let pass; spaces after a number are kept, as they can mean something.
  ltrim: true,
  max_record_size: LONGEST_ROW,
});

function located(records: unknown): readonly Row[] {
  let line = 1;
  return (records as readonly string[][]).map((cells) => {
    const row = { line, cells };
    line += 1 + cells.reduce((breaks, cell) => breaks + (cell.includes('\n') ? cell.split('\n').length - 1 : 0), 0);
    return row;
  });
}
