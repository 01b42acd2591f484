/** The rules between the keys of a purchase. */
import type { Path } from './document.js';
import { type Remark, sentence, valueAt } from './faults.js';
import { good } from './read.js';
import { planSchema } from './schema.js';

/**
 * What an order can be decided from. With a leftover value not below the cost the best order has no bound, with a price
 * and goodwill not above the cost the best order is none (Arrow, Harris & Marschak 1951).
 */
export const remarksOnOrder = (plan: unknown, series: Path): readonly Remark[] => {
  const shape = planSchema.shape.series.element.shape.purchase.unwrap().shape;
  const purchase = [...series, 'purchase'];
  const path = (key: string): Path => [...purchase, key];
  const has = (key: string): boolean => valueAt(plan, path(key)) !== undefined;
  if (valueAt(plan, purchase) === undefined) return [];
  const read = (key: keyof typeof shape): number | undefined => {
    const value: unknown = good(shape[key], valueAt(plan, path(key)));
    return typeof value === 'number' ? value : undefined;
  };
  const remark = (key: string, rest: string): Remark => ({
    path: path(key),
    on: 'value',
    message: sentence(plan, path(key), rest),
  });
  const onPurchase = (message: string): Remark => ({ path: purchase, on: 'key', message });
  const cost = read('unit-cost');
  return [
    ...aimRemarks(has, remark, onPurchase),
    ...costRemarks(cost, read('unit-price'), read('goodwill'), read('leftover-value'), remark),
    ...spanRemarks(
      { covers: read('covers'), arrives: read('arrives'), later: read('on-order-arrives') },
      good(planSchema.shape.ahead, valueAt(plan, ['ahead'])),
      remark,
    ),
    ...boundRemarks(
      { pack: read('pack'), least: read('at-least'), most: read('at-most'), spend: read('spend-at-most'), cost },
      has,
      remark,
    ),
    ...decisionRemarks(has, remark),
  ];
};

type RemarkOn = (key: string, rest: string) => Remark;

/** Money decides, or a stated chance does. */
const aimRemarks = (
  has: (key: string) => boolean,
  remark: RemarkOn,
  onPurchase: (message: string) => Remark,
): readonly Remark[] => {
  const money = ['unit-price', 'leftover-value', 'goodwill'];
  if (has('not-short'))
    return money
      .filter(has)
      .map((key) => remark(key, 'stands beside not-short; an order aims at a chance or at costs, so leave one out'));
  const missing = ['unit-cost', 'unit-price', 'leftover-value'].filter((key) => !has(key));
  if (missing.length === 0) return [];
  return [
    onPurchase(
      `purchase lacks ${missing.join(', ')}; give what a unit costs, sells for and is worth left over, or a chance such as "not-short: 90%"`,
    ),
  ];
};

const costRemarks = (
  cost: number | undefined,
  price: number | undefined,
  goodwill: number | undefined,
  leftover: number | undefined,
  remark: RemarkOn,
): readonly Remark[] => {
  if (cost === undefined) return [];
  const withGoodwill = goodwill === undefined || goodwill === 0 ? '' : ` with goodwill ${goodwill}`;
  return [
    ...(price !== undefined && price + (goodwill ?? 0) <= cost
      ? [
          remark(
            'unit-price',
            `${withGoodwill} is not above the unit cost of ${cost}, so the best order would be none`.trim(),
          ),
        ]
      : []),
    ...(leftover !== undefined && leftover >= cost
      ? [remark('leftover-value', `is not below the unit cost of ${cost}, so the best order would have no bound`)]
      : []),
  ];
};

const spanRemarks = (
  { covers, arrives = 0, later = 0 }: { covers?: number; arrives?: number; later?: number },
  ahead: number | undefined,
  remark: RemarkOn,
): readonly Remark[] => {
  if (covers === undefined) return [];
  const end = arrives + covers;
  const from = arrives > 0 ? ` from an arrival ${arrives} ahead` : '';
  return [
    ...(ahead !== undefined && end > ahead
      ? [remark('covers', `${from} is more than the ${ahead} periods that the plan looks ahead`.trim())]
      : []),
    ...(later >= end
      ? [
          remark(
            'on-order-arrives',
            `is after the ${end} periods that are counted, so it can meet none of their demand`,
          ),
        ]
      : []),
  ];
};

const boundRemarks = (
  {
    pack = 1,
    least = 0,
    most = Number.POSITIVE_INFINITY,
    spend = Number.POSITIVE_INFINITY,
    cost,
  }: { pack?: number; least?: number; most?: number; spend?: number; cost?: number },
  has: (key: string) => boolean,
  remark: RemarkOn,
): readonly Remark[] => {
  if (least > most) return [remark('at-least', `is above at-most, ${most}`)];
  if (has('spend-at-most') && cost === undefined)
    return [remark('spend-at-most', 'needs the unit cost; give unit-cost too')];
  const packs = Math.ceil(least / pack - 1e-9);
  if (packs * pack > most)
    return [remark('at-least', `and at-most, ${most}, have no whole number of packs of ${pack} between them`)];
  if (cost !== undefined && packs * pack * cost > spend * (1 + 1e-12))
    return [
      remark(
        'spend-at-most',
        `does not pay for the least order, which costs ${Number((packs * pack * cost).toPrecision(12))}`,
      ),
    ];
  return [];
};

const decisionRemarks = (has: (key: string) => boolean, remark: RemarkOn): readonly Remark[] => [
  ...(has('decided') && !has('because')
    ? [remark('decided', 'stands without because; say why, since the record keeps it')]
    : []),
  ...(has('because') && !has('decided')
    ? [remark('because', 'explains nothing; say what was decided, such as "decided: 12 packs"')]
    : []),
];
