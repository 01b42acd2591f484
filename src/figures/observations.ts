/** The wanted cells, each with its series and period. */
import { periodText } from '../calendar/calendar.js';
import type { Columns } from './columns.js';
import type { FaultList } from './fault-list.js';
import { shown } from './input-error.js';
import { suggestion } from './nearest.js';
import type { Periods } from './periods.js';
import type { FiguresRequest } from './request.js';
import type { Row } from './rows.js';
import type { Table } from './table.js';
import { tidy } from './tidy.js';

export interface Observation {
  readonly slug: string;
  readonly period: number;
  readonly line: number;
  /** Counted from 1. */
  readonly column: number;
  /** The cell as it stands. */
  readonly text: string;
}

/** In any order of periods; a period that comes again is a fault. */
export function observationsOf(
  { columns }: Table,
  rows: readonly Row[],
  { every, indices }: Periods,
  request: FiguresRequest,
  faults: FaultList,
): readonly Observation[] {
  refuseUnknownEntries(columns.series, rows, request, faults);
  const wantedIn = columns.series === null ? wideCells(columns) : longCells(columns, request);
  // In a wide file all series of a row share its period, so one of them speaks for all.
  const lines = new Map<string, Map<number, number>>(request.wanted.map(({ slug }) => [slug, new Map()]));
  const observations: Observation[] = [];
  rows.forEach(({ line, cells }, i) => {
    const wanted = wantedIn(cells);
    if (wanted.length === 0) return;
    const period = indices[i];
    const seen = lines.get(wanted[0].slug);
    const before = seen?.get(period);
    if (before !== undefined) {
      const place = { file: request.fileTyped, line, column: wanted[0].column };
      const name = () => shown(periodText(period, every));
      faults.add(place, () => `the period ${name()} stands here and in line ${before}; leave one row for a period`);
      return;
    }
    seen?.set(period, line);
    for (const { slug, column } of wanted)
      observations.push({ slug, period, line, column, text: cells[column - 1] ?? '' });
  });
  return observations;
}

/** In a long file, entries that the plan names and no row has. */
function refuseUnknownEntries(
  series: number | null,
  rows: readonly Row[],
  { wanted, series: column, fileTyped }: FiguresRequest,
  faults: FaultList,
): void {
  if (series === null) return;
  const entries = new Set(rows.map(({ cells }) => tidy(cells[series] ?? '')));
  for (const { name, column: entry, columnAt } of wanted)
    if (!entries.has(tidy(entry)))
      faults.add(columnAt, () => {
        const there = [...entries].slice(0, 1000);
        const near = suggestion(entry, there) || `; there are ${there.slice(0, 12).map(shown).join(', ')}`;
        return `series ${shown(name)}: no row of ${fileTyped} has ${shown(entry)} in its column ${shown(column ?? '')}${near}`;
      });
}

interface WantedCell {
  readonly slug: string;
  /** Counted from 1. */
  readonly column: number;
}

type WantedCells = (cells: readonly string[]) => readonly WantedCell[];

function wideCells({ bySlug }: Columns): WantedCells {
  const wanted = [...bySlug].map(([slug, column]) => ({ slug, column: column + 1 }));
  return () => wanted;
}

function longCells({ series, value }: Columns, request: FiguresRequest): WantedCells {
  const column = (value ?? 0) + 1;
  const byEntry = new Map(request.wanted.map((one) => [tidy(one.column), [{ slug: one.slug, column }]]));
  return (cells) => byEntry.get(tidy(cells[series ?? 0] ?? '')) ?? [];
}
