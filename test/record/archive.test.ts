import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { afterEach, beforeEach, expect, test } from 'vitest';
import {
  type Archive,
  closeArchive,
  fileBriefs,
  filedBrief,
  filedRecords,
  fileTrial,
  nextReplaced,
  openArchive,
  setAside,
  stageFiles,
} from '../../src/record/archive.js';
import { canonicalJson, sha256 } from '../../src/record/canonical.js';
import { type SampleChanges, sampleRecord } from './sample.js';

const date = '2026-10-05';
let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'archive-'));
});
afterEach(() => rm(folder, { recursive: true }));

async function stageSample(archive: Archive, changes: SampleChanges) {
  const record = sampleRecord(changes);
  const json = canonicalJson(record);
  await stageFiles(archive, date, record.series.slug, { html: '<p>', json, csv: 'period\n' });
  return { record, sha256: sha256(json), replaces: null };
}

const ledger = async () =>
  parse(await readFile(join(folder, 'ledger.csv'), 'utf8'), { columns: true }) as Record<string, string>[];

test('briefs are filed, found again, and added to', async () => {
  const archive = await openArchive(folder);
  await fileBriefs(archive, date, [await stageSample(archive, { slug: 'paint' })], []);
  await fileBriefs(archive, date, [await stageSample(archive, { slug: 'rope' })], []);
  expect((await readdir(join(folder, date))).sort()).toEqual(
    ['paint', 'rope'].flatMap((slug) => [`${slug}.csv`, `${slug}.html`, `${slug}.json`]),
  );
  expect(await filedBrief(archive, date, 'oars')).toBe(null);
  const filed = await filedBrief(archive, date, 'paint');
  expect(filed?.kinds).toEqual(['html', 'json', 'csv']);
  expect(filed?.filed).toMatchObject({ record: { brief: '2026-10-05/paint' } });
  const records = await filedRecords(archive, date);
  const rows = await ledger();
  expect(rows.map((row) => row.record_sha256)).toEqual([records.get('paint')?.sha256, records.get('rope')?.sha256]);
  await closeArchive(archive);
  expect((await readdir(folder)).sort()).toEqual([date, 'ledger.csv']);
});

test('what is replaced is kept, in a folder of its own each time, and the ledger names it', async () => {
  const archive = await openArchive(folder);
  await fileBriefs(archive, date, [await stageSample(archive, { slug: 'paint', expected: 1 })], []);
  await writeFile(join(folder, date, 'paint.pdf'), 'print');
  for (const expected of [2, 3]) {
    const replaced = await nextReplaced(archive, date);
    await setAside(archive, date, 'paint', replaced);
    const entry = await stageSample(archive, { slug: 'paint', expected });
    const removals = expected === 2 ? [`${date}/paint.pdf`] : [];
    await fileBriefs(archive, date, [{ ...entry, replaces: `${replaced}/paint.json` }], removals);
  }
  const expectedIn = async (path: string) =>
    JSON.parse(await readFile(join(folder, path), 'utf8')).outlook.periods[0].expected;
  expect(await expectedIn(`${date}/replaced/1/paint.json`)).toBe(1);
  expect(await expectedIn(`${date}/replaced/2/paint.json`)).toBe(2);
  expect(await expectedIn(`${date}/paint.json`)).toBe(3);
  expect(await readFile(join(folder, date, 'replaced/1/paint.pdf'), 'utf8')).toBe('print');
  expect(await readdir(join(folder, date))).not.toContain('paint.pdf');
  expect((await ledger()).map((row) => row.replaces)).toEqual([
    '',
    `${date}/replaced/1/paint.json`,
    `${date}/replaced/2/paint.json`,
  ]);
  await closeArchive(archive);
});

test('a damaged or lost record is told from a brief that is not there', async () => {
  const archive = await openArchive(folder);
  await fileBriefs(archive, date, [await stageSample(archive, { slug: 'paint' })], []);
  const file = join(folder, date, 'paint.json');
  await writeFile(file, '{"format":"seasonbrief-record/2"}');
  expect((await filedBrief(archive, date, 'paint'))?.filed).toMatchObject({
    damage: expect.stringContaining('format'),
  });
  await expect(filedRecords(archive, date)).rejects.toThrow("paint.json can't be read as a record");
  await rm(file);
  expect((await filedBrief(archive, date, 'paint'))?.filed).toMatchObject({ damage: `${file} is missing` });
  await closeArchive(archive);
});

test('a trial replaces the last trial and leaves no ledger', async () => {
  const archive = await openArchive(folder);
  await stageFiles(archive, 'trial', 'paint', { html: 'first' });
  await fileTrial(archive);
  await stageFiles(archive, 'trial', 'rope', { html: 'second' });
  await fileTrial(archive);
  await closeArchive(archive);
  expect(await readdir(folder)).toEqual(['trial']);
  expect(await readdir(join(folder, 'trial'))).toEqual(['rope.html']);
});

test('an archive in which nothing was filed leaves nothing behind', async () => {
  const fresh = join(folder, 'new', 'out');
  const archive = await openArchive(fresh);
  await stageFiles(archive, date, 'paint', { html: 'x' });
  await closeArchive(archive);
  expect(await readdir(folder)).toEqual([]);
});

test('a folder that cannot be used is refused with the remedy', async () => {
  await writeFile(join(folder, 'taken'), '');
  await expect(openArchive(join(folder, 'taken'))).rejects.toThrow(/taken: a file stands where a folder is needed/);
});
