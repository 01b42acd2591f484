import { expect, test } from 'vitest';
import { eventMarks, type Frame } from '../../src/charts/event-marks.js';

const frame: Frame = { least: 0, most: 20, perStep: 10, height: 100, heightOf: () => 30, widthOf: () => 60 };

test('a name stands in the middle of its event, on the side that the line leaves freer', () => {
  expect(eventMarks([{ what: 'Closed', from: 8, to: 10 }], frame)).toEqual([
    { what: 'Closed', from: 8, to: 10, start: 7.5, end: 10.5, t: 9, y: 91 },
  ]);
  const low: Frame = { ...frame, heightOf: () => 80 };
  expect(eventMarks([{ what: 'Closed', from: 8, to: 10 }], low)[0]?.y).toBe(9);
});

test('names keep inside the plot and clear of one another', () => {
  const marks = eventMarks(
    [
      { what: 'First', from: 0, to: 0 },
      { what: 'Second', from: 2, to: 3 },
      { what: 'Third', from: 19, to: 30 },
    ],
    frame,
  );
  expect(marks.map(({ t }) => t)).toEqual([3, 3, 17]);
  expect(marks.map(({ y }) => y)).toEqual([91, 78, 91]);
  expect(marks[2]).toMatchObject({ start: 18.5, end: 20.5 });
});

test('one that lasts is marked where it begins, its name beside it', () => {
  const [mark] = eventMarks([{ what: 'New pier', from: 8, to: null }], frame);
  // Half of 60 pixels are 3 steps, the gap of 4 pixels is 0.4.
  expect(mark).toMatchObject({ start: 7.5, end: 7.5, t: 10.9 });
  expect(eventMarks([{ what: 'New pier', from: -2, to: null }], frame)).toEqual([]);
});

test('an event before the first period shown is not marked', () => {
  expect(eventMarks([{ what: 'Long ago', from: -9, to: -5 }], frame)).toEqual([]);
});
