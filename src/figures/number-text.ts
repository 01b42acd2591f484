/** One cell as a number in the making: its digits and separators, and what stands round them. */
import { tidy, withHyphens } from './tidy.js';

export type NumberText =
  | { readonly kind: 'missing' }
  | {
      readonly kind: 'number';
      readonly isNegative: boolean;
      /** Digits with points, commas, spaces and apostrophes between them, and perhaps an exponent. */
      readonly core: string;
      /** A currency's sign or code, or `%`; empty where there is none. */
      readonly mark: string;
    }
  | { readonly kind: 'other'; readonly why: string };

/** What people and spreadsheets write for a figure that is not there: in German #NV, in Italian #N/D. */
const MISSING = new Set(['', '-', '.', 'n/a', 'n.a.', 'na', '#n/a', '#nv', '#n/d']);

const missing: NumberText = { kind: 'missing' };
const other = (why: string): NumberText => ({ kind: 'other', why });

export function numberTextOf(cell: string): NumberText {
  if (/^\d+$/.test(cell)) return { kind: 'number', isNegative: false, core: cell, mark: '' };
  const text = withHyphens(tidy(cell)).replace(/[’‘ʼ`´]/g, "'");
  // The accounting formats of spreadsheets write nothing at all as a padded hyphen.
  if (isPaddedHyphen(cell, text))
    return other(
      'can be the zero of an accounting format or a figure that is missing; write 0, or leave the cell empty',
    );
  if (MISSING.has(text.toLowerCase())) return missing;
  if (/^(null|nan|none|nil)$/i.test(text))
    return other('comes from a program and may mean nothing or not known; write 0, or leave the cell empty');
  if (/^#/.test(text)) return other('is a spreadsheet’s error; mend the formula, or leave the cell empty');
  const parts = /^(?<before>[^\d]*?)(?<core>[.,]?\d(?:[\d.,' ]*\d)?)(?<power>[eE][-+]?\d{1,3})?(?<after>[^\d]*)$/.exec(
    text,
  );
  if (parts?.groups === undefined) return other(whyNot(text));
  const { before, core, power = '', after } = parts.groups;
  const round = affixes(before, after);
  // In "Fr.12" the point belongs to the currency or to the number.
  if (round === null || (/[.,]/.test(core[0]) && /\p{L}$/u.test(before))) return other(whyNot(text));
  return { kind: 'number', core: core + power.toLowerCase(), ...round };
}

const isPaddedHyphen = (cell: string, text: string): boolean =>
  (text === '-' && /\S\s{2,}$/.test(cell)) || (/^[^\d]*-$/.test(text) && isCurrency(text.slice(0, -1).trim()));

const whyNot = (text: string): string =>
  /\d/.test(text)
    ? 'is not a plain number; write it like 1234.5, without units or words'
    : 'stands where a number belongs; write a number, or leave the cell empty where the figure is missing';

/** The sign and the mark; null where what stands round the digits is neither. */
function affixes(before: string, after: string): { readonly isNegative: boolean; readonly mark: string } | null {
  if (before === '' && after === '') return { isNegative: false, mark: '' };
  const signs = `${before} ${after}`.match(/[-+()]/g)?.join('') ?? '';
  const marks = [before, after].map((affix) => affix.replace(/[-+()]/g, '').trim());
  const isOrdered = !/[+()]/.test(after.replace(')', '')) && !before.includes(')');
  if (!isOrdered || !['', '-', '+', '()'].includes(signs)) return null;
  if (marks[0] !== '' && marks[1] !== '') return null;
  const mark = marks.join('');
  if (mark !== '' && !isCurrency(mark) && !(mark === '%' && marks[1] === '%')) return null;
  return { isNegative: signs === '-' || signs === '()', mark };
}

const CODES = new Set(Intl.supportedValuesOf('currency'));
const LOCAL = new Set(['Fr.', 'SFr.', 'kr', 'kr.', 'Kč', 'zł', 'Ft']);

const isCurrency = (mark: string): boolean =>
  /^(US|A|AU|C|CA|NZ|HK|S)?\p{Sc}$/u.test(mark) || CODES.has(mark) || LOCAL.has(mark);
