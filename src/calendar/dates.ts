/** Proleptic Gregorian dates as ISO 8601 text and as whole days since 1 January 1970. No clock, no time zone. */

const millisecondsPerDay = 86_400_000;

/** Days since 1970-01-01 of a year, a month (any integer: 13 is January of the next year) and a day. */
export const dayNumber = (year: number, month: number, day: number): number =>
  // setUTCFullYear, as Date.UTC takes the years 0 to 99 for 1900 to 1999.
  new Date(0).setUTCFullYear(year, month - 1, day) / millisecondsPerDay;

/** The ISO 8601 text of a day number. */
export const dateText = (day: number): string => new Date(day * millisecondsPerDay).toISOString().slice(0, 10);

/** The moment a day begins, for Intl with time zone UTC. */
export const dateOfDay = (day: number): Date => new Date(day * millisecondsPerDay);

/**
 * Whether a text is a real date written as ISO 8601 writes it: `2024-02-29` is one, `2023-02-29` is not.
 * Years run from 1000 to 9899, as those of periods do.
 */
export const isDate = (text: string): boolean => {
  const parts = /^((?!99)[1-9]\d{3})-(\d{2})-(\d{2})$/.exec(text);
  if (!parts) return false;
  // A day that does not exist rolls over into another month and so comes back as another text.
  return dateText(dayNumber(Number(parts[1]), Number(parts[2]), Number(parts[3]))) === text;
};

/** The day number of an ISO 8601 date. Throws on text that is no real date. */
export const dayOf = (text: string): number => {
  if (!isDate(text)) throw new Error(`"${text}" is no date; write it as year-month-day, such as 2024-03-31`);
  const [year, month, day] = text.split('-').map(Number);
  return dayNumber(year, month, day);
};

/** Year and month (1 to 12) of a day number. */
export const monthOfDay = (day: number): { readonly year: number; readonly month: number } => {
  const date = dateOfDay(day);
  return { year: date.getUTCFullYear(), month: date.getUTCMonth() + 1 };
};
