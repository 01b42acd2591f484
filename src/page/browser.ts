/**
 * The browser that prints: found, unpacked where need be, launched.
 *
 * Looked for in this order: the path the user gives, the browser that was installed with this program (Linux on
 * x64: the same bytes on every machine, and all that it needs comes with it), an installed Chrome or Chromium.
 */
import { execFile } from 'node:child_process';
import { constants } from 'node:fs';
import { access, lstat, mkdir, mkdtemp, readdir, readFile, rename, rm, stat, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { homedir, tmpdir } from 'node:os';
import { delimiter, dirname, isAbsolute, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import puppeteer, { type Browser } from 'puppeteer';

export interface BrowserRequest {
  /** Path of the browser's program; unless given, the environment's PUPPETEER_EXECUTABLE_PATH, else the search. */
  readonly browser?: string;
  /** Takes what the user should know though printing goes on. */
  readonly warn: (text: string) => void;
}

/** A browser's program and what its environment needs beside ours. */
export interface Program {
  readonly path: string;
  readonly env: Readonly<Record<string, string>>;
}

/** Launches the first browser of the search that starts; throws one error that names all that was tried. */
export const openBrowser = async ({ browser, warn }: BrowserRequest): Promise<Browser> => {
  const given = browser ?? process.env.PUPPETEER_EXECUTABLE_PATH;
  if (given) {
    return await launch({ path: given, env: {} }, warn).catch((error: unknown) => {
      throw new Error(`The browser "${given}" does not start: ${reasonOf(error)} Check the path that you gave.`);
    });
  }
  const failures: string[] = [];
  for (const find of [bundledBrowser, installedBrowser]) {
    try {
      return await launch(await find(), warn);
    } catch (error) {
      failures.push(reasonOf(error));
    }
  }
  throw new Error(
    `No browser to print PDFs with. ${failures.join(' ')} Install Chrome or Chromium, or set ` +
      'PUPPETEER_EXECUTABLE_PATH to a browser, or leave the PDFs out with --no-pdf.',
  );
};

const reasonOf = (error: unknown): string => {
  const text = (error instanceof Error ? error.message : String(error)).trim();
  return /[.!?]$/.test(text) ? text : `${text}.`;
};

// Launching -----------------------------------------------------------------------------------------------------

const launchTimeout = 30_000;

const launch = async (program: Program, warn: (text: string) => void): Promise<Browser> => {
  const start = (extra: readonly string[]): Promise<Browser> =>
    puppeteer.launch({
      executablePath: program.path,
      headless: 'shell',
      // Over a pipe the browser opens no port, and ends when this process does, however that ends.
      pipe: true,
      // Ctrl-C is for the program to answer, which must clear up first.
      handleSIGINT: false,
      handleSIGTERM: false,
      handleSIGHUP: false,
      timeout: launchTimeout,
      env: { ...process.env, ...program.env },
      args: [
        '--font-render-hinting=none',
        '--host-resolver-rules=MAP * ~NOTFOUND',
        '--no-first-run',
        '--no-pings',
        '--disable-domain-reliability',
        ...extra,
      ],
    });
  const startWithout = async (why: string): Promise<Browser> => {
    const browser = await start(['--no-sandbox']);
    warn(`The browser that prints runs without its sandbox: ${why}. It opens nothing but the brief itself.`);
    return browser;
  };
  if (process.getuid?.() === 0) return startWithout('a browser started as root can have none');
  // A browser that is denied its sandbox ends without a word over the pipe: only the second try tells.
  return await start([]).catch((error: unknown) =>
    startWithout('this system does not let it have one').catch(() => {
      throw error;
    }),
  );
};

// The bundled browser -------------------------------------------------------------------------------------------

/** The browser of the package `@sparticuz/chromium`, unpacked in the user's cache. Throws where it can't be had. */
export const bundledBrowser = async (): Promise<Program> => {
  if (process.platform !== 'linux' || process.arch !== 'x64') {
    throw new Error(`The bundled browser is for Linux on x64, and this is ${process.platform} on ${process.arch}.`);
  }
  const version = await bundledVersion();
  const failures: string[] = [];
  for (const caches of [userCache, privateTemporaryFolder]) {
    try {
      const folder = join(await caches(), `chromium-${version}`);
      if (!(await isWhole(folder))) await unpack(folder);
      const libraries = [join(folder, 'al2023', 'lib'), process.env.LD_LIBRARY_PATH].filter(Boolean).join(delimiter);
      return {
        path: join(folder, 'chromium'),
        env: { LD_LIBRARY_PATH: libraries, FONTCONFIG_FILE: join(folder, 'fonts.conf') },
      };
    } catch (error) {
      failures.push(reasonOf(error));
    }
  }
  throw new Error(`The bundled browser can't be unpacked: ${failures.join(' ')}`);
};

const bundledVersion = async (): Promise<string> => {
  const entry = createRequire(import.meta.url).resolve('@sparticuz/chromium');
  const described: { version: string } = JSON.parse(
    await readFile(join(dirname(entry), '..', '..', 'package.json'), 'utf8'),
  );
  return described.version;
};

/** The XDG Base Directory Specification: a cache stands in XDG_CACHE_HOME if that is absolute, else ~/.cache. */
const userCache = async (): Promise<string> => {
  const named = process.env.XDG_CACHE_HOME ?? '';
  const folder = join(isAbsolute(named) ? named : join(homedir(), '.cache'), 'seasonbrief');
  await mkdir(folder, { recursive: true });
  await access(folder, constants.W_OK);
  return folder;
};

/** For a user without a home to write in. Whatever stands there and could be another user's is refused. */
const privateTemporaryFolder = async (): Promise<string> => {
  const user = process.getuid?.();
  const folder = join(tmpdir(), `seasonbrief-${user}`);
  await mkdir(folder, { mode: 0o700 }).catch((error: NodeJS.ErrnoException) => {
    if (error.code !== 'EEXIST') throw error;
  });
  const found = await lstat(folder);
  if (!found.isDirectory() || found.uid !== user || (found.mode & 0o077) !== 0) {
    throw new Error(`"${folder}" is not a folder of this user's alone: remove it.`);
  }
  return folder;
};

/** Sizes of all files in an unpacked browser, by path: what `isWhole` holds the folder against. */
type Contents = Readonly<Record<string, number>>;

const contentsFile = 'contents.json';

/**
 * True where a folder holds a browser unpacked to the last byte. The folder gets its name only when it is complete,
 * but a power failure or a cleaner of temporary files may have taken parts away since.
 */
const isWhole = async (folder: string): Promise<boolean> => {
  try {
    const contents: Contents = JSON.parse(await readFile(join(folder, contentsFile), 'utf8'));
    const sizes = await Promise.all(Object.keys(contents).map(async (file) => (await stat(join(folder, file))).size));
    return Object.values(contents).every((size, i) => size === sizes[i]);
  } catch (error) {
    if (error instanceof SyntaxError || (error as NodeJS.ErrnoException).code === 'ENOENT') return false;
    throw error;
  }
};

/** Unpacks beside the folder and renames, so that two first starts at once can't meet in it. */
const unpack = async (folder: string): Promise<void> => {
  await removeAbandoned(dirname(folder));
  const staging = await mkdtemp(join(dirname(folder), unpackingPrefix));
  try {
    await unpackInto(staging);
    await writeFile(join(staging, 'fonts.conf'), fontsConfiguration(folder));
    await writeFile(join(staging, contentsFile), JSON.stringify(await contentsOf(staging)));
    await putInPlace(staging, folder);
  } finally {
    await rm(staging, { recursive: true, force: true });
  }
};

const unpackingPrefix = 'unpacking-';
const abandonedAfter = 3_600_000;

/** Clears away what starts that were killed in the middle of unpacking have left. */
const removeAbandoned = async (caches: string): Promise<void> => {
  for (const name of (await readdir(caches)).filter((each) => each.startsWith(unpackingPrefix))) {
    const path = join(caches, name);
    const age = Date.now() - (await stat(path).catch(() => ({ mtimeMs: Date.now() }))).mtimeMs;
    if (age > abandonedAfter) await rm(path, { recursive: true, force: true });
  }
};

/**
 * The package unpacks to the system's temporary folder, adds the libraries that a bare machine lacks only where it
 * believes to run in a certain cloud, and changes its process's environment; hence a process of its own.
 */
const unpackInto = async (folder: string): Promise<void> => {
  const program = "import chromium from '@sparticuz/chromium'; await chromium.executablePath();";
  await promisify(execFile)(process.execPath, ['--input-type=module', '--eval', program], {
    cwd: dirname(fileURLToPath(import.meta.url)),
    env: { ...process.env, TMPDIR: folder, AWS_LAMBDA_JS_RUNTIME: 'nodejs20.x' },
    timeout: 120_000,
  });
};

/**
 * Without a usable configuration the browser can't even use fonts that a page brings along. The machine's own fonts
 * stay out: with them the same brief would be other bytes on another machine.
 */
const fontsConfiguration = (folder: string): string => `<?xml version="1.0"?>
<!DOCTYPE fontconfig SYSTEM "fonts.dtd">
<fontconfig>
  <dir>${escapeXml(join(folder, 'fonts'))}</dir>
  <cachedir>${escapeXml(join(folder, 'fonts-cache'))}</cachedir>
</fontconfig>
`;

const escapeXml = (text: string): string => text.replace(/[&<>]/g, (sign) => `&#${sign.charCodeAt(0)};`);

const contentsOf = async (folder: string): Promise<Contents> => {
  const files = (await readdir(folder, { recursive: true, withFileTypes: true })).filter((entry) => entry.isFile());
  const paths = files.map((entry) => join(entry.parentPath, entry.name));
  const sizes = await Promise.all(paths.map(async (path) => (await stat(path)).size));
  return Object.fromEntries(paths.map((path, i) => [path.slice(folder.length + 1), sizes[i]]));
};

const putInPlace = async (staging: string, folder: string): Promise<void> => {
  const moved = await rename(staging, folder).then(
    () => true,
    () => false,
  );
  // Another start was first, or what stands there is broken.
  if (moved || (await isWhole(folder))) return;
  await rename(folder, `${staging}-broken`);
  await rm(`${staging}-broken`, { recursive: true, force: true });
  await rename(staging, folder).catch(async (error: unknown) => {
    if (!(await isWhole(folder))) throw error;
  });
};

// An installed browser ------------------------------------------------------------------------------------------

/** Chrome where its installer puts it, else Chrome or Chromium by the names that systems give them. */
const installedBrowser = async (): Promise<Program> => {
  const places = [...chromeByInstaller(), ...byName()];
  for (const path of places) {
    const runs = await access(path, constants.X_OK).then(
      () => true,
      () => false,
    );
    if (runs) return { path, env: {} };
  }
  throw new Error('Chrome or Chromium is not installed in any of the usual places.');
};

const chromeByInstaller = (): string[] => {
  try {
    return [puppeteer.executablePath('chrome')];
  } catch {
    return [];
  }
};

const byName = (): string[] => {
  if (process.platform === 'darwin') return ['/Applications/Chromium.app/Contents/MacOS/Chromium'];
  if (process.platform === 'win32') {
    const roots = [process.env.LOCALAPPDATA, process.env.PROGRAMFILES].filter((root) => root !== undefined);
    return roots.map((root) => join(root, 'Chromium', 'Application', 'chrome.exe'));
  }
  const folders = (process.env.PATH ?? '').split(delimiter).filter(isAbsolute);
  const names = ['google-chrome-stable', 'google-chrome', 'chromium', 'chromium-browser'];
  return folders.flatMap((folder) => names.map((name) => join(folder, name)));
};
