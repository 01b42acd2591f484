/** How numbers, shares and periods look in the record's locale: Intl alone decides. */
import { dateName, type NameStyle, periodName, positionName, spanName } from '../calendar/calendar.js';
import type { BriefRecord } from '../record/record.js';

export interface Formats {
  readonly number: (value: number, places: number) => string;
  /** Whole per cent with a sign: +6%. */
  readonly change: (percent: number) => string;
  /** Per cent with so many places, without a sign: 0.4%. */
  readonly percent: (percent: number, places: number) => string;
  /** A share as whole per cent: 0.41 is 41%. */
  readonly share: (share: number) => string;
  readonly period: (text: string, style: NameStyle) => string;
  readonly span: (first: string, last: string) => string;
  readonly position: (position: number) => string;
  readonly date: (iso: string) => string;
  /** Which plural form a count takes: `one`, `other`, … */
  readonly plural: (count: number) => string;
}

export function formatsOf(plan: BriefRecord['plan'], every: BriefRecord['series']['every']): Formats {
  const { locale, yearStarts } = plan;
  const change = new Intl.NumberFormat(locale, {
    style: 'percent',
    signDisplay: 'exceptZero',
    maximumFractionDigits: 0,
  });
  const share = new Intl.NumberFormat(locale, { style: 'percent', maximumFractionDigits: 0 });
  const plurals = new Intl.PluralRules(locale);
  const minus = (text: string) => text.replace('-', '\u2212');
  return {
    number: (value, places) => minus(numberFormat(locale, places).format(value === 0 ? 0 : value)),
    change: (percent) => minus(change.format(percent / 100)),
    percent: (value, places) => minus(percentFormat(locale, places).format(value / 100)),
    share: (value) => minus(share.format(value)),
    period: (text, style) => periodName(text, every, yearStarts, locale, style),
    span: (first, last) => spanName(first, last, every, yearStarts, locale),
    position: (position) => positionName(position, every, yearStarts, locale),
    date: (iso) => dateName(iso, locale),
    plural: (count) => plurals.select(count),
  };
}

const percentFormat = (locale: string, places: number): Intl.NumberFormat =>
  new Intl.NumberFormat(locale, { style: 'percent', minimumFractionDigits: places, maximumFractionDigits: places });

const made = new Map<string, Intl.NumberFormat>();

function numberFormat(locale: string, places: number): Intl.NumberFormat {
  const key = `${locale} ${places}`;
  const format =
    made.get(key) ??
    new Intl.NumberFormat(locale, {
      minimumFractionDigits: places,
      maximumFractionDigits: places,
      signDisplay: 'negative',
    });
  made.set(key, format);
  return format;
}
