/**
 * `seasonbrief recheck`: computes every filed record again, draws its pages again, and confirms the ledger.
 *
 *   archive (lock, recover) -> what is filed -> ledger -> briefs, oldest first -> covers -> what agrees and what doesn't
 *
 * Nothing in the archive is changed, but that a write that was interrupted is finished or undone first.
 */
import { readFile, stat } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { setImmediate as nextTurn } from 'node:timers/promises';
import { suggestion } from '../figures/nearest.js';
import { type Archive, closeArchive, openArchive } from '../record/archive.js';
import { ArchiveError, errorCode } from '../record/archive-error.js';
import { whereThere } from '../record/disk.js';
import { briefsIn, type FoundBrief, filedPlaces, type Place } from '../record/filed.js';
import { checkLedger } from '../record/ledger-check.js';
import { type Bench, openBench } from './recheck-bench.js';
import { recheckBrief } from './recheck-brief.js';
import { recheckCover } from './recheck-cover.js';
import type { Rechecked, RecheckOptions, RecheckResult } from './rechecked.js';
import { type Reporter, SILENT } from './work.js';

/** What is filed in one folder. */
interface Shelf {
  readonly place: Place;
  readonly briefs: readonly FoundBrief[];
}

/** Throws an ArchiveError where there is no archive, or it can't be used. */
export async function recheckArchive(folder: string, options: RecheckOptions = {}): Promise<RecheckResult> {
  const { report = SILENT } = options;
  const archive = await openThere(resolve(folder));
  try {
    if (archive.recovery !== 'nothing')
      report.message(
        `a write that was interrupted has been ${archive.recovery === 'finished' ? 'finished' : 'undone'}; nothing else is changed`,
      );
    return await recheck(archive, { ...options, report });
  } finally {
    await closeArchive(archive);
  }
}

async function recheck(
  archive: Archive,
  options: RecheckOptions & { readonly report: Reporter },
): Promise<RecheckResult> {
  const shelves: Shelf[] = [];
  // Folder after folder: all files of a long-kept archive at once are more than a system lets a program open.
  for (const place of await filedPlaces(archive)) shelves.push({ place, briefs: await briefsIn(archive, place) });
  const ledger = await whereThere(() => readFile(join(archive.folder, 'ledger.csv'), 'utf8'), null);
  if (shelves.every(({ briefs }) => briefs.length === 0) && ledger === null) throw nothingFiled(archive.folder);
  const wanted = wantedBriefs(shelves, options.only ?? []);
  const found = checkLedger(
    ledger,
    shelves.flatMap(({ briefs }) => briefs.map(ledgerFile)),
  );
  const bench = openBench(archive, found, wanted.size, options);
  for (const { content } of shelves.flatMap(({ briefs }) => briefs))
    if ('record' in content) bench.records.set(content.sha256, content);
  try {
    const { briefs, covers } = await recheckShelves(bench, shelves, wanted, options);
    // That a record is not the one that was filed is a fault of the brief, and told with it.
    const told = new Set(briefs.map(({ path }) => path));
    const faults = found.faults.filter(({ kind, path }) => kind !== 'record-changed' || !told.has(path ?? ''));
    const agrees = faults.length === 0 && [...briefs, ...covers].every(({ verdict }) => verdict === 'agrees');
    return { folder: archive.folder, agrees, briefs, covers, ledger: { rows: found.rows, faults } };
  } finally {
    await bench.close();
  }
}

/** Opens the archive if there is one: a mistyped folder is not made. */
async function openThere(folder: string): Promise<Archive> {
  if (!(await whereThere(async () => (await stat(folder)).isDirectory(), false)))
    throw new ArchiveError(
      `${folder}: there is no such folder; name the archive's folder, as in: seasonbrief recheck my-briefs/out`,
    );
  try {
    return await openArchive(folder);
  } catch (error) {
    const cause = error instanceof ArchiveError ? errorCode(error.cause) : undefined;
    if (cause === undefined || !['EACCES', 'EPERM', 'EROFS'].includes(cause)) throw error;
    throw new ArchiveError(
      `${folder}: a recheck keeps writers out by a lock in this folder, and may not write there (${cause}): give yourself the right to, or recheck a copy`,
      { cause: error },
    );
  }
}

const nothingFiled = (folder: string): ArchiveError =>
  new ArchiveError(
    `${folder}: no briefs are filed here; name the archive's folder, as in: seasonbrief recheck my-briefs/out`,
  );

function wantedBriefs(shelves: readonly Shelf[], only: readonly string[]): ReadonlySet<FoundBrief> {
  const all = shelves.flatMap(({ briefs }) => briefs);
  const names = new Set(all.flatMap(namesOf));
  const unknown = only.find((name) => !names.has(name));
  if (unknown !== undefined)
    throw new ArchiveError(`no brief of "${unknown}" is filed here${suggestion(unknown, [...names])}`);
  return new Set(only.length === 0 ? all : all.filter((brief) => namesOf(brief).some((name) => only.includes(name))));
}

const namesOf = ({ slug, content }: FoundBrief): string[] =>
  'record' in content ? [content.record.series.name, slug] : [slug];

const ledgerFile = ({ path, place, slug, content }: FoundBrief) => ({
  path,
  brief: `${place.date}/${slug}`,
  replaced: place.replaced,
  sha256: content.sha256,
  record: 'record' in content ? content.record : null,
});

/** Pages that are drawn beside the computing, at most. */
const AT_ONCE = 12;

/** Date after date: what a brief looks back at has been computed again before it, and what a cover shows too. */
async function recheckShelves(
  bench: Bench,
  shelves: readonly Shelf[],
  wanted: ReadonlySet<FoundBrief>,
  { report, signal, only = [] }: RecheckOptions & { readonly report: Reporter },
): Promise<{ briefs: Rechecked[]; covers: Rechecked[] }> {
  const briefs = inTurn<Rechecked>(bench.drawing === null ? 1 : AT_ONCE);
  const covers: Rechecked[] = [];
  for (const date of new Set(shelves.map(({ place }) => place.date))) {
    const ofDate = shelves.filter(({ place }) => place.date === date);
    for (const brief of ofDate.flatMap((shelf) => shelf.briefs)) {
      if (!wanted.has(brief)) continue;
      signal?.throwIfAborted();
      report.progress(briefs.count(), wanted.size, brief.path);
      await briefs.add(recheckBrief(brief, bench));
    }
    // A cover shows all series, so a few of them can't confirm it.
    for (const { place, briefs: standing } of only.length === 0 ? ofDate : []) {
      signal?.throwIfAborted();
      const hasCover = place.names.has('cover.json') || (place.replaced === null && standing.length > 0);
      if (hasCover) covers.push(await recheckCover(place, standing, bench));
    }
    bench.money.clear();
  }
  report.progress(wanted.size, wanted.size, '');
  return { briefs: await briefs.all(), covers };
}

/** Takes work that has begun, and waits while more than so much of it is unfinished. */
function inTurn<T>(atOnce: number) {
  const begun: Promise<T>[] = [];
  return {
    count: () => begun.length,
    add: async (work: Promise<T>): Promise<void> => {
      // A failure is told when its turn comes.
      work.catch(() => undefined);
      begun.push(work);
      await begun.at(-atOnce);
      // What has begun is given a moment, which computing would not leave it.
      await nextTurn();
    },
    all: () => Promise.all(begun),
  };
}
