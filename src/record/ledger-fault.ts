/** What can be wrong with a ledger, and how it is told. */
import type { LedgerRow } from './ledger-order.js';

export interface LedgerFault {
  readonly kind:
    | 'unreadable'
    | 'changed'
    | 'missing'
    | 'doubled'
    | 'moved'
    | 'foreign'
    | 'broken'
    | 'record-changed'
    | 'record-gone'
    | 'record-without-row';
  /** In ledger.csv, from 1 on; null where it is about no line of it. */
  readonly line: number | null;
  /** The record that it is about, below the archive and without the ending; null where it is about none. */
  readonly path: string | null;
  /** What is wrong with the line, or else with the record, and what to do. */
  readonly message: string;
  /** The line to put back, where it is known. */
  readonly row: string | null;
}

export const fault = (about: Partial<LedgerFault> & Pick<LedgerFault, 'kind' | 'message'>): LedgerFault => ({
  line: null,
  path: null,
  row: null,
  ...about,
});

export const FROM_A_COPY = 'Put it back from a copy';

export const nameOf = ({ line, cells }: LedgerRow): string =>
  cells.brief === 'brief' ? 'the heading' : line === null ? `the row of ${cells.brief}` : `line ${line}`;

export interface ChangedCell {
  readonly column: string;
  readonly found: string;
  readonly written: string;
}

export const changedCells = (row: LedgerRow, original: LedgerRow): ChangedCell[] =>
  Object.entries(original.cells)
    .map(([column, written]) => ({ column, found: row.cells[column], written }))
    .filter(({ found, written }) => found !== written);

export const cellsTold = (cells: readonly ChangedCell[], by: string): string =>
  cells.map(({ column, found, written }) => `${column} is "${found}", and ${by} "${written}"`).join('; ');
