/** A ledger's rows against the records that they are about. */
import { type LedgerFile, replacedBy, rowAgain, type Shelf, withoutOwnRow } from './ledger-again.js';
import { cellsTold, changedCells, FROM_A_COPY, fault, type LedgerFault } from './ledger-fault.js';
import type { LedgerRow } from './ledger-order.js';

/** `rows`: as they were written. `last`: the row, or heading, that a new row would follow on. */
export function againstRecords(rows: readonly LedgerRow[], last: LedgerRow, shelf: Shelf): LedgerFault[] {
  const left = new Set(shelf.files);
  const unnamed = withoutOwnRow(rows, shelf);
  const faults: LedgerFault[] = [];
  const astray: { row: LedgerRow; file: LedgerFile | undefined; place: string }[] = [];
  for (const { row, place, isFirst } of placed(rows)) {
    const file = recordOf(row, place, unnamed, shelf);
    if (file !== undefined) {
      left.delete(file);
      faults.push(...cellFaults(row, file, { isFirst, isInPlace: file.path === place }, shelf));
    }
    if (file?.path !== place) astray.push({ row, file, place });
  }
  for (const { row, file, place } of astray) {
    const there = shelf.at.get(place);
    // Another record in its place may be one whose own row was taken out, which is told as such.
    if (file !== undefined && there !== undefined && (!left.has(there) || hadOwnRow(there, file))) continue;
    if (there !== undefined) left.delete(there);
    const remedy = file === undefined ? FROM_A_COPY : `${file.path}.json is the same record: copy it there`;
    faults.push(there === undefined ? goneFault(row, place, remedy) : recordChangedFault(row, there, remedy));
  }
  return [...faults, ...withoutRow([...left], last, shelf)];
}

/** Whether a file had a row of its own: it can be read, or it is what the other was set aside for. */
const hadOwnRow = (there: LedgerFile, aside: LedgerFile): boolean =>
  there.record !== null || (there.replaced === null && aside.replaced !== null);

/** Where each row's record is to be found: in its place, or where the next row about the brief says that it was kept. */
function placed(rows: readonly LedgerRow[]) {
  const next = new Map<string, LedgerRow>();
  const first = new Map(rows.toReversed().map((row) => [row.cells.brief, row]));
  return rows
    .toReversed()
    .map((row) => {
      const { brief } = row.cells;
      const place = next.get(brief)?.cells.replaces.replace(/\.json$/, '') ?? brief;
      next.set(brief, row);
      return { row, place, isFirst: first.get(brief) === row };
    })
    .toReversed();
}

/** The file that a row was written for: in its place, or else wherever the same record stands. */
function recordOf({ cells }: LedgerRow, place: string, unnamed: readonly LedgerFile[], { at, of }: Shelf) {
  const isIts = (file: LedgerFile | undefined): boolean => file?.sha256 === cells.record_sha256;
  const there = at.get(place);
  return isIts(there) ? there : (of.get(cells.brief)?.find(isIts) ?? unnamed.find(isIts));
}

/** Cells that say otherwise than the record that they are about. */
function cellFaults(
  row: LedgerRow,
  file: LedgerFile,
  { isFirst, isInPlace }: { readonly isFirst: boolean; readonly isInPlace: boolean },
  shelf: Shelf,
): LedgerFault[] {
  const again = rowAgain(file, row, replacedBy(file, shelf));
  if (again === null) return [];
  // What was replaced and is gone since is told of the row that was written for it.
  const isGone = !isFirst && !shelf.at.has(row.cells.replaces.replace(/\.json$/, ''));
  const unsaid = ['previous_sha256', ...(isGone || !isInPlace ? ['replaces'] : [])];
  const changed = changedCells(row, again).filter(({ column }) => !unsaid.includes(column));
  if (changed.length === 0) return [];
  const message = `says otherwise than its record: ${cellsTold(changed, 'the record gives')}. Put the row back as it was`;
  return [fault({ kind: 'changed', line: row.line, path: file.path, message })];
}

const goneFault = ({ line, cells }: LedgerRow, place: string, remedy: string): LedgerFault =>
  fault({
    kind: 'record-gone',
    line,
    path: place,
    message: `was written for ${cells.brief}.json, and ${place === cells.brief ? 'that' : `${place}.json, where it was kept,`} is not there. ${remedy}`,
  });

const recordChangedFault = ({ line, cells }: LedgerRow, file: LedgerFile, remedy: string): LedgerFault =>
  fault({
    kind: 'record-changed',
    line,
    path: file.path,
    message: `is not the file that was filed: its SHA-256 begins with ${shortened(file.sha256)}, and ledger.csv${line === null ? '' : `:${line}`} has ${shortened(cells.record_sha256)}. ${remedy}`,
  });

const shortened = (sha256: string): string => `${sha256.slice(0, 12)}…`;

/** Rows for them at the end make the ledger whole again, though not as it was. */
function withoutRow(left: readonly LedgerFile[], last: LedgerRow, shelf: Shelf): LedgerFault[] {
  let above = last;
  return left.map((file) => {
    const row = rowAgain(file, above, replacedBy(file, shelf));
    above = row ?? above;
    const remedy = row === null ? FROM_A_COPY : 'Put it back at the end';
    return fault({
      kind: 'record-without-row',
      path: file.path,
      message: `has no row in ledger.csv. If the brief was issued, its row was taken out. ${remedy}`,
      row: row?.text ?? null,
    });
  });
}
