/**
 * The figures: which sign is the decimal one and which parts the thousands, settled from all wanted cells together.
 *
 * A reading is a decimal sign and a sign between thousands. Those under which every cell is a number are left; where
 * they agree on all numbers, these are the figures; where they don't, both are shown and the file is refused.
 */
import type { FaultList } from './fault-list.js';
import { type Place, shown } from './input-error.js';
import { type NumberText, numberTextOf } from './number-text.js';
import type { Observation } from './observations.js';
import type { DecimalName, FiguresRequest } from './request.js';

/** The figure of a cell, null where it is missing. */
export type NumberOf = (cell: string) => number | null;

export function numbersOf(observations: readonly Observation[], request: FiguresRequest, faults: FaultList): NumberOf {
  const cells = textsOf(observations);
  const placeOf = ({ line, column }: Observation): Place => ({ file: request.fileTyped, line, column });
  const readings = READINGS.filter(({ name }) => request.decimal == null || name === request.decimal);
  const whys = new Map([...cells].map(([text, cell]) => [text, whyRefused(cell, readings, request)]));
  for (const observation of observations) {
    const why = whys.get(observation.text) ?? null;
    if (why !== null) faults.add(placeOf(observation), () => `${shown(observation.text.trim())} ${why}`);
  }
  refuseMixedMarks(observations, cells, placeOf, faults);
  faults.throwIfAny();

  const cores = [...new Set([...cells.values()].flatMap((cell) => (cell.kind === 'number' ? [cell.core] : [])))];
  const left = readings.filter((reading) => cores.every((core) => figureIn(core, reading) !== undefined));
  const [first] = left;
  const withCore = (core: string) =>
    observations.find(({ text }) => {
      const cell = cells.get(text);
      return cell?.kind === 'number' && cell.core === core;
    });
  if (first === undefined) {
    const [one, other] = contradiction(cores, readings).map(withCore);
    if (one !== undefined && other !== undefined)
      faults.add(
        placeOf(other),
        () =>
          `${shown(other.text)} and ${shown(one.text)} in line ${one.line} don't use points, commas and spaces alike; write all numbers in one way`,
      );
    faults.throwIfAny();
  }
  const open = cores.find((core) => left.some((reading) => figureIn(core, reading) !== figureIn(core, first)));
  const cell = open === undefined ? undefined : withCore(open);
  if (open !== undefined && cell !== undefined) {
    const both = ['point', 'comma'].map((name) => left.find((reading) => reading.name === name));
    const [point, comma] = both.map((reading) => (reading === undefined ? '' : figureIn(open, reading)));
    faults.add(
      placeOf(cell),
      () =>
        `${shown(cell.text)} can be read as ${point} or as ${comma}, and no other figure settles it; write "decimal: point" or "decimal: comma" under figures in the plan for the one or the other, or save the figures without thousands separators`,
    );
    faults.throwIfAny();
  }
  const figures = new Map([...cells].map(([text, cell]) => [text, figureOf(cell, first)]));
  return (text) => figures.get(text) ?? null;
}

function figureOf(cell: NumberText, reading: NumberReading): number | null {
  if (cell.kind !== 'number') return null;
  const value = figureIn(cell.core, reading) ?? null;
  // No negative zero.
  return cell.isNegative && value !== null && value !== 0 ? -value : value;
}

interface NumberReading {
  readonly name: DecimalName;
  readonly decimal: string;
  readonly thousands: string;
}

const READINGS: readonly NumberReading[] = [
  { name: 'point', decimal: '.', thousands: ',' },
  { name: 'point', decimal: '.', thousands: ' ' },
  { name: 'point', decimal: '.', thousands: "'" },
  { name: 'comma', decimal: ',', thousands: '.' },
  { name: 'comma', decimal: ',', thousands: ' ' },
  { name: 'comma', decimal: ',', thousands: "'" },
];

/** The number under a reading; undefined where it is none under this one. */
function figureIn(core: string, { decimal, thousands }: NumberReading): number | undefined {
  if (/^\d+$/.test(core)) return finite(core);
  const [mantissa, power] = core.split('e');
  const [whole, decimals, further] = mantissa.split(decimal);
  if (further !== undefined || (decimals !== undefined && !/^\d+$/.test(decimals))) return undefined;
  const groups = whole.split(thousands);
  if (groups.length > 1) {
    if (power !== undefined || !/^[1-9]\d{0,2}$/.test(groups[0])) return undefined;
    if (!groups.slice(1).every((group) => /^\d{3}$/.test(group))) return undefined;
  } else if (!/^\d*$/.test(whole)) return undefined;
  return finite(`${groups.join('')}.${decimals ?? '0'}e${power ?? '0'}`);
}

const finite = (text: string): number | undefined => {
  const value = Number(text);
  return Number.isFinite(value) ? value : undefined;
};

/** Each text once. */
function textsOf(observations: readonly Observation[]): ReadonlyMap<string, NumberText> {
  const cells = new Map<string, NumberText>();
  for (const { text } of observations) if (!cells.has(text)) cells.set(text, numberTextOf(text));
  return cells;
}

function whyRefused(cell: NumberText, readings: readonly NumberReading[], request: FiguresRequest): string | null {
  if (cell.kind === 'other') return cell.why;
  if (cell.kind === 'missing' || readings.some((reading) => figureIn(cell.core, reading) !== undefined)) return null;
  if (request.decimal != null && READINGS.some((reading) => figureIn(cell.core, reading) !== undefined))
    return `is no number with a decimal ${request.decimal}, which the plan says that they have; mend the one or the other`;
  if (/^\d+$|e/.test(cell.core)) return 'is not a number that can be counted with here; write it like 1234.5';
  return 'has its points, commas or spaces where no number has them; write it like 1234.5';
}

/** A column has one currency or none, and a percent sign on all of its figures or on none. */
function refuseMixedMarks(
  observations: readonly Observation[],
  cells: ReadonlyMap<string, NumberText>,
  placeOf: (observation: Observation) => Place,
  faults: FaultList,
): void {
  const marked = new Map<string, { readonly mark: string; readonly at: Observation }>();
  const plain = new Map<string, Observation>();
  for (const at of observations) {
    const cell = cells.get(at.text);
    if (cell?.kind !== 'number') continue;
    const before = marked.get(at.slug);
    if (cell.mark === '') {
      if (!plain.has(at.slug)) plain.set(at.slug, at);
    } else if (before === undefined) marked.set(at.slug, { mark: cell.mark, at });
    else if (before.mark !== cell.mark) {
      const other = `${shown(before.at.text.trim())} in line ${before.at.line}`;
      faults.add(placeOf(at), () => `${shown(at.text.trim())} has another sign than ${other}; a column has one`);
    }
  }
  for (const [slug, { mark, at }] of marked) {
    const without = plain.get(slug);
    if (mark !== '%' || without === undefined) continue;
    const other = `${shown(without.text.trim())} in line ${without.line}`;
    const remedy = 'write it on all figures of the column or on none';
    faults.add(placeOf(at), () => `${shown(at.text.trim())} has a percent sign and ${other} has none; ${remedy}`);
  }
}

/** Two cores that no reading takes together: one that the likeliest reading takes, and the first that it doesn't. */
function contradiction(cores: readonly string[], readings: readonly NumberReading[]): readonly [string, string] {
  const counted = readings.map((reading) => ({
    reading,
    count: cores.filter((core) => figureIn(core, reading) !== undefined).length,
  }));
  const { reading } = counted.reduce((most, one) => (one.count > most.count ? one : most));
  const other = cores.find((core) => figureIn(core, reading) === undefined) ?? cores[0];
  const takers = readings.filter((one) => figureIn(other, one) !== undefined);
  const one = cores.find(
    (core) => figureIn(core, reading) !== undefined && takers.some((taker) => figureIn(core, taker) === undefined),
  );
  return [one ?? cores[0], other];
}
