/**
 * The two typefaces of a brief: the styles it is set in, and the fonts that hold them.
 *
 * The font files come cut by script, with a weight axis. Each style is taken out of the axis as a plain font: a PDF
 * can hold a plain font as it is, but draws a variable one glyph by glyph (Type 3). A character is set from the
 * first font of its style that holds it; what neither typeface holds (arrows, signs of comparison) comes from the
 * equations' own face.
 */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { create, type Font } from 'fontkit';
import subsetFont from 'subset-font';
import { madeFont } from './made-fonts.js';

export type Family = 'serif' | 'sans';

/**
 * The names by which style sheets and charts ask for the typefaces. Without a bare digit: unquoted, that would be no
 * valid CSS family name.
 */
export const familyNames: Readonly<Record<Family, string>> = { serif: 'Brief Serif', sans: 'Brief Sans' };

export interface Style {
  readonly family: Family;
  readonly weight: 400 | 600;
  readonly italic: boolean;
}

/** What a brief is set in. Other weights and slants are drawn in the nearest of these. */
export const styles: readonly Style[] = [
  { family: 'serif', weight: 400, italic: false },
  { family: 'serif', weight: 600, italic: false },
  { family: 'serif', weight: 400, italic: true },
  { family: 'sans', weight: 400, italic: false },
  { family: 'sans', weight: 600, italic: false },
];

/** The style that a browser takes: weights up to 500 are the regular one; sans italics are its upright, slanted. */
export const styleFor = (family: Family, weight: number, italic: boolean): Style => {
  const ofFamily = styles.filter((style) => style.family === family);
  const ofSlant = ofFamily.filter((style) => style.italic === italic);
  const candidates = ofSlant.length > 0 ? ofSlant : ofFamily;
  return candidates.find((style) => style.weight > 500 === weight > 500) ?? candidates[0];
};

/** One of the fonts that make up a style. */
export interface Face {
  /** Tells it from every other, and says what it holds, e.g. `latin`. */
  readonly name: string;
  readonly script: string;
  /** The font as TrueType. */
  readonly data: Buffer;
  readonly font: Font;
}

/** The face that a character is set from, or undefined where none holds it. */
export const faceOf = (character: string, faces: readonly Face[]): Face | undefined => {
  const codePoint = character.codePointAt(0) ?? 0;
  return faces.find((face) => face.font.hasGlyphForCodePoint(codePoint));
};

/** The fonts of a style, in the order in which they are asked for a character; opened once a process. */
export const openFaces = (style: Style): Promise<readonly Face[]> => {
  const faces = opened.get(style) ?? Promise.all(scripts.map((script) => openFace(style, script)));
  opened.set(style, faces);
  return faces;
};

const opened = new Map<Style, Promise<readonly Face[]>>();

const signs = 'signs';
const scripts = ['latin', 'latin-ext', 'greek', 'cyrillic', 'cyrillic-ext', 'vietnamese', signs];

const openFace = async (style: Style, script: string): Promise<Face> => {
  const { family, weight, italic } = style;
  const name = `${family} ${weight} ${italic ? 'italic' : 'upright'} ${script}`;
  const data = (await madeFont(`${name}.ttf`)) ?? (await cutFace(style, script));
  return { name, script, data, font: openFont(data) };
};

const cutFace = async (style: Style, script: string): Promise<Buffer> => {
  const packed = await readFile(
    resolve(script === signs ? 'katex/dist/fonts/KaTeX_Main-Regular.woff2' : fileOf(style, script)),
  );
  const characters = String.fromCodePoint(...openFont(packed).characterSet);
  return subsetFont(packed, characters, {
    targetFormat: 'sfnt',
    ...(script !== signs && { variationAxes: { wght: style.weight } }),
  });
};

const resolve = createRequire(import.meta.url).resolve;

const fileOf = ({ family, italic }: Style, script: string): string => {
  const name = { serif: 'source-serif-4', sans: 'source-sans-3' }[family];
  return `@fontsource-variable/${name}/files/${name}-${script}-wght-${italic ? 'italic' : 'normal'}.woff2`;
};

/** fontkit types what it opens as a font or a collection of fonts; these files hold one font each. */
const openFont = (data: Buffer): Font => create(data) as Font;
