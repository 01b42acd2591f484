/** Months by name, as English, German, French and Italian spreadsheets write them. */

const LOCALES = ['en-GB', 'en-US', 'de-DE', 'de-AT', 'fr-FR', 'it-IT'];

/** Abbreviations that spreadsheets write and Intl does not know; from memory. */
const FURTHER: readonly (readonly [string, number])[] = [
  ['mrz', 3],
  ['jän', 1],
  ['jan', 1],
  ['feb', 2],
  ['sep', 9],
  ['sept', 9],
];

/** The number of a month, 1 to 12, by its name in small letters; undefined where it is none. */
export const monthNamed = (name: string): number | undefined => numbers.get(bare(name));

/** Without points and accents: `févr.` is written `fevr` too. */
const bare = (name: string): string => name.normalize('NFD').replace(/[\p{M}.]/gu, '');

const numbers = namesOfMonths();

function namesOfMonths(): ReadonlyMap<string, number> {
  const names = new Map<string, number>();
  for (const locale of LOCALES)
    for (const month of ['long', 'short'] as const)
      for (const withDay of [{}, { day: 'numeric' }] as const) {
        const format = new Intl.DateTimeFormat(locale, { ...withDay, month, timeZone: 'UTC' });
        for (let number = 1; number <= 12; number++) {
          const parts = format.formatToParts(Date.UTC(2001, number - 1, 1));
          const name = parts.find(({ type }) => type === 'month')?.value ?? '';
          if (/\p{L}/u.test(name)) names.set(bare(name.toLowerCase()), number);
        }
      }
  for (const [name, number] of FURTHER) names.set(bare(name), number);
  return names;
}
