/** Whether a page looks as it did: what a reader could see counts, and what another processor rounds does not. */
import pixelmatch from 'pixelmatch';
import type { Picture } from './png.js';

/**
 * Colours nearer than this are the same; black and white are 1 apart (OKLab, HyAB). A palette moves a colour by up to
 * 0.022, and noise of two steps of 255 in every channel comes to 0.034 with it. In the middle greys the limit is ten
 * steps: a flat colour that changed by more is seen, and so is type that moved by a tenth of a pixel.
 */
const SAME_COLOUR = 0.04;

/**
 * So many pixels may differ in any square of so many: where rounding tips a coordinate over, it is one or two, far from
 * any other. The least that can change in small print is a point for a comma, four pixels in type 8 pixels high; one
 * digit for another is six or more, even in the 7 pixels of the smallest labels of a page at 80 dots an inch.
 */
const SAME_AREA = { pixels: 2, ofSquare: 10 };

export interface Difference {
  /** Of the pixels of the larger picture, from 0 to 1. */
  readonly share: number;
  /** The accepted picture, pale; on it in red what is lighter now, in blue what is darker. */
  readonly picture: Picture;
}

/** Null where the two look the same. Pictures of different sizes never do. */
export function differenceOf(now: Picture, accepted: Picture): Difference | null {
  const width = Math.max(now.width, accepted.width);
  const height = Math.max(now.height, accepted.height);
  const [before, after] = [accepted, now].map((picture) => laidOn(width, height, picture));
  const limits = { threshold: SAME_COLOUR, includeAA: true };
  const isSameSize = now.width === accepted.width && now.height === accepted.height;
  const most = pixelmatch(before, after, null, width, height, { ...limits, windowSize: SAME_AREA.ofSquare });
  if (isSameSize && most <= SAME_AREA.pixels) return null;
  const data = new Uint8Array(4 * width * height);
  const colours = { alpha: 0.3, diffColor: RED, diffColorAlt: BLUE };
  const differing = pixelmatch(before, after, data, width, height, { ...limits, ...colours });
  return { share: differing / (width * height), picture: { width, height, data } };
}

const RED: [number, number, number] = [220, 0, 0];
const BLUE: [number, number, number] = [0, 60, 220];

/** What a picture doesn't reach is transparent, which no page is. */
function laidOn(width: number, height: number, picture: Picture): Uint8Array {
  const data = new Uint8Array(4 * width * height);
  for (let y = 0; y < picture.height; y++) {
    const row = picture.data.subarray(4 * picture.width * y, 4 * picture.width * (y + 1));
    data.set(row, 4 * width * y);
  }
  return data;
}
