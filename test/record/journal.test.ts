import { cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { canonicalJson } from '../../src/record/canonical.js';
import { abandon, commit, recover, stage, stagingOf } from '../../src/record/journal.js';
import { chainedRows, withRows } from '../../src/record/ledger.js';
import { sampleRecord } from './sample.js';

let archive: string;
beforeEach(async () => {
  archive = await mkdtemp(join(tmpdir(), 'journal-'));
});
afterEach(() => rm(archive, { recursive: true }));

const rows = chainedRows(null, [{ record: sampleRecord(), sha256: 'a'.repeat(64), replaces: null }]);

/** Every file below the archive with its text. */
async function contents(): Promise<Record<string, string>> {
  const entries = await readdir(archive, { withFileTypes: true, recursive: true });
  const files = entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name));
  const texts = await Promise.all(files.map((file) => readFile(file, 'utf8')));
  return Object.fromEntries(files.map((file, i) => [file.slice(archive.length + 1), texts[i] ?? '']));
}

const journal = {
  moves: ['day/a.html', 'day/a.json', 'day/replaced/1/a.html', 'trial'],
  removals: ['day/a.pdf'],
  ledgerRows: rows,
};

async function prepare() {
  await mkdir(join(archive, 'day'));
  await mkdir(join(archive, 'trial'));
  await writeFile(join(archive, 'day/a.html'), 'old page');
  await writeFile(join(archive, 'day/a.pdf'), 'old print');
  await writeFile(join(archive, 'trial/old.html'), 'old trial');
  const staging = stagingOf(archive);
  await stage(staging, 'day/a.html', 'new page');
  await stage(staging, 'day/a.json', 'new record');
  await stage(staging, 'day/replaced/1/a.html', 'old page');
  await stage(staging, 'trial/new.html', 'new trial');
  return staging;
}

const expected = {
  'day/a.html': 'new page',
  'day/a.json': 'new record',
  'day/replaced/1/a.html': 'old page',
  'trial/new.html': 'new trial',
  'ledger.csv': withRows(null, rows),
};

test('a commit moves files and folders, removes what it names and writes the ledger', async () => {
  await commit(await prepare(), journal);
  expect(await contents()).toEqual(expected);
});

test('what was staged without a journal is cleared away, the old state stays', async () => {
  await prepare();
  expect(await recover(archive)).toBe('undone');
  expect(await contents()).toEqual({
    'day/a.html': 'old page',
    'day/a.pdf': 'old print',
    'trial/old.html': 'old trial',
  });
  expect(await recover(archive)).toBe('nothing');
});

test('a journal is finished from any point at which a crash can have cut it off', async () => {
  const steps = ['day/a.html', 'day/a.json', 'day/replaced/1/a.html', 'trial', 'day/a.pdf', 'ledger.csv'];
  for (let done = 0; done <= steps.length; done++) {
    const staging = await prepare();
    await writeFile(
      join(staging.folder, 'journal.json'),
      canonicalJson({ format: 'seasonbrief-journal/1', ...journal }),
    );
    // The steps that the crash let through, by hand.
    for (const step of steps.slice(0, done)) {
      if (step === 'ledger.csv') await writeFile(join(archive, step), withRows(null, rows));
      else if (step === 'day/a.pdf') await rm(join(archive, step));
      else {
        await rm(join(archive, step), { recursive: true, force: true });
        await cp(join(staging.folder, step), join(archive, step), { recursive: true });
        await rm(join(staging.folder, step), { recursive: true });
      }
    }
    await abandon(staging);
    expect(await recover(archive)).toBe('finished');
    expect(await contents()).toEqual(expected);
    for (const name of await readdir(archive)) await rm(join(archive, name), { recursive: true });
  }
});

test('a journal that is not understood stops everything and says what to do', async () => {
  const staging = await prepare();
  await writeFile(join(staging.folder, 'journal.json'), '{"format":"seasonbrief-journal/9"}');
  await expect(recover(archive)).rejects.toThrow(/journal.json: this journal of an unfinished write can't be read/);
  expect((await contents())['day/a.html']).toBe('old page');
});
