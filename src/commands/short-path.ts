import { relative } from 'node:path';

/** A path as the user would type it from where she stands, where that is shorter. */
export function shortPath(path: string): string {
  const short = relative(process.cwd(), path);
  return short !== '' && short.length < path.length ? short : path;
}
