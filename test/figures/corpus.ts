/**
 * Files of past figures as spreadsheets in English, German, French, Swiss and Italian offices save them, and what they
 * say: worked out by hand from the file. Those whose bytes a version control system could alter are made here.
 */
export interface Sample {
  /** A file in `corpus/`, or the name of one that `bytes` makes. */
  readonly name: string;
  readonly bytes?: Uint8Array;
  readonly period: string;
  /** Wide: the columns. Long: the entries. */
  readonly columns: readonly string[];
  readonly long?: { readonly series: string; readonly value: string };
  readonly every?: 'week' | 'month' | 'quarter' | 'half-year' | 'year';
  readonly decimal?: 'point' | 'comma';
  /** The kind and the first period; and the values of each column, in order. */
  readonly reads?: readonly [kind: string, start: string, ...values: (readonly (number | null)[])[]];
  readonly footer?: readonly string[];
  readonly refused?: RegExp;
}

type Values = readonly (number | null)[];
const read = (name: string, period: string, column: string, kind: string, start: string, values: Values): Sample => ({
  name,
  period,
  columns: [column],
  reads: [kind, start, values],
});
const refused = (name: string, period: string, column: string, message: RegExp): Sample => ({
  name,
  period,
  columns: [column],
  refused: message,
});
const upTo = (n: number): Values => Array.from({ length: n }, (_, i) => i + 1);

/** Windows-1252 has the letters of Latin 1 at the same places; its euro sign is 0x80, its curly apostrophe 0x92. */
const windows1252 = (text: string): Uint8Array =>
  Buffer.from(text.replaceAll('€', '\x80').replaceAll('’', '\x92'), 'latin1');
const utf16le = (text: string): Uint8Array => Buffer.from(text, 'utf16le');
const utf16be = (text: string): Uint8Array => Buffer.from(text, 'utf16le').swap16();
const utf8 = (text: string): Uint8Array => Buffer.from(text, 'utf8');

export const samples: readonly Sample[] = [
  read('comma-plain.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [218, 640, 411, 96]),
  read('english-thousands-and-pence.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234.5, 12040, 987.25, 1000]),
  refused(
    'english-thousands-only.csv',
    'Quarter',
    'Paint',
    /csv:2:2 "1,234" can be read as 1234 or as 1\.234.*"decimal: point".*thousands/,
  ),
  {
    ...read('english-thousands-only.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234, 12040, 987]),
    decimal: 'point',
  },
  {
    ...read('english-thousands-only.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1.234, 12.04, 987]),
    decimal: 'comma',
  },
  read('english-thousands-and-millions.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234567, 987654, 1000]),
  read('english-pounds-minus-before.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234.5, -40, 0]),
  read('english-dollars-in-parentheses.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234.5, -40, -1040]),
  refused('english-accounting-zero.csv', 'Quarter', 'Paint', /csv:3:2 "-" can be the zero of an accounting format/),
  refused('english-accounting-zero-with-pound.csv', 'Quarter', 'Paint', /csv:3:2 "£ -" can be the zero/),
  {
    name: 'english-title-and-notes.csv',
    period: 'Quarter',
    columns: ['Paint', 'Rope'],
    reads: ['quarter', '2024-Q1', [218, 640, 411], [12, 31, 22]],
    footer: ['Total', 'Source: till, counted by hand'],
  },
  refused('english-total-in-the-middle.csv', 'Quarter', 'Paint', /csv:4:1 "Total" stands among the figures; delete/),
  read('english-month-names.csv', 'Month', 'Paint', 'month', '2024-01', upTo(9)),
  refused('english-month-year-of-two-digits.csv', 'Month', 'Paint', /csv:2:1 "Jan-24" has a year of two digits.*2024/),
  read('english-dates-day-first.csv', 'Date', 'Paint', 'quarter', '2024-Q1', [218, 640, 411]),
  read('american-dates-month-first.csv', 'Date', 'Paint', 'quarter', '2024-Q1', [218, 640, 411]),
  read('quarter-starts-settled-by-spacing.csv', 'Date', 'Paint', 'quarter', '2024-Q1', [218, 640, 411, 96]),
  refused(
    'dates-in-two-orders.csv',
    'Date',
    'Paint',
    /csv:3:1 "06\/30\/2024" can only be read with the month first, and "31\/03\/2024" in line 2 can't/,
  ),
  {
    ...refused(
      'dates-that-fit-both-orders.csv',
      'Date',
      'Paint',
      /csv:2:1 "03\/05\/2022" can be read as 2022-05-03 or as 2022-03-05/,
    ),
    every: 'quarter',
  },
  read('dates-spelled-out.csv', 'Date', 'Paint', 'quarter', '2024-Q1', [218, 640, 411]),
  read('dates-with-month-names.csv', 'Date', 'Paint', 'quarter', '2024-Q1', [218, 640, 411]),
  read('dates-with-midnight.csv', 'date', 'paint', 'month', '2024-01', upTo(3)),
  read('iso-dates-with-midnight-t.csv', 'date', 'paint', 'month', '2024-01', upTo(3)),
  read('dates-without-hyphens.csv', 'date', 'paint', 'month', '2024-01', upTo(3)),
  refused('dates-of-two-digit-years.csv', 'Date', 'Paint', /csv:2:1 "31\/03\/24" has a year of two digits/),
  refused(
    'dates-as-serial-numbers.csv',
    'Date',
    'Paint',
    /csv:2:1 "45382" looks like a spreadsheet’s number for a date; format/,
  ),
  read('descending.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(3)),
  refused('repeated-period.csv', 'quarter', 'paint', /csv:4:2 the period "2024-Q1" stands here and in line 2/),
  read('blank-lines-between.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(2)),
  read('trailing-empty-columns.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(2)),
  read('remark-beside-the-table.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(3)),
  {
    name: 'trailing-commas-dropped.csv',
    period: 'quarter',
    columns: ['paint', 'rope'],
    reads: ['quarter', '2024-Q1', [1, 2, 3], [4, null, 6]],
  },
  read('index-column-without-name.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1.5, 2.25, null, 4]),
  refused('decimal-comma-between-commas.csv', 'quarter', 'paint', /csv:2:4 "2" stands after the last column.*quotes/),
  refused('decimal-comma-into-unnamed-column.csv', 'quarter', 'paint', /csv:2:3 "5" stands under no column name/),
  {
    ...read('long-layout.csv', 'month', 'Paint', 'month', '2024-01', upTo(3)),
    long: { series: 'item', value: 'sold' },
  },
  {
    ...read('long-layout-with-total.csv', 'month', 'Paint', 'month', '2024-01', upTo(2)),
    long: { series: 'item', value: 'sold' },
    footer: ['Total'],
  },
  read('header-with-no-break-space.csv', 'Quarter', 'Antifouling paint (l)', 'quarter', '2024-Q1', upTo(2)),
  read('header-in-capitals.csv', 'quarter', 'Paint', 'quarter', '2024-Q1', upTo(2)),
  read('header-over-two-lines.csv', 'Quarter', 'Paint (litres)', 'quarter', '2024-Q1', upTo(2)),
  read('header-with-two-spellings.csv', 'quarter', 'Paint', 'quarter', '2024-Q1', upTo(2)),
  refused('header-with-two-spellings.csv', 'quarter', 'paint', /column "paint" stands twice .*columns 2 and 3/),
  refused('header-doubled.csv', 'quarter', 'paint', /column "paint" stands twice .*columns 2 and 3; rename one/),
  read('header-doubled-elsewhere.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(2)),
  refused('header-misspelt.csv', 'quarter', 'paint', /column "paint" is not in .*did you mean "piant"/),
  read('quoted-delimiters-and-breaks.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(2)),
  refused('quote-left-open.csv', 'quarter', 'paint', /quotes/),
  read('everything-quoted.csv', 'quarter', 'paint', 'quarter', '2024-Q1', upTo(2)),
  read('sep-line.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1.5, 2]),
  read('pipe.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1.5, 2]),
  read('tab.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1.5, null, 3]),
  read('missing-in-every-way.csv', 'quarter', 'paint', 'quarter', '2023-Q1', [1, ...Array(8).fill(null), 2]),
  refused('null-from-a-database.csv', 'quarter', 'paint', /csv:3:2 "NULL" comes from a program.*leave the cell empty/),
  refused('spreadsheet-error.csv', 'quarter', 'paint', /csv:3:2 "#DIV\/0!" is a spreadsheet’s error; mend/),
  read('percent-on-all.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [12, 8.5, null, 11]),
  refused(
    'percent-on-some.csv',
    'quarter',
    'paint',
    /csv:2:2 "12%" has a percent sign and "0\.085" in line 3 has none/,
  ),
  refused('two-currencies.csv', 'quarter', 'paint', /csv:3:2 "€13\.50" has another sign than "£12\.50" in line 2/),
  refused('unit-in-the-cell.csv', 'quarter', 'paint', /csv:2:2 "12 kg" is not a plain number.*without units/),
  read('exponents.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1200, 0.5]),
  read('trailing-minus.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [-12.5, 13.5]),
  read('unicode-minus.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [-12.5, -13.5, 1]),
  refused('indian-grouping.csv', 'quarter', 'paint', /csv:2:2 "1,23,456" has its points, commas or spaces/),
  refused('one-dot-and-three-digits.csv', 'quarter', 'paint', /csv:2:2 "1\.234" can be read as 1\.234 or as 1234/),
  read('one-dot-and-three-digits-below-one.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1.234, 0.987]),
  refused('points-and-commas-mixed.csv', 'quarter', 'paint', /csv:3:2 "2,5" and "1\.5" in line 2 don't use points/),
  read('columns-of-year-and-quarter.csv', 'Year, Quarter', 'Paint', 'quarter', '2024-Q1', upTo(4)),
  read('columns-of-year-and-month-number.csv', 'Year, Month', 'Paint', 'month', '2024-01', [
    ...upTo(5),
    ...Array(4).fill(null),
    10,
  ]),
  refused(
    'columns-of-year-and-number.csv',
    'Year, Number',
    'Paint',
    /csv:2:1 "2023 3" can be read as 2023-03 or as 2023-Q3.*"every: month" or "every: quarter"/,
  ),
  {
    ...read('columns-of-year-and-number.csv', 'Year, Number', 'Paint', 'quarter', '2023-Q3', [0, 0, 1, 2]),
    every: 'quarter',
  },
  read('years.csv', 'year', 'paint', 'year', '2021', upTo(3)),
  refused('years-that-run-over.csv', 'year', 'paint', /"2003\/04" .*can be a month or a year that runs into the next/),
  read('months-slash-number-first.csv', 'month', 'paint', 'month', '2024-01', [1, 2, ...Array(9).fill(null), 12]),
  read('months-slash-year-first.csv', 'month', 'paint', 'month', '2024-01', upTo(2)),
  read('months-single-figure.csv', 'month', 'paint', 'month', '2024-09', upTo(3)),
  read('months-as-statistics-offices-write.csv', 'month', 'paint', 'month', '2024-01', upTo(2)),
  read('half-years.csv', 'half', 'paint', 'half-year', '2024-S1', upTo(2)),
  refused('mixed-kinds.csv', 'quarter', 'paint', /several kinds, such as "2024-Q1" and "2024-03"/),
  refused('forgotten-period.csv', 'quarter', 'paint', /csv:4:1 there is no period in this row/),
  read('prototype-columns.csv', '__proto__', 'constructor', 'quarter', '2024-Q1', upTo(2)),
  refused('web-page.csv', 'quarter', 'paint', /a web page/),

  // 2020 has 53 weeks, and its last begins on 28 December.
  read('iso-weeks.csv', 'week', 'paint', 'week', '2020-12-21', upTo(4)),
  refused('two-dates-of-28-days.csv', 'date', 'paint', /no spacing of their own/),
  { ...read('two-dates-of-28-days.csv', 'date', 'paint', 'month', '2023-01', upTo(2)), every: 'month' },
  refused('weeks-out-of-step.csv', 'week', 'paint', /csv:8:1 "2024-02-15" is out of step: .*from "2024-01-01"/),
  refused('iso-week-that-is-none.csv', 'week', 'paint', /csv:3:1 "2021-W53" is not a period/),
  {
    ...read('year-totals-below.csv', 'quarter', 'paint', 'quarter', '2023-Q4', [1.5, 2]),
    footer: ['2023 Total', '2024 Total'],
  },
  {
    ...refused(
      'long-layout-entry-misspelt.csv',
      'month',
      'Paint',
      /no row .* has "Paint" in its column "item"; did you mean "Piant"/,
    ),
    long: { series: 'item', value: 'sold' },
  },

  read('german-calendar-weeks.csv', 'Woche', 'Farbe', 'week', '2023-12-25', [1, 2, 3.5]),
  read('german-semicolon-decimal-comma.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, 987, -12.25]),
  read('german-euro-after.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, 987, -12.25]),
  refused('german-thousands-only.csv', 'Quartal', 'Farbe', /csv:2:2 "1\.234" can be read as 1\.234 or as 1234/),
  {
    ...read('german-thousands-only.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234, 12040, 987]),
    decimal: 'comma',
  },
  read('german-dates.csv', 'Datum', 'Farbe', 'month', '2024-01', [1, 2, 3.5]),
  read('german-dates-without-zeros.csv', 'Datum', 'Farbe', 'month', '2024-01', [1, 2, 3.5]),
  read('german-month-names.csv', 'Monat', 'Farbe', 'month', '2024-01', upTo(12)),
  read('german-month-names-long.csv', 'Monat', 'Farbe', 'month', '2024-01', [
    1,
    2,
    3,
    null,
    5,
    ...Array(4).fill(null),
    10,
  ]),
  read('german-month-mrz.csv', 'Monat', 'Farbe', 'month', '2024-03', [3, 4]),
  {
    ...read('german-totals-and-notes.csv', 'Monat', 'Farbe', 'month', '2024-01', [1000.5, 2, 3]),
    footer: ['Summe', 'Durchschnitt', '* vorläufig'],
  },
  read('german-nv.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1.5, null, 3]),
  read('german-half-years.csv', 'Halbjahr', 'Farbe', 'half-year', '2024-S1', upTo(2)),
  refused('german-price-dash.csv', 'Quartal', 'Farbe', /csv:2:2 "12,-"/),

  read('french-narrow-no-break-space.csv', 'Trimestre', 'Peinture', 'quarter', '2024-Q1', [1234.5, 12040, 987, -5.5]),
  read('french-no-break-space-euro.csv', 'Trimestre', 'Peinture', 'quarter', '2024-Q1', [1234.5, 987, -12.25]),
  refused('french-quarters-without-fourth.csv', 'Trimestre', 'Peinture', /"T1 2023" .*a quarter or a third of a year/),
  read('french-month-names.csv', 'Mois', 'Peinture', 'month', '2024-01', upTo(12)),
  read('french-dates-spelled-out.csv', 'Date', 'Peinture', 'month', '2024-01', [1, 2, 3.5]),
  {
    ...read('french-total-general.csv', 'Mois', 'Peinture', 'month', '2024-01', [1.5, 2]),
    footer: ['Total général'],
  },
  read('french-thousands-only.csv', 'Mois', 'Peinture', 'month', '2024-01', [1234, 12040, 987]),

  read('swiss-curly-apostrophe.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, 12040, 987]),
  read('swiss-straight-apostrophe-francs.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, -12, 987]),
  read('swiss-apostrophe-only.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234, 987]),
  read('swiss-apostrophe-and-comma.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234, 1.234]),
  read('swiss-fr-point.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, 12.05]),
  refused('swiss-fr-without-space.csv', 'Quartal', 'Farbe', /csv:2:2 "Fr\.12" is not a plain number/),

  {
    ...read('italian-months.csv', 'Mese', 'Vernice', 'month', '2024-01', [
      1,
      2,
      3,
      null,
      5.5,
      6,
      7,
      null,
      null,
      10,
      null,
      12,
    ]),
    footer: ['Totale'],
  },

  {
    ...read('semicolon-decimal-comma-windows-1252.csv', 'Monat', 'Außenfarbe', 'month', '2024-01', [1234.5, 2, 3]),
    bytes: windows1252('Monat;Außenfarbe\r\nJan 2024;1.234,50 €\r\nFeb 2024;2,00 €\r\nMär 2024;3,00 €\r\n'),
  },
  {
    ...read('swiss-windows-1252.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1234.5, 987]),
    bytes: windows1252('Quartal;Farbe\r\nQ1 2024;1’234.50\r\nQ2 2024;987.00\r\nGesamt für Q;2’221.50\r\n'),
    footer: ['Gesamt für Q'],
  },
  {
    ...read('french-windows-1252.csv', 'Période', 'Peinture', 'month', '2024-01', [1234.5, 2]),
    bytes: windows1252('Période;Peinture\r\njanv. 2024;1\xa0234,50\r\nfévr. 2024;2,00\r\n'),
  },
  {
    ...read('utf-8-with-mark-and-crlf.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1.5, 2]),
    bytes: utf8('\uFEFFQuartal;Farbe\r\nQ1 2024;1,5\r\nQ2 2024;2\r\n'),
  },
  {
    ...read('unicode-text-utf-16le.txt', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1234.5, 2]),
    bytes: utf16le('\uFEFFQuarter\tPaint\r\nQ1 2024\t"1,234.50"\r\nQ2 2024\t2.00\r\n'),
  },
  {
    ...read('utf-16le-without-mark.csv', 'Quarter', 'Paint', 'quarter', '2024-Q1', [1.5, 2]),
    bytes: utf16le('Quarter,Paint\r\nQ1 2024,1.5\r\nQ2 2024,2\r\n'),
  },
  {
    ...read('utf-16be.csv', 'Quartal', 'Größe', 'quarter', '2024-Q1', [1.5, 2]),
    bytes: utf16be('\uFEFFQuartal;Größe\r\nQ1 2024;1,5\r\nQ2 2024;2\r\n'),
  },
  {
    ...read('utf-16be-without-mark.csv', 'Quartal', 'Farbe', 'quarter', '2024-Q1', [1.5, 2]),
    bytes: utf16be('Quartal;Farbe\nQ1 2024;1,5\nQ2 2024;2\n'),
  },
  {
    ...read('old-mac-line-ends.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1, 2]),
    bytes: utf8('quarter,paint\r2024-Q1,1\r2024-Q2,2\r'),
  },
  {
    ...read('mixed-line-ends.csv', 'quarter', 'paint', 'quarter', '2024-Q1', [1, 2, 3]),
    bytes: utf8('quarter,paint\r\n2024-Q1,1\n2024-Q2,2\r2024-Q3,3'),
  },
  {
    ...refused('line-numbers-after-quoted-breaks.csv', 'quarter', 'paint', /csv:5:3 "x"/),
    bytes: utf8('quarter,note,paint\r\n2024-Q1,"a\r\nb\r\nc",1\r\n2024-Q2,,x\r\n'),
  },
  {
    ...refused('mac-roman.csv', 'Mois', 'Peinture', /csv:2:1 "fŽvr\. 2024" is not a period/),
    bytes: Buffer.from('Mois;Peinture\rf\x8evr. 2024;1\xca234,50\r', 'latin1'),
  },
  {
    ...refused('windows-1252-with-no-letter.csv', 'quarter', 'paint', /not a text file/),
    bytes: Buffer.from('quarter,paint,caf\xe9\x81\n2024-Q1,1,\n', 'latin1'),
  },
  {
    ...refused('spreadsheet.xlsx', 'quarter', 'paint', /spreadsheet or a zip file; save the figures as CSV/),
    bytes: Buffer.from([0x50, 0x4b, 3, 4, 20, 0, 6, 0]),
  },
  {
    ...refused('old-spreadsheet.xls', 'quarter', 'paint', /old spreadsheet file/),
    bytes: Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]),
  },
  { ...refused('binary.csv', 'quarter', 'paint', /not a text file/), bytes: Buffer.from([1, 2, 3, 0, 255, 0, 9]) },
  { ...refused('report.pdf', 'quarter', 'paint', /this is a PDF/), bytes: utf8('%PDF-1.7\nquarter,paint\n') },
  { ...refused('only-spaces.csv', 'quarter', 'paint', /the file is empty/), bytes: utf8(' \r\n\uFEFF\r\n') },
];
