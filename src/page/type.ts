/**
 * The type that a document embeds: each font cut down to the characters that the document uses.
 *
 * The cuts are shared by documents: the Latin fonts come in two sizes only, plain and whole, so that of hundreds of
 * briefs nearly all embed the same data, which is made once a process.
 */
import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { create, type Font } from 'fontkit';
import subsetFont from 'subset-font';
import { madeFont } from '../charts/made-fonts.js';
import { type Face, faceOf, familyNames, openFaces, type Style, styles } from '../charts/typefaces.js';

/**
 * All @font-face rules of a document: the brief's two families (slanted only where it has emphasis, <em> or <i>), and the equations' faces where it has equations.
 * The document's text must stand in it as it is or as numeric references; a named one beyond XML's throws.
 */
export const typeFor = async (html: string): Promise<string> => {
  const characters = charactersOf(html);
  const slanted = /<(?:em|i)\b/.test(html);
  const used = styles.filter(({ italic }) => slanted || !italic);
  const rules = await Promise.all(used.map((style) => styleRules(style, characters)));
  return [...rules.flat(), ...(await equationRules(html))].join('\n');
};

/** The characters of a document's text that some style lacks, which are left to whatever fonts the machine has. */
export const uncovered = async (html: string): Promise<string[]> => {
  const text = equationsOf(html).reduce((rest, equation) => rest.replace(equation, ''), html);
  // Lowered digits are in the one font that the bundled browser brings along, and in any system's.
  const drawn = charactersOf(text).filter((character) => !/[\p{C}\p{Z}\p{M}₀-₉]/u.test(character));
  const each = await Promise.all(styles.map(openFaces));
  return drawn.filter((character) =>
    each.some((faces) => faceOf(standIns.get(character) ?? character, faces) === undefined),
  );
};

/** The style sheet of the equations, without its faces, which `typeFor` embeds. */
export const equationStyle = async (): Promise<string> => (await equationSheet()).replace(faceRule, '');

// Characters ----------------------------------------------------------------------------------------------------

/** All characters of a document, markup included, in order of their code points. */
const charactersOf = (html: string): string[] => {
  const named = html.match(/&(?!(?:amp|lt|gt|quot|apos|nbsp);)[a-z]\w*;/i);
  if (named) throw new Error(`The page has "${named[0]}": write the character itself.`);
  const references = [...html.matchAll(/&#(?:x([\da-f]+)|(\d+));/gi)].map(([, hex, decimal]) =>
    String.fromCodePoint(decimal ? Number(decimal) : Number.parseInt(hex, 16)),
  );
  return [...new Set([...references, ...html])].sort(byCodePoint);
};

const codePointOf = (character: string): number => character.codePointAt(0) ?? 0;

const byCodePoint = (a: string, b: string): number => codePointOf(a) - codePointOf(b);

/** A space and a hyphen that don't break: the browser makes them of the plain kin in the same face. */
const standIns: ReadonlyMap<string, string> = new Map([
  ['\u202f', ' '],
  ['\u2011', '\u2010'],
]);

// The brief's families ------------------------------------------------------------------------------------------

const styleRules = async (style: Style, characters: readonly string[]): Promise<string[]> => {
  const faces = await openFaces(style);
  const used = new Map<Face, string[]>();
  for (const character of characters) {
    const face = faceOf(standIns.get(character) ?? character, faces);
    if (face) used.set(face, [...(used.get(face) ?? []), character]);
  }
  return await Promise.all(
    [...used].map(async ([face, own]) => {
      const set = face.script === 'latin' ? latinSet(face, own) : plainOr(own, face.script);
      return fontFaceRule({
        family: familyNames[style.family],
        style: style.italic ? 'italic' : 'normal',
        // CSS Fonts 4, section 5.2: ranges that meet leave the browser nothing to make bold by itself.
        weight: style.weight === 400 ? '1 500' : '501 1000',
        range: set,
        data: await subset(face.name, face.data, set),
      });
    }),
  );
};

/** Letters, digits and signs that English and its typography use, with the stand-ins. */
const plainLatin: ReadonlySet<string> = new Set([
  ...Array.from({ length: 0x7e - 0x20 + 1 }, (_, i) => String.fromCodePoint(0x20 + i)),
  ...'\u00a0£¥±°·×÷½–—‘’“”…€−↑↓\u2009\u200b\u2010',
  ...standIns.keys(),
]);

/** What models and their equations need of the other fonts, by script or by the equations' own face. */
const plainSets: ReadonlyMap<string, string> = new Map([
  ['greek', 'ΘΦβεθφϕ'],
  ['signs', '∇'],
  ['KaTeX_Main normal 400', '()+,.0123456789=BcglotuxyzΘΦ∇−'],
  ['KaTeX_Math italic 400', '0123456789BcglotuxyzΘΦβεθϕ'],
]);

/** A plain set where it holds all that is used, so that documents share it; else what is used. */
const plainOr = (used: readonly string[], key: string): readonly string[] => {
  const plain = plainSets.get(key) ?? '';
  return used.every((character) => plain.includes(character)) ? [...plain].sort(byCodePoint) : used;
};

const latinSet = (face: Face, used: readonly string[]): string[] => {
  const whole = used.some((character) => !plainLatin.has(character));
  const all = face.font.characterSet.map((codePoint) => String.fromCodePoint(codePoint));
  const set = whole ? [...all, ...standIns.keys()] : [...plainLatin];
  return [...new Set(set)].sort(byCodePoint);
};

// Equations -----------------------------------------------------------------------------------------------------

const resolve = createRequire(import.meta.url).resolve;

const equationSheet = (): Promise<string> => readFile(resolve('katex/dist/katex.min.css'), 'utf8');

const faceRule = /@font-face\{[^}]*\}/g;

/** The faces that the classes of a document's equations ask for by the rules of the equations' style sheet. */
const equationRules = async (html: string): Promise<string[]> => {
  const equations = equationsOf(html);
  if (equations.length === 0) return [];
  const sheet = await equationSheet();
  const elements = new Set([...equations.join('').matchAll(/class="([^"]*)"/g)].map((match) => match[1]));
  const classes = [...elements].map((names) => new Set(names.split(' ')));
  const asked = new Set(
    [...sheet.replace(faceRule, '').matchAll(/([^{}]+)\{([^}]*KaTeX_[^}]*)\}/g)]
      .filter(([, selectors]) => selectors.split(',').some((selector) => isAsked(selector, classes)))
      .map(([, , body]) => faceKey(body)),
  );
  const characters = [...new Set(equations.join('').replace(/<[^>]*>/g, ''))].sort(byCodePoint);
  const faces = (sheet.match(faceRule) ?? []).filter((rule) => asked.has(faceKey(rule)));
  return (await Promise.all(faces.map((rule) => equationFace(rule, characters)))).flat();
};

/** Each equation's markup, from its outer span to where that ends. */
const equationsOf = (html: string): string[] =>
  [...html.matchAll(/<span[^>]*class="katex"/g)].map(({ index }) => {
    let depth = 0;
    for (const tag of html.slice(index).matchAll(/<(\/?)span\b/g)) {
      depth += tag[1] ? -1 : 1;
      if (depth === 0) return html.slice(index, index + tag.index);
    }
    throw new Error('The page has an equation whose markup does not end.');
  });

/** Whether for each step of the selector some element has all the classes that it names. */
const isAsked = (selector: string, elements: readonly ReadonlySet<string>[]): boolean =>
  selector
    .trim()
    .split(/[\s>+~]+/)
    .map((step) => [...step.matchAll(/\.([\w-]+)/g)].map(([, name]) => name))
    .every((names) => elements.some((element) => names.every((name) => element.has(name))));

/** Family, slant and weight that a rule of the sheet names, as one text. */
const faceKey = (rule: string): string => {
  const family = rule.match(/KaTeX_\w+/)?.[0];
  const italic = /font-style:italic/.test(rule);
  const bold = /font-weight:700/.test(rule);
  return `${family} ${italic ? 'italic' : 'normal'} ${bold ? 700 : 400}`;
};

const equationFont = async (rule: string): Promise<Buffer> => {
  const file = rule.match(/url\(([^)]*\.woff2)\)/)?.[1];
  if (file === undefined) throw new Error(`The equations' style sheet names no woff2 file in "${rule}".`);
  return readFile(join(dirname(resolve('katex/dist/katex.min.css')), file));
};

const equationFace = async (rule: string, characters: readonly string[]): Promise<string[]> => {
  const data = await equationFont(rule);
  // fontkit types what it opens as a font or a collection; these files hold one font each.
  const font = create(data) as Font;
  const own = characters.filter((character) => font.hasGlyphForCodePoint(codePointOf(character)));
  if (own.length === 0) return [];
  const [family, style, weight] = faceKey(rule).split(' ');
  const set = plainOr(own, faceKey(rule));
  return [fontFaceRule({ family, style, weight, range: set, data: await subset(faceKey(rule), data, set) })];
};

// Data ----------------------------------------------------------------------------------------------------------

const fontFaceRule = (face: {
  readonly family: string;
  readonly style: string;
  readonly weight: string;
  readonly range: readonly string[];
  readonly data: string;
}): string =>
  `@font-face{font-family:"${face.family}";font-style:${face.style};font-weight:${face.weight};` +
  `unicode-range:${unicodeRange(face.range)};src:url(data:font/woff2;base64,${face.data}) format("woff2")}`;

/** Runs of neighbours as one range each; the characters come in order. */
const unicodeRange = (characters: readonly string[]): string => {
  const runs: [number, number][] = [];
  for (const codePoint of characters.map(codePointOf)) {
    const last = runs.at(-1);
    if (last && last[1] + 1 === codePoint) last[1] = codePoint;
    else runs.push([codePoint, codePoint]);
  }
  const hex = (codePoint: number): string => codePoint.toString(16).toUpperCase();
  return runs.map(([from, to]) => `U+${hex(from)}${to > from ? `-${hex(to)}` : ''}`).join(',');
};

const subsets = new Map<string, Promise<string>>();

/** The font cut down to the characters, as woff2 in base64; made once a process. */
const subset = (name: string, data: Buffer, characters: readonly string[]): Promise<string> => {
  const text = characters.join('');
  const key = `${name} ${text}`;
  const made = subsets.get(key) ?? cutSubset(name, data, text).then((cut) => cut.toString('base64'));
  subsets.set(key, made);
  return made;
};

const cutSubset = async (name: string, data: Buffer, text: string): Promise<Buffer> =>
  (await madeFont(madeName(name, text))) ?? (await subsetFont(data, text, { targetFormat: 'woff2' }));

/** Told apart by what the font is cut down to. */
const madeName = (name: string, text: string): string =>
  `${name} ${createHash('sha256').update(text).digest('hex').slice(0, 16)}.woff2`;

/** For the build: every font cut down to its plain set, by the name that it is kept by. */
export const plainFonts = async (): Promise<{ name: string; data: Buffer }[]> => {
  const faces = (await Promise.all(styles.map(openFaces))).flat();
  const rules = (await equationSheet()).match(faceRule) ?? [];
  const whole = [
    ...faces.map(({ name, script, data }) => ({ name, key: script, data })),
    ...(await Promise.all(
      rules
        .filter((rule) => plainSets.has(faceKey(rule)))
        .map(async (rule) => ({ name: faceKey(rule), key: faceKey(rule), data: await equationFont(rule) })),
    )),
  ];
  return Promise.all(
    whole.flatMap(({ name, key, data }) => {
      const plain = key === 'latin' ? [...plainLatin].join('') : plainSets.get(key);
      if (plain === undefined) return [];
      const text = [...plain].sort(byCodePoint).join('');
      return [
        subsetFont(data, text, { targetFormat: 'woff2' }).then((cut) => ({ name: madeName(name, text), data: cut })),
      ];
    }),
  );
};
