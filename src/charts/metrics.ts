/**
 * How wide a text is drawn, measured on the typefaces that the brief embeds, so that charts are laid out
 * without a browser and with the same result on every machine.
 */
import type { Font } from 'fontkit';
import { type Face, type Family, faceOf, openFaces, weights } from './typefaces.js';

export interface TextStyle {
  readonly family: Family;
  /** In the unit that the width comes back in. */
  readonly size: number;
  /** 400 unless given; held to the weights that the brief embeds. */
  readonly weight?: number;
  readonly italic?: boolean;
}

/** The width of a text set on one line, kerned, in the unit of `style.size`. */
export type TextWidth = (text: string, style: TextStyle) => number;

/** Opens the typefaces (once a process) and gives the measure, which itself waits for nothing. */
export const openTextWidth = async (): Promise<TextWidth> => {
  const faces = {
    serif: { upright: await openFaces('serif', false), italic: await openFaces('serif', true) },
    sans: { upright: await openFaces('sans', false), italic: await openFaces('sans', true) },
  };
  return (text, { family, size, weight = 400, italic = false }) => {
    const within = Math.min(Math.max(weight, weights.min), weights.max);
    let ems = 0;
    for (const run of runsOf(text, faces[family][italic ? 'italic' : 'upright'])) {
      // What no face holds is drawn in whatever the reader's machine has: an em is the widest of letters.
      ems += run.face ? runWidth(run.text, run.face, within) : [...run.text].length;
    }
    return ems * size;
  };
};

interface Run {
  readonly face: Face | undefined;
  readonly text: string;
}

/** A space and a hyphen that don't break; the browser draws them as their plain kin where a face lacks them. */
const standIns: Readonly<Record<string, string>> = { '\u202f': '\u2009', '\u2011': '\u2010' };

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
const runWidth = (text: string, face: Face, weight: number): number => {
  const key = `${face.name} ${weight} ${text}`;
  const known = widths.get(key);
  if (known !== undefined) return known;
  const font = weighted(face, weight);
  const width = font.layout(text).advanceWidth / font.unitsPerEm;
  widths.set(key, width);
  return width;
};

const fonts = new Map<string, Font>();

const weighted = (face: Face, weight: number): Font => {
  const key = `${face.name} ${weight}`;
  const font = fonts.get(key) ?? (face.variable ? face.font.getVariation({ wght: weight }) : face.font);
  fonts.set(key, font);
  return font;
};
