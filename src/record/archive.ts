/**
 * The archive: one folder a firm, in it one folder for each date of issue, in that the briefs, which never change.
 *
 *   openArchive (lock, recover) -> filedBrief? -> stageBrief, setAside … -> fileBriefs (journal, ledger) -> closeArchive
 */
import { randomUUID } from 'node:crypto';
import { mkdir, readdir, readFile, rename, rm, rmdir, stat } from 'node:fs/promises';
import { dirname, join, resolve } from 'node:path';
import { ArchiveError, archiveError, errorCode } from './archive-error.js';
import { sha256 } from './canonical.js';
import { type CoverRecord, coverSchema } from './cover.js';
import { whereThere, writeDurably } from './disk.js';
import { abandon, commit, type Recovery, recover, type Staging, stage, stagingOf } from './journal.js';
import { chainedRows, checkChain, checkLastRow, checkRowsOf, type LedgerEntry, lastRow, notHeld } from './ledger.js';
import { type Lock, releaseLock, takeLock } from './lock.js';
import { type BriefRecord, recordSchema } from './record.js';

export interface Archive {
  readonly folder: string;
  /** What had to be done about a write that did not end. */
  readonly recovery: Recovery;
  readonly lock: Lock;
  /** The topmost folder that was made for the archive; removed again if nothing is filed in it. */
  readonly made: string | undefined;
}

/** The files of one brief, and those of a cover but for the CSV. */
export const kinds = ['html', 'pdf', 'json', 'csv'] as const;
export type Kind = (typeof kinds)[number];
export type Files = Partial<Readonly<Record<Kind, string | Uint8Array>>>;

/** A record as it is filed, with the SHA-256 of its file. */
export interface FiledRecord {
  readonly record: BriefRecord;
  readonly sha256: string;
}

/** A brief in a dated folder: the kinds of file that are there, and its record where that can be read. */
export interface FiledBrief {
  readonly kinds: readonly Kind[];
  readonly filed: FiledRecord | { readonly damage: string };
}

/** Makes the folder where needed, keeps other writers out, and ends what a crash left unfinished. */
export async function openArchive(folder: string): Promise<Archive> {
  try {
    const { made, lock } = await lockedFolder(folder);
    try {
      return { folder, recovery: await recover(folder), lock, made };
    } catch (error) {
      await releaseLock(lock);
      throw error;
    }
  } catch (error) {
    throw archiveError(error, folder);
  }
}

async function lockedFolder(folder: string): Promise<Pick<Archive, 'made' | 'lock'>> {
  const made = await makeFolder(folder);
  try {
    return { made, lock: await takeLock(folder) };
  } catch (error) {
    // Another writer that filed nothing took its new folder away in between.
    if (errorCode(error) === 'ENOENT') return lockedFolder(folder);
    if (made !== undefined) await removeEmpty(folder, made);
    throw error;
  }
}

/**
 * Makes the folder and those above it where needed, and gives the topmost that was made. Node's own way of doing so says
 * ENOENT of a disk that may only be read.
 */
async function makeFolder(folder: string): Promise<string | undefined> {
  try {
    await mkdir(folder);
    return folder;
  } catch (error) {
    if (await isFolder(folder)) return undefined;
    if (errorCode(error) !== 'ENOENT' || dirname(folder) === folder) throw error;
    const above = await makeFolder(dirname(folder));
    const made = await makeFolder(folder);
    return above ?? made;
  }
}

/** Clears away what was staged and not filed, and lets other writers in. */
export async function closeArchive(archive: Archive): Promise<void> {
  await abandon(stagingOf(archive.folder));
  await releaseLock(archive.lock);
  if (archive.made !== undefined) await removeEmpty(archive.folder, archive.made);
}

/** Removes the folder and those above it up to `top`, as long as they are empty. */
async function removeEmpty(folder: string, top: string): Promise<void> {
  try {
    await rmdir(folder);
    if (resolve(folder) !== resolve(top)) await removeEmpty(dirname(folder), top);
  } catch (error) {
    if (errorCode(error) !== 'ENOTEMPTY') throw error;
  }
}

/** The firm whose briefs the archive holds, as its newest cover names it; null in a new archive. */
export async function filedFor(archive: Archive): Promise<string | null> {
  const dates = (await readdir(archive.folder)).filter(isDated).sort();
  for (const date of dates.reverse()) {
    const cover = await filedCover(archive, date);
    if (cover !== null) return cover.plan.preparedFor;
  }
  return null;
}

async function filedCover(archive: Archive, date: string): Promise<CoverRecord | null> {
  const text = await whereThere(() => readFile(join(archive.folder, date, 'cover.json'), 'utf8'), null);
  if (text === null) return null;
  try {
    return coverSchema.parse(JSON.parse(text));
  } catch {
    // A cover is made anew by every write, so a damaged one bars nothing.
    return null;
  }
}

/** What stands in the dated folder under this name, or null where there is nothing. */
export async function filedBrief(archive: Archive, date: string, slug: string): Promise<FiledBrief | null> {
  const there = await filedKinds(archive, date, slug);
  if (there.length === 0) return null;
  const file = join(archive.folder, date, `${slug}.json`);
  if (!there.includes('json')) return { kinds: there, filed: { damage: `${file} is missing` } };
  try {
    return { kinds: there, filed: parsedRecord(await readFile(file, 'utf8')) };
  } catch (error) {
    return { kinds: there, filed: { damage: `${file} can't be read as a record (${firstLine(error)})` } };
  }
}

export async function filedKinds(archive: Archive, date: string, name: string): Promise<Kind[]> {
  const names = new Set(await whereThere(() => readdir(join(archive.folder, date)), []));
  return kinds.filter((kind) => names.has(`${name}.${kind}`));
}

/** The records of the dated folder by their slugs, but for those that are about to be written. @throws ArchiveError naming a record that can't be read. */
export async function filedRecords(
  archive: Archive,
  date: string,
  except: ReadonlyMap<string, unknown> = new Map(),
): Promise<Map<string, FiledRecord>> {
  const records = new Map<string, FiledRecord>();
  for (const slug of (await filedSlugs(archive, date)).filter((each) => !except.has(each))) {
    const file = join(archive.folder, date, `${slug}.json`);
    try {
      records.set(slug, parsedRecord(await readFile(file, 'utf8')));
    } catch (error) {
      const remedy = 'put it back from a copy, or write its series again with --replace';
      throw new ArchiveError(`${file} can't be read as a record (${firstLine(error)}): ${remedy}`, { cause: error });
    }
  }
  return records;
}

/** The slugs of the dated folder's briefs, as far as their records are there. */
const filedSlugs = async (archive: Archive, date: string): Promise<string[]> =>
  (await whereThere(() => readdir(join(archive.folder, date)), []))
    .filter((name) => name.endsWith('.json') && name !== 'cover.json')
    .map((name) => name.slice(0, -5))
    .sort();

/**
 * The records under these slugs in the dated folders before `date`, the oldest first, and the files among them that
 * can't be read as records.
 */
export async function earlierRecords(
  archive: Archive,
  date: string,
  slugs: readonly string[],
): Promise<{ records: FiledRecord[]; damaged: string[] }> {
  const dates = (await readdir(archive.folder)).filter((name) => isDated(name) && name < date).sort();
  const records: FiledRecord[] = [];
  const damaged: string[] = [];
  for (const folder of dates)
    for (const slug of slugs) {
      const file = join(archive.folder, folder, `${slug}.json`);
      const text = await whereThere(() => readFile(file, 'utf8'), null);
      if (text === null) continue;
      try {
        records.push(parsedRecord(text));
      } catch (error) {
        damaged.push(`${file} (${firstLine(error)})`);
      }
    }
  return { records, damaged };
}

const isDated = (name: string): boolean => /^\d{4}-\d{2}-\d{2}$/.test(name);

const parsedRecord = (text: string): FiledRecord => ({
  record: recordSchema.parse(JSON.parse(text)),
  sha256: sha256(text),
});

const firstLine = (error: unknown): string => {
  const issue = recordIssue(error);
  return issue ?? (error instanceof Error ? (error.message.split('\n')[0] ?? '') : String(error));
};

/** zod's own message is a whole JSON document: the first fault and its place say enough. */
function recordIssue(error: unknown): string | null {
  if (!(error instanceof Error) || !('issues' in error) || !Array.isArray(error.issues)) return null;
  const issue: unknown = error.issues[0];
  if (typeof issue !== 'object' || issue === null || !('path' in issue) || !('message' in issue)) return null;
  return `${Array.isArray(issue.path) ? issue.path.join('.') : ''}: ${String(issue.message)}`;
}

/** Writes a brief's or a cover's files beside their place in `folder` (the date, or `trial`). */
export async function stageFiles(archive: Archive, folder: string, name: string, files: Files): Promise<void> {
  await inArchive(archive, async (staging) => {
    for (const kind of kinds) {
      const content = files[kind];
      if (content !== undefined) await stage(staging, `${folder}/${name}.${kind}`, content);
    }
  });
}

/** The folder below a dated one, `replaced/1`, `replaced/2` …, that what this run replaces is kept in. */
export async function nextReplaced(archive: Archive, date: string): Promise<string> {
  const taken = await whereThere(() => readdir(join(archive.folder, date, 'replaced')), []);
  return `${date}/replaced/${Math.max(0, ...taken.map(Number).filter(Number.isInteger)) + 1}`;
}

/** Stages a copy of a brief's or cover's files as they are now, to be kept in the folder `replaced`. */
export async function setAside(archive: Archive, date: string, name: string, replaced: string): Promise<void> {
  await inArchive(archive, async (staging) => {
    for (const kind of await filedKinds(archive, date, name)) {
      const content = await readFile(join(archive.folder, date, `${name}.${kind}`));
      await stage(staging, `${replaced}/${name}.${kind}`, content);
    }
  });
}

/** Puts everything staged for the date in its place, takes `removals` (paths below the archive) away, writes the ledger. */
export async function fileBriefs(
  archive: Archive,
  date: string,
  entries: readonly LedgerEntry[],
  removals: readonly string[],
): Promise<void> {
  await inArchive(archive, async (staging) => {
    const briefs = (await isFolder(join(archive.folder, date))) ? await filesBelow(staging.folder, date) : [date];
    const moves = [...(await stagedTemplates(staging)), ...briefs];
    const ledger = await whereThere(() => readFile(join(archive.folder, 'ledger.csv'), 'utf8'), null);
    await checkAgreement(archive, ledger, new Set(entries.map(({ record }) => record.brief)));
    const ledgerRows = chainedRows(ledger, notHeld(ledger, entries));
    await commit(staging, { moves, removals: [...removals], ledgerRows });
  });
}

/** Nothing is added to a ledger that was changed. @throws ArchiveError, but not for a brief that is made `anew`. */
async function checkAgreement(archive: Archive, ledger: string | null, anew: ReadonlySet<string>): Promise<void> {
  const filed: string[] = [];
  for (const date of (await readdir(archive.folder)).filter(isDated).sort())
    for (const slug of await filedSlugs(archive, date)) filed.push(`${date}/${slug}`);
  checkRowsOf(
    ledger,
    filed.filter((brief) => !anew.has(brief)),
  );
  if (ledger === null) return;
  checkChain(ledger);
  const { brief, recordSha256 } = lastRow(ledger);
  if (!filed.includes(brief)) return;
  const [date = '', slug = ''] = brief.split('/');
  const there = (await filedBrief(archive, date, slug))?.filed;
  if (there === undefined || 'damage' in there || (anew.has(brief) && there.sha256 !== recordSha256)) return;
  checkLastRow(ledger, there);
}

/** Puts the staged trial in place of the last one. */
export async function fileTrial(archive: Archive): Promise<void> {
  await inArchive(archive, async (staging) => {
    const moves = [...(await stagedTemplates(staging)), 'trial'];
    await commit(staging, { moves, removals: [], ledgerRows: [] });
  });
}

/** Stages a user's own templates, to be kept under their SHA-256 once for each version that was used. */
export async function keepTemplates(
  archive: Archive,
  sha256: string,
  files: ReadonlyMap<string, Uint8Array>,
): Promise<void> {
  if (await isFolder(join(archive.folder, 'templates', sha256))) return;
  await inArchive(archive, async (staging) => {
    for (const [name, content] of files) await stage(staging, `templates/${sha256}/${name}`, content);
  });
}

const stagedTemplates = async (staging: Staging): Promise<string[]> =>
  (await whereThere(() => readdir(join(staging.folder, 'templates')), [])).map((name) => `templates/${name}`);

const isFolder = (path: string): Promise<boolean> => whereThere(async () => (await stat(path)).isDirectory(), false);

/**
 * Writes a choice sheet in place of the one before and gives its path. A working paper needs neither journal nor lock:
 * one renaming puts it in its place whole.
 */
export async function writeChoiceSheet(folder: string, slug: string, html: string): Promise<string> {
  const file = join(folder, 'choice', `${slug}.html`);
  const beside = `${file}-${randomUUID()}`;
  try {
    await writeDurably(beside, html);
    await rename(beside, file);
    return file;
  } catch (error) {
    await rm(beside, { force: true });
    throw archiveError(error, folder);
  }
}

async function inArchive(archive: Archive, step: (staging: Staging) => Promise<void>): Promise<void> {
  try {
    await step(stagingOf(archive.folder));
  } catch (error) {
    throw archiveError(error, archive.folder);
  }
}

async function filesBelow(root: string, folder: string): Promise<string[]> {
  const entries = await readdir(join(root, folder), { withFileTypes: true });
  const below = await Promise.all(
    entries.map((entry) => {
      const path = `${folder}/${entry.name}`;
      return entry.isDirectory() ? filesBelow(root, path) : [path];
    }),
  );
  return below.flat().sort();
}
