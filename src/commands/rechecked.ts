/** What a recheck is asked, and what it says. */
import type { Difference } from '../record/compare.js';
import type { LedgerFault } from '../record/ledger-fault.js';
import type { Reporter } from './work.js';

export interface RecheckOptions {
  /** Names or slugs of the series to recheck; all, and the covers, unless given. */
  readonly only?: readonly string[];
  /** Whether PDFs are printed again; they are unless this is false. */
  readonly pdf?: boolean;
  readonly report?: Reporter;
  readonly signal?: AbortSignal;
}

export interface RecheckResult {
  /** Absolute path of the archive. */
  readonly folder: string;
  /** Whether there is no fault anywhere. */
  readonly agrees: boolean;
  /** The oldest date first, and on each date those that were replaced after those that stand. */
  readonly briefs: readonly Rechecked[];
  readonly covers: readonly Rechecked[];
  readonly ledger: { readonly rows: number; readonly faults: readonly LedgerFault[] };
}

/** A brief, or a cover. */
export interface Rechecked {
  /** Below the archive, without the ending: `2026-10-05/replaced/1/mooring-rope`. */
  readonly path: string;
  readonly verdict: 'agrees' | 'differs' | 'unreadable';
  /** The version of the program that made it; null where that can't be read. */
  readonly version: string | null;
  /** How far apart, as a share, its numbers are from those computed again, of those that count as the same. */
  readonly apart: number;
  /** What differs from the same computed again. */
  readonly differences: readonly Difference[];
  readonly faults: readonly RecheckFault[];
  /** What is to be known beside the verdict, such as what could not be checked; no faults. */
  readonly notes: readonly string[];
}

export interface RecheckFault {
  /** Below the archive. */
  readonly file: string;
  /** What is wrong, and what to do. */
  readonly message: string;
}
