/**
 * A YAML 1.2 document as plain data, with the place of every key and value in it.
 * Every scalar is kept as the text that was typed (`007`, `No`, `1e3`): what a value means is for the schema to say.
 */
import { isAlias, isMap, isScalar, isSeq, LineCounter, type Node, type Pair, parseDocument } from 'yaml';
import { type Fault, type Place, shown } from '../figures/input-error.js';

export type Path = readonly (string | number)[];

export interface Located {
  /** Mappings as objects without a prototype, sequences as arrays, scalars as text. */
  readonly value: unknown;
  /** Where a path's key or value stands; where there is none, the nearest thing around it that has a place. */
  readonly placeOf: (path: Path, on: 'key' | 'value') => Place;
  /** Duplicate keys and the like, beside which the rest can still be checked. */
  readonly faults: readonly Fault[];
}

/** More values than any plan has, and few enough to stop aliases that multiply without end. */
const mostNodes = 100_000;
/** Deeper than any plan goes. */
const mostLevels = 50;

/** Reads a document. Where it can't be read at all, gives the faults instead. */
export const readDocument = (text: string, file: string): Located | { readonly broken: readonly Fault[] } => {
  const source = text.replace(/^\uFEFF/, '');
  const lines = new LineCounter();
  // The failsafe schema of YAML 1.2 leaves every scalar the text it is.
  const document = parseDocument(source, {
    schema: 'failsafe',
    version: '1.2',
    lineCounter: lines,
    prettyErrors: false,
    uniqueKeys: false,
    logLevel: 'silent',
  });
  const placeAt = (offset: number): Place => {
    const { line, col } = lines.linePos(offset);
    return { file, line: Math.max(line, 1), column: Math.max(col, 1) };
  };

  const broken = [...document.errors, ...document.warnings].map(
    ({ code, message, pos }): Fault => ({ ...placeAt(pos[0]), message: syntaxMessage(code, message) }),
  );
  if (broken.length > 0) return { broken };

  const places = new Map<string, { readonly key: Place | null; readonly value: Place }>();
  const faults: Fault[] = [];
  let nodes = 0;

  const plain = (node: unknown, path: Path, key: Place | null, fallback: Place): unknown => {
    nodes++;
    if (nodes > mostNodes) throw new Unbounded('holds more values than a plan can have; are there aliases of aliases?');
    if (path.length > mostLevels) throw new Unbounded('is nested too deeply for a plan');
    const place = placeOfNode(node as Node | null, fallback);
    places.set(JSON.stringify(path), { key, value: place });
    if (isAlias(node)) {
      const target = node.resolve(document);
      if (!target) {
        faults.push({ ...place, message: `alias ${shown(`*${node.source}`)} has no anchor before it` });
        return undefined;
      }
      return plain(target, path, key, place);
    }
    if (isScalar(node)) return String(node.value);
    if (isSeq(node)) return node.items.map((item, i) => plain(item, [...path, i], null, place));
    if (isMap(node)) return plainMap(node.items as Pair<unknown, unknown>[], path, place);
    return undefined;
  };

  const plainMap = (items: readonly Pair<unknown, unknown>[], path: Path, fallback: Place): object => {
    const map: Record<string, unknown> = Object.create(null);
    for (const { key, value } of items) {
      const place = placeOfNode(key as Node | null, fallback);
      if (!isScalar(key)) {
        faults.push({ ...place, message: 'a key must be a plain word' });
        continue;
      }
      const name = String(key.value);
      if (name in map) {
        const first = places.get(JSON.stringify([...path, name]))?.key?.line;
        faults.push({ ...place, message: `key ${shown(name)} stands here twice (first in line ${first}); keep one` });
        continue;
      }
      map[name] = plain(value, [...path, name], place, place);
    }
    return map;
  };

  const placeOfNode = (node: Node | null, fallback: Place): Place => (node?.range ? placeAt(node.range[0]) : fallback);

  try {
    const value = plain(document.contents, [], null, placeAt(0));
    return { value, faults, placeOf: (path, on) => nearestPlace(places, path, on) };
  } catch (error) {
    if (!(error instanceof Unbounded)) throw error;
    return { broken: [{ ...placeAt(0), message: error.message }] };
  }
};

class Unbounded extends Error {}

const nearestPlace = (
  places: ReadonlyMap<string, { readonly key: Place | null; readonly value: Place }>,
  path: Path,
  on: 'key' | 'value',
): Place => {
  const found = places.get(JSON.stringify(path));
  if (found) return on === 'key' ? (found.key ?? found.value) : found.value;
  if (path.length === 0) return { file: '', line: null, column: null };
  return nearestPlace(places, path.slice(0, -1), 'key');
};

/** What the parser found, with what to do about it where that is plain. */
const syntaxMessage = (code: string, message: string): string => {
  const remedies: Readonly<Record<string, string>> = {
    TAB_AS_INDENT: 'indent with spaces',
    BLOCK_AS_IMPLICIT_KEY: 'put a text that holds ": " in quotation marks, and check the indentation',
    BAD_SCALAR_START: 'put the text in quotation marks',
    MULTIPLE_DOCS: 'a plan is one document, without a second "---"',
    TAG_RESOLVE_FAILED: 'leave the tag (the word with "!") out',
    MISSING_CHAR: 'check quotation marks, brackets and colons from here upwards',
    BAD_INDENT: 'check the indentation and the brackets from here upwards',
  };
  const remedy = remedies[code];
  // The parser's own remedy speaks of its interface, which means nothing to a planner.
  const what = code === 'MULTIPLE_DOCS' ? 'The file holds more than one document' : message.split('\n')[0];
  return `not readable as YAML: ${what}${remedy ? `; ${remedy}` : ''}`;
};
