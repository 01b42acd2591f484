/** The templates and words that a page is made from, compiled once; their SHA-256 stands in every record. */
import { createHash } from 'node:crypto';
import { readdir, readFile } from 'node:fs/promises';
import { join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import Handlebars from 'handlebars';
import { parse } from 'yaml';

/** Facts that a sentence is filled with. */
export type Facts = Readonly<Record<string, unknown>>;

export interface Theme {
  readonly brief: (view: object) => string;
  readonly cover: (view: object) => string;
  readonly style: string;
  /** The sentence of a dotted key, as HTML; its facts are escaped. Throws where there is none. */
  readonly say: (key: string, facts?: Facts) => string;
  /** Whether there is a sentence of this key. */
  readonly has: (key: string) => boolean;
  /** Of all files the pages are made from. */
  readonly sha256: string;
}

const shipped = fileURLToPath(new URL('../../templates', import.meta.url));

/** Loads the templates with the words of a language (a BCP 47 tag); English where it has none. */
export async function loadTheme(locale: string): Promise<Theme> {
  const files = await templateFiles(shipped);
  const language = new Intl.Locale(locale).language;
  const spoken = [...files.keys()].some((name) => name.startsWith(`wording/${language}/`)) ? language : 'en';
  const words = new Map<string, string>();
  for (const [name, text] of files)
    if (name.startsWith(`wording/${spoken}/`)) collect(parse(text) as unknown, '', words);
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
  const page = (name: string): ((view: object) => string) =>
    environment.compile(files.get(name) ?? '', { strict: true, preventIndent: true });
  return {
    brief: page('brief.hbs'),
    cover: page('cover.hbs'),
    style: files.get('style.css') ?? '',
    say,
    has: (key) => words.has(key),
    sha256: digest(files),
  };
}

/** Every file under templates/ but the starter, by its path with forward slashes, in the order of the paths. */
async function templateFiles(folder: string): Promise<ReadonlyMap<string, string>> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  const names = entries
    .filter((entry) => entry.isFile())
    .map((entry) => relative(folder, join(entry.parentPath, entry.name)).split(sep).join('/'))
    .filter((name) => !name.startsWith('starter/'))
    .sort();
  return new Map(
    await Promise.all(names.map(async (name) => [name, await readFile(join(folder, name), 'utf8')] as const)),
  );
}

function collect(node: unknown, path: string, words: Map<string, string>): void {
  if (typeof node === 'object' && node !== null)
    for (const [key, value] of Object.entries(node)) collect(value, path === '' ? key : `${path}.${key}`, words);
  else words.set(path, String(node));
}

function digest(files: ReadonlyMap<string, string>): string {
  const hash = createHash('sha256');
  for (const [name, text] of files) hash.update(`${name}\n${Buffer.byteLength(text)}\n${text}`);
  return hash.digest('hex');
}
