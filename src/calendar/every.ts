/** How often a figure stands: the kinds of period that a plan can ask for. */
export const everies = ['week', 'four-weeks', 'month', 'quarter', 'half-year', 'year'] as const;

export type Every = (typeof everies)[number];

const seasons: Readonly<Record<Every, number>> = {
  week: 52,
  'four-weeks': 13,
  month: 12,
  quarter: 4,
  'half-year': 2,
  year: 1,
};

/** How many such periods make a reporting year: the natural length m of a season. */
export const seasonOf = (every: Every): number => seasons[every];
