import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { cp, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { recordSchema } from '../../src/record/record.js';

const root = fileURLToPath(new URL('../..', import.meta.url));
let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'write-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

interface Ended {
  readonly status: number | null;
  readonly out: string;
  readonly err: string;
}

const started = (...args: string[]): ChildProcess =>
  spawn(process.execPath, [join(root, 'dist/cli.js'), ...args], { cwd: folder, stdio: ['ignore', 'pipe', 'pipe'] });

const ended = (child: ChildProcess): Promise<Ended> =>
  new Promise((resolve, reject) => {
    let [out, err] = ['', ''];
    child.stdout?.on('data', (data) => {
      out += data;
    });
    child.stderr?.on('data', (data) => {
      err += data;
    });
    child.on('error', reject);
    child.on('close', (status) => resolve({ status, out, err }));
  });

const run = (...args: string[]): Promise<Ended> => ended(started(...args));

/** A copy of the starter under a name of its own, with changes to its plan. */
async function planFolder(name: string, change: (plan: string) => string = (plan) => plan): Promise<string> {
  const to = join(folder, name);
  await cp(join(root, 'templates/starter'), to, { recursive: true });
  const plan = join(to, 'plan.yaml');
  await writeFile(plan, change(await readFile(plan, 'utf8')));
  return to;
}

const dated = (place: string) => join(place, 'out', '2026-10-05');
const briefs = ['antifouling-paint', 'mooring-rope', 'visitor-nights', 'workshop-labour'];

describe('what a write does', () => {
  test('start makes a plan that write turns into briefs; a second write is no error and changes nothing', async () => {
    expect((await run('start', 'mine')).status).toBe(0);
    const args = ['write', 'mine/plan.yaml', '--no-pdf', '--only', 'Antifouling paint'];
    const first = await run(...args);
    expect(first.status).toBe(0);
    expect(first.out.split('\n')).toContain('mine/out/2026-10-05/antifouling-paint.html');
    const place = dated(join(folder, 'mine'));
    const before = await contents(place);
    expect([...before.keys()]).toEqual([
      ...['csv', 'html', 'json'].map((kind) => `antifouling-paint.${kind}`),
      ...['html', 'json'].map((kind) => `cover.${kind}`),
      'orders.csv',
    ]);
    const second = await run(...args);
    expect(second.status).toBe(0);
    expect(second.err).toMatch(/Antifouling paint: filed already and unchanged/);
    expect(await contents(place)).toEqual(before);
    expect((await run('start', 'mine')).status).toBe(2);
  });

  test('two writes in different folders give the same bytes: HTML, PDF, JSON and CSV', async () => {
    const places = await Promise.all(['one', 'two'].map((name) => planFolder(name)));
    const ends = await Promise.all(places.map((place) => run('write', join(place, 'plan.yaml'), '--quiet')));
    expect(ends.map(({ status }) => status)).toEqual([0, 0]);
    const [one, two] = await Promise.all(places.map((place) => contents(dated(place))));
    expect([...one.keys()]).toHaveLength(21);
    for (const [name, bytes] of one) expect(two.get(name)?.equals(bytes), name).toBe(true);
    for (const name of briefs) recordSchema.parse(JSON.parse(String(one.get(`${name}.json`))));

    // A file that was lost is made again; the others, and the ledger, stay as they are.
    const ledger = await readFile(join(places[0] ?? '', 'out/ledger.csv'), 'utf8');
    for (const lost of ['mooring-rope.pdf', 'visitor-nights.csv', 'workshop-labour.html'])
      await rm(join(dated(places[0] ?? ''), lost));
    expect((await run('write', join(places[0] ?? '', 'plan.yaml'), '--quiet')).status).toBe(0);
    expect(await contents(dated(places[0] ?? ''))).toEqual(one);
    expect(await readFile(join(places[0] ?? '', 'out/ledger.csv'), 'utf8')).toBe(ledger);
  });

  test('only and quiet; a later run completes the folder and the cover', async () => {
    const place = await planFolder('only');
    const plan = join(place, 'plan.yaml');
    const one = await run('write', plan, '--no-pdf', '--only', 'Mooring rope', '--quiet');
    expect(one).toEqual({ status: 0, out: '', err: '' });
    expect(await readdir(dated(place))).toEqual([
      'cover.html',
      'cover.json',
      'mooring-rope.csv',
      'mooring-rope.html',
      'mooring-rope.json',
      'orders.csv',
    ]);
    expect((await run('write', plan, '--no-pdf', '--quiet', '--only', 'Workshop labour')).status).toBe(0);
    const cover = JSON.parse(await readFile(join(dated(place), 'cover.json'), 'utf8')) as { rows: unknown[] };
    expect(cover.rows).toHaveLength(2);
    expect((await readFile(join(place, 'out/ledger.csv'), 'utf8')).trim().split('\n')).toHaveLength(3);
    expect((await run('write', plan, '--only', 'Moring rope')).err).toMatch(
      /no series "Moring rope".*did you mean "Mooring rope"/,
    );
  });

  test('changed figures are refused without --replace, and kept with it', async () => {
    const place = await planFolder('replace');
    const plan = join(place, 'plan.yaml');
    const only = ['--no-pdf', '--only', 'Antifouling paint'];
    expect((await run('write', plan, ...only, '--quiet')).status).toBe(0);
    const figures = join(place, 'figures.csv');
    await writeFile(figures, (await readFile(figures, 'utf8')).replace('2026-Q3,521', '2026-Q3,530'));
    for (const name of ['antifouling-paint.pdf', 'cover.pdf']) await writeFile(join(dated(place), name), 'old print');
    const before = await contents(dated(place));
    const refused = await run('write', plan, ...only);
    expect(refused.status).toBe(2);
    expect(refused.err).toMatch(/"Antifouling paint" has a brief of 2026-10-05 already.*changed/);
    expect(await contents(dated(place))).toEqual(before);
    expect((await run('write', plan, ...only, '--replace', '--quiet')).status).toBe(0);
    const kept = await readFile(join(dated(place), 'replaced/1/antifouling-paint.json'));
    expect(before.get('antifouling-paint.json')?.equals(kept)).toBe(true);
    // No print of the old figures stays beside the new record; it is kept with what was replaced.
    expect(await readdir(join(dated(place), 'replaced/1'))).toEqual([
      ...['csv', 'html', 'json', 'pdf'].map((kind) => `antifouling-paint.${kind}`),
      ...['html', 'json', 'pdf'].map((kind) => `cover.${kind}`),
      'orders.csv',
    ]);
    expect((await readdir(dated(place))).filter((name) => name.endsWith('.pdf'))).toEqual([]);
    expect(await readFile(join(place, 'out/ledger.csv'), 'utf8')).toMatch(/replaced\/1\/antifouling-paint\.json/);
  });

  test('a record that was damaged is refused, and replaced on request', async () => {
    const place = await planFolder('damaged');
    const plan = join(place, 'plan.yaml');
    const only = ['--no-pdf', '--only', 'Mooring rope'];
    expect((await run('write', plan, ...only, '--quiet')).status).toBe(0);
    const whole = await contents(dated(place));
    await writeFile(join(dated(place), 'mooring-rope.json'), '{}');
    const refused = await run('write', plan, ...only);
    expect(refused.status).toBe(2);
    expect(refused.err).toMatch(/"Mooring rope" has a brief .*mooring-rope\.json can't be read as a record/);
    expect((await run('write', plan, ...only, '--quiet', '--replace')).status).toBe(0);
    expect(await contents(dated(place))).toEqual(whole);
    expect(await readFile(join(dated(place), 'replaced/1/mooring-rope.json'), 'utf8')).toBe('{}');
  });

  test('a trial is marked, and stands outside the ledger', async () => {
    const place = await planFolder('trial');
    const only = ['--no-pdf', '--only', 'Mooring rope'];
    expect((await run('write', join(place, 'plan.yaml'), ...only, '--trial', '--quiet')).status).toBe(0);
    expect(await readFile(join(place, 'out/trial/mooring-rope.html'), 'utf8')).toMatch(/Trial: not filed/);
    expect(await readdir(join(place, 'out'))).toEqual(['trial']);
  });

  test('a series that fails does not keep the others from being written', async () => {
    const place = await planFolder('failing', (plan) => plan.replace(/model: advise .*/, 'model: (3,1,3)x(2,1,2)4'));
    const two = ['--only', 'Mooring rope', '--only', 'Workshop labour'];
    const result = await run('write', join(place, 'plan.yaml'), '--no-pdf', ...two);
    expect(result.status).toBe(1);
    expect(result.err).toMatch(/series "Mooring rope" failed: .*needs/);
    expect((await readdir(dated(place))).filter((name) => name.endsWith('.json'))).toEqual([
      'cover.json',
      'workshop-labour.json',
    ]);
  });
});

describe('what a write refuses', () => {
  test('a plan with five faults: all five with line and column, status 2, nothing written', async () => {
    const place = await planFolder('faults', (plan) =>
      plan
        .replace('issued: 2026-10-05 ', 'issued: 2026-13-05 ')
        .replace('paper: A4 ', 'paper: A3 ')
        .replace('model: (0,1,1)x(0,1,1)4', 'model: (0,1,1)(0,1,1)')
        .replace('unit: nights', 'units: nights')
        .replace('effect: passing', 'effect: brief'),
    );
    const result = await run('write', join('faults', 'plan.yaml'));
    expect(result.status).toBe(2);
    const lines = (await readFile(join(place, 'plan.yaml'), 'utf8')).split('\n');
    const at = (text: string) => lines.findIndex((line) => line.includes(text)) + 1;
    for (const [text, expected] of [
      ['2026-13-05', /2026-13-05/],
      ['paper: A3', /A3/],
      ['(0,1,1)(0,1,1)', /needs the season’s length|needs the season's length/],
      ['units: nights', /unit/],
      ['effect: brief', /passing/],
    ] as const) {
      const line = result.err.split('\n').find((each) => each.includes(`plan.yaml:${at(text)}:`));
      expect(line, text).toMatch(expected);
    }
    expect(await readdir(place)).toEqual(['figures.csv', 'plan.yaml']);
  });

  test('no plan, a wrong option, an archive of another firm', async () => {
    expect((await run('write', 'nowhere.yaml')).err).toMatch(/no such plan/);
    expect((await run('write', '--frobnicate')).status).toBe(2);
    const place = await planFolder('firms');
    const plan = join(place, 'plan.yaml');
    expect((await run('write', plan, '--no-pdf', '--quiet', '--only', 'Mooring rope')).status).toBe(0);
    await writeFile(
      plan,
      (await readFile(plan, 'utf8')).replace('prepared-for: Saltmarsh Boatyard', 'prepared-for: Reedbank Marina'),
    );
    const other = await run('write', plan, '--no-pdf');
    expect(other.status).toBe(2);
    expect(other.err).toMatch(/holds the briefs of "Saltmarsh Boatyard"/);
  });
});

test('killed at any moment, a write leaves no half brief, and the next one completes the work', async () => {
  const args = (place: string) => {
    const two = ['--only', 'Mooring rope', '--only', 'Workshop labour'];
    return ['write', join(place, 'plan.yaml'), '--no-pdf', '--quiet', ...two];
  };
  const reference = await planFolder('whole');
  const begun = performance.now();
  expect((await run(...args(reference))).status).toBe(0);
  const took = performance.now() - begun;
  const whole = await contents(dated(reference));

  const place = await planFolder('killed');
  const journal = join(place, 'out/.staging/journal.json');
  for (const kill of ['anywhere', 'while staging', 'at the journal'] as const) {
    const child = started(...args(place));
    const end = ended(child);
    if (kill === 'anywhere') setTimeout(() => child.kill('SIGKILL'), took * Math.random());
    else {
      const awaited = kill === 'at the journal' ? journal : join(place, 'out/.staging/2026-10-05');
      const watch = setInterval(() => existsSync(awaited) && child.kill('SIGKILL'), 1);
      await end;
      clearInterval(watch);
    }
    await end;
    // The new folder moves in as one: it is there with everything, or not at all.
    if (existsSync(dated(place))) expect(await contents(dated(place))).toEqual(whole);
  }
  expect((await run(...args(place))).status).toBe(0);
  expect(await contents(dated(place))).toEqual(whole);
  const ledgers = await Promise.all([place, reference].map((each) => readFile(join(each, 'out/ledger.csv'), 'utf8')));
  expect(ledgers[0]).toBe(ledgers[1]);
  expect((await readdir(join(place, 'out'))).sort()).toEqual(['2026-10-05', 'ledger.csv']);
});

test.each([
  ['SIGINT', 130],
  ['SIGTERM', 143],
] as const)('stopped by %s, a write ends at once and leaves everything as it was', async (signal, status) => {
  const place = await planFolder(signal);
  const child = started('write', join(place, 'plan.yaml'), '--no-pdf');
  const end = ended(child);
  child.stderr?.on('data', (text) => {
    if (String(text).includes('1 of 4')) child.kill(signal);
  });
  const { status: found, err } = await end;
  expect(found).toBe(status);
  expect(err).toMatch(/nothing was filed/);
  expect(await readdir(place)).toEqual(['figures.csv', 'plan.yaml']);
});

async function contents(place: string): Promise<Map<string, Buffer>> {
  const entries = (await readdir(place, { withFileTypes: true })).filter((entry) => entry.isFile());
  const names = entries.map(({ name }) => name).sort();
  return new Map(await Promise.all(names.map(async (name) => [name, await readFile(join(place, name))] as const)));
}
