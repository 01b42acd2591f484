/** A made-up ledger of Saltmarsh Boatyard with the records it is about, for tests of what is done with ledgers. */
import { canonicalJson, sha256 } from '../../src/record/canonical.js';
import { chainedRows, withRows } from '../../src/record/ledger.js';
import type { LedgerFile } from '../../src/record/ledger-again.js';
import { sampleRecord } from './sample.js';

export interface Filed {
  /** The heading, then a row a brief. */
  readonly lines: readonly string[];
  readonly files: readonly LedgerFile[];
}

/** One brief after another, each given by its slug; one that is filed a second time replaces the first. */
export function filedLedger(slugs: readonly string[]): Filed {
  let ledger: string | null = null;
  let files: LedgerFile[] = [];
  slugs.forEach((slug, i) => {
    const record = sampleRecord({ slug, name: `The ${slug}`, expected: 100 + i });
    const fingerprint = sha256(canonicalJson(record));
    const { brief } = record;
    const number = Math.max(0, ...files.map(({ replaced }) => replaced ?? 0)) + 1;
    const kept = `2026-10-05/replaced/${number}/${slug}`;
    const isThere = files.some(({ path }) => path === brief);
    files = [
      ...files.map((file) => (file.path === brief ? { ...file, path: kept, replaced: number } : file)),
      { path: brief, brief, replaced: null, sha256: fingerprint, record },
    ];
    const entry = { record, sha256: fingerprint, replaces: isThere ? `${kept}.json` : null };
    ledger = withRows(ledger, chainedRows(ledger, [entry]));
  });
  return { lines: String(ledger).trimEnd().split('\n'), files };
}

export const joined = (lines: readonly string[]): string => lines.map((line) => `${line}\n`).join('');
