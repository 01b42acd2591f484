/** The row that a write makes of a record, made again. */
import { parse } from 'csv-parse/sync';
import { chainedRows } from './ledger.js';
import { type LedgerRow, ledgerRow } from './ledger-order.js';
import type { BriefRecord } from './record.js';

/** A record's file, wherever it stands. */
export interface LedgerFile {
  /** Below the archive, without the ending: `2026-10-05/replaced/1/mooring-rope`. */
  readonly path: string;
  /** As the ledger names it, wherever it is now: `2026-10-05/mooring-rope`. */
  readonly brief: string;
  /** Which of the folders for what was replaced it is in; null where it stands. */
  readonly replaced: number | null;
  readonly sha256: string;
  /** Null where it can't be read. */
  readonly record: BriefRecord | null;
}

/** The records' files by what they are looked up by. */
export interface Shelf {
  readonly files: readonly LedgerFile[];
  readonly at: ReadonlyMap<string, LedgerFile>;
  /** The versions of a brief, the oldest first. */
  readonly of: ReadonlyMap<string, readonly LedgerFile[]>;
}

export function shelved(files: readonly LedgerFile[]): Shelf {
  const of = new Map<string, LedgerFile[]>();
  for (const file of [...files].sort((a, b) => age(a) - age(b)))
    of.set(file.brief, [...(of.get(file.brief) ?? []), file]);
  return { files, at: new Map(files.map((file) => [file.path, file])), of };
}

const age = ({ replaced }: LedgerFile): number => replaced ?? Number.MAX_SAFE_INTEGER;

/** The row for a record below another row; null where the record can't be read. */
export function rowAgain({ record, sha256 }: LedgerFile, above: LedgerRow, replaces: string | null): LedgerRow | null {
  if (record === null) return null;
  const columns = Object.keys(above.cells);
  const heading = columns.join(',');
  const ledger = above.text === heading ? `${heading}\n` : `${heading}\n${above.text}\n`;
  const [text] = chainedRows(ledger, [{ record, sha256, replaces }]);
  const [cells] = parse(text);
  return ledgerRow(null, columns, cells);
}

/** Where the version before this one is kept, as a row names it; null where there was none. */
export function replacedBy(file: LedgerFile, { of }: Shelf): string | null {
  const versions = of.get(file.brief) ?? [];
  const before = versions[versions.indexOf(file) - 1];
  return before === undefined ? null : `${before.path}.json`;
}

/** The files whose record, under its own name, no row is about. */
export function withoutOwnRow(rows: readonly LedgerRow[], { files }: Shelf): LedgerFile[] {
  const named = new Set(rows.map(filedBy));
  return files.filter(({ brief, sha256 }) => !named.has(`${brief} ${sha256}`));
}

/** What a row says was filed: `2026-10-05/mooring-rope` and the SHA-256 of its record, with a space between. */
export const filedBy = ({ cells }: LedgerRow): string => `${cells.brief} ${cells.record_sha256}`;
