/**
 * The choice sheet of one series: what was advised and why, and what a planner needs to judge it by. A working paper: it
 * is drawn from this once and not filed.
 */
import type { Reason } from '../advice/choose.js';
import type { TrackRecord } from '../backtest/track-record.js';
import type { BriefRecord } from './record.js';

export interface ChoiceSheet {
  readonly issued: string;
  readonly plan: BriefRecord['plan'];
  readonly series: BriefRecord['series'];
  readonly figures: {
    readonly start: string;
    readonly values: readonly (number | null)[];
    readonly events: readonly { readonly what: string; readonly from: string; readonly to: string | null }[];
    readonly soldOut: readonly string[];
  };
  /** The periods ahead. */
  readonly ahead: readonly string[];
  readonly recommended: Recommended;
  readonly reasons: readonly Reason[];
  /** Null for yearly figures, and where there are fewer than two years without a gap. */
  readonly profile: SeasonProfile | null;
  readonly differencing: {
    readonly regular: number;
    readonly seasonal: number;
    /** The figures on the model's scale, the effects of events taken off; then differenced as the model does. */
    readonly before: Level;
    readonly after: Level;
  };
  /** Null for yearly figures, and where there are too few. */
  readonly season: SeasonTest | null;
  /** The recommended one first. */
  readonly candidates: readonly SheetCandidate[];
  /** Labels of the candidates that the information criterion can compare: same differencing, same scale. */
  readonly comparable: readonly (readonly string[])[];
  readonly trackRecord: TrackRecord | null;
  readonly planLines: string;
  /** The figures are too few to measure what the events did. */
  readonly eventsLeftOut: boolean;
}

export interface SheetModel {
  readonly form: string;
  readonly scale: string;
  readonly constant: boolean;
  readonly fittedBy: 'maximum-likelihood' | 'shrunk';
}

export interface Recommended extends SheetModel {
  /** What its forecasts do. */
  readonly shape: 'yearly-changes' | 'fading-trend' | 'wandering-level' | 'last-year' | 'last-figure';
}

export interface SeasonProfile {
  /** A figure as a share of its year's mean, or as the difference from it, in the series' unit. */
  readonly kind: 'share' | 'difference';
  /** In the order of the reporting year. */
  readonly positions: readonly {
    /** The latest period in this place. */
    readonly period: string;
    readonly median: number;
    /** One a year, the latest last; each year ends a whole number of years before the last figure. */
    readonly byYear: readonly number[];
  }[];
}

/** Whether values keep to their level, and resemble those before them. */
export interface Level {
  /** At lags 1, 2 …; empty where there are too few values. */
  readonly autocorrelations: readonly number[];
  /** 1.96/√n: about 19 in 20 autocorrelations of pure chance lie within it (Bartlett 1946). */
  readonly bound: number;
  readonly kpss: {
    readonly statistic: number;
    readonly pValue: number;
    readonly status: 'holds' | 'doubtful' | 'fails';
  } | null;
}

export interface SeasonTest {
  /** Kruskal & Wallis's statistic over its degrees of freedom: about 1 by chance. */
  readonly evidence: number;
  /** `faint`: enough for the advice to take a season into the model, but chance gives as much in 1 case of 20. */
  readonly verdict: 'clear' | 'faint' | 'none';
}

export interface SheetCandidate extends SheetModel {
  /** A, B, C … */
  readonly label: string;
  readonly isRecommended: boolean;
  /** Whether its forecasts are in the picture. */
  readonly isDrawn: boolean;
  readonly aicc: number | null;
  readonly miss: number | null;
  readonly lastYearMiss: number | null;
  readonly inside80: number | null;
  readonly leftover: 'none-seen' | 'doubtful' | 'left' | null;
  /** The middle of each period ahead, in the series' unit. */
  readonly middles: readonly number[];
}
