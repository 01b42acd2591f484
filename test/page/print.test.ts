import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openTextWidth } from '../../src/charts/metrics.js';
import { openPrinter, type Printer, sameBytes } from '../../src/page/print.js';
import { typeFor } from '../../src/page/type.js';

let printer: Printer;
const warnings: string[] = [];
beforeAll(async () => {
  printer = await openPrinter({ warn: (text) => warnings.push(text) });
});
afterAll(() => printer.close());

const issued = '2026-10-05';

const page = async (body: string, style = ''): Promise<string> => {
  const html = (type: string): string => `<!doctype html><html lang="en-GB"><head><meta charset="utf-8">
<title>Stores – outlook</title><style>${type}
body { font: 10.5pt/15pt "Brief Serif"; }
table { font-family: "Brief Sans"; }
@page { size: A4; margin: 18mm; @bottom-right { content: "page " counter(page) " of " counter(pages); font: 8pt "Brief Sans"; } }
${style}</style></head><body>${body}</body></html>`;
  return html(await typeFor(html('')));
};

const openPdf = (pdf: Uint8Array) => getDocument({ data: Uint8Array.from(pdf), verbosity: 0 }).promise;

const textOf = async (pdf: Uint8Array, number = 1): Promise<string> => {
  const content = await (await (await openPdf(pdf)).getPage(number)).getTextContent();
  return content.items.map((item) => ('str' in item ? item.str : '')).join('');
};

describe('a printed page', () => {
  test('is tagged, has title, language, outline and page numbers, and holds its text', async () => {
    const pdf = await printer.print(
      await page('<h1>Outlook</h1><p>Plan for −3 to 4, φ → 1 240.</p><h2 style="break-before:page">Checks</h2>'),
      issued,
    );
    const document = await openPdf(pdf);
    const { info } = await document.getMetadata();
    expect(info).toMatchObject({
      Title: 'Stores – outlook',
      Language: 'en-GB',
      CreationDate: "D:20261005000000+00'00'",
    });
    expect(await document.getMarkInfo()).toMatchObject({ Marked: true });
    expect((await document.getOutline()).map(({ title }) => title)).toEqual(['Outlook']);
    expect(await textOf(pdf)).toContain('Plan for −3 to 4, φ → 1 240.');
    expect(await textOf(pdf, 2)).toContain('page 2 of 2');
  });

  test('is the same bytes each time, whatever was printed between', async () => {
    const html = await page('<h1>One</h1><table><tr><th scope="col">Litres<td>1,240</table>');
    const first = await printer.print(html, issued);
    await printer.print(await page('<p>Something else'), issued);
    expect(Buffer.compare(await printer.print(html, issued), first)).toBe(0);
  });

  test('embeds its fonts as fonts, not as drawings', async () => {
    const pdf = Buffer.from(await printer.print(await page('<p>Serif <b>bold</b> <i>italic</i></p>'), issued));
    expect(pdf.includes('/Subtype /CIDFontType2')).toBe(true);
    expect(pdf.includes('/Subtype /Type3')).toBe(false);
  });

  test('is of the size that its own style sheet asks for', async () => {
    const pdf = await printer.print(await page('<p>Letter', '@page { size: Letter }'), issued);
    // US Letter is 8.5 by 11 inches of 72 points.
    expect((await (await openPdf(pdf)).getPage(1)).view).toEqual([0, 0, 612, 792]);
  });
});

test('what the typefaces lack is printed with a warning that names it', async () => {
  warnings.length = 0;
  await printer.print(await page('<p>Covered: é φ → ≥'), issued);
  expect(warnings).toEqual([]);
  await printer.print(await page('<p>Paint 日本'), issued);
  expect(warnings).toHaveLength(1);
  expect(warnings[0]).toMatch(/"Stores – outlook": .* lack 日 本,/);
});

describe('a page that would print wrongly is refused', () => {
  test('for asking for anything outside it', async () => {
    const html = await page('<img alt="" src="https://example.org/a.png">');
    await expect(printer.print(html, issued)).rejects.toThrow('asks for https://example.org/a.png');
  });

  test('for a typeface that cannot be used, and the next page is printed all the same', async () => {
    const broken = (await page('<p>Blank')).replace(/base64,[\w+/]{40}/, 'base64,AAAA');
    await expect(printer.print(broken, issued)).rejects.toThrow("can't use the embedded typefaces");
    expect(await textOf(await printer.print(await page('<p>Not blank'), issued))).toContain('Not blank');
  });

  test('for embedding no typeface', async () => {
    await expect(printer.print('<p>Plain', issued)).rejects.toThrow('embeds no typeface');
  });
});

test('text is as wide on the page as it was measured', async () => {
  const textWidth = await openTextWidth();
  const pdf = await printer.print(
    await page('<p style="font: 600 20pt Brief Sans">October to September: 1,240</p>'),
    issued,
  );
  const content = await (await (await openPdf(pdf)).getPage(1)).getTextContent();
  const drawn = content.items.flatMap((item) => ('str' in item && item.height > 15 ? [item.width] : []));
  const measured = textWidth('October to September: 1,240', { family: 'sans', size: 20, weight: 600 });
  expect(drawn.reduce((sum, width) => sum + width, 0)).toBeCloseTo(measured, 0);
});

test('identifiers are numbered in the order of the tags, and the tree that finds them put in that order', () => {
  const print = (first: string, second: string) => {
    const [low, high] = [first, second].sort();
    const place = (id: string) => (id === first ? '67 0 R' : '69 0 R');
    return Buffer.from(
      `/ID (node${first}) /ID (node${second}) /Headers [(node${second})] /Limits [(node${low}) (node${high})]
/Names [(node${low}) ${place(low)} (node${high}) ${place(high)}] /ModDate (D:20200102030405+00'00')`,
    );
  };
  const same = [print('00000031', '00000120'), print('00000120', '00000031')].map((pdf) =>
    Buffer.from(sameBytes(pdf, issued)).toString(),
  );
  expect(same[0]).toBe(
    `/ID (node00000001) /ID (node00000002) /Headers [(node00000002)] /Limits [(node00000001) (node00000002)]
/Names [(node00000001) 67 0 R (node00000002) 69 0 R] /ModDate (D:20261005000000+00'00')`,
  );
  expect(same[1]).toBe(same[0]);
});
