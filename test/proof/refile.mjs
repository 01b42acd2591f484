/**
 * Files ready-made briefs as `write` does, without computing them: node refile.mjs ARCHIVE SOURCE, where SOURCE is
 * another archive. A brief that is filed with another record is replaced; its PDF goes. Says what had to be done about
 * a write that did not end.
 */
import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import * as archives from '../../dist/record/archive.js';
import { sha256 } from '../../dist/record/canonical.js';

const [, , folder, source] = process.argv;
const date = (await readdir(source)).find((name) => /^\d{4}-/.test(name));
const names = (await readdir(join(source, date))).filter((name) => name.endsWith('.json'));
try {
  const archive = await archives.openArchive(folder);
  process.stdout.write(archive.recovery);
  await refile(archive).finally(() => archives.closeArchive(archive));
} catch (error) {
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 2;
}

async function refile(archive) {
  const slugs = names.map((name) => name.slice(0, -5)).filter((slug) => slug !== 'cover');
  const replaced = await archives.nextReplaced(archive, date);
  const [entries, removals] = [[], []];
  for (const slug of slugs) {
    const files = await filesOf(slug);
    const record = JSON.parse(files.json);
    const there = await archives.filedBrief(archive, date, slug);
    if (there?.filed.sha256 === sha256(files.json)) continue;
    if (there !== null) await archives.setAside(archive, date, slug, replaced);
    await archives.stageFiles(archive, date, slug, files);
    if (there?.kinds.includes('pdf')) removals.push(`${date}/${slug}.pdf`);
    entries.push({ record, sha256: sha256(files.json), replaces: there === null ? null : `${replaced}/${slug}.json` });
  }
  if (entries.length === 0) return;
  for (const name of ['cover', 'orders', 'budget']) await archives.stageFiles(archive, date, name, await filesOf(name));
  for (const version of await namesIn('templates'))
    await archives.keepTemplates(archive, version, await contents(`templates/${version}`));
  await archives.fileBriefs(archive, date, entries, removals);
}

async function filesOf(name) {
  const files = {};
  for (const kind of ['html', 'json', 'csv'])
    files[kind] = await readFile(join(source, date, `${name}.${kind}`), 'utf8').catch(() => undefined);
  return files;
}

async function contents(place) {
  const names = await namesIn(place);
  return new Map(await Promise.all(names.map(async (name) => [name, await readFile(join(source, place, name))])));
}

async function namesIn(place) {
  return readdir(join(source, place)).catch(() => []);
}
