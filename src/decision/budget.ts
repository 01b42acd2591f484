/**
 * Income or spending of one series, from its joint paths.
 *
 *   units -> money by step -> the money's own step, some steps later -> the figures of each line -> the lowest cash
 */
import { mean, quantile } from '../stats/sample.js';
import { aheadOf, type Paths, share, summed } from './paths.js';

/** A line of the budget: a sum over steps ahead (0 is the first), with the money that has already happened in it. */
export interface BudgetLine {
  readonly steps: readonly number[];
  readonly known: number;
}

export interface BudgetRequest {
  readonly paths: Paths;
  /** Money a unit, one a step ahead. */
  readonly perUnit: readonly number[];
  /** Steps between the sale or use and its money. */
  readonly lag: number;
  /** Money of the last `lag` steps known, the oldest first; null where it is missing. */
  readonly before: readonly (number | null)[];
  readonly lines: readonly BudgetLine[];
}

/** The cautious figure of income is the low one, that of spending the high one. */
export interface LineFigures {
  /** The quantile at 10%, the mean and the quantile at 90%. */
  readonly low: number;
  readonly expected: number;
  readonly high: number;
  /** Shares of paths above them. */
  readonly chanceAboveLow: number;
  readonly chanceAboveExpected: number;
  readonly chanceAboveHigh: number;
}

export interface Budget {
  /** Money by the step of the sale or use, ahead by count, row by row. */
  readonly amounts: Float64Array;
  /** The same by the step in which it is paid. */
  readonly cashFlows: Float64Array;
  /** Steps whose payments come from a missing figure and stand in `cashFlows` as zero. */
  readonly unknown: readonly number[];
  /** Of `amounts`, in the order of the lines. */
  readonly lines: readonly LineFigures[];
}

/** Throws an Error where prices, earlier amounts or lines don't fit the paths. */
export function makeBudget({ paths, perUnit, lag, before, lines }: BudgetRequest): Budget {
  const amounts = priced(paths, perUnit);
  return {
    amounts,
    cashFlows: delayed({ matrix: amounts, count: paths.count }, lag, before),
    unknown: [...before.keys()].filter((h) => before[h] === null && h < perUnit.length),
    lines: lineFigures({ matrix: amounts, count: paths.count }, lines),
  };
}

function priced(paths: Paths, perUnit: readonly number[]): Float64Array {
  const ahead = aheadOf(paths);
  if (perUnit.length !== ahead)
    throw new Error(`there are ${perUnit.length} prices for ${ahead} periods ahead; give one a period`);
  const odd = perUnit.findIndex((price) => !Number.isFinite(price));
  if (odd !== -1) throw new Error(`the price ${odd + 1} periods ahead is ${perUnit[odd]}; it must be a number`);
  return paths.matrix.map((units, at) => units * perUnit[Math.floor(at / paths.count)]);
}

/** Row h holds row h − lag; the first rows hold what came before the paths. */
function delayed({ matrix, count }: Paths, lag: number, before: readonly (number | null)[]): Float64Array {
  if (!(Number.isInteger(lag) && lag >= 0))
    throw new Error(`money comes ${lag} periods later; it must be a whole number of 0 or more`);
  if (before.length !== lag)
    throw new Error(
      `money comes ${lag} periods later, and ${before.length} earlier amounts are given; give one a period`,
    );
  const odd = before.findIndex((amount) => amount !== null && !Number.isFinite(amount));
  if (odd !== -1) throw new Error(`the amount ${lag - odd} periods ago is ${before[odd]}; it must be a number or null`);
  const flows = new Float64Array(matrix.length);
  before.forEach((amount, h) => {
    flows.fill(amount ?? 0, h * count, (h + 1) * count);
  });
  if (lag * count < matrix.length) flows.set(matrix.subarray(0, matrix.length - lag * count), lag * count);
  return flows;
}

/** The figures of lines over paths of money: one series' amounts or cash, or several series' together. */
export function lineFigures(money: Paths, lines: readonly BudgetLine[]): LineFigures[] {
  const ahead = aheadOf(money);
  return lines.map(({ steps, known }) => {
    const beyond = steps.find((h) => !(Number.isInteger(h) && h >= 0 && h < ahead));
    if (beyond !== undefined) throw new Error(`a line has step ${beyond}; steps run from 0 to ${ahead - 1}`);
    if (!Number.isFinite(known)) throw new Error(`the money known of a line is ${known}; it must be a number`);
    const sums = summed(money, steps, known).sort();
    const [low, expected, high] = [quantile(sums, 0.1), mean(sums), quantile(sums, 0.9)];
    const chanceAbove = (figure: number) => share(sums, (sum) => sum > figure);
    return {
      low,
      expected,
      high,
      chanceAboveLow: chanceAbove(low),
      chanceAboveExpected: chanceAbove(expected),
      chanceAboveHigh: chanceAbove(high),
    };
  });
}

export interface CashLow {
  /** By step: the mean, and what cash stays above nine times in ten (its quantile at 10%). */
  readonly steps: readonly { readonly expected: number; readonly cautious: number }[];
  /** The lowest of the cautious figures, be it below zero or not, and the first step that has it. */
  readonly lowest: { readonly step: number; readonly cautious: number };
}

/** How low cash may fall. `cumulated` holds each path's cash in hand at the end of each step. */
export function cashLow(cumulated: Paths): CashLow {
  const steps = Array.from({ length: aheadOf(cumulated) }, (_, h) => {
    const sorted = summed(cumulated, [h]).sort();
    return { expected: mean(sorted), cautious: quantile(sorted, 0.1) };
  });
  const cautious = Math.min(...steps.map((step) => step.cautious));
  return { steps, lowest: { step: steps.findIndex((step) => step.cautious === cautious), cautious } };
}
