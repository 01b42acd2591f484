import { readdir, readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { type Sample, samples } from './corpus.js';
import { readText, refusal, wanted } from './read-text.js';

const folder = new URL('./corpus/', import.meta.url);
const bytesOf = async ({ name, bytes }: Sample): Promise<Uint8Array> => bytes ?? readFile(new URL(name, folder));
const askedBy = ({ period, columns, long, every, decimal }: Sample) => ({
  period,
  every: every ?? null,
  decimal: decimal ?? null,
  series: long?.series ?? null,
  value: long?.value ?? null,
  wanted: columns.map(wanted),
});
const titled = (sample: Sample) => [sample.name, sample] as const;

describe('files as people keep them', () => {
  test.each(samples.filter(({ reads }) => reads !== undefined).map(titled))('%s is read', async (_, sample) => {
    const figures = await readText(await bytesOf(sample), askedBy(sample));
    const [kind, start, ...values] = sample.reads ?? [];
    sample.columns.forEach((column, i) => {
      const found = figures.get(column);
      expect({ ...found, findings: null }).toMatchObject({ every: kind, start, values: values[i] });
      expect(found?.footer?.map(({ text }) => text)).toEqual(sample.footer);
    });
  });

  test.each(samples.filter(({ refused }) => refused !== undefined).map(titled))('%s is refused', async (_, sample) => {
    expect(await refusal(await bytesOf(sample), askedBy(sample))).toMatch(sample.refused ?? /^$/);
  });

  test('every file of the corpus is one of these', async () => {
    const files = await readdir(fileURLToPath(folder));
    expect(files.filter((file) => !samples.some(({ name }) => name === file))).toEqual([]);
  });
});
