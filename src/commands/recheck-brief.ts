/**
 * One brief rechecked.
 *
 *   its file -> computed again and compared -> the record as it was filed -> its page and its figures
 */
import { renderBrief } from '../page/brief.js';
import type { FiledRecord } from '../record/archive.js';
import { assembleWithMoney } from '../record/assemble.js';
import type { Money } from '../record/assemble-decisions.js';
import { canonicalJson, sha256 } from '../record/canonical.js';
import { type Comparison, compare, TOLERANCE } from '../record/compare.js';
import { figuresCsv } from '../record/figures-csv.js';
import type { DamagedRecord, FoundBrief } from '../record/filed.js';
import { inputsOfRecord } from '../record/inputs.js';
import type { LedgerCheck } from '../record/ledger-check.js';
import type { BriefRecord } from '../record/record.js';
import type { Bench, FoundTheme } from './recheck-bench.js';
import { type FilesFound, recheckPage, recheckTable, together } from './recheck-files.js';
import { apartTold, briefRemedies, differencesTold, FROM_A_COPY } from './recheck-words.js';
import type { Rechecked, RecheckFault } from './rechecked.js';
import { SOFTWARE } from './software.js';

export async function recheckBrief(brief: FoundBrief, bench: Bench): Promise<Rechecked> {
  const { content, path } = brief;
  if ('damage' in content) return unreadable(path, `${content.damage}. ${damageRemedy(brief, content, bench)}`);
  const again = computedAgain(brief, content.record, bench);
  const standing = standingOf(brief, content, again, bench);
  const filed = standing === 'changed' ? again.filed : standing === 'unknown' ? null : content;
  if (filed !== null) bench.records.set(filed.sha256, filed);
  for (const each of [content, again.filed ?? content])
    if (again.money !== null) bench.money.set(each.record, again.money);
  const files = filed === null ? NOT_COMPARED : await recheckFiles(brief, filed, bench);
  const { comparison } = again;
  const faults = [...recordFaults(brief, content.record, again, standing, bench), ...files.faults];
  return {
    path,
    verdict: faults.length === 0 ? 'agrees' : 'differs',
    version: content.record.software.version,
    ...comparison,
    faults,
    notes: [...notesOn(content.record, comparison), ...files.notes],
  };
}

export const unreadable = (path: string, message: string): Rechecked => ({
  path,
  verdict: 'unreadable',
  version: null,
  apart: 0,
  differences: [],
  faults: [{ file: `${path}.json`, message }],
  notes: [],
});

// Computed again ------------------------------------------------------------------------------------------------

/** What comes of a record's inputs today. */
interface Again {
  readonly comparison: Comparison;
  /** The record as it would be filed; null where it can't be computed in full. */
  readonly filed: FiledRecord | null;
  readonly money: Money | null;
  /** Why not. */
  readonly why: readonly string[];
}

function computedAgain({ place }: FoundBrief, record: BriefRecord, bench: Bench): Again {
  const { earlier, gone } = lookedBackAt(record, bench);
  try {
    const origin = { version: record.software.version, folder: place.date };
    const { record: again, money } = assembleWithMoney(inputsOfRecord(record), origin, earlier);
    if (gone.length > 0) {
      const why = [`looks back at ${gone.join(', ')}, which is not there as it was, so that can't be computed again`];
      return {
        comparison: compare({ ...record, lookBack: null }, { ...again, lookBack: null }),
        filed: null,
        money,
        why,
      };
    }
    const filed = { record: again, sha256: sha256(canonicalJson(again)) };
    return { comparison: compare(record, again), filed, money, why: [] };
  } catch (error) {
    const why = `can't be computed again: ${error instanceof Error ? error.message : String(error)}`;
    return { comparison: { differences: [], apart: 0 }, filed: null, money: null, why: [why] };
  }
}

/** The earlier records that a look back went by, wherever they are now. */
function lookedBackAt({ lookBack }: BriefRecord, { records }: Bench) {
  const wanted = lookBack === null ? [] : [...lookBack.earlier, ...lookBack.unlike];
  return {
    earlier: wanted.flatMap((each) => records.get(each.sha256) ?? []),
    gone: wanted.filter((each) => !records.has(each.sha256)).map(({ brief }) => `${brief}.json`),
  };
}

// Against the ledger --------------------------------------------------------------------------------------------

/**
 * `filed`: the file is the one that was filed. `changed`: it is not, and what is computed again is. `agreeing`: the
 * ledger says neither, and file and computation agree. `unknown`: they don't.
 */
type Standing = 'filed' | 'changed' | 'agreeing' | 'unknown';

function standingOf(brief: FoundBrief, content: FiledRecord, again: Again, { ledger }: Bench): Standing {
  if (isFiled(brief, content.sha256, ledger)) return 'filed';
  if (again.filed !== null && isFiled(brief, again.filed.sha256, ledger)) return 'changed';
  return again.why.length === 0 && again.comparison.differences.length === 0 ? 'agreeing' : 'unknown';
}

const isFiled = ({ place, slug }: FoundBrief, fingerprint: string, { filed }: LedgerCheck): boolean =>
  filed.has(`${place.date}/${slug} ${fingerprint}`);

const damageRemedy = (brief: FoundBrief, { sha256 }: DamagedRecord, { ledger }: Bench): string =>
  isFiled(brief, sha256, ledger) ? 'It is as it was filed: recheck it with the version that wrote it' : FROM_A_COPY;

function recordFaults(
  { path, slug }: FoundBrief,
  record: BriefRecord,
  { comparison, why }: Again,
  standing: Standing,
  { ledger }: Bench,
): RecheckFault[] {
  const other = record.series.slug === slug ? [] : [`holds the brief ${record.brief}: it was put here. ${FROM_A_COPY}`];
  const changed = ledger.faults.flatMap((each) =>
    each.kind === 'record-changed' && each.path === path ? each.message : [],
  );
  const differing =
    comparison.differences.length === 0 ? [] : [`${differencesTold(comparison)}. ${reasonTold(record, standing)}`];
  const isOnlyWritten = standing === 'changed' && comparison.differences.length === 0 && comparison.apart === 0;
  const written = isOnlyWritten ? ['holds the same record, but was saved anew in another way'] : [];
  return [...other, ...changed, ...why, ...differing, ...written].map((message) => ({ file: `${path}.json`, message }));
}

function reasonTold({ software }: BriefRecord, standing: Standing): string {
  if (standing === 'changed') return 'That is the record that was filed: the file was changed since';
  if (standing !== 'filed') return FROM_A_COPY;
  return software.version === SOFTWARE.version
    ? 'The file is the one that was filed: this machine computes otherwise than the one that made it'
    : `The file is the one that was filed: version ${software.version} made it, and this version, ${SOFTWARE.version}, computes otherwise`;
}

function notesOn({ software }: BriefRecord, { apart, differences }: Comparison): string[] {
  return [
    ...(software.version === SOFTWARE.version ? [] : [`made by version ${software.version}`]),
    ...(apart > 0 && differences.length === 0 ? [apartTold(apart, TOLERANCE)] : []),
  ];
}

// Its files -----------------------------------------------------------------------------------------------------

const NOT_COMPARED: FilesFound = {
  faults: [],
  notes: ['its other files were not compared: its record is not the one that was filed'],
};

async function recheckFiles({ place, slug }: FoundBrief, { record, sha256: fingerprint }: FiledRecord, bench: Bench) {
  const at = { place, name: slug, remedies: briefRemedies(place) };
  const page = {
    issued: record.issued,
    plan: record.plan,
    version: record.software.version,
    draw: ({ theme, own }: FoundTheme) =>
      bench.drawing?.draw({ record, fingerprint, own }) ?? renderBrief(record, theme, { fingerprint, trial: false }),
  };
  return together([await recheckPage(at, page, bench), await recheckTable(at, figuresCsv(record), bench)]);
}
