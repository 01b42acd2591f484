/** What is to be done: which briefs are new, stand as they are filed, lack a file, or are to be replaced. */
import type { PlannedSeries } from '../plan/plan.js';
import { type FiledBrief, type FiledRecord, filedBrief, type Kind, kinds } from '../record/archive.js';
import { ArchiveError } from '../record/archive-error.js';
import { type BriefInputs, briefInputs, inputsOfRecord, sameInputs } from '../record/inputs.js';
import type { Work, WriteOptions } from './work.js';

/** What is to be done for one series. */
export interface Task {
  readonly series: PlannedSeries;
  readonly inputs: BriefInputs;
  /** What is filed already, and is to be set aside or completed. */
  readonly there: FiledBrief | null;
  /** The filed record whose missing files alone are to be made; null where the brief is made anew. */
  readonly filed: FiledRecord | null;
}

/** Throws an ArchiveError that names every series that is filed otherwise than the plan now says. */
export async function tasksOf({ plan, wanted, figures, theme, archive, options }: Work) {
  const tasks: Task[] = [];
  const unchanged: string[] = [];
  const refused: string[] = [];
  const failures: { name: string; message: string }[] = [];
  for (const series of wanted) {
    const found = figures.get(series.slug);
    if (found === undefined) continue;
    const inputs = inputsOrWhyNot(plan, series, found, theme.sha256);
    if (typeof inputs === 'string') {
      failures.push({ name: series.name, message: inputs });
      continue;
    }
    const there = options.trial ? null : await filedBrief(archive, plan.issued, series.slug);
    const change = there === null ? null : changeOf(there, inputs);
    if (there !== null && change === null && 'record' in there.filed) {
      if (missingKinds(there, options).length === 0) unchanged.push(series.name);
      else tasks.push({ series, inputs, there, filed: there.filed });
    } else if (there === null || options.replace) tasks.push({ series, inputs, there, filed: null });
    else refused.push(`series "${series.name}" has a brief of ${plan.issued} already, and ${change}`);
  }
  if (refused.length > 0)
    throw new ArchiveError(
      `${refused.join('\n')}\nWrite it anew with --replace, which keeps the old files, or give the plan another date under "issued".`,
    );
  return { tasks, unchanged, failures };
}

/** The inputs, or what is wrong where no model can be advised. */
function inputsOrWhyNot(...of: Parameters<typeof briefInputs>): BriefInputs | string {
  try {
    return briefInputs(...of);
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

/** Why the filed brief is not the one that the plan asks for, or null where it is. */
function changeOf({ kinds: there, filed }: FiledBrief, inputs: BriefInputs): string | null {
  if ('damage' in filed) return filed.damage;
  if (!sameInputs(inputsOfRecord(filed.record), inputs)) return 'its figures or its plan have changed since';
  if (!there.includes('html') && filed.record.plan.templates !== inputs.plan.templates)
    return 'its HTML is missing and was made with other templates than there are now';
  return null;
}

export const missingKinds = ({ kinds: there }: FiledBrief, options: WriteOptions): Kind[] =>
  wantedKinds(options).filter((kind) => !there.includes(kind));

const wantedKinds = ({ pdf }: WriteOptions): Kind[] => kinds.filter((kind) => kind !== 'pdf' || pdf !== false);
