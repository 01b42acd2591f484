import { describe, expect, test } from 'vitest';
import { advise } from '../../src/advice/advise.js';
import { seasonEvidence } from '../../src/advice/season.js';
import { forecast } from '../../src/outlook/outlook.js';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

/** A season of so many per cent, a growth a year, and noise; all invented. */
function invented(n: number, m: number, { season = 0.3, growth = 0.03, noise = 0.04, level = 200, seed = 5 } = {}) {
  const { normal } = createGenerator(seed);
  return Array.from(
    { length: n },
    (_, t) =>
      level * Math.exp((growth * t) / m + noise * normal()) * (1 + season * Math.sin((2 * Math.PI * (t % m)) / m)),
  );
}

const ids = (values: ArrayLike<number>, options: Parameters<typeof advise>[1]) =>
  advise(values, options).reasons.map(({ id }) => id);

function outlookOf(values: ArrayLike<number>, options: Parameters<typeof advise>[1]) {
  const { chosen } = advise(values, options);
  return forecast(fitModel(values, chosen), { ahead: options.ahead }).periods;
}

describe('what is chosen goes straight into fitModel, and suits the figures', () => {
  test.each([
    [4, 44],
    [12, 110],
    [2, 24],
    [13, 80],
    [1, 20],
    [52, 170],
  ])('a season of %i, %i figures', (season, n) => {
    const values = invented(n, season);
    const periods = outlookOf(values, { season, ahead: Math.min(season, 4) });
    const truth = invented(n + 4, season, { noise: 0 });
    periods.forEach(({ middle }, h) => {
      expect(Math.abs(middle / truth[n + h] - 1)).toBeLessThan(0.12);
    });
  });

  test('a clear season gets a seasonal form, shrunk; growth by shares gets logarithms', () => {
    const values = invented(60, 4, { season: 0.4, growth: 0.12 });
    const { chosen, reasons } = advise(values, { season: 4, ahead: 4 });
    expect(chosen).toMatchObject({ form: '(1,0,2)x(0,1,1)4', scale: 'log', fittedBy: 'shrunk', constant: true });
    expect(reasons.map(({ id }) => id)).toEqual(['season', 'shrunk', 'log-likelier']);
  });

  /** How many of 30 invented series are told to have no season. */
  const seasonless = (make: (seed: number) => number[], m: number) =>
    Array.from({ length: 30 }, (_, seed) => seasonEvidence(make(seed).map(Math.log), m)).filter((at) => at < 1).length;

  test('no season often gets a form without one, a season never', () => {
    // Where position says nothing the statistic's mean is about 1, the threshold, so about half fall below it.
    expect(seasonless((seed) => invented(48, 4, { season: 0, seed }), 4)).toBeGreaterThan(9);
    expect(seasonless((seed) => invented(96, 12, { season: 0, seed }), 12)).toBeGreaterThan(9);
    const steady = (m: number, n: number) => {
      const seed = Array.from({ length: 30 }, (_, i) => i).find(
        (i) => seasonEvidence(invented(n, m, { season: 0, seed: i }).map(Math.log), m) < 1,
      );
      return advise(invented(n, m, { season: 0, seed }), { season: m, ahead: 4 }).chosen.form;
    };
    expect(steady(4, 48)).toBe('(1,1,2)');
    expect(steady(12, 96)).toBe('(0,1,1)');
  });

  test('a season that has died out can count as none', () => {
    const dead = (seed: number) => [
      ...invented(40, 4, { season: 0.4, seed }),
      ...invented(32, 4, { season: 0, level: 270, seed: 100 + seed }),
    ];
    expect(seasonless(dead, 4)).toBeGreaterThan(7);
    expect(seasonless((seed) => invented(72, 4, { season: 0.4, seed }), 4)).toBe(0);
  });

  test('a step in the level is followed', () => {
    const values = invented(48, 4, { growth: 0 }).map((value, t) => (t >= 36 ? value + 300 : value));
    const sum = outlookOf(values, { season: 4, ahead: 4 }).reduce((total, { middle }) => total + middle, 0);
    expect(sum / 4).toBeGreaterThan(430);
    expect(sum / 4).toBeLessThan(580);
  });
});

describe('figures that rule something out', () => {
  test('zeros and figures below zero keep the plain scale', () => {
    const zeros = invented(44, 4).map((value, t) => (t % 3 === 0 ? 0 : value));
    expect(advise(zeros, { season: 4, ahead: 4 }).chosen.scale).toBe('plain');
    expect(ids(zeros, { season: 4, ahead: 4 })).toContain('not-above-zero');
    for (const { range80 } of outlookOf(zeros, { season: 4, ahead: 4 })) expect(range80[0]).toBeGreaterThanOrEqual(0);
    const signs = invented(44, 4).map((value) => value - 210);
    expect(advise(signs, { season: 4, ahead: 4 }).chosen.scale).toBe('plain');
  });

  test('little history: last year’s figure again; less than a year and two: the last one; two figures: an error', () => {
    const values = invented(44, 4);
    expect(advise(values.slice(0, 11), { season: 4, ahead: 4 }).chosen.form).toBe('(0,0,0)x(0,1,0)4');
    expect(ids(values.slice(0, 11), { season: 4, ahead: 4 })).toEqual(['little-history']);
    expect(advise(values.slice(0, 5), { season: 4, ahead: 4 }).chosen.form).toBe('(0,1,0)');
    expect(ids(values.slice(0, 5), { season: 4, ahead: 4 })).toEqual(['no-year']);
    expect(() => advise(values.slice(0, 2), { season: 4, ahead: 4 })).toThrow(/at least 3 figures; there are 2/);
  });

  test('gaps, events and sold-out periods go along', () => {
    const values = invented(44, 4).map((value, t) => (t === 20 ? Number.NaN : value));
    const event = { name: 'event1', values: Array.from({ length: 48 }, (_, t) => (t === 30 ? 1 : 0)) };
    const { chosen } = advise(values, { season: 4, ahead: 4, regressors: [event], soldOut: [40] });
    const fit = fitModel(values, chosen);
    expect(fit.regressors.map(({ name }) => name)).toEqual(['event1']);
    expect(fit.soldOut).toEqual([40]);
  });

  test('a position of the season without any figure leaves a form without a season', () => {
    const values = invented(44, 4).map((value, t) => (t % 4 === 1 ? Number.NaN : value));
    expect(ids(values, { season: 4, ahead: 4 })).toContain('gaps-in-season');
  });
});

test('what is given is kept', () => {
  const values = invented(44, 4);
  const { chosen, reasons } = advise(values, {
    season: 4,
    ahead: 4,
    scale: 'box-cox 0.3',
    constant: false,
    fittedBy: 'maximum-likelihood',
  });
  expect(chosen).toMatchObject({ scale: 'box-cox 0.3', constant: false, fittedBy: 'maximum-likelihood', priors: null });
  expect(reasons.map(({ id }) => id)).toEqual(['season', 'unrestricted', 'scale-given']);
});

test('candidates: the chosen one first, each once, with what a planner compares', () => {
  const { candidates, trackRecord } = advise(invented(44, 4), { season: 4, ahead: 4 });
  expect(candidates.filter(({ isChosen }) => isChosen)).toEqual([candidates[0]]);
  const names = candidates.map(({ model }) => [model.form, model.scale, model.fittedBy].join());
  expect(new Set(names).size).toBe(names.length);
  for (const { model, aicc, miss, middles } of candidates) {
    expect(aicc === null).toBe(model.fittedBy === 'shrunk');
    expect(miss).toBeGreaterThan(0);
    expect(middles).toHaveLength(4);
  }
  expect(trackRecord?.origins).toBe(8);
});

describe('the evidence of a season', () => {
  test('is Kruskal and Wallis’s statistic over its degrees of freedom', () => {
    // By hand: the changes 1, −2, 5, −6, 3, −4, by turns of either position, have the ranks 4, 6, 5 and 3, 1, 2.
    const values = [0, 1, -1, 4, -2, 1, -3];
    // H = 12/(6·7)·(15²/3 + 6²/3) − 3·7 = 3.857142857.
    expect(seasonEvidence(values, 2)).toBeCloseTo((12 / 42 / 1) * (225 / 3 + 36 / 3) - 21, 9);
  });
  test('is about one where there is none', () => {
    const found = Array.from({ length: 200 }, (_, seed) =>
      seasonEvidence(invented(32, 4, { season: 0, growth: 0, seed: 100 + seed }), 4),
    );
    const mean = found.reduce((sum, value) => sum + value, 0) / found.length;
    expect(mean).toBeGreaterThan(0.75);
    expect(mean).toBeLessThan(1.25);
  });
});
