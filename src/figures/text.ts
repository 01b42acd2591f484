/** A file's bytes as text: UTF-8 or UTF-16, with or without a byte-order mark, or Windows-1252. */
import iconv from 'iconv-lite';
import { InputError } from './input-error.js';

/** How many bytes say what kind of file it is. */
const LOOKED_AT = 4000;

/**
 * The text, with its byte-order mark taken off and every line break a line feed.
 * Throws an InputError that names what the bytes look like and how to save them instead.
 */
export function textOf(bytes: Uint8Array, file: string): string {
  const refuse = (what: string) =>
    new InputError([{ file, line: null, column: null, message: `${what}; save the figures as CSV in UTF-8` }]);
  const foreign = foreignKind(bytes);
  if (foreign !== null) throw refuse(foreign);
  const encoding = encodingOf(bytes);
  if (encoding === null) throw refuse('this is not a text file');
  const text = iconv.decode(Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength), encoding);
  if (encoding !== 'utf-8' && text.includes('\uFFFD')) throw refuse(`the text is broken: it is no ${encoding} text`);
  if (/^\s*<(!doctype|html|\?xml|table)\b/i.test(text.slice(0, 200))) throw refuse('this is a web page or an XML file');
  return text.replace(/\r\n?/g, '\n');
}

/** Kinds of file that carry figures but are no text, by their first bytes. */
function foreignKind(bytes: Uint8Array): string | null {
  const starts = (...first: number[]) => first.every((byte, i) => bytes[i] === byte);
  if (starts(0x50, 0x4b, 3, 4)) return 'this is a spreadsheet or a zip file';
  if (starts(0xd0, 0xcf, 0x11, 0xe0)) return 'this is an old spreadsheet file';
  if (starts(0x25, 0x50, 0x44, 0x46)) return 'this is a PDF';
  if (starts(0xff, 0xfe, 0, 0) || starts(0, 0, 0xfe, 0xff)) return 'the text is in UTF-32';
  return null;
}

/** Null where the bytes are no text. */
function encodingOf(bytes: Uint8Array): 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252' | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  const start = bytes.subarray(0, LOOKED_AT);
  // Digits and delimiters of UTF-16 have a zero in one and the same byte of their two.
  const zeros = [0, 0];
  start.forEach((byte, i) => {
    if (byte === 0) zeros[i % 2]++;
  });
  if (zeros[0] + zeros[1] > 0) {
    if (bytes.length % 2 === 1 || Math.max(...zeros) < start.length / 10) return null;
    if (zeros[0] === 0) return 'utf-16le';
    return zeros[1] === 0 ? 'utf-16be' : null;
  }
  if (start.some(isControl)) return null;
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(bytes);
    return 'utf-8';
  } catch {
    return bytes.some(isUndefined) ? null : 'windows-1252';
  }
}

/** Control characters but tab, line breaks, form feed and the end mark of old systems. */
const isControl = (byte: number): boolean => byte < 0x20 && !(byte >= 9 && byte <= 13) && byte !== 0x1a;

/** The five bytes that stand for nothing in Windows-1252. */
const isUndefined = (byte: number): boolean =>
  byte === 0x81 || byte === 0x8d || byte === 0x8f || byte === 0x90 || byte === 0x9d;
