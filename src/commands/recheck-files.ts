/** The files beside a record, drawn, printed and written again and compared byte for byte. */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { whereThere } from '../record/disk.js';
import type { Place } from '../record/filed.js';
import type { BriefRecord } from '../record/record.js';
import type { Bench, FoundTheme } from './recheck-bench.js';
import { otherPage, otherPdf, otherTable, type Remedies } from './recheck-words.js';
import type { RecheckFault } from './rechecked.js';
import { SOFTWARE } from './software.js';

export interface FilesFound {
  readonly faults: readonly RecheckFault[];
  readonly notes: readonly string[];
}

export const NOTHING_FOUND: FilesFound = { faults: [], notes: [] };

export const together = (all: readonly FilesFound[]): FilesFound => ({
  faults: all.flatMap(({ faults }) => faults),
  notes: all.flatMap(({ notes }) => notes),
});

/** A file, by its folder and its name without the ending, and what to do where it is wrong. */
export interface FileAt {
  readonly place: Place;
  readonly name: string;
  readonly remedies: Remedies;
}

export interface Page {
  readonly issued: string;
  readonly plan: BriefRecord['plan'];
  /** Of the program that drew it. */
  readonly version: string;
  readonly draw: (theme: FoundTheme) => Promise<string>;
}

/** The page as HTML and, where one is filed, as PDF. */
export async function recheckPage(at: FileAt, page: Page, bench: Bench): Promise<FilesFound> {
  const theme = await bench.themeOf(page.plan);
  const filed = await contentOf(at, 'html', bench);
  if (theme === null) {
    const html = filed === null ? absence(at, 'html') : NOTHING_FOUND;
    const left = { faults: [], notes: ['its page was not drawn again: made with templates that are no longer there'] };
    return together([html, left, await recheckPdf(at, page, filed?.toString() ?? null, bench)]);
  }
  const drawn = await drawnAgain(page, theme);
  if ('why' in drawn) return faultAt(at, 'html', `can't be drawn again: ${drawn.why}`);
  const html = compared(at, 'html', filed, Buffer.from(drawn.html), otherPage(page.version, SOFTWARE.version));
  return together([html, await recheckPdf(at, page, drawn.html, bench)]);
}

async function drawnAgain(
  page: Page,
  theme: FoundTheme,
): Promise<{ readonly html: string } | { readonly why: string }> {
  try {
    return { html: await page.draw(theme) };
  } catch (error) {
    return { why: error instanceof Error ? error.message : String(error) };
  }
}

async function recheckPdf(at: FileAt, page: Page, html: string | null, bench: Bench): Promise<FilesFound> {
  const filed = bench.print === null ? null : await contentOf(at, 'pdf', bench);
  if (filed === null || html === null || bench.print === null) return NOTHING_FOUND;
  const printed = await bench.print(html, page.issued);
  if ('why' in printed) return faultAt(at, 'pdf', `can't be printed again: ${printed.why}`);
  if (filed.equals(printed.pdf)) return NOTHING_FOUND;
  const [by, here] = [producerOf(filed), producerOf(printed.pdf)];
  // Another version of the browser prints the same page in other bytes.
  return by === here
    ? faultAt(at, 'pdf', `${otherPdf}. ${at.remedies.wrong}`)
    : { faults: [], notes: [`its PDF was not compared: it was printed by ${by}, and the browser here is ${here}`] };
}

/** What a PDF says it was printed by (PDF 1.7, 14.3.3). */
const producerOf = (pdf: Uint8Array): string =>
  /\/Producer \(((?:[^()\\]|\\.)*)\)/.exec(Buffer.from(pdf).toString('latin1'))?.[1] ?? 'something else';

/** A table for a spreadsheet; `csv` is null where there ought to be none. */
export async function recheckTable(at: FileAt, csv: string | null, bench: Bench): Promise<FilesFound> {
  const filed = await contentOf(at, 'csv', bench);
  if (csv !== null) return compared(at, 'csv', filed, Buffer.from(csv), otherTable);
  return filed === null ? NOTHING_FOUND : faultAt(at, 'csv', 'is there, and its records give no such table. Remove it');
}

const contentOf = ({ place, name }: FileAt, kind: string, { archive }: Bench): Promise<Buffer | null> =>
  whereThere(() => readFile(join(archive.folder, place.path, `${name}.${kind}`)), null);

function compared(
  at: FileAt,
  kind: string,
  filed: Buffer | null,
  made: Buffer,
  told: (line: number) => string,
): FilesFound {
  if (filed === null) return absence(at, kind);
  return filed.equals(made)
    ? NOTHING_FOUND
    : faultAt(at, kind, `${told(firstOtherLine(filed, made))}. ${at.remedies.wrong}`);
}

/** What was replaced is kept as it was then, which may have been without this file. */
const absence = (at: FileAt, kind: string): FilesFound =>
  at.place.replaced === null
    ? faultAt(at, kind, `is not there. ${at.remedies.missing}`)
    : { faults: [], notes: [`${at.name}.${kind} is not there`] };

const faultAt = ({ place, name }: FileAt, kind: string, message: string): FilesFound => ({
  faults: [{ file: `${place.path}/${name}.${kind}`, message }],
  notes: [],
});

function firstOtherLine(a: Buffer, b: Buffer): number {
  const [one, other] = [a, b].map((each) => each.toString('latin1').split('\n'));
  return 1 + one.findIndex((line, i) => line !== other[i]);
}
