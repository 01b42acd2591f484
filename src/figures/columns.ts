/** The columns that the plan names, found in a header row. */
import { faultList } from './fault-list.js';
import { type Place, shown } from './input-error.js';
import { suggestion } from './nearest.js';
import type { FiguresRequest } from './request.js';
import type { Row } from './rows.js';
import { tidy } from './tidy.js';

export interface Columns {
  /** One column, or two whose cells are read as one: a year and its quarter, say. */
  readonly period: readonly number[];
  /** Long layout; null in a wide file. */
  readonly series: number | null;
  readonly value: number | null;
  /** Wide layout: the column of each slug. */
  readonly bySlug: ReadonlyMap<string, number>;
}

/** Whether every name that the plan asks for stands in this row, once or more than once. */
export function hasColumns(cells: readonly string[], request: FiguresRequest): boolean {
  const header = indexed(cells);
  return namesAsked(request, header).every(({ name }) => header.placesOf(name).length > 0);
}

/** How many of the names that the plan asks for stand in this row. */
export function namesFound(cells: readonly string[], request: FiguresRequest): number {
  const header = indexed(cells);
  return namesAsked(request, header).filter(({ name }) => header.placesOf(name).length > 0).length;
}

/** Throws an InputError with every name that is not in the header or stands there twice. */
export function requireColumns(row: Row, request: FiguresRequest): Columns {
  const faults = faultList();
  const header = indexed(row.cells);
  for (const { name, what, place } of namesAsked(request, header)) {
    const at = header.placesOf(name);
    if (at.length === 0) {
      const there = row.cells.map(tidy).filter((cell) => cell !== '');
      faults.add(place, () => {
        const near = suggestion(name, there);
        const list = near === '' ? `; there are ${there.slice(0, 12).map(shown).join(', ')}` : near;
        return `${what} ${shown(name)} is not in ${request.fileTyped}${list}`;
      });
    } else if (at.length > 1) {
      const where = `as columns ${at[0] + 1} and ${at[1] + 1}`;
      faults.add(place, () => `${what} ${shown(name)} stands twice in ${request.fileTyped}, ${where}; rename one`);
    }
  }
  faults.throwIfAny();
  return columnsAt(request, header);
}

interface Header {
  /** Where a name stands: exactly so; else but for spaces; else but for capitals and ways to code an accent too. */
  readonly placesOf: (name: string) => readonly number[];
}

function indexed(cells: readonly string[]): Header {
  const spellings = [(cell: string) => cell.trim(), tidy, folded];
  const tiers = spellings.map((spell) => {
    const places = new Map<string, number[]>();
    cells.forEach((cell, i) => {
      const key = spell(cell);
      const there = places.get(key);
      if (there === undefined) places.set(key, [i]);
      else there.push(i);
    });
    return { spell, places };
  });
  return {
    placesOf: (name) => {
      for (const { spell, places } of tiers) {
        const found = spell(name) === '' ? undefined : places.get(spell(name));
        if (found !== undefined) return found;
      }
      return [];
    },
  };
}

const folded = (cell: string): string => tidy(cell).normalize('NFC').toLowerCase();

function namesAsked(
  request: FiguresRequest,
  header: Header,
): readonly { readonly name: string; readonly what: string; readonly place: Place }[] {
  const { series, value } = request;
  return [
    ...periodNames(request.period, header).map((name) => ({ name, what: 'column', place: request.periodAt })),
    ...(series === null ? [] : [{ name: series, what: 'column', place: request.seriesAt }]),
    ...(value === null ? [] : [{ name: value, what: 'column', place: request.valueAt }]),
    ...(series === null
      ? request.wanted.map(({ name, column, columnAt }) => ({
          name: column,
          what: `series ${shown(name)}: column`,
          place: columnAt,
        }))
      : []),
  ];
}

/** A name with a comma that is no column's is that of two columns. */
function periodNames(period: string, header: Header): readonly string[] {
  if (header.placesOf(period).length > 0) return [period];
  const parts = period.split(',').map((part) => part.trim());
  return parts.length === 2 && parts.every((part) => part !== '') ? parts : [period];
}

function columnsAt(request: FiguresRequest, header: Header): Columns {
  const place = (name: string) => header.placesOf(name)[0];
  return {
    period: periodNames(request.period, header).map(place),
    series: request.series === null ? null : place(request.series),
    value: request.value === null ? null : place(request.value),
    bySlug: new Map(request.series === null ? request.wanted.map(({ slug, column }) => [slug, place(column)]) : []),
  };
}
