import { spawn } from 'node:child_process';
import { appendFile, cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { recheckArchive } from '../../src/commands/recheck.js';
import { recheckLines } from '../../src/commands/recheck-lines.js';
import type { RecheckOptions } from '../../src/commands/rechecked.js';
import type { WriteOptions } from '../../src/commands/work.js';
import { writeBriefs } from '../../src/commands/write.js';
import { canonicalJson, sha256 } from '../../src/record/canonical.js';

const root = fileURLToPath(new URL('../..', import.meta.url));
let folder = '';

const date = '2026-10-05';

/** The archive that is damaged: two issues, the second of which looks back; a brief of the first was replaced. */
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'recheck-'));
  await cp(join(root, 'templates/starter'), join(folder, 'plan'), { recursive: true });
  await cp(join(root, 'templates/starter'), join(folder, 'earlier'), { recursive: true });
  await edit('earlier/plan.yaml', (plan) => plan.replace('issued: 2026-10-05', 'issued: 2026-07-06'));
  await edit('earlier/figures.csv', (figures) => figures.replace(/2026-Q3.*\n?/, ''));
  await write('earlier', { only: ['Visitor nights'] });
  await edit('earlier/figures.csv', (figures) => figures.replace('2026-Q2,581,519', '2026-Q2,581,517'));
  await write('earlier', { only: ['Visitor nights'], replace: true });
  await write('plan', { only: ['Visitor nights', 'Workshop labour'] });
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function write(plan: string, options: WriteOptions): Promise<void> {
  const { failures } = await writeBriefs(join(folder, plan, 'plan.yaml'), {
    out: join(folder, 'out'),
    pdf: false,
    ...options,
  });
  expect(failures).toEqual([]);
}

interface Ended {
  readonly status: number | null;
  readonly out: string;
  readonly err: string;
}

/** The program as it is built. */
const run = (...args: string[]): Promise<Ended> =>
  new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(root, 'dist/cli.js'), ...args], { cwd: folder });
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

const read = (path: string): Promise<string> => readFile(join(folder, path), 'utf8');

/** Changes a file, and makes sure that it was changed. */
async function edit(path: string, change: (text: string) => string): Promise<void> {
  const before = await read(path);
  const after = change(before);
  expect(after, path).not.toBe(before);
  await writeFile(join(folder, path), after);
}

/** The name of a copy of the archive. */
async function copied(): Promise<string> {
  const archive = await mkdtemp(join(folder, 'copy-'));
  await cp(join(folder, 'out'), archive, { recursive: true });
  return archive.slice(folder.length + 1);
}

/** What a recheck says of a copy of the archive that was damaged; nothing where nothing is wrong. */
async function rechecked(damage: (archive: string) => Promise<void>, only: readonly string[] = []): Promise<string> {
  const archive = await copied();
  await damage(archive);
  return await told(archive, { only });
}

async function told(archive: string, options: RecheckOptions): Promise<string> {
  const result = await recheckArchive(join(folder, archive), { pdf: false, ...options });
  const lines = recheckLines(result, { onlyFaults: true });
  expect(lines.length === 0).toBe(result.agrees);
  return lines.join('\n').replaceAll(join(folder, archive), 'out');
}

describe('an archive that is as it was written', () => {
  test('agrees in every brief, what was replaced and the look back too, and is left as it is', async () => {
    const before = await contents('out');
    expect((await read(`out/${date}/visitor-nights.json`)).includes('2026-07-06/visitor-nights')).toBe(true);
    const { status, out } = await run('recheck', 'out', '--no-pdf');
    expect(out.trimEnd().split('\n')).toEqual([
      '2026-07-06/visitor-nights: agrees',
      '2026-07-06/replaced/1/visitor-nights: agrees',
      `${date}/visitor-nights: agrees`,
      `${date}/workshop-labour: agrees`,
      '2026-07-06/cover: agrees',
      '2026-07-06/replaced/1/cover: agrees',
      `${date}/cover: agrees`,
      'ledger.csv: agrees, 4 rows',
      '4 briefs: 4 agree. 3 covers: 3 agree. The ledger agrees.',
    ]);
    expect(status).toBe(0);
    expect(await contents('out')).toEqual(before);
  });

  test('though a spreadsheet saved its ledger in its own way', async () => {
    const resaved = (text: string) => `\uFEFF${text.replace(/^2026[^,]*/gm, '"$&"').replaceAll('\n', '\r\n')}`;
    expect(await rechecked((archive) => edit(`${archive}/ledger.csv`, resaved), ['workshop-labour'])).toBe('');
  });

  test('in the briefs of one series, where only they are asked for', async () => {
    const result = await recheckArchive(join(folder, 'out'), { pdf: false, only: ['Workshop labour'] });
    expect(result).toEqual({
      folder: join(folder, 'out'),
      agrees: true,
      briefs: [
        {
          path: `${date}/workshop-labour`,
          verdict: 'agrees',
          version: expect.stringMatching(/^\d+\.\d+\.\d+/),
          apart: 0,
          differences: [],
          faults: [],
          notes: [],
        },
      ],
      covers: [],
      ledger: { rows: 4, faults: [] },
    });
  });

  test('but for a write that was interrupted, which is undone first and told', async () => {
    const archive = await copied();
    await cp(join(folder, 'out', date), join(folder, archive, '.staging/2026-11-05'), { recursive: true });
    const messages: string[] = [];
    const report = { message: (text: string) => void messages.push(text), progress: () => undefined };
    expect(await told(archive, { only: ['workshop-labour'], report })).toBe('');
    expect(messages).toEqual([expect.stringMatching(/^a write that was interrupted has been undone/)]);
    expect(await readdir(join(folder, archive))).not.toContain('.staging');
  });
});

describe('records and pages that were changed', () => {
  test('a number in a record: named, with the number that was there; status 1', async () => {
    const archive = await copied();
    let was: number | undefined;
    await edit(`${archive}/${date}/workshop-labour.json`, (text) => {
      const record = JSON.parse(text) as { outlook: { periods: { expected: number }[] } };
      was = record.outlook.periods[1]?.expected;
      return text.replace(`"expected": ${was}`, '"expected": 1500');
    });
    const { status, out } = await run('recheck', archive, '--no-pdf', '--quiet', '--only', 'workshop-labour');
    expect(status).toBe(1);
    expect(out).toContain(`${archive}/${date}/workshop-labour.json is not the file that was filed`);
    expect(out).toContain(`.expected is 1500, computed again ${was} (`);
    expect(out).toContain('That is the record that was filed: the file was changed since.');
    expect(out).toMatch(/\n1 brief: 1 differs\. The ledger agrees\.\n$/);
    // Where another series is asked for, the ledger alone tells.
    const other = await told(archive, { only: ['visitor-nights'] });
    expect(other).toContain(`out/${date}/workshop-labour.json is not the file that was filed`);
    expect(other).toMatch(/\n3 briefs: 3 agree\. The ledger differs\.$/);
  });

  test('a past figure in a record that was replaced: much differs, and the pages are not held against it', async () => {
    const out = await rechecked(
      (archive) =>
        edit(`${archive}/2026-07-06/replaced/1/visitor-nights.json`, (text) => text.replace(/(, \d)(\d+\])/, '$19$2')),
      ['visitor-nights'],
    );
    expect(out).toContain('2026-07-06/replaced/1/visitor-nights: differs; its other files were not compared');
    expect(out).toMatch(/\d+ more differ, numbers by up to .*%/);
    expect(out).toMatch(/3 briefs: 2 agree, 1 differs\./);
  });

  test('a byte of a page, a table that is gone, another budget, an order list that there ought not to be', async () => {
    const out = await rechecked(async (archive) => {
      await edit(`${archive}/${date}/visitor-nights.html`, (text) => text.replace('Visitor', 'Visiter'));
      await rm(join(folder, archive, date, 'workshop-labour.csv'));
      await edit(`${archive}/${date}/budget.csv`, (text) => text.replace('income', 'spending'));
      await appendFile(join(folder, archive, '2026-07-06/orders.csv'), 'item\n');
    });
    for (const wrong of [
      `  out/${date}/visitor-nights.html is not the page that its record gives: it differs from line `,
      `  out/${date}/workshop-labour.csv is not there. Put it back from a copy, or run write with the same plan, `,
      `  out/${date}/budget.csv is not what its record gives: it differs from line 2 on. `,
      '  out/2026-07-06/orders.csv is there, and its records give no such table. Remove it.',
    ])
      expect(out).toContain(wrong);
    expect(out).toMatch(/4 briefs: 2 agree, 2 differ\. 3 covers: 1 agrees, 2 differ\. The ledger agrees\.$/);
  });

  test('a number of a cover, and a brief that it does not show', async () => {
    const out = await rechecked(async (archive) => {
      await edit(`${archive}/${date}/cover.json`, (text) => {
        const cover = JSON.parse(text) as { rows: { brief: string }[] };
        const [first] = cover.rows;
        return canonicalJson({ ...cover, rows: [first] });
      });
      await edit(`${archive}/2026-07-06/cover.json`, (text) => text.replace(/("lambda": )[\d.]+/, '$10.125'));
    });
    expect(out).toContain(`out/${date}/cover.json does not show ${date}/workshop-labour. Put it back from a copy, or`);
    expect(out).toMatch(/out\/2026-07-06\/cover\.json computed again it comes out otherwise: budget\.lambda is 0\.125/);
    expect(out).not.toContain('2026-07-06/cover.html');
  });

  test('a record of another format, and one that was cut short, are refused with the reason', async () => {
    const out = await rechecked(async (archive) => {
      await edit(`${archive}/${date}/workshop-labour.json`, (text) => text.replace('-record/1', '-record/2'));
      await edit(`${archive}/2026-07-06/visitor-nights.json`, (text) => text.slice(0, 4000));
    });
    expect(out).toContain(`${date}/workshop-labour: can't be read\n  out/${date}/workshop-labour.json says that its `);
    expect(out).toContain(
      'format is "seasonbrief-record/2", and this program reads "seasonbrief-record/1". Put it back from a copy.',
    );
    expect(out).toMatch(/2026-07-06\/visitor-nights: can't be read\n.*visitor-nights\.json is no JSON \(/);
    // What goes by the one that was cut short says so.
    expect(out).toContain(
      `${date}/visitor-nights.json looks back at 2026-07-06/visitor-nights.json, which is not there`,
    );
    expect(out).toMatch(/4 briefs: 1 agrees, 1 differs, 2 can't be read\./);
  });

  test('a record that is gone with its pages is missed, and one in the place of another told', async () => {
    const out = await rechecked(async (archive) => {
      for (const kind of ['json', 'html', 'csv']) await rm(join(folder, archive, date, `workshop-labour.${kind}`));
      await cp(join(folder, archive, date, 'visitor-nights.json'), join(folder, archive, date, 'oars.json'));
    });
    expect(out).toContain('ledger.csv:5 was written for 2026-10-05/workshop-labour.json, and that is not there');
    expect(out).toContain(`out/${date}/oars.json holds the brief ${date}/visitor-nights: it was put here.`);
  });
});

describe('records that another program or machine made', () => {
  test('numbers that are rounded otherwise agree, and how far apart they are is told', async () => {
    const archive = await copied();
    const record = await read(`${archive}/${date}/workshop-labour.json`);
    // As it would have been filed there: a likelihood 1e-12 of its size apart, and its fingerprint wherever it stands.
    const rounded = record.replace(/("logLikelihood": )(-?[\d.]+)/, (_, key, value) => `${key}${value * (1 + 1e-12)}`);
    await writeFile(join(folder, archive, date, 'workshop-labour.json'), rounded);
    for (const file of ['ledger.csv', `${date}/workshop-labour.html`])
      await edit(`${archive}/${file}`, (text) => text.replaceAll(sha256(record), sha256(rounded)));
    const result = await recheckArchive(join(folder, archive), { pdf: false, only: ['workshop-labour'] });
    const [line] = recheckLines(result, { onlyFaults: false });
    expect(result.agrees).toBe(true);
    expect(line).toMatch(/^.*: agrees; its numbers differ by at most (1|9\.\d|1\.1)e-1[23] of their size, within 1e-9/);
  });

  test('a record of another version is compared all the same, and the version named', async () => {
    const out = await rechecked(
      (archive) =>
        edit(`${archive}/${date}/workshop-labour.json`, (text) =>
          text.replace(/"version": "[^"]*"/, '"version": "0.0.1"'),
        ),
      ['workshop-labour'],
    );
    expect(out).toContain(`${date}/workshop-labour: differs; made by version 0.0.1\n`);
    expect(out).not.toContain('computed again it comes out otherwise');
  });

  test('pages made with templates of one’s own are drawn with those that were kept, or not at all', async () => {
    await cp(join(root, 'templates/starter'), join(folder, 'own'), { recursive: true });
    await mkdir(join(folder, 'own/mine'));
    await writeFile(join(folder, 'own/mine/style.css'), 'h1 { color: teal }\n');
    await edit('own/plan.yaml', (plan) => plan.replace('paper: A4', 'templates: mine\npaper: A4'));
    await write('own', { only: ['Workshop labour'], out: join(folder, 'styled') });
    expect(await told('styled', {})).toBe('');
    await rm(join(folder, 'styled/templates'), { recursive: true });
    const result = await recheckArchive(join(folder, 'styled'), { pdf: false });
    expect(result.agrees).toBe(true);
    expect(recheckLines(result, { onlyFaults: false })[0]).toBe(
      `${date}/workshop-labour: agrees; its page was not drawn again: made with templates that are no longer there`,
    );
  });
});

test.each([
  [
    'a cell',
    ([a = '', b = '', ...rest]) => [a, b.replace('Visitor', 'Ghost'), ...rest],
    /:2 was changed .*"Visitor nights"/,
  ],
  ['two rows that changed places', ([a, b, c, ...rest]) => [a, c, b, ...rest], /:\d stands in another place/],
  [
    'a row taken out',
    ([a, b, , ...rest]) => [a, b, ...rest],
    /:3 does not follow on line 2: the row of 2026-07-06\/visitor/,
  ],
  ['the last row taken out', (rows) => rows.slice(0, -1), /2026-10-05\/workshop-labour\.json has no row/],
  ['a row that is there twice', ([a, b, ...rest]) => [a, b, b, ...rest], /:3 is line 2 once more/],
  [
    'a foreign row',
    ([a, b = '', ...rest]) => [a, b, b.replaceAll('visitor', 'ghost'), ...rest],
    /:3 \(2026-07-06\/ghost-nights\) was put in later/,
  ],
] as [string, (rows: string[]) => string[], RegExp][])('in the ledger, %s', async (_, change, wrong) => {
  const changed = (text: string) => `${change(text.trimEnd().split('\n')).join('\n')}\n`;
  const out = await rechecked((archive) => edit(`${archive}/ledger.csv`, changed), ['workshop-labour']);
  expect(out).toMatch(wrong);
  expect(out).toMatch(/\n1 brief: 1 agrees\. The ledger differs\.$/);
});

describe('what a recheck refuses', () => {
  test('a folder that is not there or holds no briefs, and makes none; status 2', async () => {
    expect(await run('recheck', 'nowhere')).toMatchObject({ status: 2, err: expect.stringMatching(/no such folder/) });
    await expect(recheckArchive(join(folder, 'plan'))).rejects.toThrow(/no briefs are filed here/);
    expect(await readdir(folder)).not.toContain('nowhere');
    expect((await readdir(join(folder, 'plan'))).sort()).toEqual(['figures.csv', 'plan.yaml']);
  });

  test('a series that is not there', async () => {
    const only = ['Workshop labor'];
    await expect(recheckArchive(join(folder, 'out'), { only })).rejects.toThrow(/did you mean "Workshop labour"\?/);
  });

  test('an archive that is being written', async () => {
    const archive = await copied();
    const holder = { pid: process.pid, host: `not-${hostname()}`, began: null };
    await writeFile(join(folder, archive, '.lock'), `${JSON.stringify(holder)}\n`);
    await expect(recheckArchive(join(folder, archive))).rejects.toThrow(/is at work here/);
  });
});

test('of many briefs, which several threads draw, each is compared with its own page', async () => {
  await cp(join(root, 'templates/starter'), join(folder, 'many'), { recursive: true });
  const halls = Array.from({ length: 12 }, (_, i) => i + 10);
  const quarters = Array.from({ length: 24 }, (_, t) => `${2020 + Math.floor(t / 4)}-Q${1 + (t % 4)}`);
  const rows = quarters.map((quarter, t) => [quarter, ...halls.map((hall) => hall * (20 + ((t * t) % 7)))].join());
  await writeFile(join(folder, 'many/figures.csv'), `${['quarter', ...halls].join()}\n${rows.join('\n')}\n`);
  const series = halls.map(
    (hall) => `  - { name: Hall ${hall}, column: ${hall}, unit: hours, model: "(0,0,0)x(0,1,0)4" }`,
  );
  await edit('many/plan.yaml', (plan) => `${plan.slice(0, plan.indexOf('series:'))}series:\n${series.join('\n')}\n`);
  await write('many', { out: join(folder, 'halls') });
  for (const [to, from] of [
    ['hall-13', 'hall-14'],
    ['hall-21', 'hall-20'],
  ])
    await cp(join(folder, 'halls', date, `${from}.html`), join(folder, 'halls', date, `${to}.html`));
  const { out } = await run('recheck', 'halls', '--no-pdf', '--quiet');
  expect(out.match(/^\S+: differs$/gm)).toEqual([`${date}/hall-13: differs`, `${date}/hall-21: differs`]);
  expect(out).toMatch(/\n12 briefs: 10 agree, 2 differ\. 1 cover: 1 agrees\. The ledger agrees\.\n$/);
});

test('a PDF is printed again: it agrees, and with one byte changed it does not', async () => {
  const only = ['Workshop labour'];
  await write('plan', { only, pdf: true, out: join(folder, 'printed') });
  expect(await told('printed', { pdf: true, only })).toBe('');
  const pdf = join(folder, 'printed', date, 'workshop-labour.pdf');
  const bytes = await readFile(pdf);
  bytes[bytes.length - 10] = 0;
  await writeFile(pdf, bytes);
  expect(await told('printed', { pdf: true, only })).toContain('workshop-labour.pdf is not what its page gives');
});

async function contents(archive: string): Promise<Map<string, string>> {
  const entries = await readdir(join(folder, archive), { recursive: true, withFileTypes: true });
  const files = entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name));
  return new Map(await Promise.all(files.sort().map(async (file) => [file, await readFile(file, 'utf8')] as const)));
}
