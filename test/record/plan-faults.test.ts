import { expect, test } from 'vitest';
import { planFaults } from '../../src/record/plan-faults.js';
import { type Changes, figures, planned } from './planned.js';

const faults = (changes: Changes, values?: readonly (number | null)[]) => {
  const { plan, series } = planned(changes);
  return planFaults(plan, series, figures(values));
};

const event = (from: string, to: string | null) =>
  `    events:\n      - what: Slipway closed\n        from: ${from}\n${
    to === null ? '        effect: lasting\n' : `        to: ${to}\n        effect: passing\n`
  }`;

test('a plan that fits its figures has no faults', () => {
  expect(faults({ more: event('2024-Q1', '2024-Q2') })).toEqual([]);
  expect(faults({ more: event('2025-Q1', null) })).toEqual([]);
});

test.each([
  [
    'an event before the figures',
    event('2020-Q1', '2020-Q2'),
    /lies outside the figures.*2023-Q3 to 2026-Q2; leave it out/,
  ],
  ['an event still to come', event('2026-Q3', '2026-Q4'), /lies outside the figures.*as a judgement/],
  ['a lasting event from the first figure on', event('2020-Q1', null), /covers every figure/],
  ['an event in months', event('2024-01', '2024-03'), /"2024-01" is not a period of figures that come every quarter/],
])('%s', (_, more, message) => {
  const found = faults({ more });
  expect(found).toHaveLength(1);
  expect(found[0]).toMatchObject({ file: 'plan.yaml', line: 15, message: expect.stringMatching(message) });
  expect(found[0]?.message).toMatch(/^series "Rope": event "Slipway closed"/);
});

test('an event with no figure in its periods has no effect to measure', () => {
  const values = [30, 11, null, 20, 33, 10, 14, 21, 36, 12, 13, 25];
  expect(faults({ more: event('2024-Q1', '2024-Q1') }, values)[0]?.message).toMatch(/no figure in its periods/);
});

test('a sold-out period needs a figure, and priors need a coefficient of the model', () => {
  expect(faults({ more: '    sold-out: [2024-Q1]\n' })).toEqual([]);
  expect(faults({ more: '    sold-out: [2031-Q1]\n' })[0]?.message).toMatch(/2031-Q1 lies outside the figures/);
  const values = [30, 11, null, 20, 33, 10, 14, 21, 36, 12, 13, 25];
  const missing = faults({ more: '    sold-out: [2024-Q1]\n' }, values)[0]?.message;
  expect(missing).toMatch(/2024-Q1 has no figure/);
  const priors = '    fitted-by: shrunk\n    priors:\n      coefficients:\n        phi9: { centre: 0, spread: 1 }\n';
  expect(faults({ more: priors })[0]?.message).toMatch(/a prior for "phi9"/);
});

test('a season that is not the figures’ own, and a look too far ahead', () => {
  expect(faults({ model: '(0,1,1)x(0,1,1)12' })[0]?.message).toMatch(/season of 12 .*write 4 after/);
  expect(faults({ model: '(0,1,1)' })).toEqual([]);
  expect(faults({ ahead: 13 })[0]?.message).toMatch(/three years, which are 12 periods/);
});
