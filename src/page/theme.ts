/** The templates and words that a page is made from, compiled once; their SHA-256 stands in every record. */
import { createHash } from 'node:crypto';
import { readdir, readFile } from 'node:fs/promises';
import { join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import Handlebars from 'handlebars';
import { parse } from 'yaml';

/** Facts that a sentence is filled with. */
export type Facts = Readonly<Record<string, unknown>>;

/** Files by their path in the folder, with forward slashes. */
export type Files = ReadonlyMap<string, Buffer>;

export interface Theme {
  readonly brief: (view: object) => string;
  readonly cover: (view: object) => string;
  readonly choice: (view: object) => string;
  readonly style: string;
  /** The sentence of a dotted key, as HTML; its facts are escaped. Throws where there is none. */
  readonly say: (key: string, facts?: Facts) => string;
  /** Whether there is a sentence of this key. */
  readonly has: (key: string) => boolean;
  /** The user's own logo as a data address, or null. */
  readonly logo: string | null;
  /** The user's own files, to be kept beside what was made with them. */
  readonly own: Files;
  /** Of all files the pages are made from. */
  readonly sha256: string;
}

const shipped = fileURLToPath(new URL('../../templates', import.meta.url));

/**
 * Loads the templates with the words of a language (a BCP 47 tag), and in English what that language lacks. A folder of
 * the user's own, laid out as the shipped one, overrides it: pages and words file by file and key by key; its style is
 * added after the shipped one. Throws an Error that names the file where one of its files can't be used.
 */
export async function loadTheme(locale: string, own: string | null = null): Promise<Theme> {
  const ours = await templateFiles(shipped);
  const theirs = own === null ? NO_FILES : await templateFiles(own);
  const texts = (files: Files) => (name: string) => files.get(name)?.toString('utf8');
  const [our, their] = [texts(ours), texts(theirs)];
  const words = new Map<string, string>();
  for (const language of new Set(['en', new Intl.Locale(locale).language]))
    for (const files of [ours, theirs])
      for (const name of files.keys())
        if (name.startsWith(`wording/${language}/`)) collect(parsedWords(name, texts(files)(name) ?? ''), '', words);
  const environment = Handlebars.create();
  const sentences = new Map<string, Handlebars.TemplateDelegate>();
  const say = (key: string, facts: Facts = {}): string => {
    const text = words.get(key);
    if (text === undefined) throw new Error(`the wording has no "${key}"`);
    const sentence = sentences.get(key) ?? environment.compile(text, { strict: true });
    sentences.set(key, sentence);
    return sentence(facts);
  };
  environment.registerHelper('say', (key: string, { hash }: Handlebars.HelperOptions) => {
    return new environment.SafeString(say(key, hash));
  });
  const page = (name: string): Handlebars.TemplateDelegate => {
    const text = their(name) ?? our(name) ?? '';
    checkTemplate(name, text);
    return environment.compile(text, { strict: true, preventIndent: true });
  };
  for (const name of new Set([...ours.keys(), ...theirs.keys()])) {
    const partial = /^partials\/(.+)\.hbs$/.exec(name)?.[1];
    if (partial !== undefined) environment.registerPartial(partial, page(name));
  }
  return {
    brief: page('brief.hbs'),
    cover: page('cover.hbs'),
    choice: page('choice.hbs'),
    style: [our('style.css'), their('style.css')].filter((text) => text !== undefined).join('\n'),
    logo: logoOf(theirs),
    say,
    has: (key) => words.has(key),
    own: theirs,
    sha256: digest([ours, theirs]),
  };
}

const NO_FILES: Files = new Map();

/** Every file under the folder but the starter, by its path with forward slashes, in the order of the paths. */
async function templateFiles(folder: string): Promise<Files> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  const names = entries
    .filter((entry) => entry.isFile())
    .map((entry) => relative(folder, join(entry.parentPath, entry.name)).split(sep).join('/'))
    .filter((name) => !name.startsWith('starter/'))
    .sort();
  return new Map(await Promise.all(names.map(async (name) => [name, await readFile(join(folder, name))] as const)));
}

function parsedWords(name: string, text: string): unknown {
  try {
    return parse(text) as unknown;
  } catch (error) {
    throw new Error(`templates: ${name} is no YAML: ${error instanceof Error ? error.message : error}`);
  }
}

function checkTemplate(name: string, text: string): void {
  try {
    Handlebars.parse(text);
  } catch (error) {
    throw new Error(`templates: ${name} is no template: ${error instanceof Error ? error.message : error}`);
  }
}

const LOGOS = { 'logo.svg': 'image/svg+xml', 'logo.png': 'image/png', 'logo.jpg': 'image/jpeg' };

/** A data address, so that the page asks for nothing outside itself. */
function logoOf(files: Files): string | null {
  for (const [name, type] of Object.entries(LOGOS)) {
    const file = files.get(name);
    if (file !== undefined) return `data:${type};base64,${file.toString('base64')}`;
  }
  return null;
}

function collect(node: unknown, path: string, words: Map<string, string>): void {
  if (typeof node === 'object' && node !== null)
    for (const [key, value] of Object.entries(node)) collect(value, path === '' ? key : `${path}.${key}`, words);
  else words.set(path, String(node));
}

function digest(sets: readonly Files[]): string {
  const hash = createHash('sha256');
  for (const files of sets)
    for (const [name, content] of files) {
      hash.update(`${name}\n${content.byteLength}\n`);
      hash.update(content);
    }
  return hash.digest('hex');
}
