/** Whether a row's name says that it adds up or averages the others, in English, German, French or Italian. */
const TOTAL =
  /^(grand |sub-?|sous-)?totals?\b|\btotals?$|^totau?x\b|^total[ei]\b|^sums?\b|summe\b|^gesamt|^insgesamt|^sommes?\b|^somma\b|^ensemble\b|^averages?\b|^mean\b|^durchschnitt|^mittelwert|^moyennes?\b|^medi[ae]\b/;

export const isTotal = (name: string): boolean =>
  // A year may stand before it, as in 2024 Total.
  TOTAL.test(name.toLowerCase().replace(/^[\d\s/.:-]+/, ''));
