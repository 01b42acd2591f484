/** Reading what may not be there, and writing that has reached the disk when it returns, so that a power cut cannot undo it behind a journal's back. */
import { mkdir, open } from 'node:fs/promises';
import { dirname } from 'node:path';
import { errorCode } from './archive-error.js';

/** Writes the whole file, makes its folder where needed, and waits until the bytes are on the disk. */
export async function writeDurably(path: string, content: string | Uint8Array): Promise<void> {
  await mkdir(dirname(path), { recursive: true });
  const file = await open(path, 'w');
  try {
    await file.writeFile(content);
    await file.sync();
  } finally {
    await file.close();
  }
}

/** Waits until the names in a folder are on the disk; a system that cannot sync folders (Windows) does it itself. */
export async function syncFolder(path: string): Promise<void> {
  try {
    const folder = await open(path, 'r');
    try {
      await folder.sync();
    } finally {
      await folder.close();
    }
  } catch (error) {
    if (!['EPERM', 'EISDIR', 'EINVAL', 'ENOTSUP'].includes(errorCode(error) ?? '')) throw error;
  }
}

/** Runs the step and gives `otherwise` where a file or folder it needs is not there. */
export async function whereThere<T, U>(step: () => Promise<T>, otherwise: U): Promise<T | U> {
  try {
    return await step();
  } catch (error) {
    if (errorCode(error) === 'ENOENT') return otherwise;
    throw error;
  }
}
