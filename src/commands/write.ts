/**
 * `seasonbrief write`: from a plan and its figures to the briefs in the archive.
 *
 *   plan, figures -> checks -> archive (lock, recover) -> records -> pages -> file all at once
 */
import { dirname, join, relative, resolve } from 'node:path';
import { readFigures, type SeriesFigures } from '../figures/figures.js';
import { type Fault, InputError } from '../figures/input-error.js';
import { renderBrief } from '../page/brief.js';
import { renderCover } from '../page/cover.js';
import { openPrinter, type Printer } from '../page/print.js';
import { loadTheme, type Theme } from '../page/theme.js';
import { type Plan, type PlannedSeries, readPlan } from '../plan/plan.js';
import {
  type Archive,
  closeArchive,
  type FiledRecord,
  fileBriefs,
  filedBrief,
  filedFor,
  filedRecords,
  fileTrial,
  nextReplaced,
  openArchive,
  setAside,
  stageFiles,
} from '../record/archive.js';
import { ArchiveError } from '../record/archive-error.js';
import { assemble } from '../record/assemble.js';
import { assembleCover } from '../record/assemble-cover.js';
import { canonicalJson, sha256 } from '../record/canonical.js';
import { figuresCsv } from '../record/figures-csv.js';
import { type BriefInputs, briefInputs, inputsOfRecord, planPart, sameInputs } from '../record/inputs.js';
import type { LedgerEntry } from '../record/ledger.js';
import { planFaults } from '../record/plan-faults.js';
import { checkModel } from './check-model.js';
import { SOFTWARE } from './software.js';

export interface WriteOptions {
  /** The archive's folder; `out` beside the plan unless given. */
  readonly out?: string;
  /** Names of the series to write; all unless given. */
  readonly only?: readonly string[];
  readonly trial?: boolean;
  readonly pdf?: boolean;
  readonly replace?: boolean;
  /** Takes what the user should know while it goes on. */
  readonly report?: Reporter;
}

export interface Reporter {
  readonly message: (text: string) => void;
  readonly progress: (done: number, of: number, what: string) => void;
}

export interface WriteResult {
  /** Absolute paths of the files to open, the cover first. */
  readonly files: readonly string[];
  readonly written: readonly string[];
  /** Names of series whose brief stands as it was filed. */
  readonly unchanged: readonly string[];
  readonly failures: readonly { readonly name: string; readonly message: string }[];
}

const SILENT: Reporter = { message: () => undefined, progress: () => undefined };

/** Throws an InputError or ArchiveError, with nothing written, where plan, figures or archive can't be used. */
export async function writeBriefs(planPath: string, options: WriteOptions = {}): Promise<WriteResult> {
  const report = options.report ?? SILENT;
  const plan = await readPlan(planPath, checkModel);
  const wanted = chosen(plan, options.only ?? []);
  const figures = await readFigures({
    ...plan.figures,
    issued: plan.issued,
    yearStarts: plan.yearStarts,
    wanted,
  });
  checkTogether(plan, wanted, figures);
  for (const series of wanted) sayWhatIsLeftAside(series, report);

  const theme = await loadTheme(plan.locale);
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

interface Work {
  readonly plan: Plan;
  readonly wanted: readonly PlannedSeries[];
  readonly figures: ReadonlyMap<string, SeriesFigures>;
  readonly theme: Theme;
  readonly archive: Archive;
  readonly options: WriteOptions;
  readonly report: Reporter;
}

/** What is to be done for one series. */
interface Task {
  readonly series: PlannedSeries;
  readonly inputs: BriefInputs;
  readonly replaces: boolean;
  /** The filed record whose pages alone are to be completed. */
  readonly filed: FiledRecord | null;
}

async function write(work: Work): Promise<WriteResult> {
  const { plan, theme, archive, options, report } = work;
  const trial = options.trial === true;
  const folder = trial ? 'trial' : plan.issued;
  const { tasks, unchanged } = await tasksOf(work);
  if (tasks.length === 0) return { files: filesToOpen(archive, folder, work), written: [], unchanged, failures: [] };

  const withPdf = options.pdf !== false;
  const printer = withPdf ? await openPrinter({ warn: report.message }) : null;
  const failures: { name: string; message: string }[] = [];
  const entries: LedgerEntry[] = [];
  const made = new Map<string, FiledRecord>();
  const replaced = tasks.some(({ replaces }) => replaces) ? await nextReplaced(archive, plan.issued) : null;
  try {
    for (const [i, task] of tasks.entries()) {
      report.progress(i, tasks.length, task.series.name);
      try {
        const filed = task.filed ?? recordOf(task, folder);
        const { html, pdf } = await pagesOf(filed, theme, printer, trial);
        const { slug } = task.series;
        if (task.replaces && replaced !== null) await setAside(archive, plan.issued, slug, replaced);
        await stageFiles(archive, folder, slug, {
          html,
          ...(pdf === null ? {} : { pdf }),
          ...(task.filed === null ? { json: canonicalJson(filed.record), csv: figuresCsv(filed.record) } : {}),
        });
        made.set(slug, filed);
        if (task.filed === null)
          entries.push({ ...filed, replaces: task.replaces ? `${replaced}/${slug}.json` : null });
      } catch (error) {
        if (error instanceof ArchiveError) throw error;
        failures.push({ name: task.series.name, message: error instanceof Error ? error.message : String(error) });
      }
    }
    report.progress(tasks.length, tasks.length, '');
    if (made.size > 0) await stageCover(work, made, printer, folder, trial);
  } finally {
    await printer?.close();
  }
  if (made.size > 0) {
    if (trial) await fileTrial(archive);
    else await fileBriefs(archive, plan.issued, entries, []);
  }
  return {
    files: made.size > 0 ? filesToOpen(archive, folder, work, failures) : [],
    written: tasks
      .map(({ series }) => series.name)
      .filter((name) => !failures.some((failure) => failure.name === name)),
    unchanged,
    failures,
  };
}

/** Throws an ArchiveError that names every series that is filed otherwise than the plan now says. */
async function tasksOf({ plan, wanted, figures, theme, archive, options }: Work) {
  const tasks: Task[] = [];
  const unchanged: string[] = [];
  const refused: string[] = [];
  for (const series of wanted) {
    const found = figures.get(series.slug);
    if (found === undefined) continue;
    const inputs = briefInputs(plan, series, found, theme.sha256);
    const there = options.trial ? null : await filedBrief(archive, plan.issued, series.slug);
    if (there === null) {
      tasks.push({ series, inputs, replaces: false, filed: null });
      continue;
    }
    const isSame = 'record' in there.filed && sameInputs(inputsOfRecord(there.filed.record), inputs);
    const complete = there.kinds.includes('html') && (options.pdf === false || there.kinds.includes('pdf'));
    if (isSame && 'record' in there.filed) {
      if (complete) unchanged.push(series.name);
      else tasks.push({ series, inputs, replaces: false, filed: there.filed });
    } else if (options.replace) tasks.push({ series, inputs, replaces: true, filed: null });
    else {
      const why = 'damage' in there.filed ? there.filed.damage : 'its figures or its plan have changed since';
      refused.push(`series "${series.name}" has a brief of ${plan.issued} already, and ${why}`);
    }
  }
  if (refused.length > 0)
    throw new ArchiveError(
      `${refused.join('\n')}\nWrite it anew with --replace, which keeps the old files, or give the plan another date under "issued".`,
    );
  return { tasks, unchanged };
}

function recordOf({ inputs }: Task, folder: string): FiledRecord {
  const record = assemble(inputs, { version: SOFTWARE.version, folder });
  return { record, sha256: sha256(canonicalJson(record)) };
}

async function pagesOf(
  { record, sha256: fingerprint }: FiledRecord,
  theme: Theme,
  printer: Printer | null,
  trial: boolean,
) {
  const html = await renderBrief(record, theme, { fingerprint, trial });
  return { html, pdf: printer === null ? null : await printer.print(html, record.issued) };
}

/** The cover shows every brief of the folder, in the plan's order and then by name. */
async function stageCover(
  { plan, theme, archive }: Work,
  made: ReadonlyMap<string, FiledRecord>,
  printer: Printer | null,
  folder: string,
  trial: boolean,
): Promise<void> {
  const there = trial ? new Map<string, FiledRecord>() : await filedRecords(archive, folder);
  const all = new Map([...there, ...made]);
  const planned = plan.series.map(({ slug }) => slug);
  const others = [...all.keys()].filter((slug) => !planned.includes(slug)).sort();
  const briefs = [...planned, ...others].flatMap((slug) => all.get(slug) ?? []);
  const cover = assembleCover(plan.issued, planPart(plan, theme.sha256), SOFTWARE, briefs);
  const html = await renderCover(cover, theme, { trial });
  const pdf = printer === null ? undefined : await printer.print(html, plan.issued);
  await stageFiles(archive, folder, 'cover', {
    html,
    json: canonicalJson(cover),
    ...(pdf === undefined ? {} : { pdf }),
  });
}

function chosen(plan: Plan, only: readonly string[]): readonly PlannedSeries[] {
  const names = plan.series.map(({ name }) => name);
  const unknown = only.filter((name) => !names.includes(name));
  if (unknown.length > 0) {
    const there = names.map((name) => `"${name}"`).join(', ');
    throw new InputError(
      unknown.map((name) => ({
        file: plan.path,
        line: null,
        column: null,
        message: `there is no series "${name}" to write; the plan has ${there}`,
      })),
    );
  }
  return only.length === 0 ? plan.series : plan.series.filter(({ name }) => only.includes(name));
}

function checkTogether(
  plan: Plan,
  wanted: readonly PlannedSeries[],
  figures: ReadonlyMap<string, SeriesFigures>,
): void {
  const faults: Fault[] = wanted.flatMap((series) => {
    const found = figures.get(series.slug);
    return found === undefined ? [] : planFaults(plan, series, found);
  });
  if (faults.length > 0) throw new InputError(faults);
}

/** One archive holds the briefs of one firm. */
async function checkFirm(archive: Archive, plan: Plan): Promise<void> {
  const filed = await filedFor(archive);
  if (filed !== null && filed !== plan.preparedFor)
    throw new ArchiveError(
      `${archive.folder} holds the briefs of "${filed}", and this plan is prepared for "${plan.preparedFor}": choose another folder with --out`,
    );
}

function sayWhatIsLeftAside({ name, judgement, purchase, budget }: PlannedSeries, { message }: Reporter): void {
  const aside = [
    ...(judgement.length > 0 ? ['the judgement'] : []),
    ...(purchase === null ? [] : ['the purchase']),
    ...(budget === null ? [] : ['the budget']),
  ];
  if (aside.length > 0)
    message(
      `series "${name}": ${aside.join(' and ')} in the plan is kept for a later version; this brief makes no use of it`,
    );
}

function filesToOpen(
  archive: Archive,
  folder: string,
  { wanted, options }: Work,
  failures: readonly { name: string }[] = [],
): string[] {
  const kind = options.pdf === false ? 'html' : 'pdf';
  const slugs = wanted.filter(({ name }) => !failures.some((failure) => failure.name === name)).map(({ slug }) => slug);
  return ['cover', ...slugs].map((slug) => join(archive.folder, folder, `${slug}.${kind}`));
}

/** A path as the user would type it from where she stands, where that is shorter. */
export function shortPath(path: string): string {
  const short = relative(process.cwd(), path);
  return short !== '' && short.length < path.length ? short : path;
}
