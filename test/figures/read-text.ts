/** Reads figures from a text or bytes, as if they were a file that a plan names. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type FiguresRequest, readFigures, type SeriesFigures } from '../../src/figures/figures.js';
import { InputError } from '../../src/figures/input-error.js';

export const at = { file: 'plan.yaml', line: 1, column: 1 };

export async function readText(
  text: string | Uint8Array,
  asked: Partial<FiguresRequest> = {},
): Promise<ReadonlyMap<string, SeriesFigures>> {
  const folder = await mkdtemp(join(tmpdir(), 'figures-'));
  const file = join(folder, 'figures.csv');
  try {
    await writeFile(file, text);
    return await readFigures({
      file,
      fileTyped: 'figures.csv',
      at,
      period: 'quarter',
      periodAt: at,
      every: null,
      decimal: null,
      series: null,
      seriesAt: at,
      value: null,
      valueAt: at,
      issued: '2026-10-05',
      yearStarts: 1,
      wanted: [wanted('paint')],
      ...asked,
    });
  } finally {
    await rm(folder, { recursive: true });
  }
}

/** A series by its column's name, which is its slug too. */
export const wanted = (column: string): FiguresRequest['wanted'][number] => ({
  slug: column,
  name: column,
  column,
  columnAt: at,
});

/** The message of the refusal. */
export async function refusal(text: string | Uint8Array, asked: Partial<FiguresRequest> = {}): Promise<string> {
  try {
    await readText(text, asked);
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error('was not refused');
}
