/**
 * Fonts that the build has cut beforehand, so that no run has to: cutting takes a second, reading no time. Where they
 * are not there, whoever asks cuts them.
 */
import { mkdir, readFile, rm, writeFile } from 'node:fs/promises';

const folder = new URL('../../dist/fonts/', import.meta.url);

const placeOf = (name: string): URL => new URL(`${name.replaceAll(' ', '-')}`, folder);

export const madeFont = async (name: string): Promise<Buffer | null> => {
  try {
    return await readFile(placeOf(name));
  } catch {
    return null;
  }
};

export const keepFont = async (name: string, data: Uint8Array): Promise<void> => writeFile(placeOf(name), data);

/** Takes away what an earlier build made. */
export const clearFonts = async (): Promise<void> => {
  await rm(folder, { recursive: true, force: true });
  await mkdir(folder, { recursive: true });
};
