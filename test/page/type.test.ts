import { create, type Font } from 'fontkit';
import katex from 'katex';
import { describe, expect, test } from 'vitest';
import { equationStyle, typeFor, uncovered } from '../../src/page/type.js';

interface EmbeddedFace {
  readonly family: string;
  readonly style: string;
  readonly weight: string;
  readonly font: Font;
}

/** Reads the rules back, with a font reader of its own for the data. */
const facesIn = (css: string): EmbeddedFace[] =>
  [...css.matchAll(/font-family:"([^"]+)";font-style:(\w+);font-weight:([\d ]+);[^}]*?base64,([\w+/=]+)\)/g)].map(
    ([, family, style, weight, data]) => ({
      family,
      style,
      weight,
      font: create(Buffer.from(data, 'base64')) as Font,
    }),
  );

const page = (text: string): string => `<!doctype html><html lang="en-GB"><body><p>${text}</p></body></html>`;

const holds = (faces: readonly EmbeddedFace[], family: string, character: string): boolean =>
  faces.some((face) => face.family === family && face.font.hasGlyphForCodePoint(character.codePointAt(0) ?? 0));

describe('typeFor', () => {
  test('embeds both families, in regular and semibold, and the serif italic', async () => {
    const faces = facesIn(await typeFor(page('Expect to <em>sell</em> 1,240 litres')));
    const styles = faces.map(({ family, style, weight }) => `${family} ${style} ${weight}`).sort();
    expect(styles).toEqual([
      'Brief Sans normal 1 500',
      'Brief Sans normal 501 1000',
      'Brief Serif italic 1 500',
      'Brief Serif normal 1 500',
      'Brief Serif normal 501 1000',
    ]);
  });

  test.each([
    ['Greek', 'φθΦΘεψβσ'],
    ['signs', '−×±–—…→←≥≤≈·'],
    ['letters of the Latin alphabets', 'éßøŁźğőț'],
    ['Cyrillic', 'Жеґ'],
    ['Vietnamese', 'ệỡ'],
  ])('holds %s where the document has them', async (_, text) => {
    const html = page(text);
    const faces = facesIn(await typeFor(html));
    for (const character of text) {
      expect([character, holds(faces, 'Brief Serif', character), holds(faces, 'Brief Sans', character)]).toEqual([
        character,
        true,
        true,
      ]);
    }
    expect(await uncovered(html)).toEqual([]);
  });

  test('reads numeric references and refuses named ones that it does not know', async () => {
    expect(holds(facesIn(await typeFor(page('&#966; &#x3b8;'))), 'Brief Serif', 'φ')).toBe(true);
    await expect(typeFor(page('3 &rarr; 4'))).rejects.toThrow('"&rarr;"');
  });

  test('keeps figures of one width within reach', async () => {
    const faces = facesIn(await typeFor(page('1,240')));
    for (const { family, font } of faces) {
      const widths = [...'0123456789'].map((digit) => font.layout(digit, { tnum: true }).advanceWidth);
      expect([family, new Set(widths).size]).toEqual([family, 1]);
    }
  });

  test('is small for an English brief, and the same for each', async () => {
    const one = await typeFor(page('Expect to sell about 1,240 litres.'));
    const other = await typeFor(page('Plan for anything from 1,080 to 1,410 – “perhaps”.'));
    expect(other).toBe(one);
    expect(one.length).toBeLessThan(100_000);
  });

  test('says which characters no face holds', async () => {
    expect(await uncovered(page('Paint 日本'))).toEqual(['日', '本']);
  });

  test('embeds the faces that the equations use and no others', async () => {
    const tex = String.raw`\Big(1-\theta_1 B\Big) y_t = \sum_{k=1}^{4} \psi_k \varepsilon_{t-k}`;
    const html = page(katex.renderToString(tex, { output: 'html', displayMode: true }));
    const faces = facesIn(await typeFor(html)).filter(({ family }) => family.startsWith('KaTeX'));
    expect(faces.map(({ family, style }) => `${family} ${style}`).sort()).toEqual([
      'KaTeX_Main normal',
      'KaTeX_Math italic',
      'KaTeX_Size2 normal',
    ]);
    expect(holds(faces, 'KaTeX_Math', 'θ')).toBe(true);
    expect(holds(faces, 'KaTeX_Size2', '∑')).toBe(true);
  });
});

test('the equations’ style sheet asks for no file', async () => {
  expect(await equationStyle()).not.toMatch(/@font-face|url\(/);
});
