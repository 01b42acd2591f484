/** Pictures as PNG files, and small ones: a repository keeps every picture that was ever accepted. */
import { convertIndexedToRgb, decode, encode } from 'fast-png';

/** Opaque pixels by rows, four bytes each: red, green, blue, 255. */
export interface Picture {
  readonly width: number;
  readonly height: number;
  readonly data: Uint8Array;
}

/** How far a palette may move a colour's red, green or blue, of 255 steps. With 3 some pages need over 256 colours. */
export const NEAR = 4;

/**
 * A picture in a palette, which takes half as much as full colour. The most frequent colours (paper, ink, lines, bands)
 * stay as they are, and what antialiasing mixes of them goes to one that is near. A picture with too many colours for
 * that keeps them all.
 */
export function toPng({ width, height, data }: Picture): Uint8Array {
  const zlib = { level: 9, mem: 12 } as const;
  const pixels = Uint32Array.from({ length: width * height }, (_, i) => colourAt(data, 4 * i));
  const counts = new Map<number, number>();
  for (const colour of pixels) counts.set(colour, (counts.get(colour) ?? 0) + 1);
  const palette: number[][] = [];
  const places = new Map<number, number>();
  for (const [colour] of [...counts].sort(([a, n], [b, m]) => m - n || a - b)) {
    const sought = channels(colour);
    const place = palette.findIndex((each) => sought.every((value, i) => Math.abs(value - each[i]) <= NEAR));
    places.set(colour, place < 0 ? palette.push(sought) - 1 : place);
  }
  if (palette.length > 256) return encode({ width, height, data, channels: 4 }, { zlib });
  const indices = Uint8Array.from(pixels, (colour) => places.get(colour) ?? 0);
  return encode({ width, height, data: indices, channels: 1, palette }, { zlib });
}

const colourAt = (data: Uint8Array, at: number): number => (data[at] << 16) | (data[at + 1] << 8) | data[at + 2];

const channels = (colour: number): number[] => [colour >> 16, (colour >> 8) & 255, colour & 255];

/** From a PNG of eight bits a channel without transparency. */
export function fromPng(bytes: Uint8Array): Picture {
  const png = decode(bytes);
  const { width, height } = png;
  const colours = png.palette ? convertIndexedToRgb(png) : png.data;
  const each = colours.length / (width * height);
  const data = new Uint8Array(4 * width * height).fill(255);
  for (let i = 0; i < width * height; i++)
    for (let channel = 0; channel < 3; channel++) data[4 * i + channel] = colours[each * i + channel];
  return { width, height, data };
}
