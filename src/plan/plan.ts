/** The plan: what to make briefs of, read from `plan.yaml`. */
import { readFile } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import { type Every, seasonOf } from '../calendar/calendar.js';
import { InputError, type Place } from '../figures/input-error.js';
import { type Located, type Path, readDocument } from './document.js';
import { inFileOrder, located, remarksOf } from './faults.js';
import { type CheckModel, remarksOnRules } from './rules.js';
import { type PlanText, planSchema, type SeriesText } from './schema.js';
import { slugsOf } from './slugs.js';

export type { AskedModel, CheckModel } from './rules.js';

export interface Plan {
  /** Absolute, as is `folder`. */
  readonly path: string;
  readonly folder: string;
  readonly heading: string;
  readonly preparedFor: string;
  readonly preparedBy: string | null;
  /** ISO 8601 date. */
  readonly issued: string;
  /** Canonical BCP 47 tag that Intl supports. */
  readonly locale: string;
  /** ISO 4217; `XXX`, its code for no currency, where the plan has no money in it. */
  readonly currency: string;
  readonly paper: 'A4' | 'Letter';
  /** First month of the reporting year, 1 to 12. */
  readonly yearStarts: number;
  /** Periods to look ahead. */
  readonly ahead: number;
  readonly aheadAt: Place;
  /** Absolute path of a folder of the user's own templates, or null. */
  readonly templates: string | null;
  readonly templatesAt: Place;
  readonly figures: PlannedFigures;
  readonly series: readonly PlannedSeries[];
}

export interface PlannedFigures {
  /** Absolute path. */
  readonly file: string;
  /** The file as typed, for messages. */
  readonly fileTyped: string;
  readonly period: string;
  /** Null: as found in the file. */
  readonly every: Every | null;
  /** Null: as found in the file. */
  readonly decimal: 'point' | 'comma' | null;
  /** Both null in a wide file. */
  readonly series: string | null;
  readonly value: string | null;
  readonly at: Place;
  readonly periodAt: Place;
  readonly seriesAt: Place;
  readonly valueAt: Place;
}

export interface PlannedSeries {
  readonly name: string;
  readonly slug: string;
  /** Names that earlier briefs had for it. */
  readonly formerly: readonly string[];
  /** What these names made of their files. */
  readonly formerSlugs: readonly string[];
  readonly column: string;
  readonly unit: string;
  readonly places: number;
  /** As typed, or `advise`. */
  readonly model: string;
  readonly scale: string | null;
  readonly constant: boolean | null;
  readonly fittedBy: 'maximum-likelihood' | 'shrunk' | null;
  /** In place of the usual ones; null leaves these as they are. */
  readonly priors: PlannedPriors | null;
  readonly reason: string | null;
  readonly events: readonly PlannedEvent[];
  readonly soldOut: readonly string[];
  readonly judgement: readonly Judgement[];
  readonly purchase: Purchase | null;
  readonly budget: Budget | null;
  readonly at: Place;
  readonly columnAt: Place;
}

export interface PlannedPriors {
  readonly coefficients: Readonly<
    Record<string, { readonly centre: number; readonly spread: number; readonly on: 'coefficient' | 'partial' }>
  >;
  readonly ridge: number | null;
}

export interface PlannedEvent {
  readonly what: string;
  readonly from: string;
  /** Null if and only if the effect is lasting. */
  readonly to: string | null;
  readonly effect: 'passing' | 'lasting';
  readonly at: Place;
}

export interface Judgement {
  readonly what: string;
  readonly from: string;
  /** Null: until the end of the outlook. */
  readonly to: string | null;
  /** `percent` 8 is 8% more; `amount` is in the series' unit, a period. */
  readonly change: { readonly kind: 'percent' | 'amount'; readonly value: number };
  readonly because: string;
  readonly at: Place;
}

export interface Purchase {
  /** Periods that the order must last, from its arrival, and periods until it arrives. */
  readonly covers: number;
  readonly arrives: number;
  /** Money a unit; null where left out. */
  readonly unitCost: number | null;
  /** What decides: money a unit, or a share between 0 and 1. */
  readonly aim:
    | {
        readonly kind: 'costs';
        readonly unitPrice: number;
        readonly leftoverValue: number;
        readonly goodwill: number;
      }
    | { readonly kind: 'not-short'; readonly chance: number };
  readonly inStock: number;
  readonly onOrder: number;
  readonly onOrderArrives: number;
  readonly pack: number;
  readonly atLeast: number | null;
  readonly atMost: number | null;
  readonly spendAtMost: number | null;
  /** Units that the planner decided on instead, and why. */
  readonly decided: { readonly units: number; readonly because: string } | null;
  readonly at: Place;
}

export interface Budget {
  readonly kind: 'income' | 'spending';
  /** Money for a unit, each amount from a period on; the first may hold from the start. */
  readonly perUnit: readonly { readonly from: string | null; readonly amount: number }[];
  /** Periods from the sale or use until the money moves. */
  readonly paidAfter: number;
  readonly at: Place;
}

/**
 * Reads and checks a plan. Places and messages name the file as `path` was given.
 * Throws an InputError with every fault in one go, in the order of the file.
 */
export const readPlan = async (path: string, checkModel: CheckModel): Promise<Plan> => {
  const text = await readText(path);
  return parsePlan(text, path, checkModel);
};

/** The plan in a text that was read from `path`. Throws an InputError as `readPlan` does. */
export const parsePlan = (text: string, path: string, checkModel: CheckModel): Plan => {
  const document = parsedDocument(text, path);
  const read = planSchema.safeParse(document.value);
  const remarks = [
    ...(read.success ? [] : remarksOf(document.value, read.error.issues)),
    ...remarksOnRules(document.value, checkModel),
  ];
  const faults = inFileOrder([...document.faults, ...located(document, remarks)]);
  if (faults.length > 0 || !read.success) throw new InputError(faults);
  return planOf(read.data, path, document);
};

const readText = async (path: string): Promise<string> => {
  const whole = { file: path, line: null, column: null };
  const bytes = await readFile(path).catch((error: NodeJS.ErrnoException) => {
    const message =
      error.code === 'ENOENT'
        ? 'there is no such plan; give the path of a plan, or make one with "seasonbrief start"'
        : `the plan can’t be read: ${error.message}`;
    throw new InputError([{ ...whole, message }]);
  });
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new InputError([{ ...whole, message: 'the plan is not UTF-8 text; save it as UTF-8' }]);
  }
};

const parsedDocument = (text: string, path: string): Located => {
  const document = readDocument(text, path);
  if ('broken' in document) throw new InputError(inFileOrder(document.broken));
  const { value } = document;
  if (typeof value === 'object' && value !== null && !Array.isArray(value)) return document;
  const empty = value === undefined || value === '';
  const what = empty ? 'the plan is empty' : 'the plan is not a list of keys';
  throw new InputError([{ ...document.placeOf([], 'value'), message: `${what}; it starts with "heading: …"` }]);
};

const planOf = (plan: PlanText, path: string, document: Located): Plan => {
  const folder = dirname(resolve(path));
  const slugs = slugsOf(plan.series.map(({ name }) => name));
  return {
    path: resolve(path),
    folder,
    heading: plan.heading,
    preparedFor: plan['prepared-for'],
    preparedBy: plan['prepared-by'] ?? null,
    issued: plan.issued,
    locale: plan.locale,
    currency: plan.currency ?? 'XXX',
    paper: plan.paper,
    yearStarts: plan['year-starts'],
    // The rules have seen to it that one of the two is given.
    ahead: plan.ahead ?? seasonOf(plan.figures.every ?? 'year'),
    aheadAt: document.placeOf(['ahead'], 'value'),
    templates: plan.templates === undefined ? null : resolve(folder, plan.templates),
    templatesAt: document.placeOf(['templates'], 'value'),
    figures: figuresOf(plan.figures, folder, document),
    series: plan.series.map((series, i) => seriesOf(series, slugs[i], ['series', i], document)),
  };
};

const figuresOf = (figures: PlanText['figures'], folder: string, { placeOf }: Located): PlannedFigures => ({
  file: resolve(folder, figures.file),
  fileTyped: figures.file,
  period: figures.period.trim(),
  every: figures.every ?? null,
  decimal: figures.decimal ?? null,
  series: figures.series?.trim() ?? null,
  value: figures.value?.trim() ?? null,
  at: placeOf(['figures', 'file'], 'value'),
  periodAt: placeOf(['figures', 'period'], 'value'),
  seriesAt: placeOf(['figures', 'series'], 'value'),
  valueAt: placeOf(['figures', 'value'], 'value'),
});

const seriesOf = (series: SeriesText, slug: string, path: Path, document: Located): PlannedSeries => {
  const at = (...below: Path): Place => document.placeOf([...path, ...below], 'value');
  return {
    name: series.name,
    slug,
    formerly: series.formerly,
    formerSlugs: series.formerly.flatMap((name) => slugsOf([name])),
    column: series.column.trim(),
    unit: series.unit,
    places: series.places,
    model: series.model,
    scale: series.scale ?? null,
    constant: series.constant ?? null,
    fittedBy: series['fitted-by'] ?? null,
    priors: series.priors ? { coefficients: series.priors.coefficients, ridge: series.priors.ridge ?? null } : null,
    reason: series.reason ?? null,
    events: series.events.map((event, i) => ({
      ...event,
      // A passing event without an end touched one period.
      to: event.effect === 'lasting' ? null : (event.to ?? event.from),
      at: at('events', i),
    })),
    soldOut: series['sold-out'],
    judgement: series.judgement.map((judgement, i) => ({
      ...judgement,
      to: judgement.to ?? null,
      at: at('judgement', i),
    })),
    purchase: series.purchase ? purchaseOf(series.purchase, at('purchase')) : null,
    budget: series.budget ? budgetOf(series.budget, at('budget')) : null,
    at: at(),
    columnAt: at('column'),
  };
};

const purchaseOf = (purchase: NonNullable<SeriesText['purchase']>, at: Place): Purchase => ({
  covers: purchase.covers,
  arrives: purchase.arrives,
  unitCost: purchase['unit-cost'] ?? null,
  aim:
    purchase['not-short'] !== undefined
      ? { kind: 'not-short', chance: purchase['not-short'] }
      : {
          // The rules have seen to it that these are given.
          kind: 'costs',
          unitPrice: purchase['unit-price'] ?? 0,
          leftoverValue: purchase['leftover-value'] ?? 0,
          goodwill: purchase.goodwill ?? 0,
        },
  inStock: purchase['in-stock'],
  onOrder: purchase['on-order'],
  onOrderArrives: purchase['on-order-arrives'],
  pack: purchase.pack,
  atLeast: purchase['at-least'] ?? null,
  atMost: purchase['at-most'] ?? null,
  spendAtMost: purchase['spend-at-most'] ?? null,
  decided:
    purchase.decided === undefined
      ? null
      : {
          units: purchase.decided.value * (purchase.decided.kind === 'packs' ? purchase.pack : 1),
          because: purchase.because ?? '',
        },
  at,
});

const budgetOf = (budget: NonNullable<SeriesText['budget']>, at: Place): Budget => ({
  kind: budget.price !== undefined ? 'income' : 'spending',
  perUnit: [...(budget.price ?? budget.cost ?? [])].sort((a, b) => ((a.from ?? '') < (b.from ?? '') ? -1 : 1)),
  paidAfter: budget['paid-after'],
  at,
});
