/** Chances in words: natural frequencies in tenths. */
import type { Formats } from './formats.js';
import type { Theme } from './theme.js';

/** "about 2 times in 10"; where tenths say too little, that it hardly ever or nearly always happens. */
export function frequency(share: number, theme: Theme, formats: Formats): string {
  const tenths = Math.round(10 * share);
  if (share < 0.05) return theme.say('frequency.never');
  if (share > 0.95) return theme.say('frequency.always');
  return theme.say(`frequency.${formats.plural(tenths) === 'one' ? 'one' : 'other'}`, {
    count: formats.number(tenths, 0),
  });
}
