/** The periods of all rows: which of the readings of their text holds, and of what kind they are. */
import { dayOf, type Every, isDate, kindsOf, periodHolding, periodIndex } from '../calendar/calendar.js';
import type { FaultList } from './fault-list.js';
import { InputError, shown } from './input-error.js';
import { periodCellOf } from './period-cell.js';
import { hasShortYear, periodReadings, periodsRead } from './period-text.js';
import type { FiguresRequest } from './request.js';
import type { Row } from './rows.js';
import { everyOfDates } from './spacing.js';
import type { Table } from './table.js';
import { isTotal } from './total.js';

export interface Periods {
  readonly every: Every;
  /** One a row: consecutive periods have consecutive indices. */
  readonly indices: readonly number[];
}

/** One way to read the whole column. */
interface Candidate {
  /** By cell. */
  readonly texts: ReadonlyMap<string, string>;
  readonly every: Every;
  readonly indices: ReadonlyMap<string, number>;
}

/** Throws an InputError where a cell is no period, out of step, or where the column can be read in two ways. */
export function periodsOf(
  { columns }: Table,
  rows: readonly Row[],
  request: FiguresRequest,
  faults: FaultList,
): Periods {
  const cells = rows.map((row) => periodCellOf(row, columns));
  const reads = new Map<string, readonly (string | null)[]>();
  for (const cell of cells) if (!reads.has(cell)) reads.set(cell, periodsRead(cell));
  const column = columns.period[0] + 1;
  const fault = (row: number, message: () => string) =>
    faults.add({ file: request.fileTyped, line: rows[row].line, column }, message);

  const whole = wholeReadings(reads);
  if (whole.length === 0) {
    refuseUnread(cells, rows, reads, fault);
    faults.throwIfAny();
  }
  refuseYearPairs(reads, request);
  refuseThirds(reads, request);
  const candidates = whole.flatMap((texts) => candidateOf(texts, request) ?? []);
  if (candidates.length === 0) {
    refuseOutOfStep(cells, whole[0], request, fault);
    faults.throwIfAny();
  }
  const [settled, other] = settledOf(candidates);
  if (other !== undefined) {
    refuseTwoReadings(cells, settled, other, fault);
    faults.throwIfAny();
  }
  return { every: settled.every, indices: cells.map((cell) => settled.indices.get(cell) ?? Number.NaN) };
}

/** The readings under which every cell is a period, each other one once. */
function wholeReadings(reads: ReadonlyMap<string, readonly (string | null)[]>): readonly ReadonlyMap<string, string>[] {
  const differs = [...reads.values()].some((read) => read.some((text) => text !== read[0]));
  return periodReadings.slice(0, differs ? undefined : 1).flatMap((_, reading) => {
    const texts = new Map<string, string>();
    for (const [cell, read] of reads) {
      const text = read[reading];
      if (text === null) return [];
      texts.set(cell, text);
    }
    return [texts];
  });
}

type AddFault = (row: number, message: () => string) => void;

function refuseUnread(
  cells: readonly string[],
  rows: readonly Row[],
  reads: ReadonlyMap<string, readonly (string | null)[]>,
  fault: AddFault,
): void {
  const isRead = (cell: string, reading: number): boolean => reads.get(cell)?.[reading] != null;
  const counts = periodReadings.map((_, reading) => cells.filter((cell) => isRead(cell, reading)).length);
  const best = counts.indexOf(Math.max(...counts));
  cells.forEach((cell, row) => {
    if (!isRead(cell, best)) fault(row, () => against(cell) ?? noPeriod(cell));
  });
  /** Where a cell is a period in another reading than most: what it stands against. */
  function against(cell: string): string | null {
    const reading = periodReadings.findIndex((_, other) => isRead(cell, other));
    const one = reading < 0 ? -1 : cells.findIndex((other) => isRead(other, best) && !isRead(other, reading));
    if (one < 0) return null;
    const { first } = periodReadings[reading];
    return `${shown(cell)} can only be read with the ${first} first, and ${shown(cells[one])} in line ${rows[one].line} can't; write all dates like 2024-03-31`;
  }
}

function noPeriod(cell: string): string {
  const likeThese = 'write 2024-Q1, 2024-03, 2024-S1, 2024, or a date such as 2024-03-31';
  if (cell === '') return `there is no period in this row; ${likeThese}, or delete the row`;
  if (isTotal(cell)) return `${shown(cell)} stands among the figures; delete the row, or move it under the last period`;
  if (hasShortYear(cell))
    return `${shown(cell)} has a year of two digits, which can be a day too; write years with four, such as 2024`;
  if (/^[34]\d{4}$/.test(cell))
    return `${shown(cell)} looks like a spreadsheet’s number for a date; format the column as a date, like 2024-03-31`;
  return `${shown(cell)} is not a period as they are read here; ${likeThese}`;
}

/** 2003/04, 2004/05 and so on are months by their form, and years that run over the turn of one by their sequence. */
function refuseYearPairs(reads: ReadonlyMap<string, unknown>, { fileTyped, periodAt }: FiguresRequest): void {
  const isPair = (cell: string): boolean => {
    const parts = /^(\d{4})[-/](\d{2})$/.exec(cell);
    return parts !== null && Number(parts[2]) === (Number(parts[1]) + 1) % 100;
  };
  const [cell] = reads.keys();
  if (reads.size < 2 || ![...reads.keys()].every(isPair)) return;
  const message = `${shown(cell)} in ${fileTyped} can be a month or a year that runs into the next, and so can all others; write years as 2003 and months as 2003-Apr`;
  throw new InputError([{ ...periodAt, message }]);
}

/** T1 is a quarter in French and Italian; where no T4 ever comes, it may be one of the three thirds of a year. */
function refuseThirds(reads: ReadonlyMap<string, unknown>, { fileTyped, periodAt }: FiguresRequest): void {
  const labels = [...reads.keys()].filter((cell) => /(^|[\d\s/-])t ?\d/i.test(cell));
  const isThird = labels.length > 3 && !labels.some((cell) => /t ?4/i.test(cell));
  if (!isThird) return;
  const message = `${shown(labels[0])} in ${fileTyped} can be a quarter or a third of a year, as no fourth ever comes; write quarters as 2024-Q1`;
  throw new InputError([{ ...periodAt, message }]);
}

function candidateOf(texts: ReadonlyMap<string, string>, request: FiguresRequest): Candidate | null {
  const every = request.every ?? everyFound([...texts.values()]);
  if (every === null) return null;
  const indices = new Map<string, number>();
  for (const [cell, text] of texts) {
    const index = indexOf(text, every, request.yearStarts);
    if (index === null) return null;
    indices.set(cell, index);
  }
  return outOfPhase([...texts.values()], every) === null ? { texts, every, indices } : null;
}

/** The first date that does not lie whole weeks, or four weeks, from the first; null where all do. */
function outOfPhase(texts: readonly string[], every: Every): string | null {
  if (every !== 'week' && every !== 'four-weeks') return null;
  const first = dayOf(texts[0]);
  return texts.find((text) => (dayOf(text) - first) % (every === 'week' ? 7 : 28) !== 0) ?? null;
}

/** The kind of period that all texts speak of; null where there is none. */
function everyFound(texts: readonly string[]): Every | null {
  if (texts.every(isDate)) return everyOfDates(texts);
  const kinds = texts.length === 0 ? [] : kindsOf(texts[0]);
  return kinds.find((kind) => texts.every((text) => kindsOf(text).includes(kind))) ?? null;
}

function indexOf(text: string, every: Every, yearStarts: number): number | null {
  if (isDate(text)) return periodIndex(periodHolding(text, every, yearStarts), every);
  return kindsOf(text).includes(every) ? periodIndex(text, every) : null;
}

function refuseOutOfStep(
  cells: readonly string[],
  texts: ReadonlyMap<string, string>,
  { every, periodAt }: FiguresRequest,
  fault: AddFault,
): void {
  const textOf = (cell: string): string => texts.get(cell) ?? '';
  const kind = every ?? everyFound([...texts.values()]);
  if (kind !== null) {
    cells.forEach((cell, row) => {
      const isIn = isDate(textOf(cell)) || kindsOf(textOf(cell)).includes(kind);
      if (!isIn) fault(row, () => `${shown(cell)} is out of step: the figures come every ${kind}`);
      else if (outOfPhase([textOf(cells[0]), textOf(cell)], kind) !== null)
        fault(row, () => `${shown(cell)} is out of step: it does not lie whole ${weeks(kind)} from ${shown(cells[0])}`);
    });
    return;
  }
  const isOther = (cell: string): boolean => everyFound([textOf(cells[0]), textOf(cell)]) === null;
  const odd = cells.every((cell) => isDate(textOf(cell))) ? undefined : cells.find(isOther);
  const message =
    odd === undefined
      ? 'the dates of the figures have no spacing of their own; write "every: quarter" (or month, …) under figures'
      : `the periods of the figures are of several kinds, such as ${shown(cells[0])} and ${shown(odd)}; write them all in one`;
  throw new InputError([{ ...periodAt, message }]);
}

const weeks = (every: Every): string => (every === 'week' ? 'weeks' : 'times four weeks');

/** One candidate, or two that differ and neither of which the spacing of its dates speaks for alone. */
function settledOf(candidates: readonly Candidate[]): readonly Candidate[] {
  const different = candidates.filter((candidate, i) => candidates.findIndex((one) => isSame(one, candidate)) === i);
  if (different.length === 1) return different;
  const regular = different.filter(({ texts, every }) => {
    const dates = [...texts.values()];
    return dates.every(isDate) && everyOfDates(dates) === every;
  });
  return regular.length === 1 ? regular : different;
}

const isSame = (one: Candidate, other: Candidate): boolean =>
  one.every === other.every && [...one.indices].every(([cell, index]) => other.indices.get(cell) === index);

function refuseTwoReadings(cells: readonly string[], one: Candidate, other: Candidate, fault: AddFault): void {
  const row = cells.findIndex((cell) => one.every !== other.every || one.indices.get(cell) !== other.indices.get(cell));
  const [a, b] = [one, other].map(({ texts }) => texts.get(cells[row]) ?? '');
  const remedy = isDate(a)
    ? `write the dates with the year first, like ${a} or ${b}`
    : `write "every: ${one.every}" or "every: ${other.every}" under figures`;
  fault(row, () => `${shown(cells[row])} can be read as ${a} or as ${b}, and no other row settles it; ${remedy}`);
}
