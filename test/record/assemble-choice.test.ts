import { describe, expect, test } from 'vitest';
import { advise } from '../../src/advice/advise.js';
import { checkModel } from '../../src/commands/check-model.js';
import type { SeriesFigures } from '../../src/figures/figures.js';
import { type Plan, type PlannedSeries, parsePlan } from '../../src/plan/plan.js';
import { assembleChoice } from '../../src/record/assemble-choice.js';
import type { ChoiceSheet } from '../../src/record/choice.js';
import { adviceOptions, briefInputs } from '../../src/record/inputs.js';
import { fitModel } from '../../src/sarima/fit.js';
import { parseForm } from '../../src/sarima/form.js';
import { createGenerator } from '../../src/stats/generator.js';

const head = `heading: Stores outlook
prepared-for: Saltmarsh Boatyard
issued: 2026-10-05
ahead: 4
figures:
  file: figures.csv
  period: quarter
  every: quarter
series:
  - name: Rope
    column: rope
    unit: metres
`;

/** A plan of one series; its lines are indented as it is. */
function planned(lines: string): { readonly plan: Plan; readonly series: PlannedSeries } {
  const plan = parsePlan(`${head}${lines}\n`, 'plan.yaml', checkModel);
  return { plan, series: plan.series[0] };
}

const quarters = (values: readonly (number | null)[]): SeriesFigures => ({
  every: 'quarter',
  start: '2017-Q1',
  values,
  findings: [],
});

const noise = (seed: number) => {
  const { normal } = createGenerator(seed);
  return normal;
};

/** A summer peak that grows with the level. */
const seasonal = (): number[] => {
  const normal = noise(1);
  return Array.from({ length: 38 }, (_, t) =>
    Math.round(400 * Math.exp(0.01 * t + 0.5 * Math.sin((Math.PI / 2) * t) + 0.05 * normal())),
  );
};

/** A level with nothing in it but chance. */
const seasonless = (): number[] => {
  const normal = noise(4);
  return Array.from({ length: 34 }, () => Math.round(500 + 20 * normal()));
};

const short = [30, 11, 12, 20, 33, 10, 14];

const sheetOf = (values: readonly (number | null)[], lines = '    model: advise'): ChoiceSheet => {
  const { plan, series } = planned(lines);
  return assembleChoice(plan, series, quarters(values), '0'.repeat(64));
};

/** What the plan's model is once the sheet's lines stand in it. */
function pasted(values: readonly (number | null)[], sheet: ChoiceSheet) {
  const { plan, series } = planned(sheet.planLines);
  return briefInputs(plan, series, quarters(values), '0'.repeat(64)).model;
}

/** What was advised, with the coefficients that a fit by it has. */
function advised(values: readonly (number | null)[], lines = '    model: advise') {
  const { series } = planned(lines);
  const figures = values.map((value) => value ?? Number.NaN);
  const { chosen } = advise(
    figures,
    adviceOptions(series, { every: 'quarter', start: '2017-Q1', ahead: 4, regressors: [] }),
  );
  return { figures, chosen, coefficients: fitModel(figures, chosen).coefficients };
}

describe('the lines for the plan', () => {
  const cases = [
    ['a seasonal series', seasonal(), '    model: advise', 'yearly-changes'],
    ['a series without a season', seasonless(), '    model: advise', 'fading-trend'],
    ['a series too short for an estimate', short, '    model: advise', 'last-year'],
    ['less than a year', short.slice(0, 4), '    model: advise', 'last-figure'],
    [
      'a scale and an estimate that the plan gives',
      seasonal(),
      '    model: (1,1,0)\n    scale: box-cox 0.3\n    fitted-by: maximum-likelihood',
      'yearly-changes',
    ],
    ['a constant that the plan denies', seasonal(), '    model: advise\n    constant: no', 'yearly-changes'],
    ['a constant that the plan asks for', seasonless(), '    model: advise\n    constant: yes', 'fading-trend'],
  ] as const;

  test.each(cases)('%s: pasted into the plan they ask for the model that was advised', (_, values, lines, shape) => {
    const sheet = sheetOf(values, lines);
    expect(sheet.recommended.shape).toBe(shape);
    const { chosen, coefficients, figures } = advised(values, lines);
    const model = pasted(values, sheet);
    const { form, scale, constant, fittedBy } = model;
    expect({ form, scale, constant, fittedBy }).toEqual({
      form: chosen.form,
      scale: chosen.scale,
      constant: chosen.constant,
      fittedBy: chosen.fittedBy,
    });
    expect(
      fitModel(figures, { form, scale, constant, fittedBy, priors: model.priors, season: 4 }).coefficients,
    ).toEqual(coefficients);
  });

  test('state priors only where they are not the usual ones of the form', () => {
    expect(sheetOf(seasonal()).planLines).toBe(
      ['model: (1,0,2)x(0,1,1)4', 'scale: log', 'constant: yes', 'fitted-by: shrunk']
        .map((line) => `    ${line}`)
        .join('\n'),
    );
    const { planLines } = sheetOf(seasonless());
    expect(planLines).toMatch(/^ {4}priors:\n {8}coefficients:\n {12}phi1: \{ centre: .*, on: coefficient \}$/m);
    expect(planLines).not.toMatch(/ridge/);
    expect(sheetOf(seasonless(), '    model: advise\n    constant: yes').planLines).toMatch(/^ {8}ridge: 0$/m);
  });
});

describe('the year’s shape', () => {
  test('off the plain scale it is shares of the year’s mean, which average one', () => {
    const { profile } = sheetOf(seasonal());
    expect(profile?.kind).toBe('share');
    const years = profile?.positions[0].byYear.map((_, year) => profile.positions.map(({ byYear }) => byYear[year]));
    expect(years).toHaveLength(7);
    for (const year of years ?? []) expect(year.reduce((sum, share) => sum + share, 0) / 4).toBeCloseTo(1, 12);
  });

  test('on the plain scale it is differences from the mean; years end with the last figure, places with the year', () => {
    const values = [...Array.from({ length: 4 }, () => [1, 2, 3, 6]).flat(), 2, 3];
    const { profile } = sheetOf(values, '    model: advise\n    scale: plain');
    // 18 quarters from 2017-Q1 end with 2021-Q2; a year back from there runs 2020-Q3 to 2021-Q2: 3, 6, 2, 3.
    expect(profile?.positions.map(({ period }) => period)).toEqual(['2021-Q1', '2021-Q2', '2020-Q3', '2020-Q4']);
    expect(profile?.positions.map(({ byYear }) => byYear.at(-1))).toEqual([-1.5, -0.5, -0.5, 2.5]);
    expect(profile?.positions.map(({ byYear }) => byYear[0])).toEqual([-2, -1, 0, 3]);
    expect(profile?.positions.map(({ median }) => median)).toEqual([-2, -1, 0, 3]);
  });

  test('a year with a gap is left out, and fewer than two years show nothing', () => {
    const values: (number | null)[] = seasonal();
    values[values.length - 6] = null;
    expect(sheetOf(values).profile?.positions[0].byYear).toHaveLength(6);
    expect(sheetOf(short).profile).toBeNull();
  });
});

describe('what the sheet is made of', () => {
  test('the evidence of a season is the one that the advice went by', () => {
    for (const values of [seasonal(), seasonless()]) {
      const { season, reasons } = sheetOf(values);
      expect(season?.evidence).toBe(reasons[0].numbers.evidence);
    }
    expect(sheetOf(seasonal()).season?.verdict).toBe('clear');
    expect(sheetOf(seasonless()).season?.verdict).toBe('none');
    expect(sheetOf(short).season).toBeNull();
  });

  test('differencing takes the trend out of a line with a season, to the last autocorrelation', () => {
    const line = Array.from({ length: 40 }, (_, t) => 100 + 3 * t + [0, 40, 20, 0][t % 4] + (t % 7 === 3 ? 5 : 0));
    const { differencing } = sheetOf(line, '    model: advise\n    scale: plain');
    expect(differencing).toMatchObject({ regular: 0, seasonal: 1, before: { kpss: { status: 'doubtful' } } });
    expect(differencing.after.kpss?.status).toBe('holds');
    expect(differencing.before.bound).toBeCloseTo(1.96 / Math.sqrt(40), 12);
    expect(differencing.after.bound).toBeCloseTo(1.96 / Math.sqrt(36), 12);
    expect(differencing.before.autocorrelations).toHaveLength(8);
  });

  test('the recommended candidate comes first, and at most three with the lowest misses stand beside it', () => {
    const { candidates, comparable, ahead } = sheetOf(seasonal());
    expect(candidates.map(({ label }) => label).join('')).toBe('ABCDEFG'.slice(0, candidates.length));
    expect(candidates.filter(({ isRecommended }) => isRecommended)).toEqual([candidates[0]]);
    const rivals = candidates.slice(1);
    const drawn = rivals.filter(({ isDrawn }) => isDrawn);
    expect(drawn).toHaveLength(3);
    const worst = Math.max(...drawn.map(({ miss }) => miss ?? Number.POSITIVE_INFINITY));
    for (const { miss } of rivals.filter(({ isDrawn }) => !isDrawn))
      expect(miss ?? Number.POSITIVE_INFINITY).toBeGreaterThanOrEqual(worst);
    for (const { middles } of candidates) expect(middles).toHaveLength(ahead.length);
    for (const labels of comparable) {
      const of = candidates.filter(({ label }) => labels.includes(label));
      expect(of.every(({ aicc }) => aicc !== null)).toBe(true);
      const differencing = of.map(({ form, scale }) => [parseForm(form).d, parseForm(form).D, scale].join());
      expect(new Set(differencing).size).toBe(1);
    }
    expect(ahead).toEqual(['2026-Q3', '2026-Q4', '2027-Q1', '2027-Q2']);
  });

  test('figures that are never below zero have no forecast below it', () => {
    const falling = Array.from({ length: 30 }, (_, t) => Math.max(0, 120 - 5 * t + [0, 15, 10, 0][t % 4]));
    for (const { middles } of sheetOf(falling).candidates)
      for (const middle of middles) expect(middle).toBeGreaterThanOrEqual(0);
  });

  test('events that too few figures can’t measure are said to be left out', () => {
    const event = '    model: advise\n    events:\n      - what: Fire\n        from: 2018-Q2\n        effect: passing';
    expect(sheetOf(short.slice(0, 6), event).eventsLeftOut).toBe(true);
    expect(sheetOf(seasonal(), event).eventsLeftOut).toBe(false);
  });

  test('two figures are an error that says so', () => {
    expect(() => sheetOf([1, 2])).toThrow('advice needs at least 3 figures; there are 2');
  });
});
