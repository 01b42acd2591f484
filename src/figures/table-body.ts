/** The rows of figures, and under them the rows that are none: totals and notes. */
import { periodCellOf } from './period-cell.js';
import { periodsRead } from './period-text.js';
import type { FiguresRequest, FooterRow } from './request.js';
import { failure, type Row } from './rows.js';
import type { Table } from './table.js';
import { tidy } from './tidy.js';
import { isTotal } from './total.js';

/**
 * Only rows at the end are taken for a footer, and only where they have no period and either call themselves a total
 * or hold none of the wanted figures. Everything else without a period is left where it is, to be refused.
 */
export function bodyOf(
  { header, rows, columns }: Table,
  request: FiguresRequest,
): { readonly rows: readonly Row[]; readonly footer: readonly FooterRow[] } {
  const valueColumns = columns.value === null ? [...columns.bySlug.values()] : [columns.value];
  const isFooter = (row: Row): boolean => {
    const period = periodCellOf(row, columns);
    if (periodsRead(period).some((read) => read !== null)) return false;
    const filled = row.cells.map(tidy).filter((cell) => cell !== '');
    if (isTotal(filled[0]) || isTotal(period)) return true;
    if (filled.length === 1) return isNote(filled[0]);
    return valueColumns.every((column) => tidy(row.cells[column] ?? '') === '') && (period === '' || isNote(period));
  };
  let end = rows.length;
  while (end > 0 && isFooter(rows[end - 1])) end--;
  if (end === 0) throw failure(request.fileTyped, header.line, 'there are column names but no figures under them');
  const footer = rows
    .slice(end)
    .map(({ line, cells }) => ({ line, text: cells.map(tidy).find((cell) => cell !== '') ?? '' }));
  return { rows: rows.slice(0, end), footer };
}

/** Words; a mistyped period or a number has none. */
const isNote = (text: string): boolean => /^[^\d]*\p{L}{3}|\p{L}{2,}.*\s\p{L}{2,}/u.test(text);
