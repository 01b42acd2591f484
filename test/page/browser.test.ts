import { mkdir, mkdtemp, readdir, readFile, rm, stat, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { bundledBrowser, openBrowser } from '../../src/page/browser.js';

let cache: string;

beforeEach(async () => {
  cache = await mkdtemp(join(tmpdir(), 'browser-test-'));
  vi.stubEnv('XDG_CACHE_HOME', cache);
  vi.stubEnv('PUPPETEER_EXECUTABLE_PATH', undefined);
});

afterEach(async () => {
  vi.unstubAllEnvs();
  await rm(cache, { recursive: true, force: true });
});

const warn = (): void => undefined;

describe.runIf(process.platform === 'linux' && process.arch === 'x64')('the bundled browser', () => {
  test('two first starts at once both find it whole, and leave nothing else', async () => {
    const [one, other] = await Promise.all([bundledBrowser(), bundledBrowser()]);
    expect(other).toEqual(one);
    expect((await stat(one.path)).size).toBeGreaterThan(100_000_000);
    expect(await readdir(join(cache, 'seasonbrief'))).toHaveLength(1);
    expect(await readFile(one.env.FONTCONFIG_FILE, 'utf8')).toContain(cache);
  });

  test('is unpacked anew where a part of it is cut short', async () => {
    const { path } = await bundledBrowser();
    const { size } = await stat(path);
    await truncate(path, 1000);
    await bundledBrowser();
    expect((await stat(path)).size).toBe(size);
  });

  test('is unpacked anew where a folder of its name is not one of ours', async () => {
    const { path } = await bundledBrowser();
    const folder = join(path, '..');
    await rm(folder, { recursive: true });
    await mkdir(folder);
    await writeFile(path, 'half');
    await bundledBrowser();
    expect((await stat(path)).size).toBeGreaterThan(100_000_000);
  });

  test('goes to a private temporary folder where the cache cannot be written', async () => {
    await writeFile(join(cache, 'file'), '');
    vi.stubEnv('XDG_CACHE_HOME', join(cache, 'file'));
    vi.stubEnv('TMPDIR', cache);
    const { path } = await bundledBrowser();
    expect(path).toContain(join(cache, `seasonbrief-${process.getuid?.()}`));
    expect((await stat(join(path, '..', '..'))).mode & 0o777).toBe(0o700);
  });

  test('refuses a temporary folder that others can write in', async () => {
    await writeFile(join(cache, 'file'), '');
    vi.stubEnv('XDG_CACHE_HOME', join(cache, 'file'));
    vi.stubEnv('TMPDIR', cache);
    const folder = join(cache, `seasonbrief-${process.getuid?.()}`);
    await mkdir(folder, { mode: 0o755 });
    await expect(bundledBrowser()).rejects.toThrow(`"${folder}" is not a folder of this user's alone`);
  });
});

test('a path that the user gives is taken at its word', async () => {
  await expect(openBrowser({ browser: '/no/such/browser', warn })).rejects.toThrow(
    /The browser "\/no\/such\/browser" does not start: .*Check the path/s,
  );
  vi.stubEnv('PUPPETEER_EXECUTABLE_PATH', '/no/such/either');
  await expect(openBrowser({ warn })).rejects.toThrow('"/no/such/either"');
});
