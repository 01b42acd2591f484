/** What a season's order is decided from, and what can't be decided from. */
import { aheadOf, type Paths } from './paths.js';

/** The best expected result in money, or a stated chance (0 to 1) of not running short in the periods covered. */
export type OrderAim =
  | {
      readonly kind: 'costs';
      /** Money a unit: what a sale brings, what a unit left over is still worth, what a lost sale costs beside its price. */
      readonly unitPrice: number;
      readonly leftoverValue: number;
      readonly goodwill: number;
    }
  | { readonly kind: 'not-short'; readonly chance: number };

/** Quantities are in the user's units. A step ahead is counted from 0, and what arrives is there when its step starts. */
export interface OrderRequest {
  /** Demand. Below zero it is goods brought back, which go into stock. */
  readonly paths: Paths;
  /** How many steps the order must last, and the first of them. */
  readonly covers: number;
  readonly arrives: number;
  readonly inStock: number;
  readonly onOrder: number;
  readonly onOrderArrives: number;
  /** Units in the pack that the goods come in. */
  readonly pack: number;
  /** May be null where the aim is a chance. */
  readonly unitCost: number | null;
  readonly atLeast: number | null;
  readonly atMost: number | null;
  /** Money. */
  readonly spendAtMost: number | null;
  readonly aim: OrderAim;
  /** Units that the planner decided on instead; need not be whole packs or within the bounds. */
  readonly decided: number | null;
}

/** Money a unit: what it costs to be one short (Cu), and to have one left over (Co). */
export interface UnitCosts {
  readonly short: number;
  readonly leftOver: number;
}

/** The level of demand to be met: the critical ratio Cu/(Cu + Co), or the stated chance, where there are no costs. */
export interface Goal {
  readonly costs: UnitCosts | null;
  readonly level: number;
}

/** Checks a request and says what it comes to. Throws an Error that says what stands there and what to do. */
export function goalOf(request: OrderRequest): Goal {
  checkNumbers(request);
  checkSpan(request);
  const { aim, unitCost } = request;
  if (aim.kind === 'not-short') {
    if (!(aim.chance > 0 && aim.chance < 1))
      throw new Error(`the chance of not running short is ${aim.chance}; it must lie between 0 and 1, e.g. 0.9`);
    return { costs: null, level: aim.chance };
  }
  const { unitPrice, leftoverValue, goodwill } = aim;
  if (unitCost === null)
    throw new Error('there is no unit cost; give it, or state a chance of not running short instead');
  if (!(leftoverValue < unitCost))
    throw new Error(
      `the leftover value ${leftoverValue} is not below the unit cost ${unitCost}: nothing would be lost by ordering ` +
        'without end; give what a unit left over really fetches',
    );
  if (!(unitPrice + goodwill > unitCost))
    throw new Error(
      `the unit price ${unitPrice} with goodwill ${goodwill} is not above the unit cost ${unitCost}: the best order ` +
        'would be none; check the price and the cost',
    );
  const costs = { short: unitPrice - unitCost + goodwill, leftOver: unitCost - leftoverValue };
  return { costs, level: costs.short / (costs.short + costs.leftOver) };
}

function checkNumbers(request: OrderRequest): void {
  const { aim, pack, spendAtMost, unitCost } = request;
  const quantities = {
    'the stock in hand': request.inStock,
    'what is on order': request.onOrder,
    'the unit cost': unitCost,
    'the least to order': request.atLeast,
    'the most to order': request.atMost,
    'the most to spend': spendAtMost,
    'the order decided on': request.decided,
    ...(aim.kind === 'costs' ? { 'the unit price': aim.unitPrice, 'the goodwill lost': aim.goodwill } : {}),
  };
  for (const [name, value] of Object.entries(quantities))
    if (value !== null && !(Number.isFinite(value) && value >= 0))
      throw new Error(`${name} is ${value}; it must be a number of 0 or more`);
  if (aim.kind === 'costs' && !Number.isFinite(aim.leftoverValue))
    throw new Error(`the leftover value is ${aim.leftoverValue}; it must be a number`);
  if (!(Number.isFinite(pack) && pack > 0))
    throw new Error(`a pack holds ${pack} units; it must hold more than 0 (1 where units are sold singly)`);
  if (spendAtMost !== null && unitCost === null)
    throw new Error(`the most to spend is ${spendAtMost}, but there is no unit cost; give the unit cost`);
}

function checkSpan({ paths, covers, arrives, onOrderArrives }: OrderRequest): void {
  const ahead = aheadOf(paths);
  const steps = { 'the order arrives': arrives, 'what is on order arrives': onOrderArrives };
  for (const [name, value] of Object.entries(steps))
    if (!(Number.isInteger(value) && value >= 0))
      throw new Error(`${name} ${value} periods ahead; it must be a whole number of 0 or more`);
  if (!(Number.isInteger(covers) && covers >= 1))
    throw new Error(`the order covers ${covers} periods; it must cover a whole number of 1 or more`);
  if (arrives + covers > ahead)
    throw new Error(
      `an order that arrives ${arrives} periods ahead and covers ${covers} needs an outlook of ${arrives + covers} ` +
        `periods, and it has ${ahead}; look further ahead or cover fewer`,
    );
}
