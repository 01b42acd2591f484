/** Chances in words: natural frequencies in tenths. */
import type { Formats } from './formats.js';
import type { Theme } from './theme.js';

/** "about 2 times in 10"; where tenths say too little, that it hardly ever or nearly always happens. */
export const frequency = (share: number, theme: Theme, formats: Formats): string =>
  frequencySentence('frequency', share, theme, formats);

/** The sentence among those under `key` that fits the chance. */
export function frequencySentence(key: string, share: number, theme: Theme, formats: Formats): string {
  const tenths = Math.round(10 * share);
  const form = share < 0.05 ? 'never' : share > 0.95 ? 'always' : formats.plural(tenths) === 'one' ? 'one' : 'other';
  return theme.say(`${key}.${form}`, { count: formats.number(tenths, 0) });
}
