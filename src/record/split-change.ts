/**
 * Why a forecast changed: for the periods that a filed brief and a new one both look ahead to, the change of the expected
 * value, taken apart by making the old forecast again and moving one thing after another to where it is now:
 *
 *   as filed -> made by today's program -> with corrected figures -> with the new figures -> with coefficients estimated
 *   anew -> as the new brief says, with its model, events and judgement
 *
 * Each part is the difference of two neighbours, so the parts add up to the change.
 */
import { periodIndex } from '../calendar/calendar.js';
import { decimal, minus, roundTo, sum, toNumber } from '../explain/decimals.js';
import type { Printed } from '../explain/printed.js';
import type { Fit } from '../sarima/fit.js';
import { withJudgement } from './assemble-decisions.js';
import { fitOf, outlookOf } from './computed.js';
import { eventRegressor } from './events.js';
import { type BriefInputs, inputsOfRecord, periodAt } from './inputs.js';
import type { ChangeParts, LookBack } from './looked-back.js';
import type { BriefRecord } from './record.js';

type Change = NonNullable<LookBack['change']>;

/** What the new brief says, as far as the look back needs it. */
export interface Current {
  readonly inputs: BriefInputs;
  readonly outlook: BriefRecord['outlook'];
  readonly printed: Printed;
}

export function changeSince(filed: BriefRecord, { inputs, outlook, printed }: Current): LookBack['change'] {
  const now = new Map(outlook.periods.map(({ period, expected }) => [period, expected]));
  const both = filed.outlook.periods.filter(({ period }) => now.has(period));
  if (both.length === 0) return null;
  const stages = stagesOf(filed, inputs);
  const periods = both.map(({ period, expected: was }) => {
    const values = [was, ...stages.map((stage) => stage.get(period) ?? Number.NaN), now.get(period) ?? Number.NaN];
    return { period, was, now: values[values.length - 1], parts: partsOf(values) };
  });
  const total = {
    was: added(periods.map((each) => each.was)),
    now: added(periods.map((each) => each.now)),
    parts: eachPart((part) => added(periods.map((each) => each.parts[part]))),
  };
  return {
    brief: filed.brief,
    issued: filed.issued,
    periods,
    total,
    printed: printedTotal(total, printed.step),
  };
}

const PARTS = ['program', 'revised', 'observed', 'estimated', 'model'] as const;

const eachPart = (value: (part: (typeof PARTS)[number], i: number) => number): ChangeParts => ({
  program: value('program', 0),
  revised: value('revised', 1),
  observed: value('observed', 2),
  estimated: value('estimated', 3),
  model: value('model', 4),
});

const added = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);

/** A stage that could not be made is left out, and what it would have told falls to the next one. */
function partsOf(values: readonly number[]): ChangeParts {
  const filled = values.map(
    (value, i) => (Number.isNaN(value) ? values.slice(0, i).findLast((each) => !Number.isNaN(each)) : value) ?? 0,
  );
  return eachPart((_, i) => filled[i + 1] - filled[i]);
}

/** By period, what is expected at the stages between the filed brief and the new one. */
function stagesOf(filed: BriefRecord, inputs: BriefInputs): ReadonlyMap<string, number>[] {
  const old = inputsOfRecord(filed);
  const corrected = withFigures(old, correctedValues(old, inputs), old.figures.start);
  const informed = withFigures(old, inputs.figures.values, inputs.figures.start, inputs.ahead);
  const fit = attempted(() => fitOf(old));
  return [
    expectedAt(fit, old),
    expectedAt(carriedOver(fit, corrected), corrected),
    expectedAt(carriedOver(fit, informed), informed),
    expectedAt(
      attempted(() => fitOf(informed)),
      informed,
    ),
  ];
}

/** What was known then, as it is known now; a figure that is gone stays. */
function correctedValues({ figures, series }: BriefInputs, now: BriefInputs): (number | null)[] {
  const shift = periodIndex(figures.start, series.every) - periodIndex(now.figures.start, series.every);
  return figures.values.map((value, t) => {
    const known = now.figures.values[t + shift];
    return known === undefined ? value : known;
  });
}

/** The old inputs with other figures; its events and sold-out periods where these still have a place. */
function withFigures(
  old: BriefInputs,
  values: readonly (number | null)[],
  start: string,
  ahead = old.ahead,
): BriefInputs {
  const { every } = old.series;
  const first = periodIndex(start, every);
  const isThere = (period: string) => (values[periodIndex(period, every) - first] ?? null) !== null;
  return {
    ...old,
    ahead,
    figures: {
      ...old.figures,
      start,
      values: [...values],
      soldOut: old.figures.soldOut.filter(isThere),
      regressors: old.figures.events.map((event) => ({
        name: event.coefficient,
        values: eventRegressor(event, every, start, values.length + ahead),
      })),
    },
  };
}

/** The old fit's coefficients on other figures. */
function carriedOver(fit: Fit | null, { figures, series }: BriefInputs): Fit | null {
  if (fit === null || figures.soldOut.length !== fit.soldOut.length) return null;
  const first = periodIndex(figures.start, series.every);
  return {
    ...fit,
    values: Float64Array.from(figures.values, (value) => value ?? Number.NaN),
    regressors: figures.regressors.map(({ name, values }) => ({ name, values: Float64Array.from(values) })),
    soldOut: figures.soldOut.map((period) => periodIndex(period, series.every) - first),
  };
}

function expectedAt(fit: Fit | null, inputs: BriefInputs): ReadonlyMap<string, number> {
  const outlook = fit === null ? null : attempted(() => withJudgement(outlookOf(fit, inputs), inputs));
  const n = inputs.figures.values.length;
  return new Map(outlook?.periods.map(({ expected }, h) => [periodAt(inputs, n + h), expected]));
}

/** Figures can come to be where the old model has no answer, such as zero on logarithms. */
function attempted<Result>(make: () => Result): Result | null {
  try {
    return make();
  } catch {
    return null;
  }
}

/** To page 1's step; the largest part takes up the rounding, so that the parts add up. */
function printedTotal({ was, now, parts }: Change['total'], step: number): Change['printed'] {
  const places = -Math.round(Math.log10(step));
  const digits = Math.max(places, 0);
  const [before, after] = [roundTo(was, places), roundTo(now, places)];
  const largest = PARTS.reduce((most, part) => (Math.abs(parts[part]) > Math.abs(parts[most]) ? part : most));
  const rounded = eachPart((part) => roundTo(parts[part], places));
  const others = sum(PARTS.filter((part) => part !== largest).map((part) => decimal(rounded[part], digits)));
  const whole = minus(decimal(after, digits), decimal(before, digits));
  return { was: before, now: after, parts: { ...rounded, [largest]: toNumber(minus(whole, others)) } };
}
