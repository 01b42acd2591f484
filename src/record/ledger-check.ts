/**
 * The ledger against itself and against the records: what was changed, taken out, put in, doubled or moved.
 *
 *   ledger -> rows in the order in which they were written -> chain -> each row against its record
 */
import { ArchiveError } from './archive-error.js';
import { filedBy, type LedgerFile, shelved } from './ledger-again.js';
import { followChain } from './ledger-chain.js';
import { FROM_A_COPY, fault, type LedgerFault, nameOf } from './ledger-fault.js';
import { type LedgerRow, type OrderedRows, orderedRows } from './ledger-order.js';
import { againstRecords } from './ledger-records.js';

export interface LedgerCheck {
  readonly rows: number;
  /** In the order of the lines. */
  readonly faults: readonly LedgerFault[];
  /** What the ledger says was filed: `2026-10-05/mooring-rope` and the SHA-256 of its record, with a space between. */
  readonly filed: ReadonlySet<string>;
}

/** `ledger` is null where there is no such file. */
export function checkLedger(ledger: string | null, files: readonly LedgerFile[]): LedgerCheck {
  if (ledger === null) {
    const message = `is not there, though there are briefs. ${FROM_A_COPY}`;
    return unreadable(files.length === 0 ? [] : [fault({ kind: 'unreadable', message })]);
  }
  try {
    return checkRows(orderedRows(ledger), files);
  } catch (error) {
    if (!(error instanceof ArchiveError)) throw error;
    const message = error.message.replace(/^ledger\.csv\S*\s/, '');
    return unreadable([fault({ kind: 'unreadable', line: 1, message })]);
  }
}

const unreadable = (faults: readonly LedgerFault[]): LedgerCheck => ({ rows: 0, faults, filed: new Set() });

function checkRows(ordered: OrderedRows, files: readonly LedgerFile[]): LedgerCheck {
  const shelf = shelved(files);
  const { rows, faults } = followChain(ordered, shelf);
  const { doubled, foreign, misplaced } = ordered;
  const all = [
    ...doubled.map(({ row, of }) => doubledFault(row, of)),
    ...foreign.map(foreignFault),
    ...misplaced.map(({ row, after }) => movedFault(row, after)),
    ...faults,
    ...againstRecords(rows, rows.at(-1) ?? ordered.heading, shelf),
  ];
  return {
    rows: ordered.rows.length + doubled.length + foreign.length,
    faults: all.sort((a, b) => (a.line ?? Number.POSITIVE_INFINITY) - (b.line ?? Number.POSITIVE_INFINITY)),
    filed: new Set(rows.map(filedBy)),
  };
}

const doubledFault = ({ line }: LedgerRow, of: LedgerRow): LedgerFault =>
  fault({ kind: 'doubled', line, message: `is ${nameOf(of)} once more. Take it out` });

const foreignFault = ({ line, cells }: LedgerRow): LedgerFault =>
  fault({
    kind: 'foreign',
    line,
    message: `(${cells.brief || 'no brief'}) was put in later: the rows above and below it follow on each other. Take it out`,
  });

const movedFault = ({ line }: LedgerRow, after: LedgerRow): LedgerFault =>
  fault({
    kind: 'moved',
    line,
    message: `stands in another place than it was written in. Move it below ${nameOf(after)}`,
  });
