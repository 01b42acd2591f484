/** The cover's record: a row for each series that has a brief in the dated folder. */
import { z } from 'zod';
import { recordSchema } from './record.js';

const record = recordSchema.shape;

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
});

export type CoverRecord = z.infer<typeof coverSchema>;
