/** What every command starts from: the plan, the series asked for, and their figures, checked together. */
import { readFigures, type SeriesFigures } from '../figures/figures.js';
import { type Fault, InputError } from '../figures/input-error.js';
import { suggestion } from '../figures/nearest.js';
import { type Plan, type PlannedSeries, readPlan } from '../plan/plan.js';
import { planFaults } from '../record/plan-faults.js';
import { checkModel } from './check-model.js';

export interface Planned {
  readonly plan: Plan;
  readonly wanted: readonly PlannedSeries[];
  readonly figures: ReadonlyMap<string, SeriesFigures>;
}

/** `only`: names of the series to read; all where it is empty. Throws an InputError where plan or figures can't be used. */
export async function readPlanned(planPath: string, only: readonly string[]): Promise<Planned> {
  const plan = await readPlan(planPath, checkModel);
  const wanted = chosen(plan, only);
  const figures = await readFigures({
    ...plan.figures,
    issued: plan.issued,
    yearStarts: plan.yearStarts,
    wanted,
  });
  checkTogether(plan, wanted, figures);
  return { plan, wanted, figures };
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
        message: `there is no series "${name}"${suggestion(name, names) || `; the plan has ${there}`}`,
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
