import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import puppeteer from 'puppeteer';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { writeBriefs } from '../../src/commands/write.js';
import { bundledBrowser } from '../../src/page/browser.js';
import { type BriefRecord, recordSchema } from '../../src/record/record.js';
import { openR, type R } from '../reference/r.js';
import { looked } from './looked-at.js';

const starter = fileURLToPath(new URL('../../templates/starter/plan.yaml', import.meta.url));
const STARTER = ['antifouling-paint', 'visitor-nights', 'mooring-rope', 'workshop-labour'];
/** R's own quarterly series, each with a model, a scale and how many decimal places it has. */
const OF_R = [
  ['UKgas', '(0,1,1)x(0,1,1)4', 'log', 1],
  ['JohnsonJohnson', '(1,0,0)x(0,1,1)4', 'box-cox 0.3', 2],
  ['presidents', '(1,0,0)x(1,0,0)4', 'plain', 0],
] as const;

let folder = '';
let r: R;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'reading-'));
  r = await openR();
  await writeBriefs(starter, { out: join(folder, 'starter') });
  for (const [name, model, scale, places] of OF_R) {
    const values = await r.numbers(`as.numeric(${name})`);
    const start = await r.numbers(`start(${name})`);
    const first = start[0] * 4 + start[1] - 1;
    const rows = values.map(
      (value, t) => `${Math.floor((first + t) / 4)}-Q${((first + t) % 4) + 1},${Number.isNaN(value) ? '' : value}`,
    );
    await writeFile(join(folder, `${name}.csv`), `quarter,value\n${rows.join('\n')}\n`);
    const plan = `heading: R's own series\nprepared-for: Nobody\nissued: 1995-01-15\npaper: Letter\nfigures:\n  file: ${name}.csv\n  period: quarter\n  every: quarter\nseries:\n  - name: ${name}\n    column: value\n    unit: units\n    places: ${places}\n    model: ${model}\n    scale: ${scale}\n`;
    await writeFile(join(folder, `${name}.yaml`), plan);
    await writeBriefs(join(folder, `${name}.yaml`), { out: join(folder, name) });
  }
}, 120_000);
afterAll(async () => {
  await r.close();
  await rm(folder, { recursive: true, force: true });
});

const made = [
  ...STARTER.map((slug) => [slug, () => join(folder, 'starter/2026-10-05', slug)] as const),
  ...OF_R.map(([name]) => [name, () => join(folder, name, '1995-01-15', name.toLowerCase())] as const),
];

describe.each(made)('%s', (_, path) => {
  test('the worked sum, read back from the PDF, adds up to the printed forecast to its last digit', async () => {
    const { equation } = await recordAt(path());
    const { workedSum } = equation;
    const lines = await linesOf(`${path()}.pdf`);
    const from = lines.findIndex((line) => line.startsWith('The sum, worked'));
    const table = lines.slice(from).filter((line) => !/^(What Known|Each line|The sum is)/.test(line));
    const numbers = (line: string) =>
      (line.match(/−?[\d,]+(?:\.\d+)?$/)?.[0] ?? '').replaceAll(',', '').replace('−', '-');
    const columns = table.slice(1, 60).map((line) => ({ line, last: numbers(line) }));
    const totalAt = columns.findIndex(({ line }) => /^(Forecast for|Change z expected)/.test(line));
    const products = columns
      .slice(0, totalAt)
      .filter(({ line }) =>
        /^(Change|Surprise|Constant|Effect|Rounding|From before|What holding|\w+[\s–]*\w* \d{4})/.test(line),
      );
    expect(products).toHaveLength(workedSum.terms.length);
    const scaled = (text: string) => Math.round(Number(text) * 10 ** workedSum.decimals.product);
    const sum = products.reduce((total, { last }) => total + scaled(last), 0);
    expect(sum).toBe(scaled(columns[totalAt].last));
    for (const { line } of products) {
      const row = line.match(/(−?[\d,]+(?:\.\d+)?) (−?[\d,]+(?:\.\d+)?) (−?[\d,]+(?:\.\d+)?)$/);
      if (row === null) continue;
      const [known, weight, product] = row.slice(1).map((text) => Number(text.replaceAll(',', '').replace('−', '-')));
      expect(Math.abs(known * weight - product), line).toBeLessThanOrEqual(
        0.5000001 * 10 ** -workedSum.decimals.product,
      );
    }
    const result =
      workedSum.back.length === 0
        ? columns[totalAt]
        : columns.find(({ line }, i) => i > totalAt && line.startsWith('Forecast for'));
    expect(Number(result?.last)).toBe(workedSum.expected);
  });

  test('back from the log scale, the printed lines multiply to the middle and lead on to the forecast', async () => {
    const { equation } = await recordAt(path());
    const { back, unit } = equation.workedSum;
    if (unit !== 'log-hundredths') return;
    const product = back.reduce((value, line) => (line.power === null ? value : value * line.value ** line.power), 1);
    const [middle, rest, expected] = ['middle', 'to-expected', 'expected'].map((kind) =>
      back.find((line) => line.kind === kind),
    );
    expect(middle?.value).toBeCloseTo(product, (middle?.decimals ?? 0) - 0.01);
    expect((middle?.value ?? 0) + (rest?.value ?? 0)).toBeCloseTo(expected?.value ?? Number.NaN, 9);
  });

  test('every number in page 1’s table is the record’s, rounded by its rule, and the column adds up', async () => {
    const { printed, outlook, plan, series } = await recordAt(path());
    const text = (await linesOf(`${path()}.pdf`)).join('\n');
    const shown = (value: number, places: number) =>
      new Intl.NumberFormat(plan.locale, { minimumFractionDigits: places, maximumFractionDigits: places })
        .format(value)
        .replace('-', '−');
    printed.periods.forEach((row, h) => {
      expect(text).toContain(shown(row.expected, printed.places));
      expect(text).toContain(`${shown(row.range80[0], printed.places)} and ${shown(row.range80[1], printed.places)}`);
      // Rounded to the plan's places first, so that the worked sum's last line rounds on to the same number.
      const most = 0.5 * printed.step + 0.5 * 10 ** -series.places;
      expect(Math.abs(row.expected - outlook.periods[h].expected)).toBeLessThanOrEqual(most * 1.0000001);
    });
    const sum = printed.periods.reduce((total, row) => total + row.expected, 0);
    expect(printed.total.expected).toBeCloseTo(sum, 9);
    expect(text).toContain(shown(printed.answer.expected, printed.answer.places));
  });
});

test('axe-core finds nothing on briefs and cover, which ask for nothing over the network and stay under 300 kB', async () => {
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
    for (const scheme of ['light', 'dark'] as const) {
      for (const file of [...made.map(([, at]) => `${at()}.html`), join(dirname(made[0][1]()), 'cover.html')]) {
        expect((await readFile(file)).length).toBeLessThan(300_000);
        const { violations, overflow } = await looked(page, file, scheme);
        expect(violations, `${file} (${scheme})`).toEqual([]);
        expect(overflow, `${file} at ${scheme}`).toBeLessThanOrEqual(0);
      }
    }
    expect(asked).toEqual([]);
  } finally {
    await browser.close();
  }
}, 120_000);

async function recordAt(path: string): Promise<BriefRecord> {
  return recordSchema.parse(JSON.parse(await readFile(`${path}.json`, 'utf8')));
}

/** The PDF's text by lines: pieces at the same height, from left to right. */
async function linesOf(path: string): Promise<string[]> {
  const task = getDocument({ data: new Uint8Array(await readFile(path)), verbosity: 0 });
  const pdf = await task.promise;
  const lines: string[] = [];
  for (let number = 1; number <= pdf.numPages; number++) {
    const { items } = await (await pdf.getPage(number)).getTextContent();
    const rows = new Map<number, { x: number; text: string }[]>();
    for (const item of items) {
      if (!('str' in item) || item.str.trim() === '') continue;
      const y = Math.round(item.transform[5] / 2);
      rows.set(y, [...(rows.get(y) ?? []), { x: item.transform[4], text: item.str.trim() }]);
    }
    for (const [, row] of [...rows].sort(([a], [b]) => b - a))
      lines.push(
        row
          .sort((a, b) => a.x - b.x)
          .map(({ text }) => text)
          .join(' '),
      );
  }
  await task.destroy();
  return lines;
}
