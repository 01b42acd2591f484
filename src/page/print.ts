/**
 * From a self-contained HTML document to a tagged PDF, the same bytes whenever the same document is printed.
 *
 * Paper, margins, running head and page numbers are the document's own, by its CSS (`@page`).
 */
import type { Browser, HTTPRequest, Page } from 'puppeteer';
import { type BrowserRequest, openBrowser } from './browser.js';
import { uncovered } from './type.js';

export interface Printer {
  /**
   * Prints a document that holds all it needs. `issued` (ISO 8601 date) becomes the PDF's date.
   * Throws where the document asks for anything outside it, where a typeface can't be used, or after a minute.
   */
  readonly print: (html: string, issued: string) => Promise<Uint8Array>;
  readonly close: () => Promise<void>;
}

/** Finds and launches a browser. Prints follow one another, whenever they were asked for. */
export const openPrinter = async (request: BrowserRequest): Promise<Printer> => {
  let browser: Browser | undefined = await openBrowser(request);
  let page: Page | undefined;
  let queue: Promise<unknown> = Promise.resolve();

  const printNext = async (html: string, issued: string): Promise<Uint8Array> => {
    try {
      await warnOfUncovered(html, request.warn);
      browser ??= await openBrowser(request);
      page ??= await openPage(browser);
      return sameBytes(await within(timeout, printPage(page, html)), issued);
    } catch (error) {
      // What failed may hang or be gone: the next print starts afresh.
      const failed = browser;
      browser = undefined;
      page = undefined;
      await failed?.close().catch(() => undefined);
      throw error;
    }
  };

  return {
    print: (html, issued) => {
      const result = queue.then(() => printNext(html, issued));
      queue = result.catch(() => undefined);
      return result;
    },
    close: async () => {
      await queue;
      await browser?.close();
    },
  };
};

const warnOfUncovered = async (html: string, warn: (text: string) => void): Promise<void> => {
  const characters = await uncovered(html);
  if (characters.length === 0) return;
  const title = html.match(/<title>([^<]*)/)?.[1] ?? 'page';
  warn(
    `"${title}": the brief's typefaces lack ${characters.join(' ')}, which print in another font or as empty boxes.`,
  );
};

const timeout = 60_000;

const within = async <T>(milliseconds: number, work: Promise<T>): Promise<T> => {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<never>((_, reject) => {
    timer = setTimeout(() => reject(new Error(`Printing took over ${milliseconds / 1000} s: given up.`)), milliseconds);
  });
  try {
    return await Promise.race([work, late]);
  } finally {
    clearTimeout(timer);
  }
};

const openPage = async (browser: Browser): Promise<Page> => {
  const page = await browser.newPage();
  await page.setJavaScriptEnabled(false);
  await page.emulateMediaType('print');
  await page.setRequestInterception(true);
  return page;
};

const printPage = async (page: Page, html: string): Promise<Uint8Array> => {
  const refused = new Set<string>();
  const judge = (asked: HTTPRequest): void => {
    if (asked.url().startsWith('data:')) {
      void asked.continue();
    } else {
      refused.add(asked.url());
      void asked.abort();
    }
  };
  page.on('request', judge);
  try {
    await page.setContent(html, { waitUntil: 'load', timeout });
    await useFaces(page);
    if (refused.size > 0) {
      throw new Error(
        `The page asks for ${[...refused].join(', ')}. A brief holds all it needs: embed it as a data: URL.`,
      );
    }
    return await page.pdf({ preferCSSPageSize: true, printBackground: true, tagged: true, outline: true, timeout });
  } finally {
    page.off('request', judge);
  }
};

/** What is used of the page's own globals: the CSS Font Loading Module's list of faces. */
declare const document: { readonly fonts: Iterable<EmbeddedFace> };

interface EmbeddedFace {
  readonly family: string;
  readonly style: string;
  readonly weight: string;
  readonly status: string;
  readonly load: () => Promise<unknown>;
}

/**
 * Loads every embedded face and makes sure of it. A browser that can't use a face prints its text as blanks,
 * without a word.
 */
const useFaces = async (page: Page): Promise<void> => {
  const faces = await page.evaluate(async () => {
    await Promise.allSettled([...document.fonts].map((face) => face.load()));
    return [...document.fonts].map(({ family, style, weight, status }) => ({ family, style, weight, status }));
  });
  if (faces.length === 0) throw new Error('The page embeds no typeface: a PDF would look different on every machine.');
  const unusable = faces.filter(({ status }) => status !== 'loaded');
  if (unusable.length === 0) return;
  const names = unusable.map(({ family, style, weight }) => `${family} ${style} ${weight}`).join(', ');
  throw new Error(`The browser can't use the embedded typefaces (${names}), so the text would be blank. Try another.`);
};

/**
 * Two prints of a document differ in their dates and in the identifiers of the tags, which count on from print to
 * print and now and then change places with a neighbour's. All are replaced by text of the same length, so that no
 * offset in the file moves: the identifiers are numbered in the order of the tags, and the tree that finds a tag by its
 * identifier (PDF 1.7, 7.9.6) is put in their order again.
 */
export const sameBytes = (pdf: Uint8Array, issued: string): Uint8Array => {
  const text = Buffer.from(pdf).toString('latin1');
  const date = `${issued.replaceAll('-', '')}000000+00'00'`;
  const dated = text.replace(/\/(CreationDate|ModDate) \(D:\d{14}[+-]\d\d'\d\d'\)/g, `/$1 (D:${date})`);
  const identifier = /(?<!\\)\(node(\d{8})\)/g;
  const leaves = dated.match(TREE_LEAF)?.length ?? 0;
  const tagged = [...dated.matchAll(/\/ID \(node(\d{8})\)/g)].map((match) => match[1]);
  const known = [...dated.matchAll(identifier)].map((match) => match[1]).sort();
  // A tree of several leaves is left in its own order: sorting could not keep their lengths.
  const found = [...new Set(leaves > 1 ? known : [...tagged, ...known])];
  const rank = new Map(found.map((digits, i) => [digits, String(i + 1).padStart(8, '0')]));
  const numbered = dated.replace(identifier, (_, digits: string) => `(node${rank.get(digits)})`);
  const sorted = numbered.replace(TREE_LEAF, (leaf) => {
    const entries = leaf.match(TREE_ENTRY) ?? [];
    const inOrder = [...entries].sort();
    const [first, last] = [inOrder[0], inOrder[inOrder.length - 1]].map((entry) =>
      entry.slice(0, '(node00000001)'.length),
    );
    return leaf
      .replace(TREE_ENTRY, () => inOrder.shift() ?? '')
      .replace(/^\/Limits \[.*?\]/, `/Limits [${first} ${last}]`);
  });
  return Buffer.from(sorted, 'latin1');
};

const TREE_ENTRY = /\(node\d{8}\) \d+ 0 R/g;
const TREE_LEAF = /\/Limits \[\(node\d{8}\) \(node\d{8}\)\]\s*\/Names \[(?:\(node\d{8}\) \d+ 0 R\s*)+\]/g;
