/** The bytes of the file of past figures, no more of them than can be read in good time. */
import { readFile, stat } from 'node:fs/promises';
import { InputError, shown } from './input-error.js';
import type { FiguresRequest } from './request.js';

/** In megabytes: a hundred series over a thousand weeks take less than one. */
const MOST_MEGABYTES = 20;

export async function bytesOf({ file, fileTyped, at }: FiguresRequest): Promise<Uint8Array> {
  const refuse = (why: string, remedy: string) =>
    new InputError([{ ...at, message: `the figures' file ${shown(fileTyped)} ${why}; ${remedy}` }]);
  const path = 'give its path from the plan’s folder';
  try {
    const found = await stat(file);
    if (found.isDirectory()) throw refuse('is a folder', path);
    if (!found.isFile()) throw refuse('is not a file', path);
    if (found.size > MOST_MEGABYTES * 1e6)
      throw refuse(
        `has ${Math.ceil(found.size / 1e6)} megabytes, and ${MOST_MEGABYTES} are the most that is read`,
        'leave out the rows and columns that the plan does not need',
      );
    return await readFile(file);
  } catch (error) {
    if (error instanceof InputError) throw error;
    const code = error instanceof Error && 'code' in error ? error.code : null;
    throw refuse(code === 'ENOENT' ? 'is not there' : `can’t be read (${code})`, path);
  }
}
