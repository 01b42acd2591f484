/** A page in the browser, as a careful reader would test it. */
import { createRequire } from 'node:module';
import type { Page } from 'puppeteer';

const axe = createRequire(import.meta.url).resolve('axe-core/axe.min.js');

/** A page without its embedded fonts, whose letters may spell anything. */
export const withoutFonts = (html: string): string => html.replace(/base64,[\w+/=]+/g, 'base64,');

/** What axe-core finds wrong, and by how many pixels the page is wider than its window: light at 1280, dark at 390. */
export async function looked(page: Page, file: string, scheme: 'light' | 'dark') {
  await page.emulateMediaFeatures([{ name: 'prefers-color-scheme', value: scheme }]);
  await page.setViewport({ width: scheme === 'dark' ? 390 : 1280, height: 900 });
  await page.goto(`file://${file}`);
  await page.addScriptTag({ path: axe });
  const violations = await page.evaluate(async () => {
    const { axe } = globalThis as unknown as {
      axe: { run: () => Promise<{ violations: { id: string; nodes: { html: string }[] }[] }> };
    };
    const found = await axe.run();
    return found.violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html.slice(0, 200)}`);
  });
  const overflow = await page.evaluate('document.documentElement.scrollWidth - document.documentElement.clientWidth');
  return { violations, overflow: Number(overflow) };
}
