import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { createCanvas, GlobalFonts } from '@napi-rs/canvas';
import { beforeAll, describe, expect, test } from 'vitest';
import { differenceOf } from './compare.js';
import { fromPng, NEAR, type Picture, toPng } from './png.js';

beforeAll(() => {
  const font = '@fontsource-variable/source-sans-3';
  const folder = dirname(createRequire(import.meta.url).resolve(`${font}/package.json`));
  GlobalFonts.registerFromPath(join(folder, 'files/source-sans-3-latin-wght-normal.woff2'), 'Small print');
});

const usual = { numbers: '1,563 and 1,868', at: 20, accent: '#0f5c5c', paper: '#ffffff', line: true, height: 60 };

/** A line of small print as large as on a page, a rule and a band. */
function drawn(changed: Partial<typeof usual> = {}): Picture {
  const { numbers, at, accent, paper, line, height } = { ...usual, ...changed };
  const width = 120;
  const context = createCanvas(width, height).getContext('2d');
  const fill = (colour: string, x: number, y: number, w: number, h: number) => {
    context.fillStyle = colour;
    context.fillRect(x, y, w, h);
  };
  fill(paper, 0, 0, width, height);
  fill(accent, 10, 40, 30, 10);
  if (line) fill('#d9d4cb', 10.2, 30.3, 90, 0.6);
  context.fillStyle = '#1d1b18';
  context.font = '400 8px "Small print"';
  context.fontVariationSettings = '"wght" 400';
  context.fillText(numbers, at, 20);
  return { width, height, data: Uint8Array.from(context.getImageData(0, 0, width, height).data) };
}

const kept = (picture: Picture): Picture => fromPng(toPng(picture));
const changedBy = (picture: Picture, change: (value: number, i: number) => number): Picture => ({
  ...picture,
  data: picture.data.map((value, i) => (i % 4 === 3 ? value : Math.min(255, Math.max(0, change(value, i))))),
});

describe('two pictures look the same', () => {
  test('where they are the same', () => {
    expect(differenceOf(drawn(), drawn())).toBeNull();
    expect(differenceOf(drawn(), kept(drawn()))).toBeNull();
  });

  test.each(['#ffffff', '#171614'])('where every channel is up to two steps off, on %s', (paper) => {
    const noisy = changedBy(drawn({ paper }), (value, i) => value + ((i * 7919) % 5) - 2);
    expect(noisy.data).not.toEqual(drawn({ paper }).data);
    expect(differenceOf(noisy, kept(drawn({ paper })))).toBeNull();
  });

  test('where one pixel in fifty differs, each alone', () => {
    const isAlone = (i: number) => Math.floor(i / 4) % 10 === 0 && Math.floor(i / 4 / 120) % 5 === 0;
    expect(
      differenceOf(
        changedBy(drawn(), (value, i) => (isAlone(i) ? 255 - value : value)),
        drawn(),
      ),
    ).toBeNull();
  });
});

describe('two pictures look different', () => {
  test.each<[string, Partial<typeof usual>]>([
    ['a word moved by a quarter of a pixel', { at: 20.25 }],
    ['a digit', { numbers: '1,568 and 1,868' }],
    ['a point for a comma', { numbers: '1.563 and 1,868' }],
    ['a word', { numbers: '1,563 und 1,868' }],
    ['a line gone', { line: false }],
    ['a colour', { accent: '#1f6a68' }],
    ['the paper', { paper: '#f2f2f2' }],
  ])('by %s', (_, change) => {
    const difference = differenceOf(drawn(change), kept(drawn()));
    expect(difference?.share).toBeGreaterThan(0);
    expect(difference?.picture).toMatchObject({ width: 120, height: 60 });
  });

  test('by their size, and the share counts what one of them lacks', () => {
    for (const [now, before] of [
      [drawn({ height: 80 }), drawn()],
      [drawn(), drawn({ height: 80 })],
    ]) {
      expect(differenceOf(now, before)?.share).toBeCloseTo(20 / 80, 9);
      expect(differenceOf(now, before)?.picture.height).toBe(80);
    }
  });
});

describe('a picture kept in a palette', () => {
  test('keeps its frequent colours, and the others nearly', () => {
    const { data } = drawn();
    const back = kept(drawn()).data;
    expect(Math.max(...data.map((value, i) => Math.abs(value - back[i])))).toBeLessThanOrEqual(NEAR);
    const at = (data: Uint8Array, x: number, y: number) => data.slice(4 * (120 * y + x), 4 * (120 * y + x + 1));
    expect(at(back, 0, 0)).toEqual(at(data, 0, 0));
    expect(at(back, 20, 45)).toEqual(at(data, 20, 45));
  });

  test('keeps all its colours where they are too many for one', () => {
    const picture = changedBy(drawn(), (_, i) => (Math.floor(i / 4) * [1, 59, 113][i % 4]) % 256);
    expect(kept(picture).data.every((value, i) => value === picture.data[i])).toBe(true);
  });
});
