/** Any table written in any dialect reads back as it was written, or is refused: never as other numbers. */
import fc from 'fast-check';
import iconv from 'iconv-lite';
import { expect, test } from 'vitest';
import { dateText, dayNumber, type Every, periodIndex, periodText, spanOf } from '../../src/calendar/calendar.js';
import { InputError } from '../../src/figures/input-error.js';
import { readText, wanted } from './read-text.js';

type Kind = Extract<Every, 'month' | 'quarter' | 'half-year' | 'year' | 'week'>;

/** A figure as digits, so that no arithmetic of ours stands between what is written and what is expected. */
interface Figure {
  readonly isNegative: boolean;
  readonly whole: string;
  readonly decimals: string;
}
type Table = readonly (readonly (Figure | null)[])[];

const isoParts = (iso: string): readonly string[] => iso.split('-');
const monthIn = (locale: string, style: 'short' | 'long') => (iso: string) =>
  new Intl.DateTimeFormat(locale, { month: style, year: 'numeric', timeZone: 'UTC' }).format(new Date(iso));
/** Styles that write a day, given as ISO 8601. */
const days: readonly ((iso: string) => string)[] = [
  (iso) => iso,
  (iso) => isoParts(iso).toReversed().join('/'),
  (iso) => isoParts(iso).toReversed().join('.'),
  (iso) => isoParts(iso).toReversed().join('-'),
  (iso) => `${iso.slice(5, 7)}/${iso.slice(8)}/${iso.slice(0, 4)}`,
  (iso) => `${Number(iso.slice(5, 7))}/${Number(iso.slice(8))}/${iso.slice(0, 4)}`,
  (iso) => new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeZone: 'UTC' }).format(new Date(iso)),
  (iso) => new Intl.DateTimeFormat('en-US', { dateStyle: 'medium', timeZone: 'UTC' }).format(new Date(iso)),
  (iso) => new Intl.DateTimeFormat('de-DE', { dateStyle: 'long', timeZone: 'UTC' }).format(new Date(iso)),
  (iso) => `${iso} 00:00:00`,
];
const byDay =
  (end: 'from' | 'to', day: (iso: string) => string) =>
  (text: string, kind: Kind): string =>
    day(spanOf(text, kind, 1)[end]);
const months: readonly ((text: string, kind: Kind) => string)[] = [
  ...['en-GB', 'en-US', 'de-DE', 'fr-FR', 'it-IT'].flatMap((locale) =>
    (['short', 'long'] as const).map((style) => byDay('from', monthIn(locale, style))),
  ),
  (text) => text.replace('-', '/'),
  (text) => isoParts(text).toReversed().join('/'),
  (text) => isoParts(text).map(Number).toReversed().join('/'),
  (text) => text.replace('-', 'M'),
];
const parted = (shape: (year: string, part: string, number: string) => string) => (text: string) => {
  const [year, part] = text.split('-');
  return shape(year, part, part.slice(1));
};
const styles: Readonly<Record<Kind, readonly ((text: string, kind: Kind) => string)[]>> = {
  month: months,
  quarter: [
    parted((year, part) => `${part} ${year}`),
    parted((year, part) => `${part}/${year}`),
    parted((year, part) => `${year} ${part}`),
    parted((year, part) => `${year}${part.toLowerCase()}`),
    parted((year, _, number) => `${number}. Quartal ${year}`),
    parted((year, _, number) => `T${number} ${year}`),
    parted((year, _, number) => `${number}Q${year}`),
    parted((year, _, number) => `${number}/${year}`),
  ],
  'half-year': [
    parted((year, _, number) => `H${number} ${year}`),
    parted((year, _, number) => `${number}. Halbjahr ${year}`),
  ],
  year: [(text) => text],
  week: [],
};
const stylesOf = (kind: Kind) => [
  (text: string) => text,
  ...styles[kind],
  ...days.map((day) => byDay('from', day)),
  ...(kind === 'week' ? [] : days.map((day) => byDay('to', day))),
];

const figure: fc.Arbitrary<Figure> = fc.record({
  isNegative: fc.boolean(),
  whole: fc.oneof(fc.nat(9), fc.nat(99_999), fc.nat(999_999_999)).map(String),
  decimals: fc.oneof(
    { weight: 3, arbitrary: fc.constant('') },
    fc.stringMatching(/^\d{1,2}$/),
    fc.stringMatching(/^\d{3}$/),
    fc.stringMatching(/^\d{4,6}$/),
  ),
});

const dialect = fc.record({
  delimiter: fc.constantFrom(',', ';', '\t', '|'),
  decimal: fc.constantFrom('.', ','),
  thousands: fc.constantFrom('', '', '.', ',', ' ', '\u00a0', '\u202f', '\u2009', "'", '’'),
  negative: fc.constantFrom('-', '-', '−', '()', 'after'),
  currency: fc.constantFrom('', '', '', '£', '€ after', 'CHF ', 'kr after'),
  quotes: fc.constantFrom('needed', 'all', 'never'),
  encoding: fc.constantFrom(
    'utf-8',
    'utf-8 marked',
    'utf-16le',
    'utf-16le marked',
    'utf-16be',
    'utf-16be marked',
    'windows-1252',
  ),
  lineEnd: fc.constantFrom('\n', '\r\n', '\r'),
  missing: fc.constantFrom('', '-', 'n/a', '.', '–', '#N/A'),
  order: fc.constantFrom('up', 'down', 'turned'),
  preamble: fc.subarray([['Sales, by period; in "litres"'], [], ['Stand: 05.10.2026', '', '1,5']]),
  footer: fc.subarray(['total', 'blank', 'note'] as const),
  said: fc.constantFrom('nothing', 'every', 'decimal', 'both'),
});
type Dialect = typeof dialect extends fc.Arbitrary<infer D> ? D : never;

const written = (value: Figure, { decimal, thousands, negative, currency }: Dialect): string => {
  const grouped = value.whole.replace(/\B(?=(\d{3})+$)/g, thousands === decimal ? '' : thousands);
  const number = value.decimals === '' ? grouped : `${grouped}${decimal}${value.decimals}`;
  const marked = currency.endsWith(' after') ? `${number} ${currency.replace(' after', '')}` : `${currency}${number}`;
  if (!value.isNegative) return marked;
  return negative === '()' ? `(${marked})` : negative === 'after' ? `${marked}-` : `${negative}${marked}`;
};

const figureOf = (value: Figure | null): number | null =>
  value === null ? null : Number(`${value.isNegative ? '-' : ''}${value.whole}.${value.decimals}`) + 0;

const inBytes = (text: string, encoding: string): Uint8Array => {
  const [name, mark] = encoding.split(' ');
  const whole = mark === undefined ? text : `\uFEFF${text}`;
  // What the code page lacks becomes a question mark, as it does where spreadsheets save.
  if (name === 'windows-1252') return iconv.encode(text, name);
  if (name === 'utf-8') return Buffer.from(whole, 'utf8');
  const little = Buffer.from(whole, 'utf16le');
  return name === 'utf-16le' ? little : little.swap16();
};

const fileOf = (names: readonly string[], periods: readonly string[], table: Table, how: Dialect): Uint8Array => {
  const mustQuote = (cell: string) => cell.includes(how.delimiter) || cell.includes('"');
  const cell = (text: string) =>
    how.quotes === 'all' || (how.quotes === 'needed' && mustQuote(text)) ? `"${text.replaceAll('"', '""')}"` : text;
  const row = (cells: readonly string[]) => cells.map(cell).join(how.delimiter);
  const padded = (first: string) => row([first, ...names.slice(1).map(() => '')]);
  const rows = periods.map((period, i) =>
    row([period, ...table[i].map((value) => (value === null ? how.missing : written(value, how)))]),
  );
  const ordered = { up: rows, down: rows.toReversed(), turned: [...rows.slice(1), ...rows.slice(0, 1)] }[how.order];
  const footer = {
    total: row(['Total', ...names.slice(1).map(() => '4711')]),
    blank: '',
    note: padded('Source: till'),
  };
  const lines = [...how.preamble.map(row), row(names), ...ordered, ...how.footer.map((name) => footer[name]), ''];
  return inBytes(lines.join(how.lineEnd), how.encoding);
};

const cell = fc.option(figure, { nil: null, freq: 8 });
const sheet = fc.record({
  kind: fc.constantFrom<Kind>('month', 'quarter', 'half-year', 'year', 'week'),
  style: fc.nat(40),
  columns: fc.integer({ min: 1, max: 3 }),
  wide: fc.array(fc.tuple(cell, cell, cell), { minLength: 1, maxLength: 20 }),
  start: fc.integer({ min: dayNumber(1995, 1, 1), max: dayNumber(2004, 1, 1) }),
  how: dialect,
});

const firstOf = (kind: Kind, day: number): number => {
  const [year, month] = isoParts(dateText(day)).map(Number);
  if (kind === 'week') return periodIndex(dateText(day), kind);
  const season = { month: 12, quarter: 4, 'half-year': 2, year: 1 }[kind];
  return year * season + Math.floor(((month - 1) * season) / 12);
};

test('what is read is what was written, and most is read', async () => {
  let [read, all] = [0, 0];
  await fc.assert(
    fc.asyncProperty(sheet, async ({ kind, style, start, columns, wide, how }) => {
      const table = wide.map((row) => row.slice(0, columns));
      const names = ['when', 'paint', 'rope', 'oil'].slice(0, columns + 1);
      const first = firstOf(kind, start);
      const texts = table.map((_, i) => periodText(first + i, kind));
      const styled = stylesOf(kind);
      const periods = texts.map((text) => styled[style % styled.length](text, kind));
      all++;
      const figures = await readText(fileOf(names, periods, table, how), {
        period: 'when',
        every: how.said === 'every' || how.said === 'both' ? kind : null,
        decimal: how.said === 'decimal' || how.said === 'both' ? (how.decimal === '.' ? 'point' : 'comma') : null,
        wanted: names.slice(1).map(wanted),
      }).catch((error: unknown) => {
        if (error instanceof InputError) return null;
        throw error;
      });
      if (figures === null) return;
      read++;
      names.slice(1).forEach((name, column) => {
        const values = table.map((row) => figureOf(row[column]));
        const from = values.findIndex((value) => value !== null);
        const to = values.findLastIndex((value) => value !== null);
        expect(figures.get(name)).toMatchObject({
          every: kind,
          start: texts[from],
          values: values.slice(from, to + 1),
        });
      });
    }),
    { numRuns: 500 },
  );
  expect(read / all).toBeGreaterThan(0.6);
});

test('whatever the bytes are, they are read or refused', async () => {
  const pieces = fc.constantFrom(
    ...[
      'when',
      'paint',
      ',',
      ';',
      '\t',
      '|',
      '"',
      '\n',
      '\r',
      ' ',
      '\u00a0',
      '-',
      '.',
      "'",
      '2024-Q1',
      'Q2/2024',
      '2024',
    ],
    ...[
      '1',
      '1,5',
      '1.234',
      '1.234,5',
      '31/03/2024',
      '£',
      '%',
      '(',
      ')',
      'Total',
      'Mar',
      'T1',
      'KW',
      '\0',
      '\uFEFF',
      'é',
    ],
  );
  const text = fc.array(pieces, { maxLength: 60 }).map((parts) => parts.join(''));
  const bytes = fc.oneof(
    text.map((cells) => Buffer.from(`when,paint\n${cells}`)),
    text.map((cells) => Buffer.from(cells, 'latin1')),
    fc.uint8Array({ maxLength: 200 }),
  );
  await fc.assert(
    fc.asyncProperty(bytes, async (file) => {
      const outcome = await readText(file, { period: 'when' }).catch((error: unknown) => error);
      expect(outcome instanceof Map || outcome instanceof InputError).toBe(true);
    }),
    { numRuns: 1000 },
  );
});
