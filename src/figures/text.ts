/** A file's bytes as text: UTF-8, with or without a byte-order mark. */
import { InputError } from './input-error.js';

/** Throws an InputError that names what the bytes look like and how to save them instead. */
export function textOf(bytes: Uint8Array, file: string): string {
  const refuse = (message: string) => new InputError([{ file, line: null, column: null, message }]);
  const starts = (...first: number[]) => first.every((byte, i) => bytes[i] === byte);
  if (starts(0x50, 0x4b, 3, 4)) throw refuse('this is a spreadsheet or a zip file; save the sheet as CSV (UTF-8)');
  if (starts(0xd0, 0xcf, 0x11, 0xe0)) throw refuse('this is an old spreadsheet file; save the sheet as CSV (UTF-8)');
  if (starts(0xff, 0xfe) || starts(0xfe, 0xff)) throw refuse('the text is in UTF-16; save it as CSV in UTF-8');
  if (bytes.subarray(0, 1000).includes(0)) throw refuse('this is not a text file; save the figures as CSV (UTF-8)');
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw refuse(
      `the text is not in UTF-8 (byte ${firstBadByte(bytes)} is the first that is not); save it as CSV in UTF-8`,
    );
  }
}

/** Counted from 1: the first byte that no UTF-8 text has there. */
function firstBadByte(bytes: Uint8Array): number {
  let [good, bad] = [0, bytes.length];
  while (bad - good > 1) {
    const middle = (good + bad) >> 1;
    try {
      new TextDecoder('utf-8', { fatal: true }).decode(bytes.subarray(0, middle), { stream: true });
      good = middle;
    } catch {
      bad = middle;
    }
  }
  return bad;
}
