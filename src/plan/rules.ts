/**
 * The rules between a plan's keys. They read the plan as typed, so that they hold whatever else is wrong with it;
 * where a value that a rule needs is itself at fault, the schema has said so and the rule keeps quiet.
 */
import { type Every, examplePeriod, isPeriod, kindsOf, seasonOf } from '../calendar/calendar.js';
import { shown } from '../figures/input-error.js';
import type { Path } from './document.js';
import { type Remark, sentence, valueAt } from './faults.js';
import { remarksOnOrder } from './order-rules.js';
import { good } from './read.js';
import { planSchema } from './schema.js';

/** What a plan asks of a model, for whoever knows models to check. Null where the plan leaves it out. */
export interface AskedModel {
  readonly model: string;
  readonly scale: string | null;
  readonly constant: boolean | null;
  readonly every: Every | null;
}

/** Each message is a whole sentence that says what stands there: `model "(0,1" is not …`. */
export type CheckModel = (
  asked: AskedModel,
) => readonly { readonly key: 'model' | 'scale' | 'constant'; readonly message: string }[];

/** All that the rules remark on. */
export const remarksOnRules = (plan: unknown, checkModel: CheckModel): readonly Remark[] => {
  const every = good(planSchema.shape.figures.shape.every, valueAt(plan, ['figures', 'every'])) ?? null;
  return [
    ...layout(plan),
    ...ahead(plan, every),
    ...eachOnce(plan, 'name'),
    ...eachOnce(plan, 'column'),
    ...money(plan),
    ...seriesPaths(plan).flatMap((path) => [
      ...periodsFit(plan, path, every),
      ...spansRunForward(plan, path, every),
      ...soldOutOnce(plan, path),
      ...priorsShrunk(plan, path),
      ...remarksOnOrder(plan, path),
      ...budgetSide(plan, path),
      ...model(plan, path, every, checkModel),
    ]),
  ];
};

/** Where a series names a period: the paths of all, whether or not they hold one. */
const periodPaths = (plan: unknown, series: Path): readonly Path[] => [
  ...['events', 'judgement'].flatMap((key) =>
    itemPaths(plan, [...series, key]).flatMap((item) => [
      [...item, 'from'],
      [...item, 'to'],
    ]),
  ),
  ...itemPaths(plan, [...series, 'sold-out']),
];

export const seriesPaths = (plan: unknown): readonly Path[] => itemPaths(plan, ['series']);

const itemPaths = (plan: unknown, path: Path): readonly Path[] => {
  const list = valueAt(plan, path);
  return Array.isArray(list) ? list.map((_, i) => [...path, i]) : [];
};

const text = (plan: unknown, path: Path): string | undefined => {
  const value = valueAt(plan, path);
  return typeof value === 'string' ? value : undefined;
};

const layout = (plan: unknown): readonly Remark[] => {
  const has = (key: string): boolean => valueAt(plan, ['figures', key]) !== undefined;
  if (has('series') === has('value')) return [];
  const [given, missing] = has('series') ? ['series', 'value'] : ['value', 'series'];
  return [
    {
      path: ['figures', given],
      on: 'key',
      message: `figures.${given} stands without figures.${missing}; a long file needs both, a wide one neither`,
    },
  ];
};

const ahead = (plan: unknown, every: Every | null): readonly Remark[] => {
  const typed = valueAt(plan, ['ahead']);
  if (typed === undefined) {
    if (every !== null || valueAt(plan, ['figures', 'every']) !== undefined) return [];
    const message = 'ahead is missing; give it, or give figures.every so that one year’s worth can be taken';
    return [{ path: ['ahead'], on: 'value', message }];
  }
  const periods = good(planSchema.shape.ahead, typed);
  if (every === null || periods === undefined || periods <= 3 * seasonOf(every)) return [];
  const rest = `looks further than three years, which are ${3 * seasonOf(every)} periods`;
  return [{ path: ['ahead'], on: 'value', message: sentence(plan, ['ahead'], rest) }];
};

const eachOnce = (plan: unknown, key: 'name' | 'column'): readonly Remark[] => {
  const first = new Map<string, number>();
  return seriesPaths(plan).flatMap((series, i): readonly Remark[] => {
    const path = [...series, key];
    const typed = text(plan, path)?.trim();
    if (typed === undefined) return [];
    const before = first.get(typed);
    if (before === undefined) {
      first.set(typed, i + 1);
      return [];
    }
    return [{ path, on: 'value', message: sentence(plan, path, `is also the ${key} of series ${before} in the list`) }];
  });
};

const money = (plan: unknown): readonly Remark[] => {
  if (valueAt(plan, ['currency']) !== undefined) return [];
  const asking = seriesPaths(plan)
    .flatMap((path) =>
      [
        // An order that aims at a chance needs no money.
        ['purchase', 'unit-cost'],
        ['purchase', 'unit-price'],
        ['budget'],
      ].map((keys) => ({ on: [...path, keys[0]], of: [...path, ...keys] })),
    )
    .find(({ of }) => valueAt(plan, of) !== undefined);
  if (!asking) return [];
  const message = `currency is missing; a ${asking.on[asking.on.length - 1]} needs one, such as "currency: GBP" at the top`;
  return [{ path: asking.on, on: 'key', message }];
};

const periodsFit = (plan: unknown, series: Path, every: Every | null): readonly Remark[] =>
  periodPaths(plan, series).flatMap((path): readonly Remark[] => {
    const typed = text(plan, path);
    if (every === null || typed === undefined || kindsOf(typed).length === 0 || isPeriod(typed, every)) return [];
    return [{ path, on: 'value', message: sentence(plan, path, `is not ${examplePeriod(every)}`) }];
  });

const spansRunForward = (plan: unknown, series: Path, every: Every | null): readonly Remark[] =>
  ['events', 'judgement'].flatMap((key) =>
    itemPaths(plan, [...series, key]).flatMap((item): readonly Remark[] => {
      const path = [...item, 'to'];
      const to = text(plan, path);
      if (to === undefined) return [];
      if (text(plan, [...item, 'effect']) === 'lasting') {
        const message = sentence(plan, path, 'ends an effect that is lasting; leave "to" out, or call it passing');
        return [{ path, on: 'value', message }];
      }
      const from = text(plan, [...item, 'from']);
      const kind = every ?? kindsOf(to)[0];
      if (from === undefined || kind === undefined || !isPeriod(from, kind) || !isPeriod(to, kind)) return [];
      // ISO dates and SDMX periods of one kind sort as text; an index would set weeks of another phase apart.
      if (from <= to) return [];
      return [{ path, on: 'value', message: sentence(plan, path, `is before ${shown(from)}, where it starts`) }];
    }),
  );

const soldOutOnce = (plan: unknown, series: Path): readonly Remark[] => {
  const paths = itemPaths(plan, [...series, 'sold-out']);
  const texts = paths.map((path) => text(plan, path));
  return paths.flatMap((path, i): readonly Remark[] =>
    texts[i] !== undefined && texts.indexOf(texts[i]) < i
      ? [{ path, on: 'value', message: sentence(plan, path, 'stands in the list twice') }]
      : [],
  );
};

const priorsShrunk = (plan: unknown, series: Path): readonly Remark[] => {
  const path = [...series, 'priors'];
  if (valueAt(plan, path) === undefined || text(plan, [...series, 'fitted-by']) === 'shrunk') return [];
  const message = 'priors stand without "fitted-by: shrunk", which alone uses them; add it, or leave priors out';
  return [{ path, on: 'key', message }];
};

const budgetSide = (plan: unknown, series: Path): readonly Remark[] => {
  const path = [...series, 'budget'];
  const budget = valueAt(plan, path);
  if (typeof budget !== 'object' || budget === null) return [];
  if (Object.hasOwn(budget, 'price') !== Object.hasOwn(budget, 'cost')) return [];
  const message = 'budget needs either a price (for income) or a cost (for spending), and only one of them';
  return [{ path, on: 'key', message }];
};

const model = (plan: unknown, series: Path, every: Every | null, checkModel: CheckModel): readonly Remark[] => {
  const shape = planSchema.shape.series.element.shape;
  const typed = good(shape.model, valueAt(plan, [...series, 'model']));
  if (typed === undefined) return [];
  const scale = good(shape.scale, valueAt(plan, [...series, 'scale'])) ?? null;
  const constant = good(shape.constant, valueAt(plan, [...series, 'constant'])) ?? null;
  return checkModel({ model: typed, scale, constant, every }).map(({ key, message }) => ({
    path: [...series, key],
    on: 'value',
    message,
  }));
};
