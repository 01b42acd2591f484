import { spawn } from 'node:child_process';
import { cp, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import puppeteer from 'puppeteer';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { writeChoiceSheets } from '../../src/commands/advise.js';
import { checkModel } from '../../src/commands/check-model.js';
import { bundledBrowser } from '../../src/page/browser.js';
import { parsePlan } from '../../src/plan/plan.js';
import { looked, withoutFonts } from './looked-at.js';

const root = fileURLToPath(new URL('../..', import.meta.url));
const slugs = ['antifouling-paint', 'mooring-rope', 'visitor-nights', 'workshop-labour'];
let folder = '';
/** The starter, advised on in two folders by two processes. */
let [starter, other] = ['', ''];
let result = { status: null as number | null, out: '', err: '' };
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'advise-'));
  [starter, other] = await Promise.all([planFolder('starter'), planFolder('other')]);
  [result] = await Promise.all([
    run('advise', 'starter/plan.yaml'),
    run('advise', join(other, 'plan.yaml'), '--quiet').then((quiet) =>
      expect(quiet).toEqual({ status: 0, out: '', err: '' }),
    ),
  ]);
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const run = (...args: string[]): Promise<{ status: number | null; out: string; err: string }> =>
  new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(root, 'dist/cli.js'), ...args], {
      cwd: folder,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
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

/** A copy of the starter under a name of its own, with changes to its plan and figures. */
async function planFolder(
  name: string,
  change: (plan: string) => string = (plan) => plan,
  changeFigures: (figures: string) => string = (figures) => figures,
): Promise<string> {
  const to = join(folder, name);
  await cp(join(root, 'templates/starter'), to, { recursive: true });
  for (const [file, by] of [
    ['plan.yaml', change],
    ['figures.csv', changeFigures],
  ] as const)
    await writeFile(join(to, file), by(await readFile(join(to, file), 'utf8')));
  return to;
}

const sheets = (place: string) => join(place, 'out/choice');

test('the starter: a table with a row a series, then the sheets, which stand under out/choice; nothing is filed', async () => {
  const { status, out, err } = result;
  expect(status).toBe(0);
  const [table, files] = out.trimEnd().split('\n\n');
  const [head, ...rows] = table.split('\n');
  expect(head).toMatch(/^Series +Model +Why +Missed by$/);
  const names = ['Antifouling paint', 'Visitor nights', 'Mooring rope', 'Workshop labour'];
  expect(rows.map((row) => names.find((name) => row.startsWith(`${name} `)))).toEqual(names);
  for (const row of rows) {
    expect(row).toMatch(/ \(\d,\d,\d\)x\(\d,\d,\d\)4 (plain|log)(, constant)?(, shrunk)? {2,}/);
    expect(row).toMatch(/ {2}\d+\.\d% \(last year’s figure: \d+\.\d%\)$/);
  }
  // The columns stand under their heads.
  for (const row of rows) expect(row.slice(head.indexOf('Model') - 2, head.indexOf('Model') + 1)).toBe('  (');
  expect(files.split('\n').map((file) => file.replace('starter/out/choice/', ''))).toEqual(
    ['antifouling-paint', 'visitor-nights', 'mooring-rope', 'workshop-labour'].map((slug) => `${slug}.html`),
  );
  expect(err).toMatch(/1 of 4 {2}Antifouling paint/);
  expect(await readdir(join(starter, 'out'))).toEqual(['choice']);
  expect(await readdir(sheets(starter))).toEqual(slugs.map((slug) => `${slug}.html`));
});

test('two runs in different folders give the same bytes, and a run over old sheets replaces them whole', async () => {
  const [one, two] = [starter, other].map(sheets);
  for (const slug of slugs) expect(await sheet(one, slug), slug).toBe(await sheet(two, slug));
  await writeFile(join(two, 'mooring-rope.html'), 'an old sheet');
  expect((await run('advise', join(other, 'plan.yaml'), '--quiet', '--only', 'Mooring rope')).status).toBe(0);
  expect(await readdir(two)).toEqual(slugs.map((slug) => `${slug}.html`));
  expect(await sheet(two, 'mooring-rope')).toBe(await sheet(one, 'mooring-rope'));
});

test('out and only: the sheets asked for, where they are asked for', async () => {
  const place = await planFolder('elsewhere');
  const args = ['--out', 'papers', '--only', 'Mooring rope', '--only', 'Visitor nights'];
  const { status, out } = await run('advise', join(place, 'plan.yaml'), ...args);
  expect(status).toBe(0);
  expect(out.trimEnd().split('\n').slice(-2)).toEqual([
    'papers/choice/visitor-nights.html',
    'papers/choice/mooring-rope.html',
  ]);
  expect(await readdir(join(folder, 'papers/choice'))).toEqual(['mooring-rope.html', 'visitor-nights.html']);
  expect(await readdir(place)).toEqual(['figures.csv', 'plan.yaml']);
});

test('a series with two figures fails with a message and status 1; the others are written', async () => {
  const place = await planFolder(
    'two-figures',
    (plan) => plan,
    (figures) =>
      figures
        .split('\n')
        .map((line, i) => {
          const cells = line.split(',');
          // The last two rows keep their rope.
          if (i > 0 && i < 47 && cells.length === 5) cells[3] = '';
          return cells.join(',');
        })
        .join('\n'),
  );
  const { status, out, err } = await run('advise', join(place, 'plan.yaml'));
  expect(status).toBe(1);
  expect(err).toMatch(/1 of 4 failed:\nseries "Mooring rope" failed: advice needs at least 3 figures; there are 2\n$/);
  expect(out).not.toMatch(/Mooring rope/);
  expect(await readdir(sheets(place))).toEqual(
    slugs.filter((slug) => slug !== 'mooring-rope').map((slug) => `${slug}.html`),
  );
});

test('a plan that can’t be used is refused with line and column, status 2 and nothing written', async () => {
  const place = await planFolder('faulty', (plan) =>
    plan.replace('paper: A4 ', 'paper: A3 ').replace('unit: nights', 'units: nights'),
  );
  const { status, out, err } = await run('advise', join('faulty', 'plan.yaml'));
  expect(status).toBe(2);
  expect(out).toBe('');
  expect(err).toMatch(/^faulty\/plan\.yaml:\d+:\d+ .*A3/m);
  expect(err).toMatch(/^faulty\/plan\.yaml:\d+:\d+ series "Visitor nights": unknown key "units"/m);
  expect(await readdir(place)).toEqual(['figures.csv', 'plan.yaml']);
  const unknown = await run('advise', join(await planFolder('unknown'), 'plan.yaml'), '--only', 'Moring rope');
  expect(unknown.status).toBe(2);
  expect(unknown.err).toMatch(/no series "Moring rope".*did you mean "Mooring rope"/);
});

test('what the plan gives is kept, and the lines on the sheet go back into the plan', async () => {
  const place = await planFolder('kept', (plan) =>
    plan.replace(
      /( {4}column: visitor_nights\n {4}unit: nights\n) {4}model: .*\n {4}scale: .*\n/,
      '$1    model: advise\n    fitted-by: maximum-likelihood\n    scale: box-cox 0.5\n',
    ),
  );
  const path = join(place, 'plan.yaml');
  const { advised, failures, table } = await writeChoiceSheets(path, { only: ['Visitor nights'] });
  expect(failures).toEqual([]);
  expect(table).toHaveLength(2);
  const [{ model, file }] = advised;
  expect(model).toMatchObject({ scale: 'box-cox 0.5', fittedBy: 'maximum-likelihood' });
  const lines = (await readFile(file, 'utf8')).match(/<pre[^>]*>\n?([^<]*)<\/pre>/)?.[1] ?? '';
  const text = (await readFile(path, 'utf8')).replace(
    / {4}model: advise\n {4}fitted-by: maximum-likelihood\n {4}scale: box-cox 0\.5/,
    lines,
  );
  const { series } = parsePlan(text, path, checkModel);
  const { form, scale, constant, fittedBy } = model;
  expect(series.find(({ name }) => name === 'Visitor nights')).toMatchObject({
    model: form,
    scale,
    constant,
    fittedBy,
  });
});

test('axe-core finds nothing on the sheets, which ask for nothing over the network and stay under 300 kB', async () => {
  const { path, env } = await bundledBrowser();
  const browser = await puppeteer.launch({
    executablePath: path,
    env: { ...process.env, ...env },
    headless: 'shell',
    args: ['--no-sandbox', '--host-resolver-rules=MAP * ~NOTFOUND'],
  });
  try {
    const page = await browser.newPage();
    const asked: string[] = [];
    page.on('request', (request) => {
      if (!/^(file|data|about):/.test(request.url())) asked.push(request.url());
    });
    for (const slug of slugs) {
      const file = join(sheets(starter), `${slug}.html`);
      const html = await readFile(file, 'utf8');
      expect(Buffer.byteLength(html)).toBeLessThan(300_000);
      expect(withoutFonts(html)).not.toMatch(/(?:src|href)="(?!data:)|url\((?!["']?data:)|@import|NaN|undefined/);
      for (const scheme of ['light', 'dark'] as const) {
        const { violations, overflow } = await looked(page, file, scheme);
        expect(violations, `${slug} (${scheme})`).toEqual([]);
        expect(overflow, `${slug} at ${scheme}`).toBeLessThanOrEqual(0);
      }
    }
    expect(asked).toEqual([]);
  } finally {
    await browser.close();
  }
});

const sheet = (place: string, slug: string): Promise<string> => readFile(join(place, `${slug}.html`), 'utf8');
