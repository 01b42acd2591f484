/**
 * The record: the waist of the program. Everything above it computes, everything below it presents.
 *
 * One JSON document a brief, holding all that its pages show and all that is needed to compute it again.
 * Numbers are at full precision unless a key is called `printed`, whose numbers stand as they are printed.
 * Periods are written as SDMX 2.1 writes them (`2026-Q4`, `2026-10`, `2026-S2`, `2026`) or as ISO 8601 dates
 * (weeks and four-week periods, by their first day). A missing figure is `null`.
 */
import { z } from 'zod';
import { budget, judgementEntry, purchase } from './decided.js';
import { lookBack } from './looked-back.js';

const number = z.number();
const missable = z.number().nullable();
const count = z.int().min(0);
const period = z.string();
const range = z.tuple([number, number]);
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

const event = z.strictObject({
  what: z.string(),
  from: period,
  to: period.nullable(),
  effect: z.enum(['passing', 'lasting']),
  /** The name of the coefficient in `fit.coefficients` that measures it. */
  coefficient: z.string(),
});

/** Something odd in the figures, and what was done about it. */
const finding = z.strictObject({
  id: z.enum(['missing', 'unfinished-left-out', 'outside-span']),
  periods: z.array(period),
  done: z.enum(['nothing', 'left-out', 'left-missing']),
});

const coefficient = z.strictObject({
  name: z.string(),
  symbol: z.string(),
  value: number,
  standardError: missable,
});

/** A term of a difference equation: a weight on a value so many periods back. */
const lagTerm = z.strictObject({
  lag: z.int().min(1),
  weight: number,
  /** The weight as a sum of products of coefficients, e.g. `φ₁ − φ₁Φ₁`; in TeX. */
  tex: z.string(),
});

const workedTerm = z.strictObject({
  /** `earlier`: what comes from before the first figure, in one line. `floor`: what holding at zero adds. */
  kind: z.enum(['past', 'surprise', 'constant', 'earlier', 'effect-off', 'effect-on', 'floor', 'rounding']),
  /** Null where the line is not about one period. */
  lag: z.int().min(0).nullable(),
  period: period.nullable(),
  /** What was observed, the surprise, the constant c or the effect, to `decimals.value` places. */
  value: missable,
  /** To `decimals.weight` places; printed weight times printed value is the printed product. */
  weight: missable,
  /** The places that this line's value and weight are printed with. */
  decimals: z.strictObject({ value: count, weight: count }),
  /** To the sum's `decimals.product` places. */
  product: number,
  /** True where the value was missing or a lower bound and the model's smoothed value stands in. */
  smoothed: z.boolean(),
  /** The name of the effect, for `effect-off` (from all past periods in the sum together) and `effect-on`. */
  coefficient: z.string().nullable(),
});

/**
 * A line that leads from the worked sum on the model's scale back to the user's units. Log scale: the base figures
 * times the growth factor, e^(sum/100), is the middle. Box-Cox scale: the transformed base figures plus the sum is
 * `transformed`, which the scale turns back into the middle. The middle plus `to-expected` is `expected`.
 */
const backLine = z.strictObject({
  kind: z.enum(['base', 'effect', 'growth', 'transformed', 'middle', 'to-expected', 'expected']),
  period: period.nullable(),
  /** The name of the effect, for `effect`: a factor on the log scale, else an addend. */
  coefficient: z.string().nullable(),
  /** How often a base figure multiplies (transformed: is added); negative where it divides (is taken off). */
  power: z.int().nullable(),
  value: number,
  decimals: count,
  smoothed: z.boolean(),
});

const workedSum = z.strictObject({
  period,
  /** `value`: the sum runs in the figures themselves. `difference`: in the differenced variable. */
  variable: z.enum(['value', 'difference']),
  unit: z.enum(['units', 'log-hundredths', 'transformed']),
  decimals: z.strictObject({ product: count, total: count }),
  terms: z.array(workedTerm),
  /** The column's sum to `decimals.total` places. */
  total: number,
  /** Empty on the plain scale. */
  back: z.array(backLine),
  /** What it all leads to: the first period's expected value in units, to the plan's decimal places. */
  expected: number,
});

const equation = z.strictObject({
  /** Expanded over the figures (on the model's scale): y_t = sum of lags + constant + e_t + sum of surprises. */
  lags: z.array(lagTerm),
  surprises: z.array(lagTerm),
  constant: number,
  /** The same in the differenced variable z. */
  differenced: z.strictObject({
    /** z is the variable differenced `regular` times, and `seasonal` times over a season of `season` periods. */
    definition: z.strictObject({ regular: count, seasonal: count, season: z.int().min(1) }),
    lags: z.array(lagTerm),
    surprises: z.array(lagTerm),
    constant: number,
  }),
  /**
   * The textbook forms, typeset in TeX and broken into lines for a column of 120 mm. Numbers have a decimal point.
   * Off the plain scale, or with events, the variable is not y itself: `variableDefinition` then says what it is.
   */
  tex: z.strictObject({
    variableDefinition: z.string().nullable(),
    backshift: z.string(),
    symbols: z.string(),
    numbers: z.string(),
    differencedDefinition: z.string().nullable(),
    differencedSymbols: z.string().nullable(),
    differencedNumbers: z.string().nullable(),
  }),
  workedSum,
  /** The next forecast as a weighted sum of past figures (model's scale): weight of each lag. */
  weights: z.array(z.strictObject({ lag: z.int().min(1), weight: number })),
  /** What one unit of surprise adds so many periods later; step 0 is 1. */
  echo: z.array(z.strictObject({ step: count, effect: number })),
  /** One for each coefficient of the fit, in its order: the facts that its sentence is chosen by. */
  meanings: z.array(
    z.strictObject({
      coefficient: z.string(),
      role: z.enum([
        'ar',
        'ma',
        'seasonal-ar',
        'seasonal-ma',
        'constant',
        'passing-event',
        'lasting-event',
        'regressor',
      ]),
      lag: z.int().min(0),
      value: number,
      /** Estimate plus and minus 1.96 standard errors, within what the model allows; null without a standard error. */
      range: range.nullable(),
      size: z.enum(['none', 'small', 'medium', 'large']),
      /** What an effect or a drift amounts to in per cent (log scale), else null. */
      percent: missable,
      /** What an effect, a drift or a level amounts to in the series' unit; null where the scale gives no such number. */
      units: missable,
      /** The share of a surprise that stays for good, where this coefficient alone decides it. */
      lasting: missable,
      /** How far, and which way, the first forecast (middle, in units) moves for one standard error more. */
      sensitivity: missable,
    }),
  ),
});

const outlookPeriod = z.strictObject({
  period,
  expected: number,
  middle: number,
  range80: range,
  range95: range,
  standardError: number,
});

const outlookTotal = z.strictObject({
  /**
   * `ahead`: all periods ahead. `year-ahead`: each year's worth of them, where they are too many for a row each on
   * page 1. `reporting-year`: a reporting year, with what has already happened in it.
   */
  kind: z.enum(['ahead', 'year-ahead', 'reporting-year']),
  /** For `reporting-year`, the year it starts in. */
  year: z.int().nullable(),
  periods: z.array(period),
  /** The part of the total that has already happened. */
  known: number,
  expected: number,
  middle: number,
  range80: range,
  range95: range,
});

const advised = z.strictObject({
  form: z.string(),
  scale: z.string(),
  constant: z.boolean(),
  fittedBy: z.enum(['maximum-likelihood', 'shrunk']),
});

const advice = z.strictObject({
  /** What the plan settled beforehand; null where it left it to the advice. */
  asked: z.strictObject({
    scale: z.string().nullable(),
    constant: z.boolean().nullable(),
    fittedBy: z.enum(['maximum-likelihood', 'shrunk']).nullable(),
  }),
  reasons: z.array(z.strictObject({ id: z.string(), numbers: z.record(z.string(), number) })),
  candidates: z.array(
    advised.extend({
      isChosen: z.boolean(),
      aicc: missable,
      miss: missable,
      lastYearMiss: missable,
      inside80: missable,
      leftoverPattern: missable,
    }),
  ),
});

const printedRow = z.strictObject({
  expected: number,
  range80: range,
  range95: range,
  /**
   * The same period (or periods) a year before, to the plan's decimal places, being known; null where it is
   * missing or itself ahead.
   */
  lastYear: missable,
  /** Whole per cent of the printed `expected` against the printed `lastYear`; null unless that is above zero. */
  change: z.int().nullable(),
});

/**
 * The numbers as page 1 prints them. The rule: a number is rounded to the largest power of ten that is not above
 * a tenth of the narrowest 8-in-10 range beside it, and never finer than the plan's decimal places.
 * The total's expected value is the sum of the printed rows, so the column adds up; the answer rounds the total's
 * printed numbers on, so that a reader can check every number against the one it comes from.
 */
const printed = z.strictObject({
  /** Decimal places of rows and of the total row. */
  places: count,
  step: number,
  periods: z.array(printedRow),
  /** One for each of the outlook's totals of the kind `year-ahead`; their expected values add up to the total's. */
  years: z.array(printedRow),
  total: printedRow,
  /** The answer's numbers: the total, rounded by its own range. */
  answer: z.strictObject({
    places: count,
    step: number,
    expected: number,
    range80: range,
    lastYear: missable,
    change: z.int().nullable(),
  }),
});

const printedJudged = z.strictObject({ alone: number, added: number });

const trackRecord = z.strictObject({
  origins: count,
  /** Forecasts that could be scored. */
  count,
  /** Σ|error| / Σ|actual| of all forecasts; null where every actual is zero. */
  miss: missable,
  lastYearMiss: missable,
  lastYearPlusChangeMiss: missable,
  best: z.enum(['model', 'last-year', 'last-year-plus-change']),
  /** Above zero where the forecasts were too low. */
  bias: missable,
  mase: number,
  inside80: number,
  inside95: number,
  intervalScore: number,
  missByStep: z.array(missable),
  lastYearMissByStep: z.array(missable),
  lastYearPlusChangeMissByStep: z.array(missable),
  inside80ByStep: z.array(missable),
  /** One step ahead, the latest last: what was expected, and what happened. */
  nextPeriod: z.array(z.strictObject({ period, expected: number, range80: range, actual: number })),
});

const priors = z.strictObject({
  coefficients: z.record(
    z.string(),
    z.strictObject({ centre: number, spread: number, on: z.enum(['coefficient', 'partial']) }),
  ),
  ridge: number,
});

/** Facts that sentences are chosen by; computed here so that templates choose words and nothing else. */
const facts = z.strictObject({
  direction: z.strictObject({
    kind: z.enum(['rising', 'falling', 'level', 'uneven', 'unknown']),
    /** Average change per year over the last years, as a share of the level (0.05 is 5%); null if unknown. */
    perYear: missable,
    years: count,
    /** The lowest and the highest of the yearly totals; null if unknown. */
    span: range.nullable(),
  }),
  /** Null without a season. */
  season: z
    .strictObject({
      strength: z.enum(['strong', 'weak', 'none']),
      /** Positions in the year (1 to m) that stand together at the season's peak. */
      peak: z.array(z.int().min(1)),
      /** Their average share of a full year's total over the last years; null where totals make no sense. */
      share: missable,
      /** The quietest position and its share. */
      trough: z.int().min(1),
      troughShare: missable,
      /** Whether the first position of `peak`, or one of them, was the year's highest in every full year. */
      everyYear: z.boolean(),
      fullYears: count,
    })
    .nullable(),
  /** The last observed period against what the model expected one period before. */
  surprise: z
    .strictObject({
      period,
      actual: number,
      expected: number,
      /** Share of the expected value; null where that is zero or below. */
      relative: missable,
      size: z.enum(['none', 'small', 'large']),
      /** Share of the surprise that is expected still to be there in the next period and in the same period of next year. */
      carryNext: number,
      carryYear: missable,
    })
    .nullable(),
  /** Width of the answer's 8-in-10 range as a share of its expected value; null where that is zero or below. */
  relativeRange: missable,
  /** Only what this series has earned, worst first. */
  caveats: z.array(
    z.strictObject({
      id: z.enum([
        'unsettled-fit',
        'short-history',
        'judgement',
        'short-order',
        'missing-figures',
        'wide-range',
        'leftover-pattern',
        'ranges-narrow',
        'changed-lately',
        'odd-period',
        'near-limit',
        'event-set-aside',
        'lasting-event',
        'sold-out',
        'ranges-untested',
        'axis-below-zero',
      ]),
      count: missable,
      share: missable,
      what: z.string().nullable(),
      from: period.nullable(),
      to: period.nullable(),
    }),
  ),
});

export const recordSchema = z.strictObject({
  format: z.literal('seasonbrief-record/1'),
  brief: z.string(),
  issued: z.string(),
  software: z.strictObject({ name: z.literal('seasonbrief'), version: z.string() }),
  plan: z.strictObject({
    heading: z.string(),
    preparedFor: z.string(),
    preparedBy: z.string().nullable(),
    locale: z.string(),
    currency: z.string(),
    paper: z.enum(['A4', 'Letter']),
    yearStarts: z.int().min(1).max(12),
    templates: sha256,
  }),
  series: z.strictObject({
    name: z.string(),
    slug: z.string(),
    /** What earlier briefs called it. */
    formerly: z.array(z.string()),
    unit: z.string(),
    places: count,
    every: z.enum(['week', 'four-weeks', 'month', 'quarter', 'half-year', 'year']),
    season: z.int().min(1),
  }),
  figures: z.strictObject({
    start: period,
    values: z.array(missable),
    sha256,
    findings: z.array(finding),
    events: z.array(event),
    soldOut: z.array(period),
    regressors: z.array(z.strictObject({ name: z.string(), values: z.array(number) })),
  }),
  model: z.strictObject({
    form: z.string(),
    scale: z.string(),
    constant: z.boolean(),
    fittedBy: z.enum(['maximum-likelihood', 'shrunk']),
    /** What the estimates were pulled towards; null by maximum likelihood. */
    priors: priors.nullable(),
    chosenBy: z.enum(['planner', 'advice']),
    /** The planner's own words. */
    reason: z.string().nullable(),
    /** What was advised, why, and against what; null where the planner chose. */
    advice: advice.nullable(),
  }),
  fit: z.strictObject({
    coefficients: z.array(coefficient),
    innovationVariance: number,
    logLikelihood: number,
    aicc: missable,
    observations: count,
    /** One-step surprises on the model's scale; null at gaps, where sold out, and in the diffuse start. */
    residuals: z.array(missable),
    standardizedResiduals: z.array(missable),
    settled: z.boolean(),
    /** What the coefficients count for: their number, or less where they are shrunk. */
    effectiveCoefficients: number,
    /** By maximum likelihood, in the order of `coefficients`, where these are shrunk; null where not, or not to be had. */
    unrestricted: z.array(z.strictObject({ value: number, standardError: missable })).nullable(),
    /** The demand expected in each period that sold out: its middle, in units. */
    demand: z.array(z.strictObject({ period, middle: number })),
    /** Polynomials with a root within 0.01 of the unit circle, and whether two sides nearly cancel. */
    nearUnitRoots: z.array(z.string()),
    nearlyCancels: z.boolean(),
    /** Autocorrelations of the standardized residuals at lags 1, 2, …, and the bound 1.96/√n. */
    autocorrelations: z.array(number),
    autocorrelationBound: number,
  }),
  equation,
  outlook: z.strictObject({
    seed: count,
    paths: count,
    periods: z.array(outlookPeriod),
    totals: z.array(outlookTotal),
    /** True where the paths were held at zero or above. */
    heldAtZero: z.boolean(),
    /** How the ranges were widened: Student's degrees of freedom, and factors on the standard error. */
    calibration: z.strictObject({
      freedom: number,
      factors: z.strictObject({
        freedom: number,
        recent: number,
        estimates: z.array(number),
        horizon: z.array(number),
      }),
    }),
  }),
  printed,
  facts,
  assumptions: z.array(
    z.strictObject({
      id: z.string(),
      status: z.enum(['holds', 'doubtful', 'fails', 'untested']),
      statistic: missable,
      pValue: missable,
      /** Further numbers that a sentence may need, by name. */
      details: z.record(z.string(), number),
      /** Single periods that stand out, on the model's scale, and what each does to the next forecast, in units. */
      periods: z.array(
        z.strictObject({
          period,
          kind: z.enum(['additive', 'level-shift']),
          size: number,
          t: number,
          forecastChange: number,
        }),
      ),
    }),
  ),
  /** How forecasts made the same way turned out; null with too little history. */
  trackRecord: trackRecord.nullable(),
  /** What the planner changed in the outlook; `alone` is what the figures alone say. */
  judgement: z
    .strictObject({
      entries: z.array(judgementEntry).min(1),
      alone: z.strictObject({ periods: z.array(outlookPeriod), totals: z.array(outlookTotal) }),
      /** As page 1's rows print it: what the figures alone say, and what was added. Both columns add up. */
      printed: z.strictObject({ periods: z.array(printedJudged), total: printedJudged, answer: number }),
    })
    .nullable(),
  purchase: purchase.nullable(),
  budget: budget.nullable(),
  /** How earlier briefs turned out; null where there are none. */
  lookBack: lookBack.nullable(),
});

export type BriefRecord = z.infer<typeof recordSchema>;
