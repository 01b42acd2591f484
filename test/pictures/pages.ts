/**
 * The pages that are under test, as pictures:
 *
 *   starter's plan -> records -> HTML ─┬─ PDF -> its pages
 *                                      └─ a brief and the cover on screens
 */
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { writeBriefs } from '../../src/commands/write.js';
import { renderBrief } from '../../src/page/brief.js';
import { openBrowser } from '../../src/page/browser.js';
import { openPrinter } from '../../src/page/print.js';
import { loadTheme } from '../../src/page/theme.js';
import { type BriefRecord, recordSchema } from '../../src/record/record.js';
import { pagesOfPdf } from './pdf-pages.js';
import type { Picture } from './png.js';
import { screensOf } from './screens.js';

const starter = fileURLToPath(new URL('../../templates/starter/plan.yaml', import.meta.url));
const ON_SCREENS = 'antifouling-paint';

/** The browser that comes with the program draws the same on every machine, where another has its own ways. */
export const isDrawnAlike =
  process.platform === 'linux' && process.arch === 'x64' && !process.env.PUPPETEER_EXECUTABLE_PATH;

/** By name, such as `cover-a4-1`, `mooring-rope-letter-1` and `cover-390-dark`. */
export async function drawPages(): Promise<ReadonlyMap<string, Picture>> {
  const { records, cover } = await written();
  const pictures = new Map<string, Picture>();
  const printed = async (name: string, html: string, most?: number) => {
    const pages = await pagesOfPdf(await printer.print(html, records[0].issued), most);
    for (const [i, picture] of pages.entries()) pictures.set(`${name}-${i + 1}`, picture);
  };
  const onScreens = async (name: string, html: string) => {
    for (const [screen, picture] of await screensOf(browser, html)) pictures.set(`${name}-${screen}`, picture);
  };
  const printer = await openPrinter({ warn: () => undefined });
  const browser = await openBrowser({ warn: () => undefined });
  try {
    for (const record of records) {
      const { slug } = record.series;
      const a4 = await pageOf(record, 'A4');
      await printed(`${slug}-a4`, a4);
      await printed(`${slug}-letter`, await pageOf(record, 'Letter'), 1);
      if (slug === ON_SCREENS) await onScreens(slug, a4);
    }
    await printed('cover-a4', cover);
    await onScreens('cover', cover);
  } finally {
    await Promise.all([printer.close(), browser.close()]);
  }
  return pictures;
}

/** The records that the starter's plan leads to, and the HTML of their cover. */
async function written(): Promise<{ records: BriefRecord[]; cover: string }> {
  const folder = await mkdtemp(join(tmpdir(), 'pictured-'));
  try {
    const { files, failures } = await writeBriefs(starter, { out: folder, pdf: false });
    if (failures.length > 0) throw new Error(failures.map(({ name, message }) => `${name}: ${message}`).join('\n'));
    const [cover, ...briefs] = files;
    const recordOf = async (brief: string) =>
      recordSchema.parse(JSON.parse(await readFile(brief.replace(/html$/, 'json'), 'utf8')));
    return { records: await Promise.all(briefs.map(recordOf)), cover: await readFile(cover, 'utf8') };
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** Without what changes with every template and release: the record's fingerprint and the version. */
async function pageOf(record: BriefRecord, paper: BriefRecord['plan']['paper']): Promise<string> {
  const shown = { ...record, plan: { ...record.plan, paper }, software: { ...record.software, version: '0.0.0' } };
  return await renderBrief(shown, await loadTheme(record.plan.locale), { fingerprint: '0'.repeat(64), trial: false });
}
