/** Runs of the built program for the proofs of the archive, and what must be true of an archive at any time. */
import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { readdir, readFile } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parse } from 'csv-parse/sync';
import { sha256 } from '../../src/record/canonical.js';
import { csvRow } from '../../src/record/csv.js';
import { recordSchema } from '../../src/record/record.js';

export const root = fileURLToPath(new URL('../..', import.meta.url));
const cli = join(root, 'dist/cli.js');
const refiler = fileURLToPath(new URL('refile.mjs', import.meta.url));
const crasher = new URL('crash.mjs', import.meta.url).href;

export interface Ended {
  readonly status: number | null;
  readonly out: string;
  readonly err: string;
}

export interface Started {
  readonly child: ChildProcess;
  readonly end: Promise<Ended>;
}

export type Environment = Readonly<Record<string, string>>;

function start(args: readonly string[], env: Environment): Started {
  const child = spawn(process.execPath, args, { stdio: ['ignore', 'pipe', 'pipe'], env: { ...process.env, ...env } });
  const end = new Promise<Ended>((resolve, reject) => {
    let [out, err] = ['', ''];
    child.stdout.on('data', (data) => {
      out += data;
    });
    child.stderr.on('data', (data) => {
      err += data;
    });
    child.on('error', reject);
    child.on('close', (status) => resolve({ status, out, err }));
  });
  return { child, end };
}

/** Starts `seasonbrief write`. */
export const startWrite = (args: readonly string[], env: Environment = {}): Started =>
  start([...preload(env), cli, 'write', ...args], env);

/** Starts filing the briefs of `source` in `archive`, without computing them. */
export const startRefile = (archive: string, source: string, env: Environment = {}): Started =>
  start([...preload(env), refiler, archive, source], env);

/** For the environment: dies at this moment of the changes below a folder. */
export const crashAt = (under: string, moment: number): Environment => ({
  CRASH_UNDER: under,
  CRASH_AT: String(moment),
});

/** For the environment: counts the changes below a folder into a file. */
export const countInto = (under: string, file: string): Environment => ({ CRASH_UNDER: under, CRASH_COUNT: file });

const preload = (env: Environment): string[] => ('CRASH_UNDER' in env ? ['--import', crasher] : []);

/** Runs the step for every item, two at a time. */
export async function twoAtATime<T>(items: readonly T[], step: (item: T, i: number) => Promise<void>): Promise<void> {
  const left = [...items.entries()];
  const lane = async (): Promise<void> => {
    for (let next = left.shift(); next !== undefined; next = left.shift()) await step(next[1], next[0]);
  };
  await Promise.all([lane(), lane()]);
}

/** SHA-256 of every file below a folder, and `folder` for every folder. */
export type Tree = Readonly<Record<string, string>>;

export async function treeOf(folder: string): Promise<Tree> {
  if (!existsSync(folder)) return {};
  const entries = await readdir(folder, { withFileTypes: true, recursive: true });
  const named = entries.map(async (entry) => {
    const path = join(entry.parentPath, entry.name);
    return [path.slice(folder.length + 1), entry.isDirectory() ? 'folder' : hash(await readFile(path))] as const;
  });
  return Object.fromEntries((await Promise.all(named)).sort(([a], [b]) => (a < b ? -1 : 1)));
}

const hash = (bytes: Buffer): string => sha256(bytes);

/**
 * What is wrong with an archive in which a write was cut off. Without a journal it holds all of what was to come, or
 * nothing of it. With one, every file is the old or the new one, and what is not yet in its place is staged.
 */
export async function faultsOfUnfinished(archive: string, before: Tree, after: Tree): Promise<string[]> {
  const all = await treeOf(archive);
  const now = pick(all, (path) => !path.startsWith('.'));
  if (!('.staging/journal.json' in all))
    return isSame(now, before) || isSame(now, after) ? [] : differences(now, after);
  JSON.parse(await readFile(join(archive, '.staging/journal.json'), 'utf8'));
  const neither = Object.keys(now).filter((path) => now[path] !== before[path] && now[path] !== after[path]);
  const nowhere = Object.keys(after).filter(
    (path) => path !== 'ledger.csv' && after[path] !== now[path] && after[path] !== all[`.staging/${path}`],
  );
  return [
    ...neither.filter((path) => now[path] !== 'folder').map((path) => `${path} is neither old nor new`),
    ...nowhere.filter((path) => after[path] !== 'folder').map((path) => `${path} is neither in place nor staged`),
  ];
}

/** Equal files; a folder without files counts for nothing. */
const isSame = (a: Tree, b: Tree): boolean => differences(filesOf(a), filesOf(b)).length === 0;

const filesOf = (tree: Tree): Tree => pick(tree, (path) => tree[path] !== 'folder');

const pick = (tree: Tree, isWanted: (path: string) => boolean): Tree =>
  Object.fromEntries(Object.entries(tree).filter(([path]) => isWanted(path)));

export const differences = (now: Tree, expected: Tree): string[] =>
  [...new Set([...Object.keys(now), ...Object.keys(expected)])]
    .filter((path) => now[path] !== expected[path])
    .map((path) =>
      path in now ? (path in expected ? `${path} differs` : `${path} is too much`) : `${path} is missing`,
    );

/** What is wrong with an archive at rest: whole briefs, and a ledger that names each of them and holds together. */
export async function faultsOf(archive: string): Promise<string[]> {
  const names = await readdir(archive);
  const strange = names.filter((name) => !/^(\d{4}-\d{2}-\d{2}|ledger\.csv|templates|choice|trial)$/.test(name));
  const rows = await ledgerOf(archive);
  const dates = names.filter((name) => /^\d{4}/.test(name));
  const dated = await Promise.all(dates.map((date) => faultsOfDate(join(archive, date), rows)));
  const replaced = await Promise.all(rows.map((row, i) => faultsOfRow(archive, row, rows.slice(i + 1))));
  return [...strange.map((name) => `${name} does not belong`), ...dated.flat(), ...replaced.flat()];
}

type Row = Readonly<Record<string, string>>;

/** The ledger's rows; throws where the chain does not hold. */
async function ledgerOf(archive: string): Promise<Row[]> {
  const text = await readFile(join(archive, 'ledger.csv'), 'utf8');
  const lines: string[][] = parse(text, { bom: true, record_delimiter: ['\r\n', '\n'] });
  const [heading = [], ...rows] = lines;
  const at = heading.indexOf('previous_sha256');
  for (const [i, row] of rows.entries())
    if (row[at] !== sha256(csvRow(lines[i] ?? []).trimEnd())) throw new Error(`row ${i + 1} does not follow:\n${text}`);
  return rows.map((row) => Object.fromEntries(heading.map((name, i) => [name, row[i] ?? ''])));
}

async function faultsOfDate(folder: string, rows: readonly Row[]): Promise<string[]> {
  const names = await readdir(folder);
  const records = names.filter((name) => name.endsWith('.json') && name !== 'cover.json');
  const faults = await Promise.all(
    records.map(async (name) => {
      const text = await readFile(join(folder, name), 'utf8');
      const { brief } = recordSchema.parse(JSON.parse(text));
      const row = rows.findLast((each) => each.brief === brief);
      const html = await readFile(join(folder, name.replace('.json', '.html')), 'utf8');
      return [
        ...(row?.record_sha256 === sha256(text) ? [] : [`${brief} is not in the ledger`]),
        ...(html.trimEnd().endsWith('</html>') ? [] : [`${brief} is half a page`]),
        ...(names.includes(name.replace('.json', '.csv')) ? [] : [`${brief} has no figures`]),
      ];
    }),
  );
  const cover: { rows: unknown[] } = JSON.parse(await readFile(join(folder, 'cover.json'), 'utf8'));
  if (cover.rows.length !== records.length)
    faults.push([`the cover of ${basename(folder)} has ${cover.rows.length} rows`]);
  return faults.flat();
}

/** Every record that the ledger names is in its place, or where the next row for the same brief says it was put. */
async function faultsOfRow(archive: string, row: Row, later: readonly Row[]): Promise<string[]> {
  const next = later.find(({ brief }) => brief === row.brief);
  if (next?.replaces === '') return [`${row.brief} is in the ledger twice`];
  const place = next?.replaces ?? `${row.brief}.json`;
  const file = join(archive, place);
  const isThere = existsSync(file) && sha256(await readFile(file)) === row.record_sha256;
  return isThere ? [] : [`${place} is not the record that the ledger names`];
}
