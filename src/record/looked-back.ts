/** How earlier briefs of a series turned out, and why its outlook changed since the last one: a part of its record. */
import { z } from 'zod';

const number = z.number();
const missable = number.nullable();
const count = z.int().min(0);
const period = z.string();
const range = z.tuple([number, number]);

/** A period that was forecast then and is known now. */
const outcome = z.strictObject({
  brief: z.string(),
  issued: z.string(),
  period,
  /** As the brief said, judgement and all. */
  expected: number,
  range80: range,
  range95: range,
  actual: number,
});

/** What moved a forecast, in the order in which it is taken apart; the parts add up to the change. */
const parts = z.strictObject({
  /** The program works otherwise than then. */
  program: number,
  /** Figures known then were corrected. */
  revised: number,
  /** Figures came in since. */
  observed: number,
  /** The coefficients were estimated anew. */
  estimated: number,
  /** Model, events or judgement changed. */
  model: number,
});

const changed = z.strictObject({ was: number, now: number, parts });

export const lookBack = z.strictObject({
  /** Every earlier record of the series that counts the same thing, the oldest first. */
  earlier: z.array(
    z.strictObject({
      brief: z.string(),
      sha256: z.string(),
      issued: z.string(),
      /** Forecast periods that are known now, how many fell inside, and Σ|error| and Σ|actual| over them. */
      known: count,
      inside80: count,
      inside95: count,
      error: number,
      actual: number,
    }),
  ),
  /** Earlier records that are not compared: another unit, another kind of period, or figures counted otherwise. */
  unlike: z.array(
    z.strictObject({ brief: z.string(), sha256: z.string(), reason: z.enum(['unit', 'period', 'counting']) }),
  ),
  /** Over all forecasts of all those briefs; null where none can be scored yet. */
  running: z.strictObject({ count, inside80: count, inside95: count, miss: missable }).nullable(),
  /** Each brief's first period ahead, where it is known now; the oldest first. */
  next: z.array(outcome),
  /** The periods of the latest earlier brief that are known now. */
  last: z.array(outcome),
  /** For the periods that the latest earlier brief and this one both look ahead to; null where there are none. */
  change: z
    .strictObject({
      brief: z.string(),
      issued: z.string(),
      periods: z.array(changed.extend({ period })),
      total: changed,
      /** The total to page 1's step; its parts add up. */
      printed: changed,
    })
    .nullable(),
  /** The latest earlier order whose periods are all known now. Units, by the figures. */
  order: z
    .strictObject({
      brief: z.string(),
      issued: z.string(),
      span: z.tuple([period, period]),
      ordered: number,
      isDecided: z.boolean(),
      demand: number,
      leftOver: number,
      lost: number,
    })
    .nullable(),
  /** The latest earlier judgement of which a period is known now: Σ|error| with it and without it over those periods. */
  judgement: z
    .strictObject({
      brief: z.string(),
      issued: z.string(),
      what: z.array(z.string()),
      periods: z.array(period),
      withIt: number,
      without: number,
    })
    .nullable(),
});

export type LookBack = z.infer<typeof lookBack>;
export type ChangeParts = z.infer<typeof parts>;
