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

const purchase = z.strictObject(
  {
    covers: wholeFrom(1, 156).describe('how many periods the order must last'),
    'unit-cost': aboveZero.describe('what a unit costs you'),
    'unit-price': atLeastZero.describe('what a unit sells for'),
    'leftover-value': number.describe('what a unit left over is still worth'),
    'in-stock': atLeastZero.describe('units in stock now'),
    'on-order': atLeastZero.default(0).describe('units ordered and still to come'),
    pack: aboveZero.default(1).describe('units in a pack; the order is in whole packs'),
  },
  { error: mapping },
);

const budget = z.strictObject(
  {
    price: atLeastZero.optional().describe('income for a unit'),
    cost: atLeastZero.optional().describe('spending for a unit'),
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
