/**
 * The chain of a ledger's rows: which were changed, and where some were taken out.
 *
 * What a row was is certain where its SHA-256 is the one that the next row holds. So each row is made again from the
 * records until one fits; that tells a row that was changed or taken out word for word.
 */
import { type LedgerFile, replacedBy, rowAgain, type Shelf, withoutOwnRow } from './ledger-again.js';
import { cellsTold, changedCells, fault, type LedgerFault, nameOf } from './ledger-fault.js';
import { type LedgerRow, ledgerRow, type OrderedRows } from './ledger-order.js';

/** The rows as they were written, as far as that can be told, and where the chain is broken. */
export function followChain(
  { heading, rows }: OrderedRows,
  shelf: Shelf,
): { rows: LedgerRow[]; faults: LedgerFault[] } {
  const lost = withoutOwnRow(rows, shelf).slice(0, MOST_TRIED);
  const written: LedgerRow[] = [];
  const faults: LedgerFault[] = [];
  rows.forEach((row, i) => {
    const above = written.at(-1) ?? heading;
    const original = originalOf(row, above, rows[i + 1], [...ownFiles(row, shelf), ...lost], shelf);
    const follows = original.cells.previous_sha256 === above.sha256;
    const gap = follows ? [] : rowsBetween(above, original.cells.previous_sha256, lost, shelf);
    if (original !== row) faults.push(changedFault(row, original));
    if (gap !== null) {
      faults.push(...gap.map((each) => missingFault(each, above, row)));
      written.push(...gap, original);
    } else if (isKnown(row, lost, shelf)) {
      faults.push(brokenFault(row, above));
      written.push(original);
    } else faults.push(unknownFault(row, above));
  });
  return { rows: written, faults };
}

/** Records that no row is about are tried for every break in the chain: more than these take too long. */
const MOST_TRIED = 50;

const ownFiles = ({ cells }: LedgerRow, { of }: Shelf): readonly LedgerFile[] => of.get(cells.brief) ?? [];

/** The row as it was, where it was changed and the row below it still tells; else the row itself. */
function originalOf(
  row: LedgerRow,
  above: LedgerRow,
  below: LedgerRow | undefined,
  files: readonly LedgerFile[],
  shelf: Shelf,
): LedgerRow {
  const wanted = below?.cells.previous_sha256;
  if (wanted === undefined || wanted === row.sha256) return row;
  const cells = { ...row.cells, previous_sha256: above.sha256 };
  const relinked = ledgerRow(row.line, Object.keys(cells), Object.values(cells));
  if (relinked.sha256 === wanted) return relinked;
  for (const file of files)
    for (const replaces of [replacedBy(file, shelf), row.cells.replaces || null]) {
      const again = rowAgain(file, above, replaces);
      if (again?.sha256 === wanted) return again;
    }
  return row;
}

/** Of more rows than these in a gap, the order is not searched for. */
const MOST_LOST = 5;

/** The rows that were taken out between a row and one that holds `until`; null where the records don't tell. */
function rowsBetween(above: LedgerRow, until: string, lost: readonly LedgerFile[], shelf: Shelf): LedgerRow[] | null {
  const next = lost.flatMap((file) => {
    const row = rowAgain(file, above, replacedBy(file, shelf));
    return row === null ? [] : [{ file, row }];
  });
  const found = next.find(({ row }) => row.sha256 === until);
  if (found !== undefined) return [found.row];
  if (lost.length > MOST_LOST) return null;
  for (const { file, row } of next) {
    const others = lost.filter((each) => each !== file);
    const rest = rowsBetween(row, until, others, shelf);
    if (rest !== null) return [row, ...rest];
  }
  return null;
}

const isKnown = ({ cells }: LedgerRow, lost: readonly LedgerFile[], { of }: Shelf): boolean =>
  of.has(cells.brief) || lost.some(({ sha256 }) => sha256 === cells.record_sha256);

const changedFault = (row: LedgerRow, original: LedgerRow): LedgerFault =>
  fault({
    kind: 'changed',
    line: row.line,
    path: original.cells.brief,
    message: `was changed after it was written: ${cellsTold(changedCells(row, original), 'was')}. Put it back as it was`,
    row: original.text,
  });

const missingFault = (row: LedgerRow, above: LedgerRow, below: LedgerRow): LedgerFault =>
  fault({
    kind: 'missing',
    line: below.line,
    path: row.cells.brief,
    message: `does not follow on ${nameOf(above)}: the row of ${row.cells.brief} between them was taken out. Put it back`,
    row: row.text,
  });

const brokenFault = ({ line }: LedgerRow, above: LedgerRow): LedgerFault =>
  fault({
    kind: 'broken',
    line,
    message: `does not follow on ${nameOf(above)}: one of them was changed, or rows between them were taken out. Compare it with a copy of the ledger`,
  });

const unknownFault = ({ line, cells }: LedgerRow, above: LedgerRow): LedgerFault =>
  fault({
    kind: 'foreign',
    line,
    message: `(${cells.brief || 'no brief'}) does not follow on ${nameOf(above)}, and there is no such brief. If there never was one, take it out; else put ledger and brief back from a copy`,
  });
