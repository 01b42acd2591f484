/**
 * The one way in which a record is written, so that equal records are equal bytes on any machine.
 *
 * UTF-8, LF, two spaces a level, a newline at the end; a list of plain values on one line; keys in the order in which
 * the object holds them, which is the schema's order for everything that a schema has read. Numbers as ECMAScript
 * writes them: the shortest digits that read back as the same double, so none of the precision is lost.
 */
import { createHash } from 'node:crypto';

/** @throws Error for a number that JSON cannot hold (NaN, infinite) or a value that it has no form for, and says where. */
export function canonicalJson(value: unknown): string {
  return `${written(value, '', '$')}\n`;
}

function written(value: unknown, indent: string, path: string): string {
  if (Array.isArray(value)) return writtenList(value, indent, path);
  if (typeof value === 'object' && value !== null) return writtenObject(value, indent, path);
  return writtenScalar(value, path);
}

function writtenScalar(value: unknown, path: string): string {
  if (typeof value === 'number' && !Number.isFinite(value))
    throw new Error(`${path} is ${value}: JSON has no such number`);
  const text = JSON.stringify(value);
  if (text === undefined) throw new Error(`${path} is ${typeof value}: JSON has no such value`);
  return text;
}

function writtenList(list: readonly unknown[], indent: string, path: string): string {
  const inner = `${indent}  `;
  const items = list.map((item, i) => written(item, inner, `${path}[${i}]`));
  if (list.every(isPlain)) return `[${items.join(', ')}]`;
  return `[\n${items.map((item) => inner + item).join(',\n')}\n${indent}]`;
}

function writtenObject(object: object, indent: string, path: string): string {
  const inner = `${indent}  `;
  const entries = Object.entries(object).filter(([, value]) => value !== undefined);
  if (entries.length === 0) return '{}';
  const lines = entries.map(
    ([key, value]) => `${inner}${JSON.stringify(key)}: ${written(value, inner, `${path}.${key}`)}`,
  );
  return `{\n${lines.join(',\n')}\n${indent}}`;
}

const isPlain = (value: unknown): boolean => typeof value !== 'object' || value === null;

/** SHA-256 (FIPS 180-4) of text in UTF-8 or of bytes, as 64 hexadecimal digits. */
export const sha256 = (content: string | Uint8Array): string => createHash('sha256').update(content).digest('hex');
