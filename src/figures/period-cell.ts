/** The cell, or the two cells, in which a row's period stands. */
import type { Columns } from './columns.js';
import type { Row } from './rows.js';
import { tidy } from './tidy.js';

export const periodCellOf = ({ cells }: Row, { period }: Columns): string =>
  tidy(period.map((column) => cells[column] ?? '').join(' '));
