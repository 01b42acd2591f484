/**
 * The ledger: one row for every brief ever issued, each holding the SHA-256 of its record and of the row before, so
 * that a row that was changed, taken out or put in later shows. The first row holds the SHA-256 of the heading.
 *
 * A row's SHA-256 is that of its cells written out again in this program's way, without the line ending. A spreadsheet
 * that saves the same cells with other quotes, line endings or a byte-order mark therefore breaks nothing.
 */
import { parse } from 'csv-parse/sync';
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

/** Heading and rows as cells. @throws ArchiveError where the file is no ledger of this program. */
export function rowsOf(ledger: string): string[][] {
  const rows = parsed(ledger);
  const first = rows[0]?.join(',');
  if (first !== columns.join(',')) {
    throw new ArchiveError(
      `ledger.csv:1 begins with "${first ?? ''}" where "${columns.join(',')}" belongs. Put the file back as seasonbrief wrote it (a spreadsheet may have saved it with other separators)`,
    );
  }
  return rows;
}

function parsed(ledger: string): string[][] {
  try {
    return parse(ledger, { bom: true, relax_column_count: true, skip_empty_lines: true });
  } catch (error) {
    const said = error instanceof Error ? error.message : String(error);
    throw new ArchiveError(`ledger.csv can't be read as CSV: ${said}. Put the file back as seasonbrief wrote it`, {
      cause: error,
    });
  }
}

const rowSha256 = (cells: readonly string[]): string => lineSha256(csvRow(cells));

const lineSha256 = (line: string): string => sha256(line.slice(0, -1));
