import { mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { parse } from 'yaml';
import { loadTheme } from '../../src/page/theme.js';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'seasonbrief-theme-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function own(name: string, files: Readonly<Record<string, string>>): Promise<string> {
  for (const [path, text] of Object.entries(files)) {
    const file = join(folder, name, path);
    await mkdir(dirname(file), { recursive: true });
    await writeFile(file, text);
  }
  return join(folder, name);
}

test('a language speaks for itself, and in English where it has no words of its own', async () => {
  const [english, german] = await Promise.all([loadTheme('en-GB'), loadTheme('de-DE')]);
  expect(german.say('why.title')).toBe('Warum wir das erwarten');
  expect(german.say('meaning.title')).toBe(english.say('meaning.title'));
  expect((await loadTheme('fr-FR')).say('why.title')).toBe(english.say('why.title'));
});

test('a folder of one’s own overrides words one by one, adds style, brings a logo, and changes the fingerprint', async () => {
  const theirs = await own('good', {
    'wording/en/mine.yaml': 'trust:\n  title: "Our record at {{firm}}"\n',
    'style.css': ':root { --accent: #223a6b; }',
    'logo.svg': '<svg xmlns="http://www.w3.org/2000/svg"/>',
  });
  const [ours, mine] = await Promise.all([loadTheme('en-GB'), loadTheme('en-GB', theirs)]);
  expect(mine.say('trust.title', { firm: 'Saltmarsh' })).toBe('Our record at Saltmarsh');
  expect(mine.say('why.title')).toBe(ours.say('why.title'));
  expect(mine.style.startsWith(ours.style)).toBe(true);
  expect(mine.style).toContain('#223a6b');
  expect(mine.logo).toMatch(/^data:image\/svg\+xml;base64,/);
  expect(ours.logo).toBeNull();
  expect(mine.sha256).not.toBe(ours.sha256);
  expect([...mine.own.keys()]).toEqual(['logo.svg', 'style.css', 'wording/en/mine.yaml']);
});

test('a file that can’t be used is named', async () => {
  const yaml = await own('yaml', { 'wording/en/mine.yaml': 'trust: [\n' });
  await expect(loadTheme('en-GB', yaml)).rejects.toThrow(/wording\/en\/mine\.yaml is no YAML/);
  const page = await own('page', { 'brief.hbs': '<p>{{#if a}}' });
  await expect(loadTheme('en-GB', page)).rejects.toThrow(/brief\.hbs is no template/);
  await expect(loadTheme('en-GB', join(folder, 'none'))).rejects.toThrow(/ENOENT/);
});

/** Every sentence by its dotted key. */
async function sentences(language: string): Promise<Map<string, string>> {
  const file = fileURLToPath(new URL(`../../templates/wording/${language}/brief.yaml`, import.meta.url));
  const all = new Map<string, string>();
  const collect = (node: unknown, path: string): void => {
    if (typeof node === 'object' && node !== null)
      for (const [key, value] of Object.entries(node)) collect(value, path === '' ? key : `${path}.${key}`);
    else all.set(path, String(node));
  };
  collect(parse(await readFile(file, 'utf8')), '');
  return all;
}

test('German has no key that English lacks, and asks for no fact that the English sentence is not given', async () => {
  const [english, german] = await Promise.all([sentences('en'), sentences('de')]);
  const facts = (text: string) => [...text.matchAll(/\{\{\s*([\w-]+)\s*\}\}/g)].map(([, name]) => name);
  for (const [key, text] of german) {
    expect([...english.keys()], key).toContain(key);
    for (const fact of facts(text)) {
      // Plural forms of one sentence are given the same facts.
      const siblings = [...english].filter(([other]) => other.replace(/\.[^.]+$/, '') === key.replace(/\.[^.]+$/, ''));
      expect(
        siblings.flatMap(([, sibling]) => facts(sibling)),
        `${key}: ${fact}`,
      ).toContain(fact);
    }
  }
});

test('no sentence has a doubled space, an empty text or a stray space before its stop', async () => {
  for (const language of ['en', 'de'])
    for (const [key, text] of await sentences(language)) {
      expect(text, key).not.toMatch(/ {2}|\s[.;:]\s|^\s+$/);
      if (!key.startsWith('cover.flag') && key !== 'made.on.plain') expect(text, key).not.toBe('');
    }
});
