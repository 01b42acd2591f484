/**
 * The cover of a folder rechecked: computed again from the records that it shows, and drawn again.
 *
 *   cover.json -> the records of its rows -> computed again and compared -> its page, order list and budget
 */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { renderCover } from '../page/cover.js';
import type { FiledRecord } from '../record/archive.js';
import { moneyOfRecord } from '../record/assemble.js';
import { assembleCover } from '../record/assemble-cover.js';
import { canonicalJson } from '../record/canonical.js';
import { type Comparison, compare, TOLERANCE } from '../record/compare.js';
import { type CoverRecord, coverSchema } from '../record/cover.js';
import { budgetCsv, ordersCsv } from '../record/cover-csv.js';
import { type FoundBrief, type Place, readDocument } from '../record/filed.js';
import type { Bench, FoundTheme } from './recheck-bench.js';
import { unreadable } from './recheck-brief.js';
import { type FilesFound, recheckPage, recheckTable, together } from './recheck-files.js';
import { apartTold, coverRemedies, differencesTold } from './recheck-words.js';
import type { Rechecked } from './rechecked.js';
import { SOFTWARE } from './software.js';

/** `standing`: the briefs of the folder. */
export async function recheckCover(place: Place, standing: readonly FoundBrief[], bench: Bench): Promise<Rechecked> {
  const path = `${place.path}/cover`;
  if (!place.names.has('cover.json')) return unreadable(path, `is not there. ${coverRemedies(place).missing}`);
  const bytes = await readFile(join(bench.archive.folder, `${path}.json`));
  const document = readDocument(bytes, 'seasonbrief-cover/1', (value) => coverSchema.safeParse(value));
  if ('damage' in document) return unreadable(path, `${document.damage}. ${coverRemedies(place).wrong}`);
  const cover = document.data;
  const { briefs, faults: shown } = briefsShown(cover, place, standing, bench);
  const again = shown.length > 0 ? { why: [] } : computedAgain(cover, place, briefs, bench);
  const comparison = 'cover' in again ? compare(cover, again.cover) : { differences: [], apart: 0 };
  const faults = [
    ...shown,
    ...('why' in again ? again.why : []),
    ...(comparison.differences.length > 0 ? [`${differencesTold(comparison)}. ${coverRemedies(place).wrong}`] : []),
    ...(bytes.equals(Buffer.from(canonicalJson(document.value)))
      ? []
      : [`was saved anew in another way. ${coverRemedies(place).wrong}`]),
  ];
  const drawn = 'cover' in again && comparison.differences.length > 0 ? again.cover : cover;
  const files = await recheckFiles(drawn, place, briefs, bench);
  const all = [...faults.map((message) => ({ file: `${path}.json`, message })), ...files.faults];
  return {
    path,
    verdict: all.length === 0 ? 'agrees' : 'differs',
    version: cover.software.version,
    ...comparison,
    faults: all,
    notes: [...notesOn(cover, comparison), ...files.notes],
  };
}

/** The records of the rows, as they were when the cover was made; and what is amiss between cover and folder. */
function briefsShown({ rows }: CoverRecord, place: Place, standing: readonly FoundBrief[], { records }: Bench) {
  const briefs = rows.flatMap(({ sha256 }) => records.get(sha256) ?? []);
  const gone = rows.filter(({ sha256 }) => !records.has(sha256)).map(({ brief }) => `${brief}.json`);
  const shown = new Set(rows.map(({ brief }) => brief));
  const unseen = place.replaced === null ? standing.filter(({ path }) => !shown.has(path)).map(({ path }) => path) : [];
  const faults = [
    ...(gone.length > 0 ? [`shows ${gone.join(', ')}, which is not there as it was. Put that back first`] : []),
    ...(unseen.length > 0 ? [`does not show ${unseen.join(', ')}. ${coverRemedies(place).wrong}`] : []),
  ];
  return { briefs, faults };
}

function computedAgain(
  { plan, software }: CoverRecord,
  { date }: Place,
  briefs: readonly FiledRecord[],
  { money }: Bench,
): { readonly cover: CoverRecord } | { readonly why: readonly string[] } {
  try {
    const moneyOf = (record: FiledRecord['record']) => money.get(record) ?? moneyOfRecord(record);
    return { cover: assembleCover(date, plan, software, briefs, moneyOf) };
  } catch (error) {
    return { why: [`can't be computed again: ${error instanceof Error ? error.message : String(error)}`] };
  }
}

const notesOn = ({ software }: CoverRecord, { apart, differences }: Comparison): string[] => [
  ...(software.version === SOFTWARE.version ? [] : [`made by version ${software.version}`]),
  ...(apart > 0 && differences.length === 0 ? [apartTold(apart, TOLERANCE)] : []),
];

async function recheckFiles(
  cover: CoverRecord,
  place: Place,
  briefs: readonly FiledRecord[],
  bench: Bench,
): Promise<FilesFound> {
  const at = (name: string) => ({ place, name, remedies: coverRemedies(place) });
  const page = {
    issued: cover.issued,
    plan: cover.plan,
    version: cover.software.version,
    draw: ({ theme }: FoundTheme) => renderCover(cover, theme, { trial: false }),
  };
  const records = briefs.map(({ record }) => record);
  return together([
    await recheckPage(at('cover'), page, bench),
    await recheckTable(at('orders'), ordersCsv(cover), bench),
    // Its rows come from the records themselves.
    ...(records.length === cover.rows.length
      ? [await recheckTable(at('budget'), budgetCsv(cover, records), bench)]
      : []),
  ]);
}
