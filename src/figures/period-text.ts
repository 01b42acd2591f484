/**
 * One period as people write it, as SDMX or ISO 8601 writes it.
 *
 * Two things a text alone doesn't say: whether 03/04/2024 is in March or in April, and whether 3/2024 is a month or a
 * quarter. A text is therefore read under a reading, and the whole column settles which one holds.
 */
import { dateText, dayNumber, isDate } from '../calendar/calendar.js';
import { monthNamed } from './month-names.js';
import { tidy, withHyphens } from './tidy.js';

/** No period's name has more characters. */
const LONGEST = 40;

export interface PeriodReading {
  readonly first: 'day' | 'month';
  readonly single: 'month' | 'quarter';
}

export const periodReadings: readonly PeriodReading[] = [
  { first: 'day', single: 'month' },
  { first: 'month', single: 'month' },
  { first: 'day', single: 'quarter' },
  { first: 'month', single: 'quarter' },
];

/**
 * What the text is under each of `periodReadings`: `2024-Q1`, `2024-03`, `2024-S1`, `2024` or a date such as
 * `2024-03-31`; null where it is no period.
 */
export function periodsRead(cell: string): readonly (string | null)[] {
  const text = plain(cell);
  if (text.length <= LONGEST)
    for (const [shape, read] of FORMS) {
      const parts = shape.exec(text);
      if (parts !== null) return periodReadings.map((reading) => read(parts.groups ?? {}, reading));
    }
  return periodReadings.map(() => null);
}

/** Whether the text would be a period, had its year four digits. */
export const hasShortYear = (cell: string): boolean => {
  const text = plain(cell);
  return (
    /^\d{1,2}[-/. ]{1,2}(\d{1,2}|\p{L}+)\.?[-/. ]{1,2}'?\d\d$/u.test(text) ||
    /^(\p{L}+|[qsht]\d|\d[qsht])\.?[-/ ]?'?\d\d$/u.test(text)
  );
};

/** Small letters, plain hyphens, no midnight after a date. */
const plain = (cell: string): string =>
  withHyphens(tidy(cell).normalize('NFKC'))
    .toLowerCase()
    .replace(/(?<=\d)[t ]0?0:00(:00(\.0+)?)?( ?am|z)?$/, '')
    .replace(/’/g, "'");

type Parts = Readonly<Record<string, string | undefined>>;
type Form = readonly [RegExp, (parts: Parts, reading: PeriodReading) => string | null];

/** As far as the calendar counts. */
const YEAR = '(?<y>(?!99)[1-9]\\d{3})';
const GAP = '[-/ ,]*';
const QUARTER = '(?:q|qtr\\.?|quarter|quartal|t|trim\\.?|trimestre)';
const HALF = '(?:s|h|hj|half|halbjahr|semester|semestre)';
/** 1st, 1. and 1er. */
const NTH = '(?:\\.|st|nd|rd|th|er|e|eme|ème|°|º|o)?';
const NAME = '(?<name>\\p{L}+)\\.?';

const form = (shape: string, read: Form[1]): Form => [new RegExp(`^${shape}$`, 'u'), read];

const part =
  (letter: 'Q' | 'S'): Form[1] =>
  ({ y, n }) =>
    `${y}-${letter}${n}`;
const month: Form[1] = ({ y, n }) => monthOf(y, Number(n));
const named: Form[1] = ({ y, name = '' }) => monthOf(y, monthNamed(name));
const single: Form[1] = ({ y, n }, reading) =>
  reading.single === 'month' ? monthOf(y, Number(n)) : Number(n) <= 4 ? `${y}-Q${n}` : null;
const week: Form[1] = ({ y, n }) => mondayOf(Number(y), Number(n));
const date: Form[1] = ({ y, m, d }) => dateOf(y, Number(m), Number(d));
const namedDate: Form[1] = ({ y, name = '', d }) => dateOf(y, monthNamed(name), Number(d));
const numericDate: Form[1] = ({ y, a, b }, { first }) =>
  first === 'day' ? dateOf(y, Number(b), Number(a)) : dateOf(y, Number(a), Number(b));

/** The first that fits is taken; no text fits two that read it differently. */
const FORMS: readonly Form[] = [
  form(YEAR, ({ y }) => `${y}`),
  // 2024-Q1, 2024 Q1, 2024Q1, 2024-S1 and the like; then Q1 2024, Q1/2024; then 1Q2024, 1. Quartal 2024.
  form(`${YEAR}${GAP}${QUARTER} ?(?<n>[1-4])`, part('Q')),
  form(`${YEAR}${GAP}${HALF} ?(?<n>[12])`, part('S')),
  form(`${QUARTER} ?(?<n>[1-4])${GAP}${YEAR}`, part('Q')),
  form(`${HALF} ?(?<n>[12])${GAP}${YEAR}`, part('S')),
  form(`(?<n>[1-4])${NTH} ?${QUARTER}${GAP}${YEAR}`, part('Q')),
  form(`(?<n>[12])${NTH} ?${HALF}${GAP}${YEAR}`, part('S')),
  form(`${YEAR}${GAP}(?<n>[1-4])${NTH} ?${QUARTER}`, part('Q')),
  form(`${YEAR}${GAP}(?<n>[12])${NTH} ?${HALF}`, part('S')),
  // Months in figures. 2024.03 is not among them: spreadsheets make 2024.1 of October.
  form(`${YEAR}[-/](?<n>\\d{2})`, month),
  form(`${YEAR}-?m(?<n>\\d{1,2})`, month),
  form(`(?<n>\\d{2})[-/.]${YEAR}`, month),
  // Weeks by ISO 8601, in German as KW 5/2024.
  form(`${YEAR}-?w(?<n>\\d{2})`, week),
  form(`${YEAR}${GAP}kw ?(?<n>\\d{1,2})`, week),
  form(`kw ?(?<n>\\d{1,2})${GAP}${YEAR}`, week),
  // A month or a quarter; with a space also 01, as the cells of two columns come.
  form(`${YEAR}(?:[-/]| 0?)(?<n>\\d)`, single),
  form(`(?:|0(?= ?\\d ))(?<n>\\d)[-/ ]${YEAR}`, single),
  form(`${YEAR} (?<n>1\\d)`, month),
  form(`(?<n>1\\d) ${YEAR}`, month),
  form(`${NAME}${GAP}${YEAR}`, named),
  form(`${YEAR}${GAP}${NAME}`, named),
  // Days. Points between figures stand only where the day comes first.
  form(`${YEAR}(?<sep>[-/.])(?<m>\\d{1,2})\\k<sep>(?<d>\\d{1,2})`, date),
  form(`${YEAR}(?<m>\\d{2})(?<d>\\d{2})`, date),
  form(`(?<d>\\d{1,2})\\. ?(?<m>\\d{1,2})\\. ?${YEAR}`, date),
  form(`(?<a>\\d{1,2})(?<sep>[-/])(?<b>\\d{1,2})\\k<sep>${YEAR}`, numericDate),
  form(`(?<d>\\d{1,2})(?:\\.|st|nd|rd|th|er)?[- ]?${NAME}${GAP}${YEAR}`, namedDate),
  form(`${NAME}[- ](?<d>\\d{1,2})(?:st|nd|rd|th)?[-, ]+${YEAR}`, namedDate),
  form(`${YEAR}[- ]${NAME}[- ](?<d>\\d{1,2})`, namedDate),
];

const two = (number: number): string => String(number).padStart(2, '0');

const monthOf = (year: string | undefined, number: number | undefined): string | null =>
  number !== undefined && number >= 1 && number <= 12 ? `${year}-${two(number)}` : null;

function dateOf(year: string | undefined, number: number | undefined, day: number): string | null {
  const text = `${year}-${two(number ?? 0)}-${two(day)}`;
  return isDate(text) ? text : null;
}

/** The first day of a week that ISO 8601 numbers; its first week is the one with 4 January in it. */
function mondayOf(year: number, week: number): string | null {
  const firstMonday = (of: number): number => {
    const fourth = dayNumber(of, 1, 4);
    // Day 4 since 1970 was a Monday; the second remainder keeps days before it from counting backwards.
    return fourth - ((((fourth - 4) % 7) + 7) % 7);
  };
  const monday = firstMonday(year) + 7 * (week - 1);
  return week >= 1 && monday < firstMonday(year + 1) ? dateText(monday) : null;
}
