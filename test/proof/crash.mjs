/**
 * Loaded before the program (`node --import`): counts what it is about to change on the disk below CRASH_UNDER, one
 * moment each, and kills the process as by a power cut at moment CRASH_AT. A write and the removal of a folder have
 * moments half way too. Without CRASH_AT the moments are counted into the file CRASH_COUNT.
 */
import fs from 'node:fs';
import { syncBuiltinESMExports } from 'node:module';
import { join, sep } from 'node:path';

const { CRASH_UNDER: under, CRASH_AT: at, CRASH_COUNT: count } = process.env;
const { promises } = fs;
const original = { ...promises };
let moments = 0;

/** The next moment; `half` does a part of what is to come before the process dies. */
async function moment(half) {
  moments++;
  if (moments !== Number(at)) return;
  await half?.();
  process.kill(process.pid, 'SIGKILL');
  await new Promise(() => undefined);
}

const isWatched = (path) => `${path}${sep}`.startsWith(`${under}${sep}`);

const watched =
  (name, ...halves) =>
  async (path, ...rest) => {
    if (isWatched(path)) {
      await moment();
      for (const half of halves) await moment(() => half(path));
    }
    return original[name](path, ...rest);
  };

/** Takes away the first half of the files below a folder, or the last. */
const halfRemoved =
  (...part) =>
  async (folder) => {
    if (!fs.existsSync(folder) || !fs.statSync(folder).isDirectory()) return;
    const entries = fs.readdirSync(folder, { recursive: true, withFileTypes: true });
    const files = entries.filter((entry) => !entry.isDirectory()).map((entry) => join(entry.parentPath, entry.name));
    for (const file of files.slice(...part.map((share) => Math.round(share * files.length)))) fs.unlinkSync(file);
  };

async function open(path, flags, ...rest) {
  const isWrite = isWatched(path) && String(flags).startsWith('w');
  if (isWrite) await moment();
  const file = await original.open(path, flags, ...rest);
  if (isWrite) {
    const writeFile = file.writeFile.bind(file);
    file.writeFile = async (content) => {
      await moment();
      await moment(() => writeFile(content.slice(0, content.length / 2)));
      return writeFile(content);
    };
  }
  return file;
}

Object.assign(promises, { open, rm: watched('rm', halfRemoved(0, 0.5), halfRemoved(0.5)) });
for (const name of ['mkdir', 'rename', 'link', 'unlink', 'rmdir']) promises[name] = watched(name);
syncBuiltinESMExports();
if (count !== undefined) process.on('exit', () => fs.writeFileSync(count, String(moments)));
