/** What the look back compares and what it does not, from records made of small figures. */
import { describe, expect, test } from 'vitest';
import type { FiledRecord } from '../../src/record/archive.js';
import { assemble } from '../../src/record/assemble.js';
import { type BriefInputs, briefInputs } from '../../src/record/inputs.js';
import { type Changes, figures, planned } from './planned.js';

/** Two years of quarters that repeat but for a little, to 2026-Q2. */
const VALUES = [30, 11, 12, 20, 33, 10, 14, 21, 36, 12, 13, 25];

interface Made extends Changes {
  readonly issued: string;
  /** How many of the quarters are known. */
  readonly known: number;
  readonly factor?: number;
  readonly unit?: string;
}

function inputsOf({ issued, known, factor = 1, unit = 'metres', ...changes }: Made): BriefInputs {
  const { plan, series } = planned(changes);
  const values = VALUES.slice(0, known).map((value) => factor * value);
  return briefInputs({ ...plan, issued }, { ...series, unit }, figures(values), '0'.repeat(64));
}

const filedAs = (made: Made, earlier: readonly FiledRecord[] = []): FiledRecord => ({
  record: assemble(inputsOf(made), { version: '0.1.0', folder: made.issued }, earlier),
  sha256: made.issued.replaceAll('-', '').padEnd(64, '0'),
});
const lookBackOf = (made: Made, ...earlier: FiledRecord[]) => filedAs(made, earlier).record.lookBack;

const NOW = { issued: '2026-07-06', known: 12 };

test('nothing earlier, nothing to look back on; a brief of the same day or later is not earlier', () => {
  expect(lookBackOf(NOW)).toBeNull();
  expect(lookBackOf(NOW, filedAs({ issued: '2026-07-06', known: 11 }))).toBeNull();
});

test('a quarter without a brief is no gap: all that is known now is scored, whatever order the records come in', () => {
  const [older, newer] = [filedAs({ issued: '2025-10-06', known: 9 }), filedAs({ issued: '2026-04-06', known: 11 })];
  const back = lookBackOf(NOW, newer, older);
  expect(back?.earlier.map(({ issued, known }) => [issued, known])).toEqual([
    ['2025-10-06', 3],
    ['2026-04-06', 1],
  ]);
  // Last year's figure again: 10, 14, 21 for what came to 12, 13, 25, and 21 for 25.
  expect(back?.earlier[0].error).toBeCloseTo(2 + 1 + 4, 0);
  expect(back?.running?.count).toBe(4);
  expect(back?.last).toHaveLength(1);
});

describe('earlier briefs that are not compared', () => {
  test.each([
    ['another unit', { unit: 'coils' }, 'unit'],
    ['a thousand times as much, the unit unsaid', { factor: 1000 }, 'counting'],
    ['a series that was split', { factor: 2 }, 'counting'],
  ])('%s', (_, made, reason) => {
    const back = lookBackOf(NOW, filedAs({ issued: '2026-04-06', known: 11, ...made }));
    expect(back).toMatchObject({ earlier: [], running: null, last: [], change: null });
    expect(back?.unlike.map((each) => each.reason)).toEqual([reason]);
  });

  test('figures corrected by a third are still the same figures', () => {
    const back = lookBackOf(NOW, filedAs({ issued: '2026-04-06', known: 11, factor: 1.33 }));
    expect(back?.unlike).toEqual([]);
    const change = back?.change;
    expect(change?.total.parts.revised).toBeLessThan(0);
    expect(change?.total.parts.revised).toBeCloseTo((change?.total.was ?? 0) * (1 / 1.33 - 1), 0);
  });
});

test('a stage that can’t be made tells nothing, and the parts add up all the same', () => {
  const early = filedAs({ issued: '2026-04-06', known: 11, model: '(0,1,0)x(0,1,0)4', more: '    scale: log\n' });
  // A zero has no logarithm, so the old model can't be carried over to these figures.
  const now = inputsOf(NOW);
  const values = now.figures.values.map((value, t) => (t === 11 ? 0 : value));
  const { lookBack } = assemble({ ...now, figures: { ...now.figures, values } }, { version: '0.1.0', folder: 'x' }, [
    early,
  ]);
  for (const { was, now: is, parts } of lookBack?.change?.periods ?? []) {
    expect(parts.observed).toBe(0);
    expect(Object.values(parts).reduce((sum, part) => sum + part, was)).toBeCloseTo(is, 9);
  }
  expect(lookBack?.change?.periods.length).toBeGreaterThan(0);
});

test('an order whose periods are not all known yet is not told of; one that ran short is, in units', () => {
  const more = '    purchase: { covers: 1, not-short: 90%, in-stock: 5, decided: 10, because: Little room }\n';
  const order = filedAs({ issued: '2026-04-06', known: 11, more });
  expect(lookBackOf(NOW, order)?.order).toMatchObject({ ordered: 10, demand: 25, leftOver: 0, lost: 10 });
  const longer = filedAs({ issued: '2026-04-06', known: 11, more: more.replace('covers: 1', 'covers: 2') });
  expect(lookBackOf(NOW, longer)?.order).toBeNull();
});
