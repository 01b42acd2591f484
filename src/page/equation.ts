/** An equation from TeX to HTML that is also read aloud. */
import katex from 'katex';
import type { Theme } from './theme.js';

/** A figure with the equation and, for a screen reader, its words. Decimal points become the locale's own. */
export function equationHtml(tex: string, theme: Theme, locale: string): string {
  const point = new Intl.NumberFormat(locale).formatToParts(0.5).find(({ type }) => type === 'decimal')?.value ?? '.';
  const local = point === '.' ? tex : tex.replace(/(\d)\.(\d)/g, `$1{${point}}$2`);
  const drawn = katex
    .renderToString(local, { output: 'html', displayMode: true, throwOnError: true })
    .replaceAll(' aria-hidden="true"', '');
  return `<div class="equation" role="img" aria-label="${spoken(tex, theme)}">${drawn}</div>`;
}

const LETTERS = ['phi', 'theta', 'Phi', 'Theta', 'nabla', 'beta', 'log'];

function spoken(tex: string, theme: Theme): string {
  const word = (key: string) => ` ${theme.say(`speech.${key}`)} `;
  return tex
    .replace(/\\begin\{aligned\}|\\end\{aligned\}|\\\\|\\quad|&|\{\}/g, ' ')
    .replaceAll('\\varepsilon', ' epsilon ')
    .replace(new RegExp(`\\\\(${LETTERS.join('|')})`, 'g'), ' $1 ')
    .replace(/_\{([^}]*)\}|_(.)/g, (_, long?: string, short?: string) => `${word('of')}${long ?? short}`)
    .replace(/\^\{([^}]*)\}|\^(.)/g, (_, long?: string, short?: string) => `${word('power')}${long ?? short}`)
    .replaceAll('=', word('equals'))
    .replaceAll('+', word('plus'))
    .replaceAll('-', word('minus'))
    .replace(/\s+/g, ' ')
    .trim();
}
