/** Rows of CSV (RFC 4180, with LF) that are safe to open in a spreadsheet. */

export type Cell = string | number | null;

/** One row with its line ending. A line break inside a cell becomes a space, so that a row is always one line. */
export const csvRow = (cells: readonly Cell[]): string => `${cells.map(csvCell).join(',')}\n`;

function csvCell(cell: Cell): string {
  const text = defused(String(cell ?? '').replace(/\s*[\r\n]+\s*/g, ' '));
  return /[",]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/**
 * A spreadsheet takes a text that begins with one of these for a formula and runs it; an apostrophe before it keeps it
 * a text (OWASP, "CSV Injection"). A real number stays as it is, minus sign and all. Doing it twice changes nothing.
 */
const defused = (text: string): string => (/^[=+\-@\t]/.test(text) && !isNumber(text) ? `'${text}` : text);

const isNumber = (text: string): boolean => /^-?\d+(\.\d+)?(e[+-]?\d+)?$/.test(text);
