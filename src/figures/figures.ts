/**
 * The file of past figures: from bytes to one gapless row of periods for each series.
 *
 *   bytes -> text -> rows -> cells by series and period -> SeriesFigures
 *
 * Comma-separated values (RFC 4180) in UTF-8, decimal point, wide (a column a series) or long (a row an observation).
 * What is not understood is refused with its row and column; nothing is guessed.
 */
import { readFile } from 'node:fs/promises';
import { CsvError, parse } from 'csv-parse/sync';
import { type Every, isDate, kindsOf, periodHolding, periodIndex, periodText, spanOf } from '../calendar/calendar.js';
import { type Fault, InputError, type Place, shown } from './input-error.js';
import { suggestion } from './nearest.js';
import { everyOfDates } from './spacing.js';
import { textOf } from './text.js';

/** Where the figures stand, as the plan says. */
export interface FiguresRequest {
  /** Absolute path, and the path as typed for messages. */
  readonly file: string;
  readonly fileTyped: string;
  readonly at: Place;
  /** The column with the period. */
  readonly period: string;
  readonly periodAt: Place;
  /** Null: as found. */
  readonly every: Every | null;
  /** Both null in a wide file. */
  readonly series: string | null;
  readonly seriesAt: Place;
  readonly value: string | null;
  readonly valueAt: Place;
  /** A figure of a period that ends after this ISO date is unfinished. */
  readonly issued: string;
  readonly yearStarts: number;
  readonly wanted: readonly {
    readonly slug: string;
    readonly name: string;
    readonly column: string;
    readonly columnAt: Place;
  }[];
}

export interface SeriesFigures {
  readonly every: Every;
  /** The first period that holds a figure. */
  readonly start: string;
  /** One a period from the first figure to the last; null where missing. */
  readonly values: readonly (number | null)[];
  readonly findings: readonly Finding[];
}

export interface Finding {
  readonly id: 'missing' | 'unfinished-left-out';
  readonly periods: readonly string[];
  readonly done: 'left-out' | 'left-missing';
}

/** Faults shown in one go; a file of another kind would have one a row. */
const MOST_FAULTS = 20;

/** Figures by slug. Throws an InputError with every fault found (the first twenty). */
export async function readFigures(request: FiguresRequest): Promise<ReadonlyMap<string, SeriesFigures>> {
  const text = textOf(await bytesOf(request), request.fileTyped);
  const { header, rows } = rowsOf(text, request.fileTyped);
  const columns = columnsOf(header, request);
  const faults: Fault[] = [];
  const every = request.every ?? everyFound(rows, columns.period, request);
  const cells = cellsOf(rows, columns, every, request, faults);
  throwIfAny(faults);
  const figures = new Map<string, SeriesFigures>();
  for (const { slug, name, column, columnAt } of request.wanted) {
    const found = seriesOf(cells.get(slug) ?? new Map(), every, request);
    if (found === null) {
      const whose = `series ${shown(name)}: column ${shown(column)}`;
      faults.push({ ...columnAt, message: `${whose} holds no figure up to ${request.issued} in ${request.fileTyped}` });
    } else figures.set(slug, found);
  }
  throwIfAny(faults);
  return figures;
}

async function bytesOf({ file, fileTyped, at }: FiguresRequest): Promise<Uint8Array> {
  try {
    return await readFile(file);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? error.code : null;
    const why = code === 'ENOENT' ? 'is not there' : code === 'EISDIR' ? 'is a folder' : `can't be read (${code})`;
    throw new InputError([
      { ...at, message: `the figures' file ${shown(fileTyped)} ${why}; give its path from the plan's folder` },
    ]);
  }
}

/** A row with the number of the line that it begins on. */
interface Row {
  readonly line: number;
  readonly cells: readonly string[];
}

function rowsOf(text: string, file: string): { header: Row; rows: readonly Row[] } {
  const fail = (line: number | null, message: string) => new InputError([{ file, line, column: null, message }]);
  let parsed: { record: string[]; info: { lines: number } }[];
  try {
    parsed = parse(text, { info: true, relax_column_count: true, skip_empty_lines: false, trim: false }) as never;
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    const line = typeof error.lines === 'number' ? error.lines : null;
    throw fail(line, `the quotes of a cell don't close as they should: ${error.message}; mend that row`);
  }
  let line = 1;
  const rows = parsed.map(({ record, info }) => {
    const row = { line, cells: record.map((cell) => cell.trim()) };
    line = info.lines + 1;
    return row;
  });
  const filled = rows.filter(({ cells }) => cells.some((cell) => cell !== ''));
  const [header, ...rest] = filled;
  if (header === undefined) throw fail(null, 'the file is empty; it needs a row of column names and rows of figures');
  const delimiter = header.cells.length === 1 ? /[;\t|]/.exec(header.cells[0])?.[0] : undefined;
  if (delimiter !== undefined) {
    const named = delimiter === '\t' ? 'tabs' : shown(delimiter);
    throw fail(header.line, `the cells are divided by ${named}; save the file with commas between the cells`);
  }
  if (rest.length === 0) throw fail(header.line, 'there are column names but no figures under them');
  return { header, rows: rest };
}

interface Columns {
  readonly period: number;
  /** Long layout; null in a wide file. */
  readonly series: number | null;
  readonly value: number | null;
  /** Wide layout: the column of each slug. */
  readonly bySlug: ReadonlyMap<string, number>;
}

function columnsOf(header: Row, request: FiguresRequest): Columns {
  const faults: Fault[] = [];
  const find = (name: string, place: Place, what: string): number => {
    const at = header.cells.indexOf(name);
    const again = header.cells.indexOf(name, at + 1);
    if (at < 0) {
      const there = header.cells.filter((cell) => cell !== '').slice(0, 12);
      const near = suggestion(name, header.cells);
      const list = near === '' ? `; there are ${there.map(shown).join(', ')}` : near;
      faults.push({ ...place, message: `${what} ${shown(name)} is not in ${request.fileTyped}${list}` });
    } else if (again >= 0) {
      faults.push({
        ...place,
        message: `${what} ${shown(name)} stands twice in ${request.fileTyped}, as columns ${at + 1} and ${again + 1}; rename one`,
      });
    }
    return at;
  };
  const period = find(request.period, request.periodAt, 'column');
  const series = request.series === null ? null : find(request.series, request.seriesAt, 'column');
  const value = request.value === null ? null : find(request.value, request.valueAt, 'column');
  const bySlug = new Map<string, number>();
  if (series === null)
    for (const { slug, name, column, columnAt } of request.wanted)
      bySlug.set(slug, find(column, columnAt, `series ${shown(name)}: column`));
  throwIfAny(faults);
  return { period, series, value, bySlug };
}

/** The kind of period that the whole column speaks of. */
function everyFound(rows: readonly Row[], column: number, request: FiguresRequest): Every {
  const texts = rows.map(({ cells }) => cells[column] ?? '').filter((text) => text !== '');
  const fail = (message: string) => new InputError([{ ...request.periodAt, message }]);
  if (texts.length > 0 && texts.every(isDate)) {
    const every = everyOfDates(texts);
    if (every !== null) return every;
    throw fail(
      'the dates of the figures have no spacing of their own; write "every: quarter" (or month, …) under figures',
    );
  }
  const kinds = (texts.length === 0 ? [] : kindsOf(texts[0])).filter((kind) =>
    texts.every((text) => kindsOf(text).includes(kind)),
  );
  if (kinds[0] !== undefined) return kinds[0];
  const odd = rows.find(({ cells }) => kindsOf(cells[column] ?? '').length === 0 && !isDate(cells[column] ?? ''));
  if (odd === undefined) throw fail('the periods of the figures are of several kinds; write them all in one');
  throw new InputError([
    { file: request.fileTyped, line: odd.line, column: column + 1, message: periodRemedy(odd.cells[column] ?? '') },
  ]);
}

const periodRemedy = (text: string): string =>
  `${text === '' ? 'there is no period' : `${shown(text)} is not a period`} as they are read here; write 2024-Q1, 2024-03, 2024-S1, 2024, or a date such as 2024-03-31`;

interface Cell {
  readonly value: number | null;
  readonly line: number;
}

/** Every wanted cell by slug and period index. */
function cellsOf(
  rows: readonly Row[],
  columns: Columns,
  every: Every,
  request: FiguresRequest,
  faults: Fault[],
): ReadonlyMap<string, Map<number, Cell>> {
  const file = request.fileTyped;
  const cells = new Map<string, Map<number, Cell>>(request.wanted.map(({ slug }) => [slug, new Map()]));
  const slugOf = new Map(request.wanted.map(({ column, slug }) => [column, slug]));
  const last = new Map<string, number>();
  const put = (slug: string, index: number, row: Row, column: number) => {
    const fault = (message: string) => faults.push({ file, line: row.line, column: column + 1, message });
    const seen = cells.get(slug)?.get(index);
    const period = shown(periodText(index, every));
    if (seen !== undefined) {
      fault(`the period ${period} stands here and in line ${seen.line}; leave one row for a period`);
      return;
    }
    if ((last.get(slug) ?? Number.NEGATIVE_INFINITY) > index) {
      fault(`the period ${period} comes after a later one; sort the rows by period`);
      return;
    }
    last.set(slug, index);
    const text = row.cells[column] ?? '';
    const value = numberOf(text);
    if (value === undefined) fault(numberRemedy(text));
    else cells.get(slug)?.set(index, { value, line: row.line });
  };
  for (const row of rows) {
    const text = row.cells[columns.period] ?? '';
    const index = indexOf(text, every, request.yearStarts);
    if (index === null) {
      const isOther = kindsOf(text).length > 0;
      const message = isOther ? `${shown(text)} is out of step: the figures come every ${every}` : periodRemedy(text);
      faults.push({ file, line: row.line, column: columns.period + 1, message });
    } else if (columns.series === null) {
      for (const [slug, column] of columns.bySlug) put(slug, index, row, column);
    } else {
      const slug = slugOf.get(row.cells[columns.series] ?? '');
      if (slug !== undefined && columns.value !== null) put(slug, index, row, columns.value);
    }
  }
  return cells;
}

function indexOf(text: string, every: Every, yearStarts: number): number | null {
  if (isDate(text)) return periodIndex(periodHolding(text, every, yearStarts), every);
  return kindsOf(text).includes(every) ? periodIndex(text, every) : null;
}

const MISSING = new Set(['', '-', '.', 'n/a']);

/** A figure, null where it is missing, undefined where the text is neither. */
function numberOf(text: string): number | null | undefined {
  if (MISSING.has(text.toLowerCase())) return null;
  if (!/^[-+]?\d+(\.\d+)?(e[-+]?\d{1,3})?$/i.test(text)) return undefined;
  const value = Number(text);
  return Number.isFinite(value) ? value : undefined;
}

function numberRemedy(text: string): string {
  const why = /\d,\d/.test(text)
    ? 'has a comma in it; write numbers without thousands separators and with a decimal point'
    : /\d/.test(text)
      ? 'is not a plain number; write it like 1234.5, without signs of currency or unit'
      : 'stands where a number belongs; write a number, or leave the cell empty where the figure is missing';
  return `${shown(text)} ${why}`;
}

/** One series' figures without gaps in the periods; null where there are none. */
function seriesOf(
  cells: ReadonlyMap<number, Cell>,
  every: Every,
  { issued, yearStarts }: FiguresRequest,
): SeriesFigures | null {
  const known = [...cells].filter(([, { value }]) => value !== null).sort(([a], [b]) => a - b);
  const isFinished = (index: number) => spanOf(periodText(index, every), every, yearStarts).to <= issued;
  const finished = known.filter(([index]) => isFinished(index));
  const [first, last] = [finished[0]?.[0], finished.at(-1)?.[0]];
  if (first === undefined || last === undefined) return null;
  const values = Array.from({ length: last - first + 1 }, (_, i) => cells.get(first + i)?.value ?? null);
  const name = (index: number) => periodText(index, every);
  const missing = values.flatMap((value, i) => (value === null ? [name(first + i)] : []));
  const unfinished = known.filter(([index]) => !isFinished(index)).map(([index]) => name(index));
  return {
    every,
    start: name(first),
    values,
    findings: [
      ...(missing.length > 0 ? [{ id: 'missing' as const, periods: missing, done: 'left-missing' as const }] : []),
      ...(unfinished.length > 0
        ? [{ id: 'unfinished-left-out' as const, periods: unfinished, done: 'left-out' as const }]
        : []),
    ],
  };
}

function throwIfAny(faults: readonly Fault[]): void {
  if (faults.length === 0) return;
  const rest = faults.length - MOST_FAULTS;
  const more: Fault = {
    file: faults[0].file,
    line: null,
    column: null,
    message: `… and ${rest} more like these`,
  };
  throw new InputError(rest > 0 ? [...faults.slice(0, MOST_FAULTS), more] : faults);
}
