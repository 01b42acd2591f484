/** How many pages, on both papers, and that nothing is wider than the paper, however odd the names and numbers. */
import { cp, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import type { Browser } from 'puppeteer';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { writeBriefs } from '../../src/commands/write.js';
import { openBrowser } from '../../src/page/browser.js';
import { createGenerator } from '../../src/stats/generator.js';
import { withoutFonts } from './looked-at.js';

const starter = fileURLToPath(new URL('../../templates/starter', import.meta.url));
let folder: string;
let browser: Browser;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pages-'));
  browser = await openBrowser({ warn: () => undefined });
});
afterAll(async () => {
  await browser.close();
  await rm(folder, { recursive: true, force: true });
});

/** The text of each page. */
async function pagesOf(pdf: string): Promise<string[]> {
  const loading = getDocument({ data: new Uint8Array(await readFile(pdf)), verbosity: 0 });
  const document = await loading.promise;
  const pages: string[] = [];
  for (let number = 1; number <= document.numPages; number++) {
    const { items } = await (await document.getPage(number)).getTextContent();
    pages.push(items.map((item) => ('str' in item ? item.str : '')).join(' '));
  }
  await loading.destroy();
  return pages;
}

/** Elements that reach beyond the paper's column; a browser would shrink the whole brief for one of them. */
async function tooWide(html: string, paper: 'A4' | 'Letter'): Promise<string[]> {
  const page = await browser.newPage();
  const column = Math.floor(((paper === 'A4' ? 210 : 215.9) - 36) * (96 / 25.4));
  await page.setViewport({ width: column, height: 900 });
  await page.emulateMediaType('print');
  await page.goto(pathToFileURL(html).href);
  const found = await page.evaluate(`[...document.querySelectorAll('main *')]
    .filter((each) => !each.closest('svg') && each.getBoundingClientRect().right > ${column + 1})
    .map((each) => each.tagName + ': ' + each.textContent.trim().slice(0, 50))`);
  await page.close();
  return found as string[];
}

async function briefsIn(plan: string): Promise<{ pdf: string[]; html: string[] }> {
  const out = join(folder, 'out', plan.replaceAll('/', '_'));
  const { failures } = await writeBriefs(plan, { out });
  expect(failures).toEqual([]);
  const dated = join(out, '2026-10-05');
  const names = (await readdir(dated)).map((name) => join(dated, name));
  const ending = (kind: string) => names.filter((name) => name.endsWith(kind));
  return { pdf: ending('.pdf'), html: ending('.html') };
}

describe.each(['A4', 'Letter'] as const)('on %s', (paper) => {
  test('every starter series takes four pages at most, its cover one, and nothing is too wide', async () => {
    const plan = join(folder, paper, 'plan.yaml');
    await cp(starter, join(folder, paper), { recursive: true });
    await writeFile(plan, (await readFile(plan, 'utf8')).replace('paper: A4 ', `paper: ${paper} `));
    const { pdf, html } = await briefsIn(plan);
    expect(pdf).toHaveLength(5);
    for (const file of pdf) {
      const pages = await pagesOf(file);
      expect(pages.length, file).toBeLessThanOrEqual(file.endsWith('cover.pdf') ? 1 : 4);
    }
    for (const file of html) expect(await tooWide(file, paper), file).toEqual([]);
  });
});

test('forty years of months, names of eighty characters, numbers from 0.001 to ten million, 36 periods ahead', async () => {
  const { normal } = createGenerator(8);
  const months = Array.from({ length: 480 }, (_, t) => {
    const index = 1986 * 12 + 9 + t;
    const season = 1 + 0.3 * Math.sin((2 * Math.PI * t) / 12);
    const tiny = (0.004 * season * (1 + 0.05 * normal())).toFixed(4);
    const huge = Math.round(8e6 * season * (1 + t / 480) * (1 + 0.05 * normal()));
    return `${Math.floor(index / 12)}-${String((index % 12) + 1).padStart(2, '0')},${tiny},${huge}`;
  });
  const place = join(folder, 'odd');
  await cp(starter, place, { recursive: true });
  await writeFile(join(place, 'figures.csv'), `month,tiny,huge\n${months.join('\n')}\n`);
  await writeFile(
    join(place, 'plan.yaml'),
    `heading: Stores outlook for the whole of the harbour and its three outlying pontoons
prepared-for: Saltmarsh Boatyard and Chandlery of the Upper Estuary, with Moorings Ltd
issued: 2026-10-05
currency: JPY
ahead: 36
figures: { file: figures.csv, period: month, every: month }
series:
  - name: Polyurethane sealant for below-waterline joints, white, in cartridges of 300 ml
    column: huge
    unit: cartridges of 300 ml
    model: (0,1,1)x(0,1,1)12
    purchase: { covers: 6, arrives: 2, unit-cost: 30000, unit-price: 41000, leftover-value: 100, in-stock: 9000000, pack: 500 }
    budget: { price: 41000, paid-after: 2 }
    judgement: [{ what: The upper estuary is dredged, from: 2027-01, change: +3%, because: The port has said so }]
  - name: Copper flake additive
    column: tiny
    unit: tonnes
    places: 4
    model: (0,1,1)x(0,1,1)12
    scale: log
    budget: { cost: 0.03 }
`,
  );
  const { pdf, html } = await briefsIn(join(place, 'plan.yaml'));
  for (const file of html) expect(await tooWide(file, 'A4'), file).toEqual([]);
  // A row for each of 36 months, in the annex and for each kind of money on the cover, takes what it takes; page 1 is one.
  for (const file of pdf.filter((each) => !each.endsWith('cover.pdf'))) {
    const pages = await pagesOf(file);
    expect(pages.length, file).toBeLessThanOrEqual(10);
    expect(pages[1]).toMatch(/The decision/);
  }
  for (const file of html) expect(withoutFonts(await readFile(file, 'utf8'))).not.toMatch(/NaN|undefined|Infinity/);
});
