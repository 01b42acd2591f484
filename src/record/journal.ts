/**
 * All or nothing for a set of files: they are written to `.staging` beside their place, a journal names the renames,
 * removals and ledger rows to come, and only then is anything moved.
 *
 *   staged files -> journal.json (the point of no return) -> renames, removals, ledger -> .staging removed
 *
 * A crash before the journal stands leaves a staging folder, which the next command removes: nothing happened. A crash
 * after it leaves a journal, which the next command carries out again: every step may be done twice without harm.
 */
import { mkdir, readdir, readFile, rename, rm, stat } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { z } from 'zod';
import { ArchiveError } from './archive-error.js';
import { canonicalJson } from './canonical.js';
import { syncFolder, whereThere, writeDurably } from './disk.js';
import { withRows } from './ledger.js';

const journalSchema = z.strictObject({
  format: z.literal('seasonbrief-journal/1'),
  /** Paths below the archive: each file or whole folder moves from the staging folder to the same path outside it. */
  moves: z.array(z.string()),
  removals: z.array(z.string()),
  /** Whole lines of the ledger, chained already. */
  ledgerRows: z.array(z.string()),
});

type Journal = Omit<z.infer<typeof journalSchema>, 'format'>;

export interface Staging {
  readonly archive: string;
  readonly folder: string;
}

export type Recovery = 'nothing' | 'finished' | 'undone';

/** Finishes what a journal names, or clears away what was staged without one. The archive's lock must be held. */
export async function recover(archive: string): Promise<Recovery> {
  const staging = stagingOf(archive);
  if (!(await isThere(staging.folder))) return 'nothing';
  const journal = await readJournal(staging);
  if (journal !== null) await carryOut(staging, journal);
  const isEmpty = (await readdir(staging.folder)).length === 0;
  await discard(staging);
  if (journal !== null) return 'finished';
  return isEmpty ? 'nothing' : 'undone';
}

/** The archive's staging folder; nothing is created before the first file is staged. */
export const stagingOf = (archive: string): Staging => ({ archive, folder: join(archive, '.staging') });

/** Writes a file that will stand at `path` below the archive once the journal is carried out. */
export async function stage(staging: Staging, path: string, content: string | Uint8Array): Promise<void> {
  await writeDurably(join(staging.folder, path), content);
}

/** Puts the staged files in their places, all or none. */
export async function commit(staging: Staging, journal: Journal): Promise<void> {
  await syncTree(staging.folder);
  const pending = join(staging.folder, 'journal.pending');
  await writeDurably(pending, canonicalJson({ format: 'seasonbrief-journal/1', ...journal }));
  await rename(pending, journalOf(staging));
  await syncFolder(staging.folder);
  await carryOut(staging, journal);
  await discard(staging);
}

/** Clears away what was staged, unless a journal promises to file it. */
export async function abandon(staging: Staging): Promise<void> {
  if (!(await isThere(journalOf(staging)))) await discard(staging);
}

/** Takes the journal away last: without it, a rest of what was filed would pass for a write that was not. */
async function discard(staging: Staging): Promise<void> {
  const names = await whereThere(() => readdir(staging.folder), []);
  for (const name of names.filter((each) => each !== 'journal.json'))
    await rm(join(staging.folder, name), { recursive: true, force: true });
  await rm(staging.folder, { recursive: true, force: true });
}

const journalOf = (staging: Staging): string => join(staging.folder, 'journal.json');

async function readJournal(staging: Staging): Promise<Journal | null> {
  const file = journalOf(staging);
  const text = await whereThere(() => readFile(file, 'utf8'), null);
  if (text === null) return null;
  try {
    return journalSchema.parse(JSON.parse(text));
  } catch (error) {
    throw new ArchiveError(
      `${file}: this journal of an unfinished write can't be read. It may come from another version: finish with that one, or move the folder ${staging.folder} away and compare the ledger with the briefs`,
      { cause: error },
    );
  }
}

async function carryOut(staging: Staging, journal: Journal): Promise<void> {
  for (const path of journal.moves) await moveIn(staging, path);
  for (const path of journal.removals) await rm(join(staging.archive, path), { force: true });
  await appendToLedger(staging, journal.ledgerRows);
  const folders = new Set([...journal.moves, ...journal.removals, 'ledger.csv'].flatMap(foldersAbove));
  for (const folder of folders) await syncFolder(join(staging.archive, folder));
}

/** `a/b/c.html` -> `a/b`, `a`, and the archive itself (`.`). */
const foldersAbove = (path: string): string[] => {
  const above = dirname(path);
  return above === '.' ? ['.'] : [above, ...foldersAbove(above)];
};

/** Moves one file or folder to its place. What is no longer in the staging folder was moved before a crash. */
async function moveIn(staging: Staging, path: string): Promise<void> {
  const from = join(staging.folder, path);
  const to = join(staging.archive, path);
  const found = await whereThere(() => stat(from), null);
  if (found === null) return;
  await mkdir(dirname(to), { recursive: true });
  if (found.isDirectory()) await rm(to, { recursive: true, force: true });
  await rename(from, to);
}

async function appendToLedger(staging: Staging, rows: readonly string[]): Promise<void> {
  if (rows.length === 0) return;
  const ledger = join(staging.archive, 'ledger.csv');
  const before = await whereThere(() => readFile(ledger, 'utf8'), null);
  const after = withRows(before, rows);
  if (after === before) return;
  const staged = join(staging.folder, 'ledger.csv');
  await writeDurably(staged, after);
  await rename(staged, ledger);
}

/** Waits until every name in a staged folder is on the disk. */
async function syncTree(folder: string): Promise<void> {
  for (const entry of await readdir(folder, { withFileTypes: true })) {
    if (entry.isDirectory()) await syncTree(join(folder, entry.name));
  }
  await syncFolder(folder);
}

const isThere = (path: string): Promise<boolean> =>
  whereThere(async () => {
    await stat(path);
    return true;
  }, false);
