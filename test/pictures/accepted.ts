/** The pictures that were accepted, one file a page. */
import { existsSync, readdirSync } from 'node:fs';
import { mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { type Difference, differenceOf } from './compare.js';
import { fromPng, type Picture, toPng } from './png.js';

const folder = fileURLToPath(new URL('accepted', import.meta.url));
const pathOf = (name: string): string => join(folder, `${name}.png`);
const acceptedPicture = async (name: string): Promise<Picture> => fromPng(await readFile(pathOf(name)));

export const acceptedNames = (): string[] =>
  existsSync(folder) ? readdirSync(folder).map((file) => file.replace(/\.png$/, '')) : [];

/** How to accept, for whoever reads of a difference. */
export const REMEDY = 'If this is meant, accept all pages as they are now: npm run pictures';

/**
 * Throws where a page looks different from its accepted picture. Both the page and what differs can then be looked at,
 * in a temporary folder that is left for that.
 */
export async function expectAccepted(name: string, now: Picture): Promise<void> {
  const before = await acceptedPicture(name);
  const difference = differenceOf(now, before);
  if (difference === null) return;
  seen ??= mkdtemp(join(tmpdir(), 'seasonbrief-pictures-'));
  const page = join(await seen, `${name}.png`);
  const differing = join(await seen, `${name}-difference.png`);
  await writeFile(page, toPng(now));
  await writeFile(differing, toPng(difference.picture));
  throw new Error(
    `${changeOf(name, difference, now, before)}\n` +
      `  accepted:   ${pathOf(name)}\n  now:        ${page}\n  difference: ${differing}\n${REMEDY}`,
  );
}

/** Accepts the pages: writes those that are new or look different and removes those that are no more. Says which. */
export async function accept(pages: ReadonlyMap<string, Picture>): Promise<string[]> {
  await mkdir(folder, { recursive: true });
  const names = acceptedNames();
  const changes: string[] = [];
  for (const [name, now] of pages) {
    const before = names.includes(name) ? await acceptedPicture(name) : null;
    const difference = before === null ? null : differenceOf(now, before);
    if (before !== null && difference === null) continue;
    await writeFile(pathOf(name), toPng(now));
    changes.push(before === null || difference === null ? `${name} is new` : changeOf(name, difference, now, before));
  }
  for (const name of names.filter((each) => !pages.has(each))) {
    await rm(pathOf(name));
    changes.push(`${name} is removed: there is no such page`);
  }
  return changes;
}

/** The folder for what differs, made once it is needed. */
let seen: Promise<string> | undefined;

function changeOf(name: string, { share }: Difference, now: Picture, before: Picture): string {
  const [is, was] = [now, before].map(({ width, height }) => `${width} × ${height}`);
  const size = is === was ? '' : `, and its size is ${is}, not ${was}`;
  return `${name} differs in ${(100 * share).toPrecision(2)}% of its pixels${size}`;
}
