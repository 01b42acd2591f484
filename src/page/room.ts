/**
 * How page 1 shares its height: what is said leaves more or less room to the pictures, and where that does not do the
 * type is set closer. The text is measured on the embedded typefaces, so that the page is one page without a browser.
 */
import { openTextWidth } from '../charts/metrics.js';
import { plainText } from './document.js';

/** What stands on page 1, as HTML where the wording gave it. */
export interface FirstPageTexts {
  readonly masthead: readonly string[];
  readonly name: string;
  readonly answer: string;
  readonly judged: string;
  readonly order: { readonly answer: string; readonly why: string } | null;
  readonly budget: string | null;
  readonly rows: number;
  readonly reasons: readonly string[];
  readonly trust: string;
  /** The title of the track record's picture; null where there is none. */
  readonly track: string | null;
  readonly caveats: readonly string[];
}

export interface Room {
  /** The style's own class for how closely page 1 is set. */
  readonly setting: 'roomy' | 'close' | 'tight';
  /** The plot's height of the picture, in px. */
  readonly picture: number;
  readonly hasTrack: boolean;
}

/** From the most generous to the least. */
const CHOICES: readonly Room[] = [
  { setting: 'roomy', picture: 140, hasTrack: true },
  { setting: 'roomy', picture: 118, hasTrack: true },
  { setting: 'close', picture: 118, hasTrack: true },
  { setting: 'close', picture: 100, hasTrack: true },
  { setting: 'close', picture: 118, hasTrack: false },
  { setting: 'close', picture: 96, hasTrack: false },
  { setting: 'close', picture: 80, hasTrack: false },
  { setting: 'tight', picture: 80, hasTrack: false },
  { setting: 'tight', picture: 68, hasTrack: false },
];

/** The first choice that fits; the last one where none does. `below` is what the picture has under its plot, in px. */
export async function roomFor(texts: FirstPageTexts, paper: 'A4' | 'Letter', below: number): Promise<Room> {
  const linesOf = await openLines();
  const available = PAPERS[paper] - SPARE;
  const fits = (room: Room) => heightOf(texts, room, below, linesOf) <= available;
  return CHOICES.find(fits) ?? CHOICES[CHOICES.length - 1];
}

const pt = (millimetres: number): number => (millimetres * 72) / 25.4;

/** Height between the margins, and what is kept free for lines that the browser breaks otherwise. */
const PAPERS = { A4: pt(297 - 36), Letter: pt(279.4 - 36) };
const SPARE = 12;
/** The column on A4, the narrower paper, and half of it. */
const COLUMN = pt(174);
const HALF = pt(82.5);
/** A pixel of the pictures, which are as wide as the column. */
const PIXEL = COLUMN / 662;

/** The style's measures, in points: see `.roomy`, `.close` and `.tight` there. */
const SETTINGS = {
  roomy: { answer: [17, 23, pt(9)], text: [10, 13.5], row: 13 + pt(1.8), item: pt(1), gaps: pt(21) },
  close: { answer: [15.5, 20, pt(6)], text: [9.5, 12.5], row: 13 + pt(1), item: pt(0.4), gaps: pt(17) },
  tight: { answer: [14, 18, pt(4)], text: [9, 11.5], row: 10.5 + pt(0.8), item: pt(0.4), gaps: pt(12) },
} as const;
/** More rows than this are set as closely as can be. */
export const MANY_ROWS = 6;
const LONG_ROW = 10.5 + pt(0.8);
const HEADING = 15 + pt(1);
const DO = [12, 16] as const;

type Lines = (html: string, size: number, width: number) => number;

function heightOf(texts: FirstPageTexts, { setting, picture, hasTrack }: Room, below: number, linesOf: Lines): number {
  const { answer, text, row, item, gaps } = SETTINGS[setting];
  const [size, leading] = text;
  const said = (html: string, width: number) => linesOf(html, size, width) * leading;
  const items = (list: readonly string[], width: number) =>
    list.reduce((sum, each) => sum + said(each, width - pt(4)) + item, 0);
  const done = (html: string) => linesOf(html, DO[0], COLUMN - pt(6)) * DO[1];
  const masthead = Math.max(...texts.masthead.map((each) => linesOf(each, 8.5, COLUMN))) * 12 + 12;
  const todo =
    texts.order === null && texts.budget === null
      ? 0
      : 13 +
        pt(3) +
        (texts.order === null ? 0 : done(texts.order.answer) + said(texts.order.why, COLUMN - pt(6)) + 2) +
        (texts.budget === null ? 0 : done(texts.budget) + pt(1));
  const trust =
    HEADING +
    said(texts.trust, HALF) +
    (hasTrack && texts.track !== null ? linesOf(texts.track, 8.5, HALF) * 12 + 62 : 0);
  const tableRow = texts.rows > MANY_ROWS ? LONG_ROW : row;
  return (
    masthead +
    linesOf(texts.name, texts.name.length > 45 ? 15 : 19, COLUMN) * 23 +
    13 +
    linesOf(texts.answer, answer[0], COLUMN) * answer[1] +
    answer[2] +
    (texts.judged === '' ? 0 : linesOf(texts.judged, 9.5, COLUMN) * 13 + pt(2)) +
    todo +
    12 +
    (picture + below) * PIXEL +
    (texts.rows + 2) * tableRow +
    Math.max(HEADING + items(texts.reasons, HALF), trust) +
    HEADING +
    items(texts.caveats, COLUMN) +
    gaps
  );
}

/** How many lines a sentence takes: by its width, with a little for what a line leaves empty at its end. */
async function openLines(): Promise<Lines> {
  const width = await openTextWidth();
  return (html, size, column) =>
    Math.max(1, Math.ceil((width(plainText(html), { family: 'serif', size }) * 1.04) / column));
}
