/** Makes the briefs and their cover, and stages them beside their place in the archive. */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { renderBrief } from '../page/brief.js';
import { renderCover } from '../page/cover.js';
import type { Printer } from '../page/print.js';
import {
  earlierRecords,
  type FiledRecord,
  type Files,
  filedKinds,
  filedRecords,
  type Kind,
  nextReplaced,
  setAside,
  stageFiles,
} from '../record/archive.js';
import { ArchiveError } from '../record/archive-error.js';
import { assembleWithMoney, moneyOfRecord } from '../record/assemble.js';
import { assembleCover } from '../record/assemble-cover.js';
import type { Money } from '../record/assemble-decisions.js';
import { canonicalJson, sha256 } from '../record/canonical.js';
import { budgetCsv, ordersCsv } from '../record/cover-csv.js';
import { figuresCsv } from '../record/figures-csv.js';
import { planPart } from '../record/inputs.js';
import type { LedgerEntry } from '../record/ledger.js';
import type { BriefRecord } from '../record/record.js';
import { SOFTWARE } from './software.js';
import { missingKinds, type Task } from './tasks.js';
import { folderOf, type Work } from './work.js';

/** What has been staged so far. */
export interface Made {
  readonly records: Map<string, FiledRecord>;
  /** Of the records made anew that have a budget. */
  readonly money: Map<string, Money>;
  readonly entries: LedgerEntry[];
  /** Files that the new ones leave without a counterpart. */
  readonly removals: string[];
  readonly failures: { name: string; message: string }[];
  /** The folder for what is replaced; null where nothing is. */
  readonly replaced: string | null;
}

/** Computes, renders, prints and stages one brief after another; one that fails does not stop the others. */
export async function makeBriefs(work: Work, tasks: readonly Task[], printer: Printer | null): Promise<Made> {
  const { plan, archive, options, report } = work;
  const replaces = tasks.some(({ there, filed }) => there !== null && filed === null);
  const replaced = replaces ? await nextReplaced(archive, plan.issued) : null;
  const made: Made = { records: new Map(), money: new Map(), entries: [], removals: [], failures: [], replaced };
  for (const [i, task] of tasks.entries()) {
    options.signal?.throwIfAborted();
    report.progress(i, tasks.length, task.series.name);
    try {
      await makeBrief(work, task, printer, made);
    } catch (error) {
      if (error instanceof ArchiveError || options.signal?.aborted) throw error;
      made.failures.push({ name: task.series.name, message: error instanceof Error ? error.message : String(error) });
    }
  }
  report.progress(tasks.length, tasks.length, '');
  return made;
}

async function makeBrief(work: Work, task: Task, printer: Printer | null, made: Made): Promise<void> {
  const { plan, archive, options } = work;
  const { slug } = task.series;
  const filed = task.filed ?? (await recordOf(work, task, made));
  const files = await filesOf(work, task, filed, printer);
  if (task.filed !== null && task.there !== null) {
    const missing = missingKinds(task.there, options);
    await stageFiles(archive, folderOf(work), slug, Object.fromEntries(missing.map((kind) => [kind, files[kind]])));
  } else {
    if (task.there !== null && made.replaced !== null) await setAside(archive, plan.issued, slug, made.replaced);
    await stageFiles(archive, folderOf(work), slug, files);
    made.removals.push(...withoutCounterpart(task.there?.kinds ?? [], files, `${plan.issued}/${slug}`));
    const replaces = task.there === null ? null : `${made.replaced}/${slug}.json`;
    made.entries.push({ ...filed, replaces });
  }
  made.records.set(slug, filed);
}

async function recordOf(work: Work, { inputs, series }: Task, made: Made): Promise<FiledRecord> {
  const { archive, plan, report } = work;
  const { records: earlier, damaged } = await earlierRecords(archive, plan.issued, [
    series.slug,
    ...series.formerSlugs,
  ]);
  for (const file of damaged)
    report.message(`series "${series.name}": ${file} can't be read as a record, and the look back leaves it out`);
  const origin = { version: SOFTWARE.version, folder: folderOf(work) };
  const { record, money } = assembleWithMoney(inputs, origin, earlier);
  if (money !== null) made.money.set(record.series.slug, money);
  return { record, sha256: sha256(canonicalJson(record)) };
}

/** A brief's files; a page that is filed already is printed as it is filed. */
async function filesOf({ theme, archive, options }: Work, task: Task, filed: FiledRecord, printer: Printer | null) {
  const { record, sha256: fingerprint } = filed;
  const isFiled = task.filed !== null && task.there?.kinds.includes('html');
  const html = isFiled
    ? await readFile(join(archive.folder, record.issued, `${record.series.slug}.html`), 'utf8')
    : await renderBrief(record, theme, { fingerprint, trial: options.trial === true });
  return {
    html,
    ...(await printed(html, record.issued, printer)),
    json: canonicalJson(record),
    csv: figuresCsv(record),
  };
}

const printed = async (html: string, issued: string, printer: Printer | null): Promise<Files> =>
  printer === null ? {} : { pdf: await printer.print(html, issued) };

const withoutCounterpart = (there: readonly Kind[], files: Files, path: string): string[] =>
  there.filter((kind) => files[kind] === undefined).map((kind) => `${path}.${kind}`);

/**
 * Stages what all series share: the cover, which shows every brief of the folder, in the plan's order and then by name,
 * the order list and the budget. Gives the files of those before them that are not made anew.
 */
export async function stageCover(
  work: Work,
  { records, money, replaced }: Made,
  printer: Printer | null,
): Promise<string[]> {
  const { plan, theme, archive, options } = work;
  const folder = folderOf(work);
  const others = options.trial ? new Map<string, FiledRecord>() : await filedRecords(archive, folder, records);
  const all = new Map([...others, ...records]);
  const planned = plan.series.map(({ slug }) => slug);
  const unplanned = [...all.keys()].filter((slug) => !planned.includes(slug)).sort();
  const briefs = [...planned, ...unplanned].flatMap((slug) => all.get(slug) ?? []);
  const moneyOf = (record: BriefRecord) => money.get(record.series.slug) ?? moneyOfRecord(record);
  const cover = assembleCover(plan.issued, planPart(plan, theme.sha256), SOFTWARE, briefs, moneyOf);
  const html = await renderCover(cover, theme, { trial: options.trial === true });
  const shared: Record<(typeof SHARED)[number], Files> = {
    cover: { html, ...(await printed(html, plan.issued, printer)), json: canonicalJson(cover) },
    orders: csvFiles(ordersCsv(cover)),
    budget: csvFiles(
      budgetCsv(
        cover,
        briefs.map(({ record }) => record),
      ),
    ),
  };
  const stale: string[] = [];
  for (const name of SHARED) {
    const there = options.trial ? [] : await filedKinds(archive, folder, name);
    if (replaced !== null) await setAside(archive, folder, name, replaced);
    await stageFiles(archive, folder, name, shared[name]);
    stale.push(...withoutCounterpart(there, shared[name], `${folder}/${name}`));
  }
  return stale;
}

const SHARED = ['cover', 'orders', 'budget'] as const;

const csvFiles = (csv: string | null): Files => (csv === null ? {} : { csv });
