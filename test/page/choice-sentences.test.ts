import { describe, expect, test } from 'vitest';
import { checkModel } from '../../src/commands/check-model.js';
import { choiceLine } from '../../src/page/choice-line.js';
import {
  answerSentence,
  doesSentence,
  reasonSentences,
  testSentences,
  trackSentences,
  warnings,
} from '../../src/page/choice-sentences.js';
import { choiceWords } from '../../src/page/choice-words.js';
import { loadTheme } from '../../src/page/theme.js';
import { parsePlan } from '../../src/plan/plan.js';
import { assembleChoice } from '../../src/record/assemble-choice.js';
import type { ChoiceSheet, Level } from '../../src/record/choice.js';

const theme = await loadTheme('en-GB');
const plan = parsePlan(
  `heading: Stores outlook
prepared-for: Saltmarsh Boatyard
issued: 2026-10-05
ahead: 4
figures:
  file: figures.csv
  period: quarter
series:
  - name: Rope
    column: rope
    unit: metres
    model: advise
`,
  'plan.yaml',
  checkModel,
);
const sheet = assembleChoice(
  plan,
  plan.series[0],
  {
    every: 'quarter',
    start: '2021-Q3',
    findings: [],
    values: [30, 11, 12, 20, 33, 10, 14, 21, 36, 12, 13, 25, 38, 12, 16, 25, 37, 14, 15, 27],
  },
  '0'.repeat(64),
);
const words = (changes: Partial<ChoiceSheet>) => choiceWords({ ...sheet, ...changes }, theme);

type Reason = ChoiceSheet['reasons'][number];

/** Every reason that the advice knows, with numbers that it may come with: one entry for each wording. */
const reasons: Readonly<Record<Reason['id'], readonly (readonly [numbers: Reason['numbers'], says: RegExp])[]>> = {
  'little-history': [[{ figures: 7 }, /^These 7 figures tell too little/]],
  'no-year': [[{ figures: 4 }, /^These 4 figures are too few to show a season/]],
  season: [[{ evidence: 8.25 }, /clear season/]],
  'no-season': [[{ evidence: 0.4 }, /has no season/]],
  yearly: [[{ figures: 20 }, /A year’s figure has no season/]],
  'gaps-in-season': [[{ figures: 14 }, /14 figures, but the gaps/]],
  shrunk: [[{}, /pulled towards/]],
  unrestricted: [[{}, /maximum likelihood/]],
  'log-likelier': [
    [{ difference: 3.24 }, /on logarithms: .* lower by 3\.2 /],
    [{ difference: -4.5 }, /Plain figures are likelier by 4\.5 .* too little/],
    [{ difference: 0.01 }, /as likely on logarithms/],
  ],
  'plain-likelier': [
    [{ difference: -3.24 }, /as they are: .* lower by 3\.2 /],
    [{ difference: 0 }, /simpler/],
  ],
  'log-missed-more': [[{ difference: 2.04, ratio: 1.43 }, /likelier by 2\.0 .* missed by 1\.4 times as much/]],
  'not-above-zero': [[{}, /zero or below/]],
  'scale-given': [[{}, /The plan sets the scale \(log\)/]],
};

describe('reasons', () => {
  const all = Object.entries(reasons).flatMap(([id, wordings]) =>
    wordings.map(([numbers, says]) => [id as Reason['id'], numbers, says] as const),
  );

  test.each(all)('%s %j has a sentence', (id, numbers, says) => {
    const of = words({ reasons: [{ id, numbers }] });
    const [said] = reasonSentences(of);
    expect(said).toMatch(says);
    expect(said).not.toMatch(/NaN|undefined|\{\{|-\d/);
    const { why } = choiceLine(of.sheet, theme);
    if (id === 'shrunk' || id === 'unrestricted') expect(why).toBe('');
    else expect(why).toMatch(/^\w.{3,40}$/);
  });

  test('a season that chance could give is called faint', () => {
    const season = { evidence: 1.3, verdict: 'faint' } as const;
    const [said] = reasonSentences(words({ season, reasons: [{ id: 'season', numbers: { evidence: 1.3 } }] }));
    expect(said).toMatch(/faint/);
  });
});

describe('the recommendation', () => {
  const shapes = ['yearly-changes', 'fading-trend', 'wandering-level', 'last-year', 'last-figure'] as const;
  const forms = ['(1,0,2)x(0,1,1)4', '(1,1,2)', '(0,1,1)', '(0,0,0)x(0,1,0)4', '(0,1,0)'];
  test('has words for every form, with and without a constant, on every scale, by either estimate', () => {
    for (const [i, shape] of shapes.entries())
      for (const constant of [true, false])
        for (const scale of ['plain', 'log', 'box-cox 0.3'])
          for (const fittedBy of ['shrunk', 'maximum-likelihood'] as const) {
            const of = words({ recommended: { form: forms[i], shape, constant, scale, fittedBy } });
            const said = `${answerSentence(of)} ${doesSentence(of)}`;
            expect(said).toMatch(/^We recommend <b>\(.*\.$/);
            expect(said.includes('shrunk')).toBe(fittedBy === 'shrunk' && i < 3);
            expect(said.includes('adds') || said.includes('with a constant')).toBe(constant);
          }
  });
});

describe('the tests', () => {
  const level = (status: 'holds' | 'doubtful' | 'fails'): Level => ({
    autocorrelations: [],
    bound: 0.3,
    kpss: { statistic: 0.512, pValue: status === 'fails' ? 0.001 : 0.04, status },
  });

  test('have a sentence for each outcome, with the number', () => {
    for (const before of ['holds', 'doubtful', 'fails'] as const)
      for (const after of ['holds', 'doubtful', 'fails'] as const) {
        const differencing = { regular: 0, seasonal: 1, before: level(before), after: level(after) };
        const said = testSentences(words({ differencing }));
        expect(said).toHaveLength(3);
        for (const sentence of said.slice(0, 2)) expect(sentence).toMatch(/0\.51, probability by chance/);
        expect(said[1].includes('under 0.01')).toBe(after === 'fails');
      }
    for (const verdict of ['clear', 'faint', 'none'] as const)
      expect(testSentences(words({ season: { evidence: 2.345, verdict } })).at(-1)).toMatch(/2\.3 times/);
  });

  test('say what was too short to test', () => {
    const untested = { autocorrelations: [], bound: 1, kpss: null };
    const none = { regular: 0, seasonal: 1, before: untested, after: untested };
    expect(testSentences(words({ differencing: none, season: null }))).toEqual([
      'There are too few figures for the KPSS test.',
      'There are too few figures to test for a season.',
    ]);
    const half = { ...none, before: level('holds') };
    expect(testSentences(words({ differencing: half }))[1]).toMatch(/too few left/);
  });
});

describe('how the advice has done', () => {
  const record = sheet.trackRecord;
  if (record === null) throw new Error('the figures are enough for a track record');
  const tracked = (miss: number, lastYearMiss: number, lastYearPlusChangeMiss: number, more = {}) =>
    words({ trackRecord: { ...record, miss, lastYearMiss, lastYearPlusChangeMiss }, ...more });

  test('a plain rule that wins is said to win, first of all', () => {
    const of = tracked(0.12, 0.08, 0.2);
    expect(trackSentences(of)[1]).toMatch(
      /^A plain rule did better: repeating last year’s figure would have missed by 8\.0%, where the advice missed by 12\.0%/,
    );
    expect(warnings(of)).toEqual([trackSentences(of)[1]]);
    expect(trackSentences(tracked(0.12, 0.3, 0.05))[1]).toMatch(/did better: last year’s figure with/);
  });

  test('one that does about as well, or worse, is no warning', () => {
    expect(trackSentences(tracked(0.1, 0.098, 0.2))[1]).toMatch(/did about as well, missing by 9\.8%/);
    expect(trackSentences(tracked(0.1, 0.15, 0.2))[1]).toMatch(/^It missed by 10\.0% on average; the best plain rule/);
    expect(trackSentences(tracked(0, 0, 0.2))[1]).toMatch(/about as well/);
    expect(warnings(tracked(0.1, 0.098, 0.2))).toEqual([]);
  });

  test('where the advice is that rule, it does not warn against itself', () => {
    const shape = 'last-year' as const;
    const recommended = { ...sheet.recommended, form: '(0,0,0)x(0,1,0)4', constant: false, shape };
    const of = tracked(0.12, 0.08, 0.2, { recommended });
    expect(trackSentences(of)[1]).toMatch(/The plain rule that it recommends now/);
    expect(warnings(of)).toEqual([]);
  });

  test('too little history, or nothing but zeros, is said to leave it untested', () => {
    for (const of of [words({ trackRecord: null }), words({ trackRecord: { ...record, miss: null } })]) {
      expect(trackSentences(of)).toEqual([expect.stringMatching(/^There are too few figures to test/)]);
      expect(choiceLine(of.sheet, theme).missed).toBe('too few figures to test');
    }
  });

  test('the command line’s cell sets the advice beside last year’s figure', () => {
    expect(choiceLine(tracked(0.061, 0.0932, 0.2).sheet, theme).missed).toBe('6.1% (last year’s figure: 9.3%)');
  });
});
