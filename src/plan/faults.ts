/** Turns what the schema and the rules remark on into faults that name file, line, column and series. */
import { z } from 'zod';
import { type Fault, shown } from '../figures/input-error.js';
import { suggestion } from '../figures/nearest.js';
import type { Located, Path } from './document.js';
import { planSchema } from './schema.js';

/** Something wrong at a path of the plan. The message is a whole sentence but for the name of the series. */
export interface Remark {
  readonly path: Path;
  readonly on: 'key' | 'value';
  readonly message: string;
}

/** What stands at a path, or undefined. */
export const valueAt = (value: unknown, path: Path): unknown =>
  path.reduce<unknown>((inside, part) => {
    if (Array.isArray(inside) && typeof part === 'number') return inside[part];
    if (typeof inside === 'object' && inside !== null && Object.hasOwn(inside, part))
      return (inside as Readonly<Record<string | number, unknown>>)[part];
    return undefined;
  }, value);

/** `unit-cost "abc" is no number`: the key, what stands there, and the rest of the sentence. */
export const sentence = (plan: unknown, path: Path, rest: string): string => {
  const value = valueAt(plan, path);
  const words = [keyName(path), typeof value === 'string' ? shown(value) : '', rest];
  return words.filter((word) => word !== '').join(' ');
};

/** The schema's issues as remarks. */
export const remarksOf = (plan: unknown, issues: readonly z.core.$ZodIssue[]): readonly Remark[] =>
  issues.flatMap((issue): readonly Remark[] => {
    const path = issue.path as Path;
    if (issue.code === 'unrecognized_keys')
      return issue.keys.map((key) => ({
        path: [...path, key],
        on: 'key',
        message: `unknown key ${shown(key)}${place(path)}${suggestion(key, knownKeys(path))}`,
      }));
    if (valueAt(plan, path) === undefined) {
      const meaning = schemaAt(path)?.description;
      return [{ path, on: 'value', message: `${keyName(path)} is missing${meaning ? ` (${meaning})` : ''}` }];
    }
    return [{ path, on: 'value', message: sentence(plan, path, issue.message) }];
  });

/** Remarks as faults, with the name of the series that each is about. */
export const located = (document: Located, remarks: readonly Remark[]): readonly Fault[] =>
  remarks.map(({ path, on, message }) => ({
    ...document.placeOf(path, on),
    message: `${seriesName(document.value, path)}${message}`,
  }));

/** In the order in which they stand in the file. */
export const inFileOrder = (faults: readonly Fault[]): readonly Fault[] =>
  [...faults].sort((a, b) => (a.line ?? 0) - (b.line ?? 0) || (a.column ?? 0) - (b.column ?? 0));

const seriesName = (plan: unknown, [top, number]: Path): string => {
  if (top !== 'series' || typeof number !== 'number') return '';
  const name = valueAt(plan, [top, number, 'name']);
  return typeof name === 'string' ? `series ${shown(name)}: ` : `series ${number + 1}: `;
};

/** Keys below a series are named without it, as its name stands before: `events 2: from`, `purchase.unit-cost`. */
const keyName = (path: Path): string => {
  const [top, number, ...rest] = path;
  const inside = top === 'series' && typeof number === 'number' ? rest : path;
  return inside.reduce<string>((name, part) => {
    if (typeof part === 'number') return `${name} ${part + 1}`;
    if (name === '') return part;
    return /\d$/.test(name) ? `${name}: ${part}` : `${name}.${part}`;
  }, '');
};

const place = (path: Path): string => {
  const name = keyName(path);
  return name === '' ? '' : ` in ${name}`;
};

const knownKeys = (path: Path): readonly string[] => {
  const schema = schemaAt(path);
  const inner = schema && unwrapped(schema);
  return inner instanceof z.ZodObject ? Object.keys(inner.shape) : [];
};

const schemaAt = (path: Path): z.ZodType | undefined =>
  path.reduce<z.ZodType | undefined>((schema, part) => {
    const inner = schema && unwrapped(schema);
    if (inner instanceof z.ZodArray) return inner.element as z.ZodType;
    if (inner instanceof z.ZodObject && Object.hasOwn(inner.shape, part)) return inner.shape[part] as z.ZodType;
    return undefined;
  }, planSchema);

const unwrapped = (schema: z.ZodType): z.ZodType =>
  schema instanceof z.ZodOptional || schema instanceof z.ZodDefault ? unwrapped(schema.unwrap() as z.ZodType) : schema;
