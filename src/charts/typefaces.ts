/**
 * The two typefaces of a brief and the files that hold them.
 *
 * Each face comes cut into files by script. A character is set from the first file of its family and style that
 * holds it; what neither typeface holds (arrows, signs of comparison) comes from the equations' own face.
 * The families go by names without a bare digit, which unquoted would be no valid CSS family name.
 */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { create, type Font } from 'fontkit';
import subsetFont from 'subset-font';

export type Family = 'serif' | 'sans';

/** The names by which style sheets and charts ask for the two typefaces. */
export const familyNames: Readonly<Record<Family, string>> = { serif: 'Brief Serif', sans: 'Brief Sans' };

/** The weights that a brief may use; the files hold more, which would only cost room. */
export const weights = { min: 400, max: 700 } as const;

/** One opened font file of a family and style. */
export interface Face {
  /** The file's name, which tells it from every other. */
  readonly name: string;
  readonly variable: boolean;
  /** The font unpacked (TrueType), its weight cut down to `weights`. */
  readonly data: Buffer;
  readonly font: Font;
}

const opened = new Map<string, Promise<readonly Face[]>>();

/** The files of a family and style, in the order in which they are asked for a character; opened once a process. */
export const openFaces = (family: Family, italic: boolean): Promise<readonly Face[]> => {
  const key = `${family} ${italic}`;
  const faces = opened.get(key) ?? Promise.all(filesOf(family, italic).map(openFace));
  opened.set(key, faces);
  return faces;
};

/** The face that a character is set from, or undefined where none holds it. */
export const faceOf = (character: string, faces: readonly Face[]): Face | undefined => {
  const codePoint = character.codePointAt(0) ?? 0;
  return faces.find((face) => face.font.hasGlyphForCodePoint(codePoint));
};

const filesOf = (family: Family, italic: boolean): string[] => {
  const name = { serif: 'source-serif-4', sans: 'source-sans-3' }[family];
  const scripts = ['latin', 'latin-ext', 'greek', 'cyrillic', 'cyrillic-ext', 'vietnamese'];
  const style = italic ? 'italic' : 'normal';
  return [
    ...scripts.map((script) => `@fontsource-variable/${name}/files/${name}-${script}-wght-${style}.woff2`),
    'katex/dist/fonts/KaTeX_Main-Regular.woff2',
  ];
};

const resolve = createRequire(import.meta.url).resolve;

const openFace = async (file: string): Promise<Face> => {
  const packed = await readFile(resolve(file));
  // fontkit types the result as a font or a collection; a woff2 file holds one font.
  const { characterSet, variationAxes } = create(packed) as Font;
  const variable = 'wght' in variationAxes;
  const data = await subsetFont(packed, String.fromCodePoint(...characterSet), {
    targetFormat: 'sfnt',
    ...(variable && { variationAxes: { wght: { ...weights } } }),
  });
  return { name: file.slice(file.lastIndexOf('/') + 1), variable, data, font: create(data) as Font };
};
