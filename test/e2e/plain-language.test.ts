/** Page 1's prose is plain: Flesch, "A new readability yardstick", Journal of Applied Psychology 32 (1948). */
import { execFile } from 'node:child_process';
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { flesch } from 'flesch';
import { syllable } from 'syllable';
import { afterAll, beforeAll, expect, test } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
let out = '';
beforeAll(async () => {
  out = await mkdtemp(join(tmpdir(), 'seasonbrief-plain-'));
  const plan = join(root, 'templates/starter/plan.yaml');
  await promisify(execFile)('node', [join(root, 'dist/cli.js'), 'write', plan, '--out', out, '--no-pdf', '--quiet']);
});
afterAll(() => rm(out, { recursive: true, force: true }));

/** The prose of page 1: the answer, the list items, the paragraphs; not its tables and charts. */
function proseOf(html: string): string[] {
  const [, first] = html.split('<article');
  return [...first.matchAll(/<(li|p)(?: class="(?:answer|do|judged)")?>(.*?)<\/\1>/gs)]
    .map(([, , text]) => text.replace(/<[^>]+>/g, '').trim())
    .filter((text) => text.includes(' '));
}

test.each(['antifouling-paint', 'visitor-nights', 'mooring-rope', 'workshop-labour'])(
  'page 1 of %s reads easily: at least 60, which is plain English',
  async (slug) => {
    const prose = proseOf(await readFile(join(out, '2026-10-05', `${slug}.html`), 'utf8'));
    const sentences = prose.flatMap((text) => text.split(/(?<=[.!?”])\s+(?=[A-Z“\d])/));
    const words = prose.join(' ').match(/[\p{L}\d][\p{L}\d’',.%–-]*/gu) ?? [];
    // A number read aloud has about three syllables.
    const syllables = words.reduce((sum, word) => sum + (/\p{L}/u.test(word) ? syllable(word) : 3), 0);
    expect(words.length).toBeGreaterThan(80);
    expect(flesch({ sentence: sentences.length, word: words.length, syllable: syllables })).toBeGreaterThan(60);
  },
);

test.each(['antifouling-paint', 'visitor-nights', 'mooring-rope', 'workshop-labour'])(
  'page 1 of %s keeps the trade’s words and slips of the pen out',
  async (slug) => {
    const prose = proseOf(await readFile(join(out, '2026-10-05', `${slug}.html`), 'utf8')).join('\n');
    expect(prose).not.toMatch(
      /significan|confidence|p-value|residual|stationar|undefined|NaN|null|-0\b|\b1 (quarters|years)/i,
    );
    expect(prose).not.toMatch(/ {2}|\s[.;:]/);
  },
);
