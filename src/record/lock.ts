/**
 * One writer at a time in an archive: a file `.lock` that names the process at work.
 *
 * The lock of a process that is gone is taken over. Whether it is gone can only be told on the same computer; a
 * process number that was given out again is told from the old one by when its process began, where the system says.
 */
import { randomUUID } from 'node:crypto';
import { open, readFile, rename, unlink } from 'node:fs/promises';
import { hostname } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { ArchiveError, errorCode } from './archive-error.js';
import { sha256 } from './canonical.js';
import { whereThere } from './disk.js';

export interface Lock {
  readonly file: string;
}

interface Holder {
  readonly pid: number;
  readonly host: string;
  /** What the system says about when the process began, in its own units; null where it says nothing. */
  readonly began: string | null;
  /** Of this run of the program alone. */
  readonly run?: unknown;
}

const run = randomUUID();

/** @throws ArchiveError naming the other process while it is at work. */
export async function takeLock(folder: string): Promise<Lock> {
  const file = join(folder, '.lock');
  await take(file);
  return { file };
}

export async function releaseLock(lock: Lock): Promise<void> {
  await whereThere(() => unlink(lock.file), undefined);
}

async function take(file: string): Promise<void> {
  while (!(await createLock(file))) {
    const found = await settledText(file);
    if (found === null) continue;
    const holder = holderOf(found);
    if (holder !== null && (await isAtWork(holder))) throw busy(file, holder);
    if (await takeOver(file, found)) return;
  }
}

/**
 * Puts a lock of this process in the place of a stale one; false where another writer came first. Only who holds the
 * lock on the succession to this very lock may replace it, so that of many who find it stale one does.
 */
async function takeOver(file: string, stale: string): Promise<boolean> {
  const succession = `${file}-${sha256(stale).slice(0, 16)}`;
  await take(succession);
  if ((await settledText(file)) === stale) {
    await rename(succession, file);
    return true;
  }
  await unlink(succession);
  return false;
}

/** Creates the lock unless it is there: the one step that the file system promises to give to one writer only. */
async function createLock(file: string): Promise<boolean> {
  try {
    const created = await open(file, 'wx');
    try {
      const holder: Holder = { pid: process.pid, host: hostname(), began: await beganOf(process.pid), run };
      await created.writeFile(`${JSON.stringify(holder)}\n`);
    } catch (error) {
      await unlink(file);
      throw error;
    } finally {
      await created.close();
    }
    return true;
  } catch (error) {
    if (errorCode(error) === 'EEXIST') return false;
    throw error;
  }
}

/** The lock's text, or null once it is gone. A lock that was just created is given time to be filled in. */
async function settledText(file: string): Promise<string | null> {
  for (let attempt = 1; ; attempt++) {
    const text = await whereThere(() => readFile(file, 'utf8'), null);
    if (text === null || text.endsWith('\n') || attempt === 20) return text;
    await pause(50);
  }
}

function holderOf(text: string): Holder | null {
  try {
    const holder: unknown = JSON.parse(text);
    return isHolder(holder) ? holder : null;
  } catch {
    return null;
  }
}

const isHolder = (value: unknown): value is Holder =>
  typeof value === 'object' &&
  value !== null &&
  'pid' in value &&
  Number.isInteger(value.pid) &&
  'host' in value &&
  typeof value.host === 'string' &&
  'began' in value &&
  (value.began === null || typeof value.began === 'string');

async function isAtWork(holder: Holder): Promise<boolean> {
  if (holder.host !== hostname() || holder.run === run) return true;
  if (!isAlive(holder.pid)) return false;
  const began = await beganOf(holder.pid);
  // Where the system does not say, this process at least knows that it is not the one of another run.
  return began === holder.began && (began !== null || holder.pid !== process.pid);
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return errorCode(error) === 'EPERM';
  }
}

/** Field 22 of Linux's /proc/PID/stat, the start time in clock ticks since boot (proc(5)); null on other systems. */
async function beganOf(pid: number): Promise<string | null> {
  try {
    const stat = await readFile(`/proc/${pid}/stat`, 'utf8');
    // The second field, the program's name in brackets, may itself hold spaces and brackets.
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? null;
  } catch {
    return null;
  }
}

const busy = (file: string, holder: Holder): ArchiveError =>
  new ArchiveError(
    holder.host === hostname()
      ? `${file}: another write is at work here (process ${holder.pid}): wait until it has ended and run the command again`
      : `${file}: a write on the computer "${holder.host}" (process ${holder.pid}) is at work here: wait until it has ended; if it is sure to be dead, delete this file`,
  );
