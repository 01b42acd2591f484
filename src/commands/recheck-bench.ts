/** What all steps of one recheck share: the archive, what is known of its records so far, templates and a printer. */
import { stat } from 'node:fs/promises';
import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { openPrinter, type Printer } from '../page/print.js';
import { loadTheme, type Theme } from '../page/theme.js';
import type { Archive, FiledRecord } from '../record/archive.js';
import type { Money } from '../record/assemble-decisions.js';
import { whereThere } from '../record/disk.js';
import type { LedgerCheck } from '../record/ledger-check.js';
import type { BriefRecord } from '../record/record.js';
import { type Drawing, openDrawing } from './drawing.js';
import type { RecheckOptions } from './rechecked.js';
import { SILENT } from './work.js';

export interface Bench {
  readonly archive: Archive;
  readonly ledger: LedgerCheck;
  /** By their SHA-256: all that are there, and those rechecked so far as they were filed. */
  readonly records: Map<string, FiledRecord>;
  /** Of the records that have a budget, until their covers are rechecked. */
  readonly money: Map<BriefRecord, Money>;
  /** The templates that something was made with; null where they are not to be had any more. */
  readonly themeOf: (plan: BriefRecord['plan']) => Promise<FoundTheme | null>;
  /** Other threads that draw briefs; null where they are too few to be worth it. */
  readonly drawing: Drawing | null;
  /** Null where PDFs are left out. */
  readonly print: Print | null;
  readonly close: () => Promise<void>;
}

export interface FoundTheme {
  readonly theme: Theme;
  /** The folder of the user's own templates in it; null where there are none. */
  readonly own: string | null;
}

/** Gives the PDF, or why the page can't be printed. Throws where there is no browser to print with. */
export type Print = (html: string, issued: string) => Promise<{ readonly pdf: Uint8Array } | { readonly why: string }>;

/** Fewer briefs than these are drawn before another thread has got ready. */
const MANY = 12;

/** More threads than these take more memory than they are worth. */
const MOST_THREADS = 4;

/** `count`: how many briefs are to be rechecked. */
export function openBench(
  archive: Archive,
  ledger: LedgerCheck,
  count: number,
  { pdf, report = SILENT }: RecheckOptions,
): Bench {
  const themes = new Map<string, Promise<FoundTheme | null>>();
  const press = openPress(report.message);
  const drawing = count < MANY ? null : openDrawing(Math.min(availableParallelism(), MOST_THREADS));
  return {
    archive,
    ledger,
    records: new Map(),
    money: new Map(),
    themeOf: ({ locale, templates }) => {
      const key = `${locale} ${templates}`;
      const theme = themes.get(key) ?? themeWith(archive, locale, templates);
      themes.set(key, theme);
      return theme;
    },
    drawing,
    print: pdf === false ? null : press.print,
    close: async () => {
      await drawing?.close();
      await press.close();
    },
  };
}

/** A printer whose browser is started when the first page is printed. */
function openPress(warn: (text: string) => void): { readonly print: Print; readonly close: () => Promise<void> } {
  let opened: Promise<Printer> | null = null;
  return {
    print: async (html, issued) => {
      opened ??= openPrinter({ warn });
      const printer = await opened;
      try {
        return { pdf: await printer.print(html, issued) };
      } catch (error) {
        return { why: error instanceof Error ? error.message : String(error) };
      }
    },
    close: async () => {
      const printer = await opened?.catch(() => null);
      await printer?.close();
    },
  };
}

/** The shipped templates, with the user's own of that version where some are kept; null unless they are what they were. */
async function themeWith({ folder }: Archive, locale: string, sha256: string): Promise<FoundTheme | null> {
  const kept = join(folder, 'templates', sha256);
  const own = (await whereThere(async () => (await stat(kept)).isDirectory(), false)) ? kept : null;
  try {
    const theme = await loadTheme(locale, own);
    return theme.sha256 === sha256 ? { theme, own } : null;
  } catch {
    // Templates that can't be used are not those that the pages were made with.
    return null;
  }
}
