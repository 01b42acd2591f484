/**
 * Cells under no column name. Remarks beside the table are passed over; but where a number stands there, or where a row
 * between commas is longer than the header, a comma inside a number may have been taken for one between cells, and every
 * figure after it would be another's.
 */
import type { FaultList } from './fault-list.js';
import { shown } from './input-error.js';
import type { FiguresRequest } from './request.js';
import type { Row } from './rows.js';
import type { Table } from './table.js';
import { tidy } from './tidy.js';

export function refuseUnnamed(
  { header, delimiter }: Table,
  rows: readonly Row[],
  { fileTyped }: FiguresRequest,
  faults: FaultList,
): void {
  const names = header.cells.map(tidy);
  const firstNamed = names.findIndex((name) => name !== '');
  const unnamed = names.flatMap((name, i) => (name === '' && i > firstNamed ? [i] : []));
  for (const { line, cells } of rows) {
    const refuse = (column: number, where: string) =>
      faults.add(
        { file: fileTyped, line, column: column + 1 },
        () =>
          `${shown(tidy(cells[column]))} stands ${where}; put quotes round a cell that holds a comma, or name the column`,
      );
    const inside = unnamed.find((column) => /^\D{0,4}\d/.test(tidy(cells[column] ?? '')));
    const beyond = cells.findIndex((cell, i) => i >= names.length && (delimiter === ',' || tidy(cell) !== ''));
    if (inside !== undefined) refuse(inside, 'under no column name');
    else if (beyond >= 0) refuse(beyond, 'after the last column that has a name');
  }
}
