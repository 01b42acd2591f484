/** What the sentences of a choice sheet are made with. */
import { periodIndex, periodText } from '../calendar/calendar.js';
import type { ChoiceSheet, SheetModel } from '../record/choice.js';
import { type Formats, formatsOf } from './formats.js';
import type { Facts, Theme } from './theme.js';

export interface ChoiceWords {
  readonly sheet: ChoiceSheet;
  readonly formats: Formats;
  /** A sentence of the choice sheet; `every` and `every-other` are always there to fill it with. */
  readonly say: (key: string, facts?: Facts) => string;
  readonly has: (key: string) => boolean;
  /** "four". */
  readonly count: (number: number) => string;
  /** "four quarters". */
  readonly periods: (count: number) => string;
  /** "seven years". */
  readonly years: (count: number) => string;
  /** A share as per cent with one decimal; a dash where there is none. */
  readonly miss: (share: number | null) => string;
  /** A share as whole per cent; a dash where there is none. */
  readonly share: (share: number | null) => string;
}

export function choiceWords(sheet: ChoiceSheet, theme: Theme): ChoiceWords {
  const { every } = sheet.series;
  const formats = formatsOf(sheet.plan, every);
  const always = {
    every: theme.say(`choice.every.${every}.one`),
    'every-other': theme.say(`choice.every.${every}.other`),
  };
  const say = (key: string, facts: Facts = {}) => theme.say(`choice.${key}`, { ...always, ...facts });
  const has = (key: string) => theme.has(`choice.${key}`);
  const count = (number: number) => (has(`number.${number}`) ? say(`number.${number}`) : formats.number(number, 0));
  const counted = (number: number, of: string) =>
    say('counted', {
      number: count(number),
      of: say(`every.${of}.${formats.plural(number) === 'one' ? 'one' : 'other'}`),
    });
  const tenths = new Intl.NumberFormat(sheet.plan.locale, {
    style: 'percent',
    minimumFractionDigits: 1,
    maximumFractionDigits: 1,
  });
  return {
    sheet,
    formats,
    say,
    has,
    count,
    periods: (number) => counted(number, every),
    years: (number) => counted(number, 'year'),
    miss: (share) => (share === null ? say('none') : tenths.format(share)),
    share: (share) => (share === null ? say('none') : formats.share(share)),
  };
}

export const capital = (text: string): string => text.slice(0, 1).toLocaleUpperCase() + text.slice(1);

/** A form as it stands in a sentence. */
export const formText = (form: string): string => form.replace(')x(', ') × (');

export const yesOrNo = (value: boolean): 'yes' | 'no' => (value ? 'yes' : 'no');

/** How a model's coefficients are estimated; `nothing` where it has none. */
export const estimatesOf = ({ form, fittedBy }: SheetModel): 'nothing' | SheetModel['fittedBy'] =>
  /^\(0,\d+,0\)(x\(0,\d+,0\)\d+)?$/.test(form) ? 'nothing' : fittedBy;

export const lastPeriod = ({ figures, series }: ChoiceSheet): string =>
  periodText(periodIndex(figures.start, series.every) + figures.values.length - 1, series.every);
