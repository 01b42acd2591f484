/** How numbers, shares and periods look in the record's locale: Intl alone decides. */
import { dateName, type NameStyle, periodName, positionName, spanName, spanOf } from '../calendar/calendar.js';
import type { BriefRecord } from '../record/record.js';

export interface Formats {
  readonly number: (value: number, places: number) => string;
  /** Rounded to so many places, or to tens, hundreds … where they are below zero. */
  readonly rounded: (value: number, places: number) => string;
  /** A stated quantity with at least so many places, and more where it has them: 0.5 stays 0.5. */
  readonly amount: (value: number, places: number) => string;
  /** Money that was stated: with the currency's own places, or more where it has them. */
  readonly price: (amount: number) => string;
  /** Money that is told in passing: in full, and without small coins from a hundred on. */
  readonly about: (amount: number) => string;
  /** Money with so many places. */
  readonly money: (amount: number, places: number) => string;
  /** Money rounded to so many places, or to tens, hundreds … where they are below zero. */
  readonly moneyTo: (amount: number, places: number) => string;
  /** Whole per cent with a sign: +6%. */
  readonly change: (percent: number) => string;
  /** Per cent with so many places, without a sign: 0.4%. */
  readonly percent: (percent: number, places: number) => string;
  /** A share as whole per cent: 0.41 is 41%. */
  readonly share: (share: number) => string;
  readonly period: (text: string, style: NameStyle) => string;
  readonly span: (first: string, last: string) => string;
  readonly position: (position: number) => string;
  /** "A, B and C". */
  readonly list: (items: readonly string[]) => string;
  readonly date: (iso: string) => string;
  /** The date of a period's first day. */
  readonly firstDay: (period: string) => string;
  /** Which plural form a count takes: `one`, `other`, … */
  readonly plural: (count: number) => string;
}

export function formatsOf(plan: BriefRecord['plan'], every: BriefRecord['series']['every']): Formats {
  const { locale, yearStarts, currency } = plan;
  const inCurrency: Intl.NumberFormatOptions = { style: 'currency', currency, currencyDisplay: 'narrowSymbol' };
  const price = formatter(locale, inCurrency);
  const finer = formatter(locale, { ...inCurrency, maximumFractionDigits: FINEST });
  const own = price.resolvedOptions().maximumFractionDigits ?? 2;
  const money = (amount: number, places: number) =>
    minus(formatter(locale, { ...inCurrency, ...withPlaces(places) }).format(amount === 0 ? 0 : amount));
  const number = (value: number, places: number) =>
    minus(formatter(locale, { ...withPlaces(places), signDisplay: 'negative' }).format(value === 0 ? 0 : value));
  const percent = (places: number) => formatter(locale, { style: 'percent', ...withPlaces(places) });
  const change = formatter(locale, { style: 'percent', signDisplay: 'exceptZero', maximumFractionDigits: 0 });
  const plurals = new Intl.PluralRules(locale);
  const minus = (text: string) => text.replace('-', '\u2212');
  return {
    number,
    rounded: (value, places) => number(toPlaces(value, places), Math.max(places, 0)),
    amount: (value, places) =>
      minus(
        formatter(locale, withPlaces(Number.isInteger(value) ? 0 : places, Math.max(places, FINEST))).format(value),
      ),
    price: (amount) => minus((isFiner(amount, own) ? finer : price).format(amount)),
    about: (amount) => (Math.abs(amount) < 100 ? minus(price.format(amount)) : money(Math.round(amount), 0)),
    money,
    moneyTo: (amount, places) => money(toPlaces(amount, places), Math.max(places, 0)),
    change: (percent) => minus(change.format(percent / 100)),
    percent: (value, places) => minus(percent(places).format(value / 100)),
    share: (value) => minus(percent(0).format(value)),
    period: (text, style) => periodName(text, every, yearStarts, locale, style),
    span: (first, last) => spanName(first, last, every, yearStarts, locale),
    position: (position) => positionName(position, every, yearStarts, locale),
    list: (items) => new Intl.ListFormat(locale).format(items),
    date: (iso) => dateName(iso, locale),
    firstDay: (text) => dateName(spanOf(text, every, yearStarts).from, locale),
    plural: (count) => plurals.select(count),
  };
}

/** The finest places that a stated price or quantity is shown with. */
const FINEST = 4;

const isFiner = (amount: number, places: number): boolean =>
  Math.abs(amount - Number(amount.toFixed(places))) > 0.5 * 10 ** -FINEST;

/** Never −0. */
const toPlaces = (value: number, places: number): number => {
  const step = 10 ** -places;
  const rounded = places > 0 ? Number(value.toFixed(places)) : Math.round(value / step) * step;
  return rounded === 0 ? 0 : rounded;
};

const made = new Map<string, Intl.NumberFormat>();

/** Made once for each locale and kind: making one takes far longer than using it. */
function formatter(locale: string, options: Intl.NumberFormatOptions): Intl.NumberFormat {
  const key = `${locale} ${JSON.stringify(options)}`;
  const format = made.get(key) ?? new Intl.NumberFormat(locale, options);
  made.set(key, format);
  return format;
}

const withPlaces = (least: number, most = least): Intl.NumberFormatOptions => ({
  minimumFractionDigits: least,
  maximumFractionDigits: most,
});
