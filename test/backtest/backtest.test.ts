import { describe, expect, test } from 'vitest';
import { besideAt, modelForecasts, rollingForecasts } from '../../src/backtest/roll.js';
import { type TrackRecord, trackRecord } from '../../src/backtest/track-record.js';
import { fitModel } from '../../src/sarima/fit.js';
import { simulate } from '../sarima/simulate.js';

const y = Float64Array.from(simulate(2, 40, { phi: 0, theta: -0.4, Phi: 0, Theta: -0.5, m: 4, d: 1, D: 1 }));
const options = { ahead: 4, season: 4, soldOut: [], origins: 8 };
const repeat = { form: '(0,0,0)x(0,1,0)4' };
const repeated = (values: Float64Array) => modelForecasts(values, fitModel(values, repeat), repeat, options);
const scored = (values: Float64Array): TrackRecord => {
  const record = trackRecord(repeated(values));
  if (record === null) throw new Error('there are forecasts');
  return record;
};

test('eight origins, each as far ahead as there is something to score', () => {
  const forecasts = repeated(y);
  expect([...new Set(forecasts.map(({ known }) => known))]).toEqual([32, 33, 34, 35, 36, 37, 38, 39]);
  expect(forecasts.length).toBe(4 * 5 + 3 + 2 + 1);
  for (const { known, step, actual } of forecasts) expect(actual).toBe(y[known + step - 1]);
});

test('the model that repeats last year’s figure misses by exactly as much as that rule', () => {
  const record = scored(y);
  expect(record.miss).toBeCloseTo(record.lastYearMiss ?? Number.NaN, 12);
  // By hand: the changes on a year before over the scored periods, each as often as it was forecast.
  const times = (t: number) => Math.min(t - 31, 4);
  let errors = 0;
  let size = 0;
  for (let t = 32; t < 40; t++) {
    errors += times(t) * Math.abs(y[t] - y[t - 4]);
    size += times(t) * Math.abs(y[t]);
  }
  expect(record.miss).toBeCloseTo(errors / size, 12);
  expect(record.best).toBe('model');
});

test('a series that grows by the same amount each year is foretold without a miss by last year plus change', () => {
  const rising = Float64Array.from(
    { length: 32 },
    (_, t) => 100 + 10 * Math.floor(t / 4) + [0, 30, 50, 20][t % 4] + (t === 3 ? 0.5 : 0),
  );
  const record = scored(rising);
  expect(record.lastYearPlusChangeMiss).toBeCloseTo(0, 12);
  expect(record.best).toBe('last-year-plus-change');
  expect(record.bias).toBeGreaterThan(0);
  expect(record.mase).toBeCloseTo(1, 1);
});

test('what happens later never reaches a forecast', () => {
  const changed = Float64Array.from(y, (value, t) => (t >= 37 ? value + 1000 : value));
  const asked = { form: '(0,1,1)x(0,1,1)4' };
  const at = (values: Float64Array) =>
    rollingForecasts(values, (known) => fitModel(values.subarray(0, known), asked), options).filter(
      ({ known }) => known <= 37,
    );
  const [before, after] = [at(y), at(changed)];
  before.forEach(({ expected, range80 }, i) => {
    expect(after[i].expected).toBe(expected);
    expect(after[i].range80).toEqual(range80);
  });
});

test('missing and sold-out periods are not scored', () => {
  const gappy = Float64Array.from(y, (value, t) => (t === 35 ? Number.NaN : value));
  expect(repeated(gappy).some(({ known, step }) => known + step - 1 === 35)).toBe(false);
  const sold = modelForecasts(y, fitModel(y, repeat), repeat, { ...options, soldOut: [36] });
  expect(sold.some(({ known, step }) => known + step - 1 === 36)).toBe(false);
});

test('an event is unknown before it happens', () => {
  const column = Array.from({ length: 44 }, (_, t) => (t >= 36 ? 1 : 0));
  const beside = { regressors: [{ name: 'event1', values: column }], soldOut: [10, 38] };
  expect(besideAt(beside, 36)).toEqual({ regressors: [], soldOut: [10] });
  expect(besideAt(beside, 37).regressors).toHaveLength(1);
});

describe('the interval score', () => {
  test('is the width plus 2/α times what lies outside', () => {
    const forecast = { known: 9, step: 1, expected: 10, middle: 10, lastYear: 9, lastYearPlusChange: 9, scale: 2 };
    const at = (actual: number) => ({
      ...forecast,
      actual,
      range80: [8, 12] as [number, number],
      range95: [6, 14] as [number, number],
    });
    const record = trackRecord([at(10), at(13), at(15), at(5)]);
    // Gneiting & Raftery 2007, equation 43, with α = 0.05, in units of 2: (8 + 8 + (8 + 40) + (8 + 40))/4/2.
    expect(record?.intervalScore).toBeCloseTo(14, 12);
    expect(record?.inside80).toBe(0.25);
    expect(record?.inside95).toBe(0.5);
    expect(record?.mase).toBeCloseTo((0 + 3 + 5 + 5) / 4 / 2, 12);
  });
  test('with fewer than four forecasts there is no record', () => {
    expect(trackRecord([])).toBeNull();
  });
});
