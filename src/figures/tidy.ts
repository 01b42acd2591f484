/** Cells as a reader sees them. */

/** Zero-width and direction marks, which web pages and other programs leave in cells. */
const INVISIBLE = /[\u00ad\u200b-\u200f\u202a-\u202e\u2060-\u2069\ufeff]/g;
const PLAIN = /^[!-~]*$/;

/** Without what can't be seen, every run of spaces (no-break ones and line breaks too) one space, none at the ends. */
export const tidy = (cell: string): string =>
  PLAIN.test(cell) ? cell : cell.replace(INVISIBLE, '').replace(/\s+/g, ' ').trim();

/** Every dash and minus sign as a hyphen. */
export const withHyphens = (text: string): string => text.replace(/[\u2010-\u2015\u2212\ufe58\ufe63\uff0d]/g, '-');
