/** The pages of a PDF as pictures. */
import { createCanvas } from '@napi-rs/canvas';
import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import type { Picture } from './png.js';

/** Dots an inch: the least at which the smallest print can still be read. */
const RESOLUTION = 80;

/** The first pages, as many as are asked for, or all. */
export async function pagesOfPdf(pdf: Uint8Array, most = Number.POSITIVE_INFINITY): Promise<Picture[]> {
  const task = getDocument({ data: new Uint8Array(pdf), verbosity: 0 });
  const document = await task.promise;
  const pictures: Picture[] = [];
  for (let number = 1; number <= Math.min(most, document.numPages); number++) {
    const page = await document.getPage(number);
    const viewport = page.getViewport({ scale: RESOLUTION / 72 });
    const [width, height] = [Math.round(viewport.width), Math.round(viewport.height)];
    const canvas = createCanvas(width, height);
    await page.render({ canvas: canvas as never, viewport }).promise;
    const { data } = canvas.getContext('2d').getImageData(0, 0, width, height);
    pictures.push({ width, height, data: Uint8Array.from(data) });
  }
  await task.destroy();
  return pictures;
}
