/** All that is filed in an archive, folder by folder: what `recheck` goes through. */
import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Archive, FiledRecord } from './archive.js';
import { sha256 } from './canonical.js';
import { whereThere } from './disk.js';
import { recordSchema } from './record.js';

/** A dated folder, or a folder in it that keeps what was replaced. */
export interface Place {
  readonly date: string;
  /** Which of the folders for what was replaced, from 1 on; null for the dated folder itself. */
  readonly replaced: number | null;
  /** Below the archive: `2026-10-05`, `2026-10-05/replaced/1`. */
  readonly path: string;
  /** The files in it. */
  readonly names: ReadonlySet<string>;
}

/** A brief as it stands in its folder. */
export interface FoundBrief {
  readonly place: Place;
  readonly slug: string;
  /** Below the archive, without the ending: `2026-10-05/replaced/1/mooring-rope`. */
  readonly path: string;
  readonly content: FiledRecord | DamagedRecord;
}

export interface DamagedRecord {
  /** What is wrong with the file. */
  readonly damage: string;
  /** Of the file as it is. */
  readonly sha256: string;
}

/** The dated folders, the oldest first, each followed by those that keep what was replaced in it. */
export async function filedPlaces({ folder }: Archive): Promise<Place[]> {
  const dates = (await readdir(folder)).filter((name) => /^\d{4}-\d{2}-\d{2}$/.test(name)).sort();
  const places = dates.map(async (date) => {
    const found = await whereThere(() => readdir(join(folder, date, 'replaced')), []);
    const numbers = found.filter((name) => /^[1-9]\d*$/.test(name)).map(Number);
    return [null, ...numbers.sort((a, b) => a - b)].map(async (replaced): Promise<Place> => {
      const path = replaced === null ? date : `${date}/replaced/${replaced}`;
      const entries = await readdir(join(folder, path), { withFileTypes: true });
      const names = new Set(entries.filter((entry) => entry.isFile()).map(({ name }) => name));
      return { date, replaced, path, names };
    });
  });
  return await Promise.all((await Promise.all(places)).flat());
}

/** Every record in a place. A page whose record is gone is found through the ledger, which names all of them. */
export async function briefsIn({ folder }: Archive, place: Place): Promise<FoundBrief[]> {
  const slugs = [...place.names]
    .filter((name) => name.endsWith('.json') && name !== 'cover.json')
    .map((name) => name.slice(0, -'.json'.length))
    .sort();
  return await Promise.all(
    slugs.map(async (slug) => {
      const path = `${place.path}/${slug}`;
      return { place, slug, path, content: readRecord(await readFile(join(folder, `${path}.json`))) };
    }),
  );
}

function readRecord(bytes: Uint8Array): FiledRecord | DamagedRecord {
  const fingerprint = sha256(bytes);
  const found = readDocument(bytes, 'seasonbrief-record/1', (value) => recordSchema.safeParse(value));
  return 'damage' in found ? { ...found, sha256: fingerprint } : { record: found.data, sha256: fingerprint };
}

/** What zod says of a value. */
type Parsed<T> =
  | { readonly success: true; readonly data: T }
  | {
      readonly success: false;
      readonly error: {
        readonly issues: readonly { readonly path: readonly PropertyKey[]; readonly message: string }[];
      };
    };

/**
 * A record or a cover from its file, also as it stands there; or what is wrong with the file: another format is never
 * guessed at.
 */
export function readDocument<T>(
  bytes: Uint8Array,
  format: string,
  parse: (value: unknown) => Parsed<T>,
): { readonly data: T; readonly value: unknown } | { readonly damage: string } {
  let value: unknown;
  try {
    value = JSON.parse(new TextDecoder().decode(bytes));
  } catch (error) {
    const said = error instanceof Error ? error.message : String(error);
    return { damage: `is no JSON (${said}): it was damaged or cut short` };
  }
  const found = valueAt(value, 'format');
  if (found !== format)
    return {
      damage: `says that its format is ${JSON.stringify(found) ?? 'nothing'}, and this program reads "${format}"`,
    };
  const parsed = parse(value);
  if (parsed.success) return { data: parsed.data, value };
  const [issue] = parsed.error.issues;
  const version = valueAt(valueAt(value, 'software'), 'version');
  const by = typeof version === 'string' ? `; it says that version ${version} wrote it` : '';
  return {
    damage: `can't be read as a ${format} (${issue.path.join('.')}: ${issue.message}${by})`,
  };
}

const valueAt = (value: unknown, key: string): unknown =>
  typeof value === 'object' && value !== null ? (value as Readonly<Record<string, unknown>>)[key] : undefined;
