/**
 * `seasonbrief write`: from a plan and its figures to the briefs in the archive.
 *
 *   plan, figures -> checks -> archive (lock, recover) -> records -> pages -> file all at once
 */
import { dirname, join, resolve } from 'node:path';
import { openPrinter } from '../page/print.js';
import type { Plan, PlannedSeries } from '../plan/plan.js';
import {
  type Archive,
  closeArchive,
  fileBriefs,
  filedFor,
  filedKinds,
  fileTrial,
  keepTemplates,
  openArchive,
} from '../record/archive.js';
import { ArchiveError } from '../record/archive-error.js';
import { makeBriefs, stageCover } from './make-briefs.js';
import { planTheme } from './plan-theme.js';
import { readPlanned } from './read-planned.js';
import { tasksOf } from './tasks.js';
import { folderOf, type Reporter, SILENT, type Work, type WriteOptions } from './work.js';

export interface WriteResult {
  /** Absolute paths of the files to open, the cover first. */
  readonly files: readonly string[];
  readonly written: readonly string[];
  /** Names of series whose brief stands as it was filed. */
  readonly unchanged: readonly string[];
  readonly failures: readonly { readonly name: string; readonly message: string }[];
}

/** Throws an InputError or ArchiveError, with nothing written, where plan, figures or archive can't be used. */
export async function writeBriefs(planPath: string, options: WriteOptions = {}): Promise<WriteResult> {
  const report = options.report ?? SILENT;
  const { plan, wanted, figures } = await readPlanned(planPath, options.only ?? []);
  sayWhatIsPassedOver(plan, figures, report);

  const theme = await planTheme(plan);
  const folder = resolve(options.out ?? join(dirname(resolve(plan.path)), 'out'));
  const archive = await openArchive(folder);
  try {
    if (archive.recovery !== 'nothing')
      report.message(
        `a write that was interrupted has been ${archive.recovery === 'finished' ? 'finished' : 'undone'}`,
      );
    await checkFirm(archive, plan);
    return await write({ plan, wanted, figures, theme, archive, options, report });
  } finally {
    await closeArchive(archive);
  }
}

async function write(work: Work): Promise<WriteResult> {
  const { archive, options, report } = work;
  const folder = folderOf(work);
  const { tasks, unchanged, failures } = await tasksOf(work);
  const coverKinds = options.trial ? [] : await filedKinds(archive, folder, 'cover');
  if (tasks.length === 0 && coverKinds.includes('html')) {
    return { files: filesToOpen(work, failures), written: [], unchanged, failures };
  }
  const printer = options.pdf === false ? null : await openPrinter({ warn: report.message });
  try {
    const made = await makeBriefs(work, tasks, printer);
    made.failures.unshift(...failures);
    options.signal?.throwIfAborted();
    const stands = made.records.size + unchanged.length > 0;
    if (made.records.size > 0 || (stands && !coverKinds.includes('html'))) {
      const stale = await stageCover(work, made, printer);
      options.signal?.throwIfAborted();
      await keepTemplates(archive, work.theme.sha256, work.theme.own);
      if (options.trial) await fileTrial(archive);
      else await fileBriefs(archive, folder, made.entries, [...made.removals, ...stale]);
    }
    const failed = new Set(made.failures.map(({ name }) => name));
    return {
      files: stands ? filesToOpen(work, made.failures) : [],
      written: tasks.map(({ series }) => series.name).filter((name) => !failed.has(name)),
      unchanged,
      failures: made.failures,
    };
  } finally {
    await printer?.close();
  }
}

/** One archive holds the briefs of one firm. */
async function checkFirm(archive: Archive, plan: Plan): Promise<void> {
  const filed = await filedFor(archive);
  if (filed !== null && filed !== plan.preparedFor)
    throw new ArchiveError(
      `${archive.folder} holds the briefs of "${filed}", and this plan is prepared for "${plan.preparedFor}": choose another folder with --out`,
    );
}

/** Rows under the figures that hold none: totals and notes. */
function sayWhatIsPassedOver(plan: Plan, figures: Work['figures'], { message }: Reporter): void {
  const rows = new Map(
    [...figures.values()].flatMap(({ footer = [] }) => footer.map(({ line, text }) => [line, text])),
  );
  for (const [line, text] of rows)
    message(`${plan.figures.fileTyped}:${line} "${text}" stands under the figures and is passed over`);
}

function filesToOpen(work: Work, failures: readonly { readonly name: string }[]): string[] {
  const kind = work.options.pdf === false ? 'html' : 'pdf';
  const isMade = ({ name }: PlannedSeries): boolean => !failures.some((failure) => failure.name === name);
  const slugs = work.wanted.filter(isMade).map(({ slug }) => slug);
  return ['cover', ...slugs].map((slug) => join(work.archive.folder, folderOf(work), `${slug}.${kind}`));
}
