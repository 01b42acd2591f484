/** The season's order on page 2, its sentences, its table and its chart; and what page 1 says of it. */
import { orderChart } from '../charts/order-chart.js';
import type { BriefRecord } from '../record/record.js';
import { plainText } from './document.js';
import type { Formats } from './formats.js';
import { frequency, frequencySentence } from './frequency.js';
import type { Theme } from './theme.js';

type Purchase = NonNullable<BriefRecord['purchase']>;
type Outcome = Purchase['best'];

export async function orderView(record: BriefRecord, theme: Theme, formats: Formats) {
  const { purchase, series } = record;
  if (purchase === null) return null;
  return {
    title: theme.say('order.title'),
    answer: orderSentence(record, theme, formats),
    reasons: [...coverSentences(record, purchase, theme, formats), ...costSentences(record, purchase, theme, formats)],
    decided: decidedSentences(record, purchase, theme, formats),
    nearby: nearbyTable(record, purchase, theme, formats),
    chart: {
      title: theme.say(purchase.ratio === null ? 'order.chart.short' : 'order.chart.result', { unit: series.unit }),
      svg: await orderChart(purchase, {
        described: plainText(
          theme.say(purchase.ratio === null ? 'order.chart.described-short' : 'order.chart.described', {
            best: quantity(purchase.best, record, theme, formats),
          }),
        ),
        units: theme.say('order.chart.axis', { unit: series.unit }),
        number: formats.number,
        value: purchase.ratio === null ? (value) => formats.share(value) : formats.money,
        best: theme.say('order.chart.best'),
        decided: theme.say('order.chart.decided'),
      }),
    },
    caution: theme.say(purchase.ratio === null ? 'order.caution-chance' : 'order.caution'),
  };
}

/** What to order, in one sentence: what the planner decided, or what the sums point to. */
export function orderSentence(record: BriefRecord, theme: Theme, formats: Formats): string {
  const { purchase } = record;
  if (purchase === null) return '';
  const order = purchase.decided ?? purchase.best;
  if (order.units === 0) return theme.say('order.nothing');
  const facts = {
    quantity: quantity(order, record, theme, formats),
    cost: order.cost === null ? '' : formats.about(order.cost),
    by: formats.firstDay(purchase.span[0]),
  };
  const when = purchase.asked.arrives > 0 ? 'later' : 'now';
  return theme.say(`order.do.${when}${order.cost === null ? '' : '-cost'}`, facts);
}

/** Page 1's sentence beside it: how long it lasts, how likely it runs short, and why so much. */
export function orderReason(record: BriefRecord, theme: Theme, formats: Formats): string {
  const { purchase } = record;
  if (purchase === null) return '';
  const order = purchase.decided ?? purchase.best;
  return [
    ...decidedSentences(record, purchase, theme, formats).slice(0, 1),
    theme.say('order.lasts', {
      span: formats.span(...purchase.span),
      short: frequencySentence('order.short', order.chanceShort, theme, formats),
    }),
    ...(purchase.decided === null ? whySentences(purchase, theme, formats) : []),
  ].join(' ');
}

/** "17 packs of 24 (408 litres)", or where units are sold singly "408 litres". */
function quantity(order: Outcome, { purchase, series }: BriefRecord, theme: Theme, formats: Formats): string {
  const { pack } = purchase?.asked ?? { pack: 1 };
  const facts = {
    packs: formats.amount(order.packs, 0),
    pack: formats.amount(pack, 0),
    units: formats.amount(order.units, series.places),
    unit: series.unit,
  };
  if (pack === 1 || !Number.isInteger(order.packs)) return theme.say('order.quantity.units', facts);
  return theme.say(`order.quantity.${formats.plural(order.packs) === 'one' ? 'one' : 'other'}`, facts);
}

/** "17 packs", for where the pack has been told. */
function packsOf(order: Outcome, record: BriefRecord, theme: Theme, formats: Formats): string {
  if (record.purchase?.asked.pack === 1) return quantity(order, record, theme, formats);
  const form = formats.plural(order.packs) === 'one' ? 'one' : 'other';
  return theme.say(`order.quantity.packs.${form}`, { packs: formats.amount(order.packs, 0) });
}

function coverSentences(record: BriefRecord, purchase: Purchase, theme: Theme, formats: Formats): string[] {
  const { asked, demand, beforeArrival } = purchase;
  const { series } = record;
  const units = (value: number) => formats.rounded(value, demandPlaces(purchase, record));
  const facts = {
    span: formats.span(...purchase.span),
    unit: series.unit,
    expected: units(demand.expected),
    low: units(demand.range80[0]),
    high: units(demand.range80[1]),
    stock: formats.amount(asked.inStock, series.places),
    ordered: formats.amount(asked.onOrder, series.places),
    arrives: formats.amount(asked.onOrderArrives, 0),
    left: units(purchase.stockAtArrival),
  };
  const held = asked.onOrder === 0 ? 'stock' : asked.onOrderArrives === 0 ? 'stock-and-order' : 'stock-and-later';
  return [
    theme.say('order.covers', facts),
    theme.say(`order.${held}`, { ...facts, every: everyText(asked.onOrderArrives, record, theme, formats) }),
    ...(beforeArrival === null
      ? []
      : [
          theme.say('order.before', {
            ...facts,
            demand: units(beforeArrival.demand),
            short: frequencySentence('order.before-short', beforeArrival.chanceShort, theme, formats),
          }),
        ]),
  ];
}

/** Demand is told as coarsely as its range warrants; the table of orders one place finer. */
const demandPlaces = ({ printed }: Purchase, { series }: BriefRecord): number =>
  Math.min(printed.units - 1, series.places);

const everyText = (count: number, { series }: BriefRecord, theme: Theme, formats: Formats): string =>
  theme.say(`every.${series.every}.${formats.plural(count) === 'one' ? 'one' : 'other'}`);

function whySentences({ ratio, shortCost, leftOverCost, asked }: Purchase, theme: Theme, formats: Formats): string[] {
  if (ratio === null || shortCost === null || leftOverCost === null)
    return asked.aim.kind === 'not-short'
      ? [theme.say('order.aim', { chance: frequency(asked.aim.chance, theme, formats) })]
      : [];
  // Within a twentieth of a half neither side weighs more.
  const key = ratio > 0.55 ? 'more' : ratio < 0.45 ? 'less' : 'as-much';
  return [theme.say(`order.why.${key}`, { short: formats.price(shortCost), left: formats.price(leftOverCost) })];
}

function costSentences(record: BriefRecord, purchase: Purchase, theme: Theme, formats: Formats): string[] {
  const { asked, ratio, shortCost, leftOverCost, demand, best, unbound, heldBy } = purchase;
  const { series } = record;
  const target = formats.rounded(demand.target, demandPlaces(purchase, record));
  const facts = {
    target,
    unit: series.unit,
    quantity: quantity(best, record, theme, formats),
    unbound: quantity(unbound, record, theme, formats),
  };
  const bound =
    heldBy === null
      ? []
      : [
          theme.say(`order.held.${heldBy}`, {
            ...facts,
            bound:
              heldBy === 'spend-at-most'
                ? formats.price(asked.spendAtMost ?? 0)
                : formats.amount((heldBy === 'at-least' ? asked.atLeast : asked.atMost) ?? 0, series.places),
          }),
        ];
  if (
    ratio === null ||
    shortCost === null ||
    leftOverCost === null ||
    asked.aim.kind !== 'costs' ||
    asked.unitCost === null
  )
    return [...whySentences(purchase, theme, formats), ...bound];
  const { unitPrice, leftoverValue, goodwill } = asked.aim;
  return [
    theme.say(goodwill === 0 ? 'order.costs' : 'order.costs-goodwill', {
      price: formats.price(unitPrice),
      cost: formats.price(asked.unitCost),
      value: formats.price(leftoverValue),
      goodwill: formats.price(goodwill),
      short: formats.price(shortCost),
      left: formats.price(leftOverCost),
    }),
    theme.say('order.ratio', {
      short: formats.price(shortCost),
      left: formats.price(leftOverCost),
      ratio: formats.number(ratio, 2),
      often: frequency(ratio, theme, formats),
    }),
    theme.say(asked.arrives === 0 && asked.onOrderArrives === 0 ? 'order.target' : 'order.target-paths', {
      ...facts,
      stock: formats.amount(asked.inStock + asked.onOrder, series.places),
      paths: formats.number(record.outlook.paths, 0),
    }),
    ...bound,
  ];
}

function decidedSentences(record: BriefRecord, purchase: Purchase, theme: Theme, formats: Formats): string[] {
  const { decided, best, asked, printed } = purchase;
  if (decided === null || asked.decided === null) return [];
  const facts = {
    decided: quantity(decided, record, theme, formats),
    best: packsOf(best, record, theme, formats),
    because: asked.decided.because,
    short: frequency(decided.chanceShort, theme, formats),
    bestShort: frequency(best.chanceShort, theme, formats),
  };
  const difference = (best.result ?? 0) - (decided.result ?? 0);
  const isTold = decided.result !== null && difference > 0.5 * 10 ** -printed.result;
  return [
    theme.say('order.decided', facts),
    ...(facts.short === facts.bestShort ? [] : [theme.say('order.decided-short', facts)]),
    ...(isTold
      ? [theme.say('order.decided-costs', { ...facts, less: formats.moneyTo(difference, printed.result) })]
      : []),
  ];
}

function nearbyTable(record: BriefRecord, purchase: Purchase, theme: Theme, formats: Formats) {
  const { series } = record;
  const { printed, nearby, best, decided, asked } = purchase;
  const units = (value: number) => formats.rounded(value, Math.min(printed.units, series.places));
  const hasPacks = asked.pack !== 1;
  const hasCost = best.cost !== null;
  const hasResult = best.result !== null;
  const isNew = decided !== null && !nearby.some((each) => each.units === decided.units);
  const rows = isNew ? [...nearby, decided].sort((a, b) => a.units - b.units) : nearby;
  return {
    title: theme.say('order.nearby.title'),
    hasPacks,
    hasCost,
    hasResult,
    heads: [
      theme.say('order.nearby.units', { unit: series.unit }),
      ...(hasPacks ? [theme.say('order.nearby.packs', { pack: formats.amount(asked.pack, 0) })] : []),
      ...(hasCost ? [theme.say('order.nearby.cost')] : []),
      ...['short', 'sales', 'left', 'lost'].map((key) => theme.say(`order.nearby.${key}`)),
      ...(hasResult ? [theme.say('order.nearby.result')] : []),
    ],
    rows: rows.map((each) => ({
      isChosen: each.units === (decided ?? best).units,
      units: formats.amount(each.units, series.places),
      note:
        each.units === decided?.units
          ? theme.say('order.nearby.decided')
          : each.units === best.units
            ? theme.say('order.nearby.best')
            : '',
      packs: formats.amount(each.packs, Number.isInteger(each.packs) ? 0 : 1),
      cost: each.cost === null ? '' : formats.price(each.cost),
      short: formats.share(each.chanceShort),
      sales: units(each.sales),
      left: units(each.leftOver),
      lost: units(each.lost),
      result: each.result === null ? '' : formats.moneyTo(each.result, printed.result),
    })),
    note: theme.say(hasResult ? 'order.nearby.note' : 'order.nearby.note-chance', {
      span: formats.span(...purchase.span),
      unit: series.unit,
      goodwill: asked.aim.kind === 'costs' && asked.aim.goodwill > 0 ? theme.say('order.nearby.goodwill') : '',
    }),
  };
}
