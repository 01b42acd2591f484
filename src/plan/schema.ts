/**
 * What a plan may hold: every key, its kind and its default.
 *
 * A plan's scalars come as the text that was typed, so keys for numbers and switches read text; each complaint is the
 * rest of a sentence that starts with the key and what stands there. Rules between keys stand in rules.ts.
 */
import { z } from 'zod';
import { everies, isDate, kindsOf } from '../calendar/calendar.js';
import { shown } from '../figures/input-error.js';
import { nearest } from '../figures/nearest.js';

const longestLine = 200;

/** Text as typed, as long as it likes. */
const prose = z.string({ error: 'should be a text' }).refine((text) => text.trim() !== '', {
  error: 'is empty; give a text or leave the key out',
});

/** Text as typed, on one line: names, units, columns. */
const line = prose
  .refine((text) => !/[\p{Cc}\p{Zl}\p{Zp}\p{Cs}]/u.test(text), { error: 'holds a line break or a control character' })
  .refine((text) => text.length <= longestLine, { error: `is longer than ${longestLine} characters` });

const numberText = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;

/** A number where a text is one, else the text itself, for the check after it to refuse. */
const asNumber = (value: unknown): unknown =>
  typeof value === 'string' && numberText.test(value) ? Number(value) : value;

const notANumber = (input: unknown): string =>
  typeof input === 'string' && /^[+-]?[\d.]*,\d+$/.test(input)
    ? 'is not a number; write a decimal point and no separator for thousands, such as 1234.5'
    : 'is not a number; write digits with a decimal point, such as 12.5';

const number = z.preprocess(asNumber, z.number({ error: ({ input }) => notANumber(input) }));
const atLeastZero = z.preprocess(
  asNumber,
  z.number({ error: ({ input }) => notANumber(input) }).min(0, { error: 'is below zero' }),
);
const aboveZero = z.preprocess(
  asNumber,
  z.number({ error: ({ input }) => notANumber(input) }).gt(0, { error: 'should be above zero' }),
);
const wholeFrom = (least: number, most: number) => {
  const error = `should be a whole number from ${least} to ${most}`;
  return z.preprocess(asNumber, z.int({ error }).min(least, { error }).max(most, { error }));
};

const oneOf = <const Names extends readonly [string, ...string[]]>(names: Names) =>
  z.enum(names, {
    error: ({ input }) => {
      const meant = typeof input === 'string' ? nearest(input, names) : null;
      return `should be ${listed(names)}${meant === null ? '' : `; did you mean ${meant}?`}`;
    },
  });

const listed = (names: readonly string[]): string =>
  names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} or ${names[names.length - 1]}`;

const yesOrNo = z
  .union([z.enum(['yes', 'no', 'true', 'false']), z.boolean()], { error: 'should be yes or no' })
  .transform((value) => value === true || value === 'yes' || value === 'true');

const date = z.string({ error: 'should be a date' }).refine(isDate, {
  error: 'is not a real date; write year-month-day, such as 2026-10-05',
});

const period = z.string({ error: 'should be a period' }).refine((text) => kindsOf(text).length > 0, {
  error: 'is no period; write it as 2024-Q1, 2024-03, 2024-S1, 2024 or, for weeks, the date of the first day',
});

const months = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const;

const month = z
  .union([z.enum(months), z.preprocess(asNumber, z.int().min(1).max(12))], {
    error: ({ input }) => {
      const meant = typeof input === 'string' ? nearest(input, months) : null;
      return `should be an English month name or 1 to 12${meant === null ? '' : `; did you mean ${meant}?`}`;
    },
  })
  .transform((value) => (typeof value === 'number' ? value : months.indexOf(value) + 1));

/** Supported, not only well formed: for any other Intl would quietly take the machine's own locale. */
const isLocale = (text: string): boolean => {
  try {
    return Intl.DateTimeFormat.supportedLocalesOf(text).length > 0;
  } catch {
    return false;
  }
};

const locale = z
  .string({ error: 'should be a locale' })
  .refine(isLocale, { error: 'is no locale known here; write language and region, such as en-GB, de-DE or sv-SE' })
  .transform((text) => Intl.getCanonicalLocales(text)[0]);

const currencies: ReadonlySet<string> = new Set(Intl.supportedValuesOf('currency'));

const currency = z.string({ error: 'should be a currency' }).refine((text) => currencies.has(text), {
  error: ({ input }) =>
    typeof input === 'string' && currencies.has(input.toUpperCase())
      ? `should be in capitals: ${input.toUpperCase()}`
      : 'is no currency by ISO 4217; write its three letters, such as GBP, EUR or USD',
});

/** A planner's change to the outlook: a share (`+8%`) or an amount (`+40`). The sign is part of it. */
const change = z
  .string({ error: 'should be a change' })
  .regex(/^[+-](\d+\.?\d*|\.\d+)%?$/, {
    error: 'should have a sign and a number, with or without %, such as +8%, -5% or +40',
  })
  .refine((text) => !text.endsWith('%') || Number.parseFloat(text) > -100, {
    error: 'takes away everything or more; write a change above -100%',
  })
  .refine((text) => Number.isFinite(Number.parseFloat(text)), { error: 'is too large' })
  .transform((text) => ({
    kind: text.endsWith('%') ? ('percent' as const) : ('amount' as const),
    value: Number.parseFloat(text),
  }));

const mapping = 'should hold keys of its own, indented below it';

const event = z.strictObject(
  {
    what: line.describe('what happened, in a few words'),
    from: period.describe('the first period it touched'),
    to: period.optional().describe('the last period it touched'),
    effect: oneOf(['passing', 'lasting']).describe('passing if it came and went, lasting if it stayed'),
  },
  { error: mapping },
);

const judgement = z.strictObject(
  {
    what: line.describe('what the figures can’t know'),
    from: period.describe('the first period it changes'),
    to: period.optional().describe('the last period it changes; left out: until the end'),
    change: change.describe('by how much, such as +8% or +40'),
    because: prose.describe('why you think so'),
  },
  { error: mapping },
);

/** A chance in per cent (`90%`) or as a natural frequency (`9 in 10`), as a share between 0 and 1. */
const chance = z
  .string({ error: 'should be a chance' })
  .regex(/^(\d+(\.\d+)?%|\d+ in \d+)$/, { error: 'should be a chance such as 90% or 9 in 10' })
  .transform((text) => {
    const [first, second] = text.split(' in ').map(Number.parseFloat);
    return text.endsWith('%') ? first / 100 : first / second;
  })
  .refine((share) => share > 0 && share < 1, { error: 'should lie between 0% and 100%' });

/** So many packs (`12 packs`), or so many units. */
const decided = z
  .string({ error: 'should be an order' })
  .regex(/^\d+(\.\d+)?( packs?)?$/, { error: 'should be a number of packs or units, such as 12 packs or 288' })
  .transform((text) => ({
    kind: text.includes('pack') ? ('packs' as const) : ('units' as const),
    value: Number.parseFloat(text),
  }));

const purchase = z.strictObject(
  {
    covers: wholeFrom(1, 156).describe('how many periods the order must last, from its arrival'),
    arrives: wholeFrom(0, 155).default(0).describe('periods ahead until it arrives; 0 is at once'),
    'unit-cost': aboveZero.optional().describe('what a unit costs you'),
    'unit-price': atLeastZero.optional().describe('what a unit sells for'),
    'leftover-value': number.optional().describe('what a unit left over is still worth'),
    goodwill: atLeastZero.optional().describe('what a lost sale costs beside its price'),
    'not-short': chance.optional().describe('the chance of not running short to aim at, in place of the costs'),
    'in-stock': atLeastZero.describe('units in stock now'),
    'on-order': atLeastZero.default(0).describe('units ordered and still to come'),
    'on-order-arrives': wholeFrom(0, 155).default(0).describe('periods ahead until these arrive; 0 is at once'),
    pack: aboveZero.default(1).describe('units in a pack; the order is in whole packs'),
    'at-least': atLeastZero.optional().describe('the least to order, in units'),
    'at-most': atLeastZero.optional().describe('the most to order, in units'),
    'spend-at-most': atLeastZero.optional().describe('the most to spend on the order'),
    decided: decided.optional().describe('what you decided to order instead, in packs or units'),
    because: prose.optional().describe('why you decided so'),
  },
  { error: mapping },
);

/** One amount of money a unit, or several, each from a period on. */
const perUnit = z.union(
  [
    atLeastZero.transform((amount) => [{ from: null, amount }]),
    z
      .record(period, atLeastZero)
      .refine((amounts) => Object.keys(amounts).length > 0, { error: 'holds no amount' })
      .transform((amounts) => Object.entries(amounts).map(([from, amount]) => ({ from, amount }))),
  ],
  { error: 'should be an amount such as 18.50, or amounts by the period that they hold from, such as 2026-Q4: 18.50' },
);

const budget = z.strictObject(
  {
    price: perUnit.optional().describe('income for a unit'),
    cost: perUnit.optional().describe('spending for a unit'),
    'paid-after': wholeFrom(0, 24).default(0).describe('periods from the sale or use until the money moves'),
  },
  { error: mapping },
);

const prior = z.strictObject(
  {
    centre: number.describe('what the coefficient is pulled towards'),
    spread: aboveZero.describe('how far from it is still likely: one standard deviation'),
    on: oneOf(['coefficient', 'partial'])
      .default('coefficient')
      .describe('coefficient, or partial for the partial autocorrelation in its place'),
  },
  { error: mapping },
);

const priors = z.strictObject(
  {
    coefficients: z
      .record(z.string(), prior, { error: 'should hold coefficients by name, such as phi1, indented below it' })
      .default({})
      .describe('a centre and a spread by the coefficient’s name, such as phi1 or Theta1'),
    ridge: atLeastZero.optional().describe('how many observations’ worth of no constant'),
  },
  { error: mapping },
);

const series = z.strictObject(
  {
    name: line.describe('what the brief calls the series'),
    formerly: z
      .union([line.transform((name) => [name]), z.array(line)], { error: 'should be a name or a list of names' })
      .default([])
      .describe('what earlier briefs called it, so that they are found'),
    column: line.describe('the column of the figures that holds it, or in a long file its entry in the series column'),
    unit: line.describe('what is counted, such as litres'),
    places: wholeFrom(0, 6).default(0).describe('decimal places shown'),
    model: line.describe('the model, such as (0,1,1)x(0,1,1)4, or advise'),
    scale: line.optional().describe('plain, log or box-cox with its number'),
    constant: yesOrNo.optional().describe('whether the model has a constant'),
    'fitted-by': oneOf(['maximum-likelihood', 'shrunk']).optional().describe('how the coefficients are estimated'),
    priors: priors.optional().describe('what shrunk estimates are pulled towards, in place of the usual values'),
    reason: prose.optional().describe('why this model'),
    events: z.array(event, { error: 'should be a list' }).default([]).describe('what happened in the past'),
    'sold-out': z
      .array(period, { error: 'should be a list of periods, such as [2022-Q3]' })
      .default([])
      .describe('periods in which more would have been sold, had there been more'),
    judgement: z.array(judgement, { error: 'should be a list' }).default([]).describe('what the figures can’t know'),
    purchase: purchase.optional().describe('the order to be worked out'),
    budget: budget.optional().describe('the budget to be worked out'),
  },
  { error: mapping },
);

const figures = z.strictObject(
  {
    file: line.describe('the file of past figures, as seen from the plan'),
    period: line.describe('the column that holds the period'),
    every: oneOf(everies).optional().describe('how often a figure stands; left out: as found'),
    decimal: oneOf(['point', 'comma'])
      .optional()
      .describe('the decimal sign of the figures, where they don’t show it themselves; left out: as found'),
    series: line.optional().describe('in a long file, the column that says which series a row is of'),
    value: line.optional().describe('in a long file, the column that holds the figure'),
  },
  { error: mapping },
);

export const planSchema = z.strictObject(
  {
    heading: line.describe('the heading of the briefs'),
    'prepared-for': line.describe('the firm that the briefs are for'),
    'prepared-by': line.optional().describe('who made them'),
    issued: date.describe('the date on the briefs'),
    locale: locale.default('en-GB').describe('how dates and numbers look'),
    currency: currency.optional().describe('the currency of costs and prices, by ISO 4217'),
    paper: oneOf(['A4', 'Letter']).default('A4').describe('the paper of the PDF'),
    'year-starts': month.default(1).describe('the first month of the reporting year'),
    ahead: wholeFrom(1, 156).optional().describe('periods to look ahead; left out: one year’s worth'),
    templates: line.optional().describe('a folder of your own pages, words, style and logo, as seen from the plan'),
    figures: figures.describe('where the past figures are'),
    series: z
      .array(series, { error: 'should be a list of series, each starting with "- name:"' })
      .min(1, { error: 'is empty; a plan needs at least one series' })
      .describe('the series to look ahead for'),
  },
  { error: `${shown('plan.yaml')} should hold keys such as heading and series` },
);

export type PlanText = z.output<typeof planSchema>;
export type SeriesText = PlanText['series'][number];
