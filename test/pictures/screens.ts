/** An HTML page as a reader sees it: whole, on a phone and on a desk, by day and by night. */
import type { Browser } from 'puppeteer';
import { fromPng, type Picture } from './png.js';

const WIDTHS = [390, 1280];
const SCHEMES = ['light', 'dark'] as const;

/** Pictures by width and scheme, such as `390-dark`. */
export async function screensOf(browser: Browser, html: string): Promise<Map<string, Picture>> {
  const page = await browser.newPage();
  const pictures = new Map<string, Picture>();
  for (const width of WIDTHS)
    for (const scheme of SCHEMES) {
      await page.setViewport({ width, height: 900 });
      await page.emulateMediaFeatures([{ name: 'prefers-color-scheme', value: scheme }]);
      await page.setContent(html, { waitUntil: 'load' });
      await page.evaluate('document.fonts.ready.then(() => undefined)');
      const png = await page.screenshot({ fullPage: true, optimizeForSpeed: true });
      pictures.set(`${width}-${scheme}`, fromPng(png));
    }
  await page.close();
  return pictures;
}
