import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { type Archive, closeArchive, openArchive } from '../../src/record/archive.js';
import { canonicalJson, sha256 } from '../../src/record/canonical.js';
import { briefsIn, filedPlaces } from '../../src/record/filed.js';
import { sampleRecord } from './sample.js';

let archive: Archive;
beforeEach(async () => {
  archive = await openArchive(await mkdtemp(join(tmpdir(), 'filed-')));
});
afterEach(async () => {
  await closeArchive(archive);
  await rm(archive.folder, { recursive: true });
});

async function put(path: string, content: string): Promise<void> {
  const file = join(archive.folder, path);
  await mkdir(dirname(file), { recursive: true });
  await writeFile(file, content);
}

test('every dated folder in the order of the dates, and what was replaced in it by its number', async () => {
  for (const path of [
    '2026-10-05/replaced/10',
    '2026-10-05/replaced/2',
    '2026-07-06',
    'trial',
    'choice',
    'templates/a',
  ])
    await put(`${path}/rope.json`, '{}');
  await put('2026-10-05/replaced/old/rope.json', '{}');
  const places = await filedPlaces(archive);
  expect(places.map(({ path }) => path)).toEqual([
    '2026-07-06',
    '2026-10-05',
    '2026-10-05/replaced/2',
    '2026-10-05/replaced/10',
  ]);
  expect(places.map(({ names }) => [...names])).toEqual([['rope.json'], [], ['rope.json'], ['rope.json']]);
});

test('records are read with the SHA-256 of their files; the cover is none of them', async () => {
  const record = sampleRecord({ slug: 'rope' });
  await put('2026-10-05/rope.json', canonicalJson(record));
  await put('2026-10-05/cover.json', '{}');
  const [place] = await filedPlaces(archive);
  expect(place && (await briefsIn(archive, place))).toEqual([
    { place, slug: 'rope', path: '2026-10-05/rope', content: { record, sha256: sha256(canonicalJson(record)) } },
  ]);
});

test.each([
  ['{"format": "seasonbrief-rec', /^is no JSON \(.*\): it was damaged or cut short$/],
  [
    '{"format": "seasonbrief-record/2"}',
    /^says that its format is "seasonbrief-record\/2", and this program reads "seasonbrief-record\/1"/,
  ],
  ['[]', /^says that its format is nothing/],
  [
    canonicalJson({ ...sampleRecord(), software: { name: 'seasonbrief', version: '0.0.7' }, issued: 5 }),
    /^can't be read as a seasonbrief-record\/1 \(issued: .*; it says that version 0\.0\.7 wrote it\)/,
  ],
])('what is no record is told with the reason: %.30s', async (text, damage) => {
  await put('2026-10-05/rope.json', text);
  const [place] = await filedPlaces(archive);
  const [found] = place === undefined ? [] : await briefsIn(archive, place);
  expect(found?.content).toEqual({ damage: expect.stringMatching(damage), sha256: sha256(text) });
});
