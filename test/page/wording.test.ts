/** Page 1's sentences over a grid of facts: no slip of grammar, no number that is none. */
import { beforeAll, describe, expect, test } from 'vitest';
import { budgetSentence, budgetView } from '../../src/page/budget.js';
import { formatsOf } from '../../src/page/formats.js';
import { judgedSentences } from '../../src/page/judgement.js';
import { lookBackSentences, lookBackView } from '../../src/page/look-back.js';
import { orderReason, orderSentence, orderView } from '../../src/page/order.js';
import { answerSentence, caveatSentences, reasons } from '../../src/page/sentences.js';
import { loadTheme, type Theme } from '../../src/page/theme.js';
import { assumptionRows, trustSentences } from '../../src/page/trust.js';
import type { BriefRecord } from '../../src/record/record.js';
import { recordSchema } from '../../src/record/record.js';
import { sampleRecord } from '../record/sample.js';

const themes = new Map<string, Theme>();
beforeAll(async () => {
  for (const locale of ['en-GB', 'de-DE']) themes.set(locale, await loadTheme(locale));
});

type Kind = readonly [BriefRecord['series']['every'], number, string];
const KINDS: readonly Kind[] = [
  ['quarter', 4, '2026-Q1'],
  ['month', 12, '2026-01'],
  ['half-year', 2, '2026-S1'],
  ['year', 1, '2026'],
];

/** Every slip that is looked for, in any language. */
const SLIPS =
  /undefined|NaN|null|Infinity|\{\{|[-−]0(?![\d.,])| {2}| [.,;:]|^\s*$|\b1 (quarters|months|years|half-years|forecasts|periods)\b/;

function expectClean(sentences: readonly string[]): void {
  for (const sentence of sentences) {
    const text = sentence.replace(/<[^>]+>/g, '');
    expect(text).not.toMatch(SLIPS);
    expect(text.endsWith('.') || text.endsWith('”') || text.endsWith('“'), text).toBe(true);
    expect(text[0], text).toMatch(/[\p{Lu}\d“„]/u);
  }
}

type Facts = BriefRecord['facts'];

/** A judgement of changes such as `+6%` or `-40` on the sample's one period. */
function judgementOf(changes: readonly (readonly [string, string | null])[], from: string): BriefRecord['judgement'] {
  return {
    entries: changes.map(([change, to]) => ({
      what: 'New slipway opens',
      from,
      to,
      change: {
        kind: change.endsWith('%') ? ('percent' as const) : ('amount' as const),
        value: Number.parseFloat(change),
      },
      because: 'Two charter firms have signed',
    })),
    alone: { periods: [], totals: [] },
    printed: { periods: [{ alone: 200, added: 40 }], total: { alone: 200, added: 40 }, answer: 200 },
  };
}

interface OrderChanges {
  readonly unitCost?: number | null;
  readonly packs?: number;
  readonly pack?: number;
  readonly arrives?: number;
  readonly chanceShort?: number;
  readonly isDecided?: boolean;
}

/** An order as a record holds it; without a unit cost it aims at a chance. */
function purchaseOf(
  period: string,
  { unitCost = 11.2, packs = 17, pack = 24, arrives = 0, chanceShort = 0.18, isDecided = false }: OrderChanges,
): BriefRecord['purchase'] {
  const outcome = (each: number) => ({
    packs: each,
    units: each * pack,
    cost: unitCost === null ? null : each * pack * unitCost,
    sales: 200,
    leftOver: 0,
    lost: 40,
    result: unitCost === null ? null : 1234.5 * each,
    chanceShort,
    chanceLeft: 1 - chanceShort,
  });
  const costs = unitCost === null ? null : { short: unitCost * 0.6, left: unitCost * 0.2 };
  return {
    asked: {
      covers: 1,
      arrives,
      unitCost,
      aim:
        unitCost === null
          ? { kind: 'not-short', chance: 0.9 }
          : { kind: 'costs', unitPrice: unitCost * 1.6, leftoverValue: unitCost * 0.8, goodwill: 0 },
      inStock: 0,
      onOrder: 0,
      onOrderArrives: 0,
      pack,
      atLeast: null,
      atMost: null,
      spendAtMost: null,
      decided: isDecided ? { units: (packs + 3) * pack, because: 'They had no more' } : null,
    },
    span: [period, period],
    shortCost: costs?.short ?? null,
    leftOverCost: costs?.left ?? null,
    ratio: costs === null ? null : 0.75,
    demand: { expected: 240, middle: 238, range80: [200, 280], target: 260 },
    beforeArrival: arrives === 0 ? null : { demand: 12, lost: 0, chanceShort: 0 },
    stockAtArrival: 0,
    best: outcome(packs),
    unbound: outcome(packs),
    heldBy: null,
    decided: isDecided ? outcome(packs + 3) : null,
    nearby: [outcome(packs), outcome(packs + 1)],
    curve: [
      { units: 0, result: null, chanceShort: 1 },
      { units: 500, result: null, chanceShort: 0 },
    ],
    printed: { units: 0, result: 0 },
  };
}

function budgetOf(
  kind: 'income' | 'spending',
  amount: number,
  count: number,
  period: string,
  places: number,
): BriefRecord['budget'] {
  const range = { low: 0.8 * amount, expected: amount, high: 1.3 * amount };
  const line = { ...range, chanceAboveLow: 0.9, chanceAboveExpected: 0.48, chanceAboveHigh: 0.1 };
  return {
    asked: { kind, perUnit: [{ from: null, amount: 2 }], paidAfter: 1 },
    periods: Array.from({ length: count }, () => ({ period, perUnit: 2, ...line })),
    totals: [{ kind: 'ahead', year: null, known: 0, periods: [period], ...line }],
    printed: { places, periods: Array.from({ length: count }, () => range), totals: [range] },
  };
}

describe.each(['en-GB', 'de-DE'])('%s', (locale) => {
  const theme = () => themes.get(locale) as Theme;
  const make = (every: Kind, changes: (record: BriefRecord) => object): BriefRecord => {
    const [kind, season, period] = every;
    const base = sampleRecord();
    const record = {
      ...base,
      plan: { ...base.plan, locale },
      series: { ...base.series, every: kind, season },
      figures: { ...base.figures, start: period },
      outlook: { ...base.outlook, periods: base.outlook.periods.map((each) => ({ ...each, period })) },
    };
    return recordSchema.parse({ ...record, ...changes(record) });
  };
  const formats = (record: BriefRecord) => formatsOf(record.plan, record.series.every);

  test.each(KINDS)(
    'the answer, each %s: growing, falling, level, unknown; tiny, huge, zero, below zero; one and many',
    (...every) => {
      for (const expected of [0, 0.004, 1, 240, 12_345_678, -35])
        for (const change of [null, 0, 1, 7, -8, -100, 250, 900])
          for (const ahead of [1, 4, 13]) {
            const record = make(every, ({ outlook, printed }) => ({
              outlook: { ...outlook, periods: Array.from({ length: ahead }, () => outlook.periods[0]) },
              printed: {
                ...printed,
                answer: {
                  ...printed.answer,
                  expected,
                  range80: [expected - 1, expected + 1],
                  change,
                  places: expected === 0.004 ? 3 : 0,
                },
              },
            }));
            expectClean([answerSentence(record, theme(), formats(record))]);
          }
    },
  );

  test.each(KINDS)('the reasons, each %s: every season, direction and surprise', (...every) => {
    const [, season, period] = every;
    const seasons: Facts['season'][] = [
      null,
      ...(season === 1
        ? []
        : (['strong', 'weak', 'none'] as const).flatMap((strength) =>
            [true, false].map((everyYear) => ({
              strength,
              peak: season > 2 ? [1, 2] : [1],
              share: 0.41,
              trough: season,
              troughShare: 0.1,
              everyYear,
              fullYears: 9,
            })),
          )),
    ];
    const directions = (['rising', 'falling', 'level', 'uneven', 'unknown'] as const).flatMap((kind) =>
      [1, 5].map((years) => ({
        kind,
        perYear: kind === 'falling' ? -0.04 : 0.06,
        years,
        span: [900, 1100] as [number, number],
      })),
    );
    const surprises: Facts['surprise'][] = [
      null,
      ...(['none', 'small', 'large'] as const).flatMap((size) =>
        [0, 0.5, 1.3].flatMap((carryNext) =>
          [180, 260].map((actual) => ({
            period,
            actual,
            expected: 220.4,
            relative: 0.1,
            size,
            carryNext,
            carryYear: null,
          })),
        ),
      ),
    ];
    for (const oneSeason of seasons)
      for (const direction of directions)
        for (const surprise of surprises) {
          const record = make(every, ({ facts }) => ({ facts: { ...facts, season: oneSeason, direction, surprise } }));
          expectClean(reasons(record, theme(), formats(record)));
        }
  });

  test.each(KINDS)('the caveats, each %s, one and many', (...every) => {
    const [, , period] = every;
    const ids = recordSchema.shape.facts.shape.caveats.element.shape.id.options;
    for (const id of ids)
      for (const count of [1, 3]) {
        const caveat = { id, count, share: 0.62, what: 'Slipway closed', from: period, to: period };
        const record = make(every, ({ facts }) => ({
          facts: { ...facts, caveats: [caveat] },
          judgement: judgementOf([['+6%', null]], period),
          purchase: purchaseOf(period, {}),
        }));
        expectClean(caveatSentences(record, theme(), formats(record)));
      }
  });

  test.each(KINDS)(
    'judgement, each %s: more and less, in per cent and in units, for a while and for good',
    (...every) => {
      const [, , period] = every;
      for (const change of ['+6%', '-12.5%', '+1', '-40'])
        for (const to of [null, period]) {
          const record = make(every, () => ({ judgement: judgementOf([[change, to]], period) }));
          const sentences = judgedSentences(record, theme(), formats(record));
          expect(sentences).toHaveLength(2);
          expectClean(sentences);
          expect(sentences[1]).not.toMatch(/[-−+]\d/);
        }
    },
  );

  test.each(KINDS)(
    'the order, each %s: none, one pack and many, at once and later, decided otherwise or not',
    (...every) => {
      const [, , period] = every;
      for (const currency of ['GBP', 'JPY'])
        for (const unitCost of [null, 0.03, 11.2, 30_000])
          for (const packs of [0, 1, 17])
            for (const pack of [1, 24, 0.5])
              for (const arrives of [0, 1])
                for (const chanceShort of [0, 0.1, 0.34, 1])
                  for (const isDecided of [true, false]) {
                    const changes = { unitCost, packs, pack, arrives, chanceShort, isDecided };
                    const record = make(every, ({ plan }) => ({
                      plan: { ...plan, currency },
                      purchase: purchaseOf(period, changes),
                    }));
                    expectClean([
                      orderSentence(record, theme(), formats(record)),
                      orderReason(record, theme(), formats(record)),
                    ]);
                    if (currency === 'JPY')
                      expect(orderSentence(record, theme(), formats(record))).not.toMatch(/[¥￥][\d,]*\.\d\d\b.*[¥￥]/);
                  }
    },
  );

  test.each(KINDS)('page 2, each %s: what the order and the budget are made of', async (...every) => {
    const [, , period] = every;
    const held = ['at-least', 'at-most', 'spend-at-most', null] as const;
    for (const [i, unitCost] of [null, 0.03, 30_000].entries())
      for (const arrives of [0, 1])
        for (const isDecided of [true, false]) {
          const purchase = purchaseOf(period, { unitCost, arrives, isDecided, packs: i });
          if (purchase === null) continue;
          const asked = {
            ...purchase.asked,
            onOrder: 10 * i,
            onOrderArrives: arrives,
            atLeast: 1,
            atMost: 5,
            spendAtMost: 9,
          };
          const record = make(every, () => ({
            purchase: { ...purchase, asked, heldBy: held[i] },
            budget: budgetOf(i === 0 ? 'income' : 'spending', 1234, 1 + 3 * i, period, 2),
          }));
          const order = await orderView(record, theme(), formats(record));
          const budget = budgetView(record, theme(), formats(record));
          expectClean([
            ...(order?.reasons ?? []),
            ...(order?.decided ?? []),
            order?.nearby.note ?? '',
            order?.caution ?? '',
          ]);
          expectClean([budget?.answer ?? '', budget?.note ?? '', budget?.caution ?? '']);
        }
  });

  test.each(KINDS)('the budget, each %s: income and spending, tiny and huge, one period and many', (...every) => {
    const [, , period] = every;
    for (const currency of ['GBP', 'JPY', 'EUR'])
      for (const kind of ['income', 'spending'] as const)
        for (const amount of [0, 0.03, 1, 24_900, 31_000_000])
          for (const count of [1, 4]) {
            const record = make(every, ({ plan }) => ({
              plan: { ...plan, currency },
              budget: budgetOf(kind, amount, count, period, currency === 'JPY' ? 0 : 2),
            }));
            expectClean([budgetSentence(record, theme(), formats(record))]);
          }
  });

  test.each(KINDS)('the trust, each %s: no record, a good one, one that a plain rule beats', (...every) => {
    const [, , period] = every;
    for (const miss of [null, 0, 0.002, 0.06, 0.4])
      for (const lastYearMiss of [0.001, 0.06, 0.5])
        for (const inside80 of [0, 0.5, 1]) {
          const trackRecord = {
            origins: 8,
            count: 26,
            miss,
            lastYearMiss,
            lastYearPlusChangeMiss: 0.3,
            best: 'model' as const,
            bias: 0,
            mase: 1,
            inside80,
            inside95: 1,
            intervalScore: 5,
            missByStep: [0.1],
            lastYearMissByStep: [0.1],
            lastYearPlusChangeMissByStep: [0.1],
            inside80ByStep: [1],
            nextPeriod: [{ period, expected: 1, range80: [0, 2] as [number, number], actual: 1 }],
          };
          const record = make(every, () => ({ trackRecord }));
          expectClean(trustSentences(record, theme(), formats(record)));
        }
    const none = make(every, () => ({}));
    expectClean(trustSentences(none, theme(), formats(none)));
  });

  test.each(KINDS)(
    'the look back, each %s: inside and outside, up and down, every cause, one and many',
    async (...every) => {
      const [, , period] = every;
      const outcome = (actual: number) => ({
        brief: '2026-07-06/antifouling-paint',
        issued: '2026-07-06',
        period,
        expected: 240,
        range80: [200, 280] as [number, number],
        range95: [180, 300] as [number, number],
        actual,
      });
      const causes = ['program', 'revised', 'observed', 'estimated', 'model'] as const;
      for (const actual of [240, 290, 400, 0])
        for (const count of [1, 5])
          for (const cause of causes)
            for (const by of [-60, 60]) {
              const none = { program: 0, revised: 0, observed: 0, estimated: 0, model: 0 };
              const changed = { was: 240, now: 240 + by, parts: { ...none, [cause]: by } };
              const lookBack: BriefRecord['lookBack'] = {
                earlier: [],
                unlike: [{ brief: 'x', sha256: 'y', reason: count === 1 ? 'unit' : 'counting' }],
                running: { count, inside80: count - 1, inside95: count, miss: actual === 0 ? null : 0.002 * actual },
                next: Array.from({ length: count }, () => outcome(actual)),
                last: [outcome(actual)],
                change: {
                  brief: 'x',
                  issued: '2026-07-06',
                  periods: [{ ...changed, period }],
                  total: changed,
                  printed: changed,
                },
                order: {
                  brief: 'x',
                  issued: '2026-07-06',
                  span: [period, period],
                  ordered: 100,
                  isDecided: false,
                  demand: 90 + by,
                  leftOver: Math.max(10 - by, 0),
                  lost: Math.max(by - 10, 0),
                },
                judgement: {
                  brief: 'x',
                  issued: '2026-07-06',
                  what: ['A fair'],
                  periods: [period],
                  withIt: actual,
                  without: 240,
                },
              };
              const record = make(every, () => ({ lookBack }));
              expectClean(lookBackSentences(record, theme(), formats(record)));
              if (locale !== 'en-GB') continue;
              const view = await lookBackView(record, theme(), formats(record));
              expectClean([view?.text ?? '']);
              for (const cell of [...(view?.rows ?? []).flatMap(({ cells }) => cells), ...(view?.change?.cells ?? [])])
                expect(cell).not.toMatch(SLIPS);
            }
    },
  );

  test('every assumption in every state', () => {
    const ids = [
      'leftover-pattern',
      'even-spread',
      'normal-surprises',
      'odd-quarters',
      'stable-over-time',
      'enough-history',
      'differencing',
      'settled-fit',
    ];
    for (const status of ['holds', 'doubtful', 'fails', 'untested'] as const)
      for (const pValue of [null, 0.0001, 0.6]) {
        const record = make(KINDS[0], () => ({
          assumptions: ids.map((id) => ({
            id,
            status,
            statistic: status === 'untested' ? null : 3.2,
            pValue,
            details: { years: 9, ratio: 1.4 },
            periods:
              id === 'odd-quarters' && status === 'fails'
                ? [{ period: '2026-Q1', kind: 'additive', size: 1, t: 5, forecastChange: -3 }]
                : [],
          })),
        }));
        for (const { says, figure, follows } of assumptionRows(record, theme(), formats(record)).rows)
          for (const text of [says, figure, follows]) expect(text.replace(/<[^>]+>/g, '')).not.toMatch(SLIPS);
      }
  });
});
