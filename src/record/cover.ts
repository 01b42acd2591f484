/** The cover's record: a row for each series that has a brief in the dated folder. */
import { z } from 'zod';
import { lineFigures, printedMoney } from './decided.js';
import { recordSchema } from './record.js';

const record = recordSchema.shape;

/** Null where no series is of the kind; `net` where there is income and spending. */
const sides = {
  income: lineFigures.nullable(),
  spending: lineFigures.nullable(),
  net: lineFigures.nullable(),
};

export const coverSchema = z.strictObject({
  format: z.literal('seasonbrief-cover/1'),
  issued: z.string(),
  software: record.software,
  plan: record.plan,
  rows: z.array(
    z.strictObject({
      brief: z.string(),
      /** SHA-256 of the brief's record file. */
      sha256: z.string(),
      series: record.series,
      /** The last figures, at most five years, and the periods ahead, for the small line. */
      history: z.array(z.number().nullable()),
      outlook: z.array(z.number()),
      /** First and last period ahead. */
      span: z.tuple([z.string(), z.string()]),
      answer: record.printed.shape.answer,
      caveats: record.facts.shape.caveats,
      /** How forecasts made this way turned out; null where there are too few figures to tell. */
      trackRecord: z.strictObject({ count: z.int(), miss: z.number().nullable(), inside80: z.number() }).nullable(),
    }),
  ),
  /** What is to be ordered: the best order, or what the planner decided instead. */
  orders: z.array(
    z.strictObject({
      brief: z.string(),
      series: record.series,
      packs: z.number(),
      pack: z.number(),
      units: z.number(),
      unitCost: z.number().nullable(),
      cost: z.number().nullable(),
      isDecided: z.boolean(),
      /** The period at whose start it is to be there. */
      arrives: z.string(),
    }),
  ),
  /** All budgets as one; null where no series has one. */
  budget: z
    .strictObject({
      seed: z.int(),
      /** How far the correlations were pulled towards none. */
      lambda: z.number(),
      /** Of the surprises of the series named, series by series. */
      correlations: z.array(z.array(z.number())),
      series: z.array(z.string()),
      /** Names of series that look ahead over other periods and are left out. */
      apart: z.array(z.string()),
      periods: z.array(z.strictObject({ period: z.string(), ...sides })),
      totals: z.array(
        z.strictObject({
          kind: z.enum(['ahead', 'reporting-year', 'calendar-year']),
          year: z.int().nullable(),
          /** Whether a part of it has already happened. */
          isPartKnown: z.boolean(),
          ...sides,
        }),
      ),
      /** As they are printed, by kind. */
      printed: z.strictObject({
        income: printedMoney.nullable(),
        spending: printedMoney.nullable(),
        net: printedMoney.nullable(),
        /** Decimal places (negative: tens, hundreds) of cash. */
        cash: z.int(),
      }),
      /** Cumulated from nothing in hand, at the end of each period; null where nothing is paid out. */
      cash: z
        .strictObject({
          /** `cautious`: cash stays above it nine times in ten. */
          periods: z.array(z.strictObject({ period: z.string(), expected: z.number(), cautious: z.number() })),
          lowest: z.strictObject({ period: z.string(), cautious: z.number() }),
          /** Whether money that is still due comes from a missing figure and counts as none. */
          hasUnknown: z.boolean(),
        })
        .nullable(),
    })
    .nullable(),
});

export type CoverRecord = z.infer<typeof coverSchema>;
