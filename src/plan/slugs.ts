/** Short names for files: ASCII, unique within a plan, and never a name that the archive itself uses. */

const longest = 60;

/** Names of the archive, and names of devices that some systems don't let a file have. */
const taken: ReadonlySet<string> = new Set([
  ...['cover', 'orders', 'budget', 'ledger', 'choice', 'trial', 'replaced', 'templates'],
  ...['con', 'prn', 'aux', 'nul'],
  ...Array.from({ length: 10 }, (_, i) => [`com${i}`, `lpt${i}`]).flat(),
]);

/** Letters that don't come apart into a base letter and a mark. */
const letters: ReadonlyMap<string, string> = new Map([
  ['ß', 'ss'],
  ['æ', 'ae'],
  ['œ', 'oe'],
  ['ø', 'o'],
  ['đ', 'd'],
  ['ð', 'd'],
  ['ł', 'l'],
  ['þ', 'th'],
  ['ı', 'i'],
]);

/** A slug for each name, in order. A name in another script becomes its number: `series-3`. */
export const slugsOf = (names: readonly string[]): readonly string[] => {
  const used = new Set(taken);
  return names.map((name, i) => {
    const slug = unused(slugOf(name) || `series-${i + 1}`, used);
    used.add(slug);
    return slug;
  });
};

const slugOf = (name: string): string =>
  name
    .toLowerCase()
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[^\p{ASCII}]/gu, (letter) => letters.get(letter) ?? '-')
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, longest)
    .replace(/^-+|-+$/g, '');

const unused = (slug: string, used: ReadonlySet<string>): string => {
  if (!used.has(slug)) return slug;
  for (let number = 2; ; number++) {
    const numbered = `${slug.slice(0, longest - `-${number}`.length)}-${number}`;
    if (!used.has(numbered)) return numbered;
  }
};
