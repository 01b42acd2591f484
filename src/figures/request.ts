/** What is asked of the file of past figures, and what comes of it. */
import type { Every } from '../calendar/calendar.js';
import type { Place } from './input-error.js';

/** Where the figures stand, as the plan says. */
export interface FiguresRequest {
  /** Absolute path, and the path as typed for messages. */
  readonly file: string;
  readonly fileTyped: string;
  readonly at: Place;
  /** The column with the period; or two columns with a comma between, such as `year, quarter`. */
  readonly period: string;
  readonly periodAt: Place;
  /** Null: as found. */
  readonly every: Every | null;
  /** Which sign divides the whole from its decimals; left out or null: as found. */
  readonly decimal?: DecimalName | null;
  /** Both null in a wide file. */
  readonly series: string | null;
  readonly seriesAt: Place;
  readonly value: string | null;
  readonly valueAt: Place;
  /** A figure of a period that ends after this ISO date is unfinished. */
  readonly issued: string;
  readonly yearStarts: number;
  readonly wanted: readonly WantedSeries[];
}

export type DecimalName = 'point' | 'comma';

export interface WantedSeries {
  readonly slug: string;
  readonly name: string;
  readonly column: string;
  readonly columnAt: Place;
}

export interface SeriesFigures {
  readonly every: Every;
  /** The first period that holds a figure. */
  readonly start: string;
  /** One a period from the first figure to the last; null where missing. */
  readonly values: readonly (number | null)[];
  readonly findings: readonly Finding[];
  /** Rows under the figures that were left out: totals and notes. Not there where there are none. */
  readonly footer?: readonly FooterRow[];
}

export interface Finding {
  readonly id: 'missing' | 'unfinished-left-out';
  readonly periods: readonly string[];
  readonly done: 'left-out' | 'left-missing';
}

export interface FooterRow {
  readonly line: number;
  /** What its first filled cell says. */
  readonly text: string;
}
