/**
 * From text to the table: which sign stands between the cells, and which row names the columns.
 *
 * Both are settled together: the header is the first row in which, with one of the delimiters, every name that the
 * plan asks for is a cell of its own. Lines above it are a preamble and are passed over.
 */
import { type Columns, hasColumns, namesFound, requireColumns } from './columns.js';
import { shown } from './input-error.js';
import type { FiguresRequest } from './request.js';
import { type Delimiter, delimiters, failure, headRows, type Row, rowsOf } from './rows.js';
import { tidy } from './tidy.js';

export interface Table {
  readonly delimiter: Delimiter;
  readonly header: Row;
  /** The filled rows under the header, at least one. */
  readonly rows: readonly Row[];
  readonly columns: Columns;
}

/** How many rows the header is looked for in. */
const ROWS_LOOKED_AT = 50;

export function tableOf(text: string, request: FiguresRequest): Table {
  if (tidy(text.slice(0, 1000)) === '' && tidy(text) === '') throw emptyFile(request.fileTyped);
  const { delimiter, header } = headerOf(text, request);
  const columns = requireColumns(header, request);
  const under = rowsOf(text, delimiter, request.fileTyped).filter(
    ({ line, cells }) => line > header.line && cells.some((cell) => tidy(cell) !== ''),
  );
  if (under.length === 0)
    throw failure(request.fileTyped, header.line, 'there are column names but no figures under them');
  return { delimiter, header, rows: under, columns };
}

const emptyFile = (file: string) =>
  failure(file, null, 'the file is empty; it needs a row of column names and rows of figures');

/** The header and its delimiter; where no row has every name, the row that comes nearest, for the message. */
function headerOf(text: string, request: FiguresRequest): { delimiter: Delimiter; header: Row } {
  const present = delimiters.filter((delimiter) => text.includes(delimiter));
  const candidates = (present.length === 0 ? delimiters.slice(0, 1) : present).flatMap((delimiter) => {
    const rows = headRows(text, delimiter, ROWS_LOOKED_AT);
    return rows === null ? [] : [{ delimiter, rows, widths: commonWidth(rows) }];
  });
  const complete = candidates.flatMap(({ delimiter, rows, widths }) => {
    const header = rows.find(({ cells }) => hasColumns(cells, request));
    return header === undefined ? [] : [{ delimiter, header, widths }];
  });
  const [best, next] = complete.sort((a, b) => b.widths - a.widths);
  if (next !== undefined && next.widths === best.widths)
    throw failure(
      request.fileTyped,
      best.header.line,
      `the cells could be divided by ${named(best.delimiter)} or by ${named(next.delimiter)}; leave one header row`,
    );
  if (best !== undefined) return best;
  // Nothing fits: a broken quote says so itself, where the likeliest delimiter is tried again.
  if (candidates.length === 0) rowsOf(text, likeliest(text), request.fileTyped);
  const nearest = candidates
    .flatMap(({ delimiter, rows, widths }) =>
      rows.map((header) => ({
        delimiter,
        header,
        rank: [namesFound(header.cells, request), widths, header.cells.filter((cell) => tidy(cell) !== '').length],
      })),
    )
    .reduce<{ delimiter: Delimiter; header: Row; rank: readonly number[] } | null>(
      (most, row) => (most === null || isMore(row.rank, most.rank) ? row : most),
      null,
    );
  if (nearest === null) throw emptyFile(request.fileTyped);
  return nearest;
}

const named = (delimiter: Delimiter): string => (delimiter === '\t' ? 'tabs' : shown(delimiter));

const isMore = (a: readonly number[], b: readonly number[]): boolean => {
  const i = a.findIndex((value, at) => value !== b[at]);
  return i >= 0 && a[i] > b[i];
};

/** How many of these rows have the commonest number of cells, one cell alone not counted. */
function commonWidth(rows: readonly Row[]): number {
  const counts = new Map<number, number>();
  for (const { cells } of rows) if (cells.length > 1) counts.set(cells.length, (counts.get(cells.length) ?? 0) + 1);
  return Math.max(0, ...counts.values());
}

const likeliest = (text: string): Delimiter =>
  delimiters
    .map((delimiter) => ({ delimiter, count: text.slice(0, 100_000).split(delimiter).length }))
    .sort((a, b) => b.count - a.count)[0].delimiter;
