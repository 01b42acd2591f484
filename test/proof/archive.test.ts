/**
 * The archive under hard use: several writers, a process killed at any moment, a full disk, a folder that can't be
 * written to, a ledger that a spreadsheet saved. Nothing is lost or half there, the ledger and the folders agree, and
 * the next write gives the bytes of a run that nothing disturbed.
 */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { cp, mkdir, mkdtemp, readFile, rm, stat, symlink, writeFile } from 'node:fs/promises';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  countInto,
  crashAt,
  differences,
  type Ended,
  type Environment,
  faultsOf,
  faultsOfUnfinished,
  root,
  type Started,
  startRefile,
  startWrite,
  treeOf,
  twoAtATime,
} from './archive-runs.js';

const october = '2026-10-05';
const labour = ['--only', 'Workshop labour'];
const nights = ['--only', 'Visitor nights'];
const both = [...labour, ...nights];
const well: Ended = { status: 0, out: '', err: '' };

let home = '';
/** Milliseconds that a write of both series takes. */
let took = 0;
beforeAll(async () => {
  home = await mkdtemp(join(tmpdir(), 'archive proof '));
  const began = performance.now();
  await undisturbed({ only: both });
  took = performance.now() - began;
});
afterAll(() => rm(home, { recursive: true, force: true }));

let made = 0;
const fresh = (): string => join(home, `archive-${++made}`);

// Plans and what an undisturbed run makes of them ---------------------------------------------------------------------

/** What one write is asked for. */
interface Asked {
  readonly only: readonly string[];
  readonly date?: string;
  /** With other last figures than the starter's, in place of what is filed. */
  readonly replace?: boolean;
}

const plans = new Map<string, Promise<string>>();

/** The starter's plan with the date and the figures that are asked for. */
function planOf({ date = october, replace = false }: Asked): Promise<string> {
  const key = `plan of ${date}${replace ? ', other figures' : ''}`;
  const plan = plans.get(key) ?? makePlan(join(home, key), date, replace);
  plans.set(key, plan);
  return plan;
}

async function makePlan(folder: string, date: string, hasOtherFigures: boolean): Promise<string> {
  const plan = join(folder, 'plan.yaml');
  await cp(join(root, 'templates/starter'), folder, { recursive: true });
  await edit(plan, (text) => text.replace(`issued: ${october}`, `issued: ${date}`));
  if (hasOtherFigures)
    await edit(join(folder, 'figures.csv'), (text) => text.replace(/^(2026-Q3,.*),765,/m, '$1,795,'));
  return plan;
}

const edit = async (file: string, change: (text: string) => string): Promise<void> =>
  writeFile(file, change(await readFile(file, 'utf8')));

const argsOf = async (asked: Asked, out: string): Promise<string[]> => [
  ...[await planOf(asked), '--out', out, '--no-pdf', '--quiet', ...asked.only],
  ...(asked.replace ? ['--replace'] : []),
];

const write = async (asked: Asked, out: string): Promise<Ended> => startWrite(await argsOf(asked, out)).end;

const references = new Map<string, Promise<string>>();

/** An archive in which nothing disturbed these writes, one after the other; not to be written to. */
function undisturbed(...all: readonly Asked[]): Promise<string> {
  const key = JSON.stringify(all);
  const archive = references.get(key) ?? makeUndisturbed(all);
  references.set(key, archive);
  return archive;
}

async function makeUndisturbed(all: readonly Asked[]): Promise<string> {
  const out = fresh();
  const last = all.at(-1);
  if (last === undefined) return out;
  await copy(await undisturbed(...all.slice(0, -1)), out);
  expect(await write(last, out)).toEqual(well);
  return out;
}

async function copy(archive: string, to = fresh()): Promise<string> {
  await mkdir(to, { recursive: true });
  if (existsSync(archive)) await cp(archive, to, { recursive: true });
  return to;
}

async function expectWhole(archive: string, reference: string, what = ''): Promise<void> {
  expect(differences(await treeOf(archive), await treeOf(reference)), what).toEqual([]);
  expect(await faultsOf(archive), what).toEqual([]);
}

// Several writers -----------------------------------------------------------------------------------------------------

describe('several writers at once', () => {
  const busy =
    /^\S.*\/\.lock\S*: another write is at work here \(process \d+\): wait until it has ended and run the command again\n$/;

  /** All have ended well, or were told to wait; at least one got through. */
  function expectOrderly(ends: readonly Ended[]): void {
    for (const { status, err } of ends) {
      expect([0, 2], err).toContain(status);
      if (status === 2) expect(err).toMatch(busy);
    }
    expect(ends.map(({ status }) => status)).toContain(0);
  }

  /** Starts the second write at any time while the first is at work, or just after. */
  async function atOnce(first: Asked, second: Asked, out: string): Promise<Ended[]> {
    const one = startWrite(await argsOf(first, out));
    await pause(Math.random() * took);
    const ends = await Promise.all([one.end, write(second, out)]);
    expectOrderly(ends);
    return ends;
  }

  test('the same plan twice', async () => {
    const asked = { only: labour };
    const reference = await undisturbed(asked);
    await twoAtATime([...Array(6).keys()], async () => {
      const out = fresh();
      await atOnce(asked, asked, out);
      await expectWhole(out, reference);
    });
  });

  test('two series, of one date or of two', async () => {
    await twoAtATime([october, '2026-10-06', october, '2026-10-06'], async (date) => {
      const asked = [{ only: labour }, { only: nights, date }] as const;
      const ways = [await undisturbed(...asked), await undisturbed(asked[1], asked[0])];
      const out = fresh();
      const ends = await atOnce(...asked, out);
      for (const [i, { status }] of ends.entries()) if (status === 2) expect(await write(asked[i], out)).toEqual(well);
      const now = await treeOf(out);
      expect(await Promise.all(ways.map(async (way) => differences(now, await treeOf(way))))).toContainEqual([]);
      expect(await faultsOf(out)).toEqual([]);
    });
  });

  test('four at the lock that a dead process left', async () => {
    const reference = await undisturbed({ only: both });
    const expected = await treeOf(reference);
    for (let round = 0; round < 15; round++) {
      const out = await copy(fresh());
      const holder = { pid: spawnSync(process.execPath, ['-e', '']).pid, host: hostname(), began: '1' };
      await writeFile(join(out, '.lock'), `${JSON.stringify(holder)}\n`);
      const ends = await Promise.all(
        [1, 2, 3, 4].map(async () => {
          await pause(Math.random() * 50);
          return startRefile(out, reference).end;
        }),
      );
      expectOrderly(ends);
      expect(differences(await treeOf(out), expected)).toEqual([]);
    }
  });
});

// Killed --------------------------------------------------------------------------------------------------------------

/** Work on an archive that may be cut off. */
interface Work {
  readonly name: string;
  readonly before: string;
  readonly after: string;
  readonly start: (out: string, env?: Environment) => Started;
}

/** How many changes to the disk the work makes. */
async function momentsOf({ before, start }: Work): Promise<number> {
  const [out, count] = [await copy(before), fresh()];
  expect((await start(out, countInto(out, count)).end).status).toBe(0);
  return Number(await readFile(count, 'utf8'));
}

const anyOf = (moments: number): number => Math.ceil(Math.random() * moments);

describe('killed', () => {
  test('at each change to the disk in turn', async () => {
    const [one, two] = [await undisturbed({ only: labour }), await undisturbed({ only: both })];
    const printed = await copy(await undisturbed({ only: nights }));
    await writeFile(join(printed, october, 'visitor-nights.pdf'), 'a print');
    const works = [
      await refiling('new', fresh(), one),
      await refiling('replaced and added', printed, await others(two)),
    ];
    for (const { name, before, after, start } of works) {
      const [was, becomes] = [await treeOf(before), await treeOf(after)];
      const moments = await momentsOf({ name, before, after, start });
      await twoAtATime([...Array(moments).keys()], async (i) => {
        const out = await copy(before);
        let what = `${name}: killed at change ${i + 1} of ${moments}`;
        await start(out, crashAt(out, i + 1)).end;
        expect(await faultsOfUnfinished(out, was, becomes), what).toEqual([]);
        const isFiled = differences(becomes, await treeOf(out)).every((fault) => fault.endsWith('too much'));
        if (existsSync(join(out, '.staging/journal.json'))) {
          const second = anyOf(20);
          what += `, and at ${second} of what finishes it`;
          await start(out, crashAt(out, second)).end;
          expect(await faultsOfUnfinished(out, was, becomes), what).toEqual([]);
        }
        const { status, out: recovery, err } = await start(out).end;
        expect({ status, err }, what).toEqual({ status: 0, err: '' });
        if (isFiled) expect(recovery, what).not.toBe('undone');
        expect(differences(await treeOf(out), becomes), what).toEqual([]);
        await rm(out, { recursive: true });
      });
    }
  });

  /** An archive of the briefs with other figures, and with templates of the user's own. */
  async function others(archive: string): Promise<string> {
    const replaced = await copy(archive);
    expect(await write({ only: both, replace: true }, replaced)).toEqual(well);
    await rm(join(replaced, october, 'replaced'), { recursive: true });
    await mkdir(join(replaced, 'templates/a-version'), { recursive: true });
    for (const name of ['brief.hbs', 'style.css']) await writeFile(join(replaced, 'templates/a-version', name), name);
    return replaced;
  }

  async function refiling(name: string, before: string, source: string): Promise<Work> {
    const after = await copy(before);
    expect(await startRefile(after, source).end).toEqual({ ...well, out: 'nothing' });
    return { name, before, after, start: (out, env) => startRefile(out, source, env) };
  }

  test('at fifty moments of a write, and of the writes that clear up after it', { timeout: 400_000 }, async () => {
    const works = await Promise.all([
      writing('new', [], { only: both }),
      writing('replaced', [{ only: both }], { only: both, replace: true }),
    ]);
    const moments = await Promise.all(works.map(momentsOf));
    let kills = 0;
    await twoAtATime([...Array(50).keys()], async (round) => {
      if (kills >= 50) return;
      const work = works[round % 2];
      const [was, becomes] = [await treeOf(work.before), await treeOf(work.after)];
      const out = await copy(work.before);
      let what = work.name;
      for (let kill = 0; kill < 3; kill++) {
        kills++;
        if (kills % 2 === 0) {
          const moment = anyOf(moments[round % 2]);
          what += `, killed at change ${moment}`;
          await work.start(out, crashAt(out, moment)).end;
        } else {
          const after = Math.random() * took;
          what += `, killed after ${after} ms`;
          const { child, end } = work.start(out);
          const timer = setTimeout(() => child.kill('SIGKILL'), after);
          await end;
          clearTimeout(timer);
        }
        expect(await faultsOfUnfinished(out, was, becomes), what).toEqual([]);
        if (differences(await treeOf(out), becomes).length === 0) break;
      }
      expect(await work.start(out).end, what).toEqual(well);
      await expectWhole(out, work.after, what);
      await rm(out, { recursive: true });
    });
  });

  async function writing(name: string, before: readonly Asked[], asked: Asked): Promise<Work> {
    const args = await argsOf(asked, '');
    return {
      name,
      before: await undisturbed(...before),
      after: await undisturbed(...before, asked),
      start: (out, env) =>
        startWrite(
          args.map((arg) => arg || out),
          env,
        ),
    };
  }
});

// Disks ---------------------------------------------------------------------------------------------------------------

const page = 4096;

/** A small disk of so many pages, in memory. */
async function withDisk(pages: number, step: (disk: string) => Promise<void>): Promise<void> {
  const disk = fresh();
  await mkdir(disk);
  mount('-t', 'tmpfs', '-o', `size=${pages * page}`, 'tmpfs', disk);
  try {
    await step(disk);
  } finally {
    spawnSync('umount', [disk]);
  }
}

const remount = (disk: string, option: string): void => mount('-o', `remount,${option}`, disk);

function mount(...args: string[]): void {
  const { status, stderr } = spawnSync('mount', args);
  if (status !== 0) throw new Error(`mount ${args.join(' ')}: ${stderr}`);
}

/** Why disks can't be tried here, or null where they can. */
const noDisks = await (async () => {
  const place = await mkdtemp(join(tmpdir(), 'disk-'));
  const { status } = spawnSync('mount', ['-t', 'tmpfs', 'tmpfs', place]);
  if (status === 0) spawnSync('umount', [place]);
  await rm(place, { recursive: true });
  return status === 0 ? null : 'needs the right to mount a disk in memory (root on Linux)';
})();

describe.skipIf(noDisks !== null)(`on a disk that fails${noDisks === null ? '' : `: ${noDisks}`}`, () => {
  const full = (out: string) => `${out}: the disk is full: make room and run the command again (ENOSPC)\n`;
  const locked = (out: string, code: string) =>
    `${out}: this may not be written: give yourself the right to write there, or choose another folder with --out (${code})\n`;

  test('full at any point of the filing', async () => {
    const source = await undisturbed({ only: both });
    const becomes = await treeOf(source);
    const needed = await pagesOf(source);
    const sizes = [...Array(needed + 3).keys()].slice(1).filter((pages) => pages % 9 === 0 || pages > needed - 6);
    const ends = new Set<string>();
    await twoAtATime(sizes, (pages) =>
      withDisk(pages, async (disk) => {
        const out = join(disk, 'out');
        const { status, err } = await startRefile(out, source).end;
        const isPromised = existsSync(join(out, '.staging/journal.json'));
        ends.add(status === 0 ? 'filed' : isPromised ? 'promised' : 'undone');
        if (status !== 0) {
          expect({ status, err }, `${pages} pages`).toEqual({ status: 2, err: full(out) });
          expect(await faultsOfUnfinished(out, {}, becomes), `${pages} pages`).toEqual([]);
          if (!isPromised) expect(await treeOf(disk), `${pages} pages`).toEqual({});
        }
        remount(disk, `size=${2 * needed * page}`);
        const recovery = isPromised ? 'finished' : 'nothing';
        expect(await startRefile(out, source).end, `${pages} pages`).toEqual({ ...well, out: recovery });
        await expectWhole(out, source, `${pages} pages`);
      }),
    );
    expect([...ends].sort()).toEqual(['filed', 'promised', 'undone']);
  });

  test('full in the middle of a write, at its journal, at its ledger; and full already', async () => {
    const asked = { only: labour };
    const reference = await undisturbed(asked);
    const staged = (await pagesOf(reference)) - 1;
    // The lock takes a page, then the journal one, then the ledger one.
    await twoAtATime([Math.round(staged / 2), staged + 1, staged + 2, 0], (pages) =>
      withDisk(pages || 1, async (disk) => {
        const out = join(disk, 'out');
        if (pages === 0) await writeFile(join(disk, 'taken'), Buffer.alloc(page));
        expect(await write(asked, out), `${pages} pages`).toEqual({ status: 2, out: '', err: full(out) });
        const isPromised = existsSync(join(out, '.staging/journal.json'));
        expect(isPromised).toBe(pages === staged + 2);
        if (!isPromised) expect(existsSync(out), `${pages} pages`).toBe(false);
        remount(disk, `size=${4 * staged * page}`);
        const again = await startWrite((await argsOf(asked, out)).filter((arg) => arg !== '--quiet')).end;
        expect(again.status).toBe(0);
        if (isPromised) expect(again.err).toMatch(/^a write that was interrupted has been finished\n/);
        await expectWhole(out, reference, `${pages} pages`);
      }),
    );
  });

  test('one that may only be read', async () => {
    const reference = await undisturbed({ only: labour }, { only: nights });
    await withDisk(4096, async (disk) => {
      const out = await copy(await undisturbed({ only: labour }), join(disk, 'out'));
      const before = await treeOf(disk);
      remount(disk, 'ro');
      expect(await write({ only: nights }, out)).toEqual({ status: 2, out: '', err: locked(out, 'EROFS') });
      const other = join(disk, 'new', 'out');
      expect(await write({ only: nights }, other)).toEqual({ status: 2, out: '', err: locked(other, 'EROFS') });
      expect(await treeOf(disk)).toEqual(before);
      remount(disk, 'rw');
      expect(await write({ only: nights }, out)).toEqual(well);
      await expectWhole(out, reference);
    });
  });

  /** What the files take on a disk in memory, the ledger among them. */
  async function pagesOf(archive: string): Promise<number> {
    const tree = Object.entries(await treeOf(archive)).filter(([, hash]) => hash !== 'folder');
    const sizes = await Promise.all(tree.map(async ([path]) => (await stat(join(archive, path))).size));
    return sizes.reduce((sum, size) => sum + Math.ceil(size / page), 0);
  }
});

// Ledgers -------------------------------------------------------------------------------------------------------------

describe('a ledger that was saved by a spreadsheet', () => {
  const later = { only: labour, date: '2026-10-06' };
  const rowsOf = (ledger: string): string[][] => parse(ledger, { bom: true, record_delimiter: ['\r\n', '\n'] });
  const quoted = (ledger: string, separator: string): string[] =>
    rowsOf(ledger).map((row) => row.map((cell) => `"${cell.replaceAll('"', '""')}"`).join(separator));

  test('with the same cells: the chain goes on, whether or not its last line was ended', async () => {
    const reference = await undisturbed({ only: labour }, { only: nights }, later);
    await twoAtATime(['\r\n', ''], async (end) => {
      const out = await copy(await undisturbed({ only: labour }));
      await edit(join(out, 'ledger.csv'), (text) => `\uFEFF${quoted(text, ',').join('\r\n')}${end}`);
      const saved = await readFile(join(out, 'ledger.csv'), 'utf8');
      for (const asked of [{ only: nights }, later]) expect(await write(asked, out)).toEqual(well);
      const [ledger, expected] = await Promise.all(
        [out, reference].map((archive) => readFile(join(archive, 'ledger.csv'), 'utf8')),
      );
      expect(ledger.startsWith(saved)).toBe(true);
      expect(rowsOf(ledger)).toEqual(rowsOf(expected));
      expect(differences(await treeOf(out), await treeOf(reference))).toEqual(['ledger.csv differs']);
      expect(await faultsOf(out)).toEqual([]);
    });
  });

  const putBack =
    'Put back what was changed (seasonbrief recheck tells), or the whole file from a copy, and run this again\n';
  const gone = 'Put its newest copy back, or move the files of these briefs away and write them again\n';
  const broken = (line: number) =>
    `ledger.csv:${line} does not follow from line ${line - 1}: one of them was changed, or a row between them was taken out. ${putBack}`;
  const last = `ledger.csv:3 does not say what ${october}/visitor-nights.json says: one of them was changed. ${putBack}`;
  /** The row with another text in the cell under this heading. */
  const withCell = (lines: string[], row: number, column: string, text: string): string[] =>
    lines.map((line, i) => {
      const at = rowsOf(lines[0])[0].indexOf(column);
      const cells = rowsOf(line)[0];
      return i === row ? cells.map((cell, j) => `"${j === at ? text : cell}"`).join(',') : line;
    });

  const refused: readonly [string, (lines: string[]) => string[] | null, string | RegExp][] = [
    [
      'semicolons',
      (lines) => rowsOf(lines.join('\n')).map((row) => row.join(';')),
      /^ledger\.csv:1 begins with "date;series;.*" where "date,series,.*" belongs\. Put the file back as seasonbrief wrote it \(a spreadsheet may have saved it with other separators\)\n$/,
    ],
    [
      'semicolons and quotes',
      (lines) => quoted(lines.join('\n'), ';'),
      /^ledger\.csv can't be read as CSV: .* at line 1.* Put the file back as seasonbrief wrote it \(a spreadsheet may have saved it with other separators\)\n$/,
    ],
    ['a changed cell', (lines) => withCell(lines, 1, 'expected', '5000'), broken(3)],
    ['a changed cell in the last row', (lines) => withCell(lines, 2, 'expected', '1,700'), last],
    ['another record in the last row', (lines) => withCell(lines, 2, 'record_sha256', '0'.repeat(64)), last],
    [
      'dates as a spreadsheet shows them',
      (lines) => lines.map((line) => line.replace(october, '05/10/2026')),
      broken(3),
    ],
    ['sorted rows', ([heading, ...rows]) => [heading, ...rows.reverse()], broken(2)],
    [
      'a row taken out',
      ([heading, , second]) => [heading, second],
      `ledger.csv has no row for what is filed: ${october}/workshop-labour. ${gone}`,
    ],
    [
      'the last row taken out',
      (lines) => lines.slice(0, 2),
      `ledger.csv has no row for what is filed: ${october}/visitor-nights. ${gone}`,
    ],
    [
      'no ledger',
      () => null,
      `ledger.csv is not there, though these are filed: ${october}/visitor-nights, ${october}/workshop-labour. ${gone}`,
    ],
  ];

  test('other cells, or other rows: refused, and nothing is written', async () => {
    const filed = await undisturbed({ only: labour }, { only: nights });
    const source = await undisturbed(later);
    await twoAtATime(refused, async ([what, change, message], i) => {
      const out = await copy(filed);
      const ledger = join(out, 'ledger.csv');
      const text = await readFile(ledger, 'utf8');
      const changed = change(text.trimEnd().split('\n'));
      if (changed === null) await rm(ledger);
      else await writeFile(ledger, `${changed.join('\n')}\n`);
      const before = await treeOf(out);
      const { status, err } = await (i % 2 === 0 && i < 3 ? write(later, out) : startRefile(out, source).end);
      expect(status, what).toBe(2);
      if (typeof message === 'string') expect(err, what).toBe(message);
      else expect(err, what).toMatch(message);
      expect(await treeOf(out), what).toEqual(before);
      if (i > 0) return;
      await writeFile(ledger, text);
      expect(await write(later, out)).toEqual(well);
      await expectWhole(out, await undisturbed({ only: labour }, { only: nights }, later));
    });
  });

  test('a brief whose files were lost is written again, and has its row already', async () => {
    const out = await copy(await undisturbed({ only: labour }));
    await rm(join(out, october), { recursive: true });
    expect(await startRefile(out, await undisturbed({ only: labour })).end).toEqual({ ...well, out: 'nothing' });
    await expectWhole(out, await undisturbed({ only: labour }));
  });
});

// Places --------------------------------------------------------------------------------------------------------------

test('whatever the folder is called, wherever it is and whatever the clock says: the same bytes, PDFs among them', async () => {
  const far = join(home, 'Pläne für Bücher & Söhne', 'åben (2026) #1');
  const plan = join(far, 'plän.yaml');
  await mkdir(far, { recursive: true });
  await cp(join(root, 'templates/starter/plan.yaml'), plan);
  await cp(join(root, 'templates/starter/figures.csv'), join(far, 'figures.csv'));
  const [real, link] = [fresh(), fresh()];
  await mkdir(real);
  await symlink(real, link);
  const ends = await Promise.all([
    startWrite([plan, '--quiet', ...labour], { TZ: 'Pacific/Kiritimati', LC_ALL: 'tr_TR.UTF-8' }).end,
    startWrite([await planOf({ only: labour }), '--out', link, '--quiet', ...labour], { TZ: 'America/Adak' }).end,
  ]);
  expect(ends).toEqual([well, well]);
  expect((await stat(join(real, october, 'workshop-labour.pdf'))).isFile()).toBe(true);
  await expectWhole(join(far, 'out'), real);
  for (const name of ['cover.pdf', 'workshop-labour.pdf']) await rm(join(real, october, name));
  await expectWhole(real, await undisturbed({ only: labour }));
});
