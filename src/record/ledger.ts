/**
 * The ledger: one row for every brief ever issued, each holding the SHA-256 of its record and of the row before, so
 * that a row that was changed, taken out or put in later shows. The first row holds the SHA-256 of the heading.
 *
 * A row's SHA-256 is that of its cells written out again in this program's way, without the line ending. A spreadsheet
 * that saves the same cells with other quotes, line endings or a byte-order mark therefore breaks nothing.
 */
import { type Options, parse } from 'csv-parse/sync';
import { ArchiveError } from './archive-error.js';
import { sha256 } from './canonical.js';
import { csvRow } from './csv.js';
import type { BriefRecord } from './record.js';

const columns = [
  'date',
  'series',
  'unit',
  'model',
  'from',
  'to',
  'expected',
  'low_80',
  'high_80',
  'order',
  'record_sha256',
  'previous_sha256',
  'brief',
  'replaces',
] as const;

/** What a row says of one brief. The figures are those that the brief's answer prints. */
export interface LedgerEntry {
  readonly record: BriefRecord;
  /** SHA-256 of the record's file. */
  readonly sha256: string;
  /** The record that a `--replace` moved aside, as a path below the archive. */
  readonly replaces: string | null;
}

const heading = csvRow(columns);

/** The new rows, chained to each other and to the ledger's last one. `ledger` is null where there is none yet. */
export function chainedRows(ledger: string | null, entries: readonly LedgerEntry[]): string[] {
  let previous = rowSha256(rowsOf(ledger ?? heading).at(-1) ?? [...columns]);
  return entries.map((entry) => {
    const row = rowOf(entry, previous);
    previous = lineSha256(row);
    return row;
  });
}

function rowOf({ record, sha256: recordSha256, replaces }: LedgerEntry, previous: string): string {
  const { answer } = record.printed;
  const ahead = record.outlook.periods;
  const cells: Record<(typeof columns)[number], string | number | null> = {
    date: record.issued,
    series: record.series.name,
    unit: record.series.unit,
    model: record.model.form,
    from: ahead[0]?.period ?? null,
    to: ahead.at(-1)?.period ?? null,
    expected: answer.expected,
    low_80: answer.range80[0],
    high_80: answer.range80[1],
    order: (record.purchase?.decided ?? record.purchase?.best)?.units ?? null,
    record_sha256: recordSha256,
    previous_sha256: previous,
    brief: record.brief,
    replaces,
  };
  return csvRow(columns.map((column) => cells[column]));
}

/** The ledger with the rows at its end; rows that it holds already are not written a second time. */
export function withRows(ledger: string | null, rows: readonly string[]): string {
  const text = ledger === null || ledger === '' ? heading : ledger;
  const held = new Set(rowsOf(text).map(rowSha256));
  const missing = rows.filter((row) => !held.has(lineSha256(row)));
  return missing.length === 0 ? text : (text.endsWith('\n') ? text : `${text}\n`) + missing.join('');
}

/** The entries that the ledger lacks: a brief whose files were lost and are made again has its row already. */
export function notHeld(ledger: string | null, entries: readonly LedgerEntry[]): LedgerEntry[] {
  const rows = rowsOf(ledger ?? heading);
  const held = new Map(rows.map((row) => [cellOf(row, 'brief'), cellOf(row, 'record_sha256')]));
  return entries.filter(({ record, sha256, replaces }) => replaces !== null || held.get(record.brief) !== sha256);
}

/** @throws ArchiveError where a row does not follow from the one before it. */
export function checkChain(ledger: string): void {
  const rows = rowsOf(ledger);
  const broken = rows.findIndex((row, i) => i > 0 && cellOf(row, 'previous_sha256') !== rowSha256(rows[i - 1] ?? []));
  if (broken > 0)
    throw new ArchiveError(
      `ledger.csv:${broken + 1} does not follow from line ${broken}: one of them was changed, or a row between them was taken out. ${putBack}`,
    );
}

/** The last row, which no row after it vouches for, against its record. @throws ArchiveError where they differ. */
export function checkLastRow(ledger: string, filed: Omit<LedgerEntry, 'replaces'>): void {
  const rows = rowsOf(ledger);
  const last = rows.at(-1) ?? [];
  const written = rowOf({ ...filed, replaces: cellOf(last, 'replaces') || null }, cellOf(last, 'previous_sha256'));
  if (rowSha256(last) !== lineSha256(written))
    throw new ArchiveError(
      `ledger.csv:${rows.length} does not say what ${filed.record.brief}.json says: one of them was changed. ${putBack}`,
    );
}

/** What the last row is about; the heading's words where there is no row. */
export function lastRow(ledger: string): { readonly brief: string; readonly recordSha256: string } {
  const last = rowsOf(ledger).at(-1) ?? [];
  return { brief: cellOf(last, 'brief'), recordSha256: cellOf(last, 'record_sha256') };
}

/** @throws ArchiveError naming those of the filed briefs (`2026-10-05/paint`) that have no row. */
export function checkRowsOf(ledger: string | null, briefs: readonly string[]): void {
  const named = new Set(rowsOf(ledger ?? heading).map((row) => cellOf(row, 'brief')));
  const missing = briefs.filter((brief) => !named.has(brief));
  if (missing.length === 0) return;
  const more = missing.length > 3 ? ` and ${missing.length - 3} more` : '';
  throw new ArchiveError(
    `ledger.csv ${ledger === null ? 'is not there, though these are filed' : 'has no row for what is filed'}: ${missing.slice(0, 3).join(', ')}${more}. Put its newest copy back, or move the files of these briefs away and write them again`,
  );
}

const putBack =
  'Put back what was changed (seasonbrief recheck tells), or the whole file from a copy, and run this again';

const cellOf = (row: readonly string[], column: (typeof columns)[number]): string => row[columns.indexOf(column)] ?? '';

/** Heading and rows as cells. @throws ArchiveError where the file is no ledger of this program. */
export function rowsOf(ledger: string): string[][] {
  const rows = parsed(ledger);
  const first = rows[0]?.join(',');
  if (first !== columns.join(',')) {
    throw new ArchiveError(
      `ledger.csv:1 begins with "${first ?? ''}" where "${columns.join(',')}" belongs. ${asWritten}`,
    );
  }
  return rows;
}

/** How a ledger is read. A spreadsheet saves CRLF, and the rows that are added then end in LF: a file may hold both. */
export const ledgerCsv: Options = {
  bom: true,
  record_delimiter: ['\r\n', '\n'],
  relax_column_count: true,
  skip_empty_lines: true,
};

function parsed(ledger: string): string[][] {
  try {
    return parse(ledger, ledgerCsv);
  } catch (error) {
    const said = error instanceof Error ? error.message : String(error);
    throw new ArchiveError(`ledger.csv can't be read as CSV: ${said}. ${asWritten}`, { cause: error });
  }
}

const asWritten = 'Put the file back as seasonbrief wrote it (a spreadsheet may have saved it with other separators)';

const rowSha256 = (cells: readonly string[]): string => lineSha256(csvRow(cells));

const lineSha256 = (line: string): string => sha256(line.slice(0, -1));
