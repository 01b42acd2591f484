/** What every page shares: its style sheet with paper and running head, and the type that its text needs. */
import type { BriefRecord } from '../record/record.js';
import type { Theme } from './theme.js';
import { equationStyle, typeFor } from './type.js';

/** Stands in a document's style where the type goes once the text is known. */
const TYPE = '/* type */';

export interface RunningHead {
  /** HTML, as the wording gives it. */
  readonly left: string;
  readonly foot: string;
  readonly page: string;
  readonly of: string;
}

export async function pageStyle(theme: Theme, paper: BriefRecord['plan']['paper'], head: RunningHead): Promise<string> {
  const margin = (text: string) => `"${cssText(text)}"`;
  const page = `@page { size: ${paper}; } @page { @top-left { content: ${margin(head.left)}; } @bottom-left { content: ${margin(head.foot)}; } @bottom-right { content: ${margin(`${head.page} `)} counter(page) ${margin(` ${head.of} `)} counter(pages); } }`;
  return [TYPE, await equationStyle(), theme.style, page].join('\n');
}

/** A sentence as a CSS string inside a style element: what could end either goes by its number. */
const cssText = (html: string): string =>
  plainText(html).replace(/["\\<>&\n\r]/g, (character) => `\\${(character.codePointAt(0) ?? 0).toString(16)} `);

export async function withType(html: string): Promise<string> {
  const faces = await typeFor(html);
  return html.replace(TYPE, () => faces);
}

/** A sentence comes back as HTML; where plain text is wanted, its references are turned back. */
export const plainText = (html: string): string =>
  html
    .replace(/<[^>]*>/g, '')
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&quot;', '"')
    .replaceAll('&#x27;', "'")
    .replaceAll('&#x3D;', '=')
    .replaceAll('&#x60;', '`')
    .replaceAll('&amp;', '&');
