/** The starter's PDFs before outside eyes: qpdf finds nothing wrong, and four pages stay under 400 kB. Needs `qpdf`. */
import { execFile } from 'node:child_process';
import { mkdtemp, readdir, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterAll, beforeAll, expect, test } from 'vitest';

const run = promisify(execFile);
const root = fileURLToPath(new URL('../..', import.meta.url));
let out = '';
let folder = '';
beforeAll(async () => {
  out = await mkdtemp(join(tmpdir(), 'seasonbrief-proof-'));
  const plan = join(root, 'templates/starter/plan.yaml');
  await run('node', [join(root, 'dist/cli.js'), 'write', plan, '--out', out, '--quiet']);
  folder = join(out, '2026-10-05');
});
afterAll(() => rm(out, { recursive: true, force: true }));

test('every PDF is whole, small, and four pages at most', async () => {
  const files = (await readdir(folder)).filter((name) => name.endsWith('.pdf'));
  expect(files).toHaveLength(5);
  for (const name of files) {
    const path = join(folder, name);
    const { stdout } = await run('qpdf', ['--check', path]);
    expect(stdout, name).toMatch(/No syntax or stream encoding errors found/);
    const pages = await run('qpdf', ['--show-npages', path]);
    expect(Number(pages.stdout), name).toBeLessThanOrEqual(4);
    expect((await stat(path)).size, name).toBeLessThan(400_000);
  }
});
