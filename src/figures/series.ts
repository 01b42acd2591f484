/** From the wanted cells to each series' figures, a period each from its first figure to its last. */
import { type Every, periodText, spanOf } from '../calendar/calendar.js';
import type { FaultList } from './fault-list.js';
import { shown } from './input-error.js';
import type { NumberOf } from './numbers.js';
import type { Observation } from './observations.js';
import type { FiguresRequest, FooterRow, SeriesFigures } from './request.js';

/** By slug. A series without any figure is a fault. */
export function seriesOf(
  observations: readonly Observation[],
  numberOf: NumberOf,
  every: Every,
  footer: readonly FooterRow[],
  request: FiguresRequest,
  faults: FaultList,
): ReadonlyMap<string, SeriesFigures> {
  const bySlug = new Map<string, Map<number, number | null>>(request.wanted.map(({ slug }) => [slug, new Map()]));
  for (const { slug, period, text } of observations) bySlug.get(slug)?.set(period, numberOf(text));
  const isFinished = finishedBy(every, request);
  const figures = new Map<string, SeriesFigures>();
  for (const { slug, name, column, columnAt } of request.wanted) {
    const found = gapless(bySlug.get(slug) ?? new Map(), every, isFinished);
    if (found !== null) figures.set(slug, footer.length > 0 ? { ...found, footer } : found);
    else
      faults.add(columnAt, () => {
        const what = `series ${shown(name)}: column ${shown(column)}`;
        return `${what} holds no figure up to ${request.issued} in ${request.fileTyped}`;
      });
  }
  return figures;
}

/** Whether a period ends by the day of issue; each is looked at once for all series. */
function finishedBy(every: Every, { issued, yearStarts }: FiguresRequest): (index: number) => boolean {
  const known = new Map<number, boolean>();
  return (index) => {
    const seen = known.get(index);
    if (seen !== undefined) return seen;
    const isFinished = spanOf(periodText(index, every), every, yearStarts).to <= issued;
    known.set(index, isFinished);
    return isFinished;
  };
}

/** Null where there is no figure. */
function gapless(
  values: ReadonlyMap<number, number | null>,
  every: Every,
  isFinished: (index: number) => boolean,
): SeriesFigures | null {
  const known = [...values].filter(([, value]) => value !== null).sort(([a], [b]) => a - b);
  const name = (index: number) => periodText(index, every);
  const finished = known.filter(([index]) => isFinished(index));
  const [first, last] = [finished[0]?.[0], finished.at(-1)?.[0]];
  if (first === undefined || last === undefined) return null;
  const row = Array.from({ length: last - first + 1 }, (_, i) => values.get(first + i) ?? null);
  const missing = row.flatMap((value, i) => (value === null ? [name(first + i)] : []));
  const unfinished = known.filter(([index]) => !isFinished(index)).map(([index]) => name(index));
  return {
    every,
    start: name(first),
    values: row,
    findings: [
      ...(missing.length > 0 ? [{ id: 'missing' as const, periods: missing, done: 'left-missing' as const }] : []),
      ...(unfinished.length > 0
        ? [{ id: 'unfinished-left-out' as const, periods: unfinished, done: 'left-out' as const }]
        : []),
    ],
  };
}
