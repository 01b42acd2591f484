/**
 * How wide a text is drawn, measured on the typefaces that the brief embeds, so that charts are laid out
 * without a browser and with the same result on every machine.
 */
import { type Face, type Family, faceOf, openFaces, styleFor, styles } from './typefaces.js';

export interface TextStyle {
  readonly family: Family;
  /** In the unit that the width comes back in. */
  readonly size: number;
  /** 400 unless given. */
  readonly weight?: number;
  readonly italic?: boolean;
}

/** The width of a text set on one line, kerned, in the unit of `style.size`. */
export type TextWidth = (text: string, style: TextStyle) => number;

/** Opens the typefaces (once a process) and gives the measure, which itself waits for nothing. */
export const openTextWidth = async (): Promise<TextWidth> => {
  const faces = new Map(await Promise.all(styles.map(async (style) => [style, await openFaces(style)] as const)));
  return (text, { family, size, weight = 400, italic = false }) => {
    let ems = 0;
    for (const blank of text.match(BLANKS) ?? []) ems += blanks.get(blank) ?? 0;
    for (const run of runsOf(text.replace(BLANKS, ''), faces.get(styleFor(family, weight, italic)) ?? [])) {
      // What no face holds is drawn in whatever the reader's machine has: an em is the widest of letters.
      ems += run.face ? runWidth(run.text, run.face) : [...run.text].length;
    }
    return ems * size;
  };
};

interface Run {
  readonly face: Face | undefined;
  readonly text: string;
}

/** Blanks have no outline to measure: their widths in ems, as both families draw them. */
const blanks: ReadonlyMap<string, number> = new Map([
  ['\u2002', 0.5],
  ['\u2009', 0.2],
  ['\u202f', 0.2],
  ['\u200b', 0],
  ['\ufeff', 0],
]);
const BLANKS = /[\u2002\u2009\u202f\u200b\ufeff]/g;

/** A hyphen that doesn't break; the browser draws it as its plain kin where a face lacks it. */
const standIns: Readonly<Record<string, string>> = { '\u2011': '\u2010' };

const runsOf = (text: string, faces: readonly Face[]): Run[] => {
  const runs: Run[] = [];
  for (const written of text) {
    const character = standIns[written] ?? written;
    const face = faceOf(character, faces);
    const last = runs.at(-1);
    if (last && last.face === face) runs[runs.length - 1] = { face, text: last.text + character };
    else runs.push({ face, text: character });
  }
  return runs;
};

const widths = new Map<string, number>();

/** In ems. */
const runWidth = (text: string, face: Face): number => {
  const key = `${face.name} ${text}`;
  const width = widths.get(key) ?? face.font.layout(text).advanceWidth / face.font.unitsPerEm;
  widths.set(key, width);
  return width;
};
