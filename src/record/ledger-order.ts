/**
 * The rows of a ledger in the order in which they were written, whatever order they stand in now: every row holds the
 * SHA-256 of the one before, so they say it themselves.
 */
import { parse } from 'csv-parse/sync';
import { sha256 } from './canonical.js';
import { csvRow } from './csv.js';
import { rowsOf } from './ledger.js';

export interface LedgerRow {
  /** In the file, from 1 on; null of a row that is not there and ought to be. */
  readonly line: number | null;
  /** As this program writes it, without the line ending. */
  readonly text: string;
  readonly sha256: string;
  /** By the names of the columns. */
  readonly cells: Readonly<Record<string, string>>;
}

export interface OrderedRows {
  readonly heading: LedgerRow;
  /** In the order in which they were written. */
  readonly rows: readonly LedgerRow[];
  /** A row that stands in another place than it was written in, and the one that it belongs after. */
  readonly misplaced: readonly { readonly row: LedgerRow; readonly after: LedgerRow }[];
  /** A row that is there a second time, and the one that it repeats. */
  readonly doubled: readonly { readonly row: LedgerRow; readonly of: LedgerRow }[];
  /** Rows between two that follow on each other: they were put in later. */
  readonly foreign: readonly LedgerRow[];
}

/** @throws ArchiveError where the file is no ledger of this program. */
export function orderedRows(ledger: string): OrderedRows {
  const [heading, ...all] = readRows(ledger);
  const { once, doubled } = withoutDoubles(all, heading);
  const chains = chainsOf(once, heading);
  const foreign = foreignIn(once, chains, heading);
  const rows = chains.flat().filter((row) => !foreign.includes(row));
  const asFiled = once.filter((row) => !foreign.includes(row));
  return { heading, rows, misplaced: misplacedIn(asFiled, rows, heading), doubled, foreign };
}

/** A row as the ledger holds it. */
export function ledgerRow(line: number | null, columns: readonly string[], cells: readonly string[]): LedgerRow {
  const text = csvRow(cells).slice(0, -1);
  const named = Object.fromEntries(columns.map((column, i) => [column, cells[i] ?? '']));
  return { line, text, sha256: sha256(text), cells: named };
}

/** The heading first, each with its line in the file, which may hold blank lines. */
function readRows(ledger: string): LedgerRow[] {
  const [columns] = rowsOf(ledger);
  const rows = parse(ledger, {
    bom: true,
    relax_column_count: true,
    skip_empty_lines: true,
    on_record: (cells: string[], { lines }) => [String(lines), ...cells],
  });
  return rows.map(([line, ...cells]) => ledgerRow(Number(line), columns, cells));
}

const previousOf = ({ cells }: LedgerRow): string => cells.previous_sha256;

/** Of rows that are the same, the one that follows on the row above it is kept, or else the first. */
function withoutDoubles(rows: readonly LedgerRow[], heading: LedgerRow) {
  const kept = new Map<string, LedgerRow>();
  rows.forEach((row, i) => {
    const follows = previousOf(row) === (rows[i - 1] ?? heading).sha256;
    if (follows || !kept.has(row.sha256)) kept.set(row.sha256, row);
  });
  const once = rows.filter((row) => kept.get(row.sha256) === row);
  const doubled = rows.flatMap((row) => {
    const of = kept.get(row.sha256);
    return of === undefined || of === row ? [] : [{ row, of }];
  });
  return { once, doubled };
}

/** Rows that follow on each other: first those from the heading on, then others by their first rows in the file. */
function chainsOf(rows: readonly LedgerRow[], heading: LedgerRow): LedgerRow[][] {
  const left = new Set(rows);
  const named = new Set(rows.map(previousOf));
  const followers = new Map<string, LedgerRow[]>();
  for (const row of rows) followers.set(previousOf(row), [...(followers.get(previousOf(row)) ?? []), row]);
  // Of two rows that follow on the same one, the one that others follow on in turn is the more likely to be genuine.
  const next = (row: LedgerRow): LedgerRow | undefined => {
    const after = (followers.get(row.sha256) ?? []).filter((each) => left.has(each));
    return after.find((each) => named.has(each.sha256)) ?? after[0];
  };
  const chainAfter = (row: LedgerRow): LedgerRow[] => {
    const chain: LedgerRow[] = [];
    for (let at = next(row); at !== undefined; at = next(at)) {
      chain.push(at);
      left.delete(at);
    }
    return chain;
  };
  const chains = [chainAfter(heading)];
  while (left.size > 0) {
    const there = new Set([...left].map((row) => row.sha256));
    const [head] = [...left].filter((row) => !there.has(previousOf(row)));
    left.delete(head);
    chains.push([head, ...chainAfter(head)]);
  }
  return chains;
}

/** Rows that stand between two that follow on each other, and that are in no chain with rows elsewhere. */
function foreignIn(rows: readonly LedgerRow[], chains: readonly LedgerRow[][], heading: LedgerRow): LedgerRow[] {
  const chainOf = new Map(chains.slice(1).flatMap((chain) => chain.map((row) => [row, chain] as const)));
  const place = new Map([heading, ...rows].map((row, i) => [row.sha256, i]));
  return rows.flatMap((row, i) => {
    const above = place.get(previousOf(row)) ?? i;
    const between = rows.slice(above, i);
    const isForeign = (each: LedgerRow): boolean =>
      chainOf.get(each)?.every((other) => between.includes(other)) ?? false;
    return between.every(isForeign) ? between : [];
  });
}

/** The fewest rows that must be moved to turn the one order into the other: those outside a longest run in order. */
function misplacedIn(filed: readonly LedgerRow[], written: readonly LedgerRow[], heading: LedgerRow) {
  if (filed.every((row, i) => row === written[i])) return [];
  const place = new Map(filed.map((row, i) => [row, i]));
  const at = written.map((row) => place.get(row) ?? 0);
  const longest = at.map(() => 1);
  const before = at.map(() => -1);
  for (let i = 0; i < at.length; i++)
    for (let j = 0; j < i; j++)
      if (at[j] < at[i] && longest[j] + 1 > longest[i]) {
        longest[i] = longest[j] + 1;
        before[i] = j;
      }
  const inOrder = new Set<number>();
  for (let i = longest.indexOf(Math.max(...longest)); i >= 0; i = before[i]) inOrder.add(i);
  return written.flatMap((row, i) => (inOrder.has(i) ? [] : [{ row, after: written[i - 1] ?? heading }]));
}
