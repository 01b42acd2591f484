/** The program's name and version, from its package. */
import { readFileSync } from 'node:fs';

const read = (): string => {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  const { version } = JSON.parse(text) as { version: string };
  return version;
};

export const SOFTWARE = { name: 'seasonbrief', version: read() } as const;
