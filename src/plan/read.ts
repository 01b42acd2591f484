/** A single value of a plan, read by its schema whatever else is wrong with the plan. */
import type { z } from 'zod';

/** A value as the schema reads it, or undefined where it is left out or at fault. */
export const good = <Schema extends z.ZodType>(schema: Schema, value: unknown): z.output<Schema> | undefined => {
  const read = schema.safeParse(value);
  return read.success ? read.data : undefined;
};
