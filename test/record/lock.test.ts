import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { releaseLock, takeLock } from '../../src/record/lock.js';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'lock-'));
});
afterEach(() => rm(folder, { recursive: true }));

const leaveLock = (holder: object) => writeFile(join(folder, '.lock'), `${JSON.stringify(holder)}\n`);

test('a second writer is refused until the first lets go', async () => {
  const lock = await takeLock(folder);
  await expect(takeLock(folder)).rejects.toThrow(`process ${process.pid}`);
  await releaseLock(lock);
  await releaseLock(await takeLock(folder));
  expect(await readdir(folder)).toEqual([]);
});

test('of many that ask at once one gets it', async () => {
  const asked = await Promise.allSettled(Array.from({ length: 20 }, () => takeLock(folder)));
  expect(asked.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
});

test('the lock of a dead process is taken over', async () => {
  const dead = spawnSync(process.execPath, ['-e', '']).pid;
  await leaveLock({ pid: dead, host: hostname(), began: '1' });
  await takeLock(folder);
  expect(JSON.parse(await readFile(join(folder, '.lock'), 'utf8')).pid).toBe(process.pid);
  expect(await readdir(folder)).toEqual(['.lock']);
});

test('the lock of an earlier process whose number this one was given is taken over', async () => {
  await leaveLock({ pid: process.pid, host: hostname(), began: '1' });
  await takeLock(folder);
});

test('the lock of a living process holds, unless its number was given out again', async () => {
  const living = spawn(process.execPath, ['-e', 'setInterval(() => 0, 1e6)']);
  await once(living, 'spawn');
  try {
    const stat = await readFile(`/proc/${living.pid}/stat`, 'utf8').catch(() => null);
    const began = stat === null ? null : (stat.split(') ')[1]?.split(' ')[19] ?? null);
    await leaveLock({ pid: living.pid, host: hostname(), began });
    await expect(takeLock(folder)).rejects.toThrow('another write is at work here');
    if (began === null) return;
    await leaveLock({ pid: living.pid, host: hostname(), began: '1' });
    await takeLock(folder);
  } finally {
    living.kill('SIGKILL');
  }
});

test('a lock from another computer holds and says how to get past it', async () => {
  await leaveLock({ pid: 1, host: 'elsewhere', began: null });
  await expect(takeLock(folder)).rejects.toThrow('if it is sure to be dead, delete this file');
});

test('a lock that was cut off while it was written is taken over', async () => {
  await writeFile(join(folder, '.lock'), '{"pid":');
  await takeLock(folder);
});
