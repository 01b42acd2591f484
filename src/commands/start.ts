/** `seasonbrief start`: a starter plan and figures to edit. */
import { copyFile, mkdir, readdir } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

const starter = fileURLToPath(new URL('../../templates/starter', import.meta.url));

/** Copies the starter's files and gives their paths. Throws, with nothing copied, where one is there already. */
export async function startPlan(folder: string): Promise<string[]> {
  const target = resolve(folder);
  await mkdir(target, { recursive: true });
  const there = new Set(await readdir(target));
  const names = (await readdir(starter)).sort();
  const taken = names.filter((name) => there.has(name));
  if (taken.length > 0)
    throw new Error(
      `${target} holds ${taken.join(' and ')} already; name another folder, as in: seasonbrief start my-briefs`,
    );
  for (const name of names) await copyFile(join(starter, name), join(target, name));
  return names.map((name) => join(target, name));
}
