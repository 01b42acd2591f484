import { describe, expect, test } from 'vitest';
import type { Context } from '../../src/explain/context.js';
import { factsOf } from '../../src/explain/facts.js';
import { makeOutlook } from '../../src/outlook/outlook.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

const contextOf = (length: number, season: number, rest: Partial<Context> = {}): Context => ({
  places: 0,
  season,
  periods: Array.from({ length }, (_, t) => `p${t}`),
  positions: Array.from({ length }, (_, t) => (t % season) + 1),
  events: [],
  ...rest,
});

function factsFrom(
  values: readonly number[],
  form: string,
  season: number,
  scale = 'plain',
  rest: Partial<Context> = {},
) {
  const fit = fitModel(values, { form, scale });
  const spans = [{ kind: 'ahead' as const, year: null, known: 0, steps: [0, 1] }];
  const outlook = makeOutlook(fit, { ahead: 2, seed: 1, holdAtZero: false, spans });
  return { fit, outlook, facts: factsOf(fit, outlook, contextOf(values.length + 2, season, rest)) };
}

/** Quarters with shares 10, 40, 30 and 20% of a year's total, with a little noise. */
const seasonal = (years: number, growth: number): number[] => {
  const { normal } = createGenerator(11);
  return Array.from(
    { length: 4 * years },
    (_, t) => [100, 400, 300, 200][t % 4] * (1 + growth) ** Math.floor(t / 4) * (1 + 0.02 * normal()),
  );
};

describe('direction', () => {
  test.each([
    [0.05, 'rising'],
    [-0.05, 'falling'],
    [0, 'level'],
  ] as const)('yearly totals that change by %d a year are %s', (growth, kind) => {
    const { direction } = factsFrom(seasonal(8, growth), '(0,1,1)x(0,1,1)4', 4).facts;
    expect(direction.kind).toBe(kind);
    expect(Math.abs((direction.perYear ?? Number.NaN) - growth)).toBeLessThan(0.01);
    expect(direction.years).toBe(5);
  });

  test('is unknown where totals are not above zero', () => {
    const around = seasonal(6, 0).map((value, t) => value - 250 + (t % 3));
    expect(factsFrom(around, '(0,1,1)x(0,1,1)4', 4).facts.direction).toMatchObject({ kind: 'unknown', perYear: null });
  });
});

describe('season', () => {
  test('its peak, its share and its quietest position are those that the figures were made with', () => {
    const { season } = factsFrom(seasonal(8, 0), '(0,1,1)x(0,1,1)4', 4).facts;
    expect(season).toMatchObject({ strength: 'strong', peak: [2, 3], trough: 1, everyYear: true, fullYears: 8 });
    expect(season?.share).toBeCloseTo(0.7, 1);
    expect(season?.troughShare).toBeCloseTo(0.1, 1);
  });

  test('a peak runs over the turn of the year, but not over more than half of it', () => {
    const { normal } = createGenerator(4);
    const monthly = Array.from({ length: 72 }, (_, t) => {
      const distance = Math.min(t % 12, 12 - (t % 12));
      return 100 * (1 + 0.9 * Math.cos((Math.PI * distance) / 6)) + 2 * normal();
    });
    const peak = factsFrom(monthly, '(0,1,1)x(0,1,1)12', 12).facts.season?.peak ?? [];
    expect(peak).toContain(12);
    expect(peak).toContain(1);
    expect(peak.length).toBeLessThanOrEqual(6);
    expect([...peak].every((position, i) => i === 0 || position === (peak[i - 1] % 12) + 1)).toBe(true);
  });

  test('chance is no season: pure noise seldom shows one, however wide it swings', () => {
    let shown = 0;
    for (let seed = 1; seed <= 60; seed++) {
      const { normal } = createGenerator(seed);
      const noise = Array.from({ length: 60 }, () => Math.max(1, 100 + 25 * normal()));
      if (factsFrom(noise, '(0,0,0)', 12).facts.season?.strength !== 'none') shown++;
    }
    // F above 4 with (11, 44) degrees of freedom is rarer than one in a thousand.
    expect(shown).toBeLessThanOrEqual(1);
  });

  test('there is none to tell of in a year, in two short years, or below zero', () => {
    const years = Array.from({ length: 20 }, (_, t) => 50 + 3 * t + (t % 3));
    expect(factsFrom(years, '(0,1,1)', 1).facts.season).toBeNull();
    const below = seasonal(6, 0).map((value) => value - 150);
    expect(factsFrom(below, '(0,1,1)x(0,1,1)4', 4).facts.season).toBeNull();
  });
});

test('the latest surprise is the last figure less its forecast one period before, and what is left of it', () => {
  const values = seasonal(8, 0.03);
  const { fit, facts } = factsFrom(values, '(0,1,1)x(0,1,1)4', 4);
  const { surprise } = facts;
  expect(surprise?.actual).toBe(values[31]);
  expect(surprise?.expected).toBeCloseTo(values[31] - fit.residuals[31], 8);
  // ψ₁ = 1 + θ₁ and ψ₄ = (1 + θ₁) + (1 + Θ₁) − 1 + … of (1−B)(1−B⁴): by hand 1 + θ₁ + 1 + Θ₁ at lag 4 less the one ε.
  expect(surprise?.carryNext).toBeCloseTo(1 + fit.theta[0], 10);
  expect(surprise?.carryYear).toBeCloseTo(1 + fit.theta[0] + (1 + fit.Theta[0]), 10);
  const log = factsFrom(values, '(0,1,1)x(0,1,1)4', 4, 'log');
  expect(log.facts.surprise?.expected).toBeCloseTo(values[31] * Math.exp(-log.fit.residuals[31]), 8);
});

test('caveats are those that a series has earned, with what their sentences need', () => {
  const ids = (facts: ReturnType<typeof factsFrom>['facts']) => facts.caveats.map(({ id }) => id);
  expect(ids(factsFrom(seasonal(8, 0.03), '(0,1,1)x(0,1,1)4', 4).facts)).not.toContain('short-history');
  const gap = seasonal(8, 0.03);
  gap[13] = Number.NaN;
  expect(factsFrom(gap, '(0,1,1)x(0,1,1)4', 4).facts.caveats.find(({ id }) => id === 'missing-figures')?.count).toBe(1);
  const young = factsFrom(seasonal(4, 0.03).slice(0, 15), '(0,1,1)', 4).facts;
  expect(young.caveats.find(({ id }) => id === 'short-history')?.count).toBe(3);
  const event = { what: 'Closed', from: 'p5', to: 'p6', effect: 'passing' as const, coefficient: 'event1' };
  expect(
    factsFrom(seasonal(8, 0), '(0,1,1)', 4, 'plain', { events: [event] }).facts.caveats.find(
      ({ what }) => what === 'Closed',
    ),
  ).toMatchObject({ id: 'event-set-aside', from: 'p5', to: 'p6' });
  const { facts, outlook } = factsFrom(seasonal(8, 0), '(0,1,1)', 4);
  const { expected, range80 } = outlook.totals[0];
  expect(facts.relativeRange).toBeCloseTo((range80[1] - range80[0]) / expected, 12);
});
