/** Facts about a series that the sentences of page 1 are chosen by. Thresholds are common practice unless said otherwise. */
import type { Outlook } from '../outlook/outlook.js';
import type { Fit } from '../sarima/fit.js';
import { parseScale } from '../sarima/scale.js';
import { psiWeights } from '../sarima/weights.js';
import type { Context } from './context.js';

export interface Facts {
  readonly direction: {
    readonly kind: 'rising' | 'falling' | 'level' | 'uneven' | 'unknown';
    readonly perYear: number | null;
    readonly years: number;
    /** The lowest and the highest of the yearly totals; null if unknown. */
    readonly span: [number, number] | null;
  };
  readonly season: {
    readonly strength: 'strong' | 'weak' | 'none';
    readonly peak: readonly number[];
    readonly share: number | null;
    readonly trough: number;
    readonly troughShare: number | null;
    readonly everyYear: boolean;
    readonly fullYears: number;
  } | null;
  readonly surprise: {
    readonly period: string;
    readonly actual: number;
    readonly expected: number;
    readonly relative: number | null;
    readonly size: 'none' | 'small' | 'large';
    readonly carryNext: number;
    readonly carryYear: number | null;
  } | null;
  readonly relativeRange: number | null;
  readonly caveats: readonly Caveat[];
}

export interface Caveat {
  readonly id:
    | 'unsettled-fit'
    | 'short-history'
    | 'missing-figures'
    | 'sold-out'
    | 'wide-range'
    | 'leftover-pattern'
    | 'near-limit'
    | 'event-set-aside'
    | 'lasting-event'
    | 'ranges-untested';
  readonly count: number | null;
  readonly share: number | null;
  readonly what: string | null;
  readonly from: string | null;
  readonly to: string | null;
}

export function factsOf(fit: Fit, outlook: Outlook, context: Context): Facts {
  const relativeRange = relativeRangeOf(outlook);
  return {
    direction: directionOf(fit, context),
    season: context.season === 1 ? null : seasonOf(fit, context),
    surprise: surpriseOf(fit, context),
    relativeRange,
    caveats: caveatsOf(fit, context, relativeRange),
  };
}

/** Sums over the latest full spans of a year; the mean yearly change over at most five of them. */
function directionOf({ values }: Fit, { season }: Context): Facts['direction'] {
  const sums: number[] = [];
  for (let end = values.length; end >= season && sums.length < 6; end -= season) {
    const sum = values.slice(end - season, end).reduce((total, value) => total + value, 0);
    if (!Number.isFinite(sum)) break;
    sums.push(sum);
  }
  const years = sums.length - 1;
  const [last, first] = [sums[0], sums[years]];
  if (years < 1 || !(last > 0) || !(first > 0))
    return { kind: 'unknown', perYear: null, years: Math.max(years, 0), span: null };
  const perYear = (last / first) ** (1 / years) - 1;
  const span: [number, number] = [Math.min(...sums), Math.max(...sums)];
  // Under 1% a year nobody acts on it; a total that went 5% up or down between has not been level for that.
  const isLevel = Math.abs(perYear) < 0.01;
  const kind = isLevel ? (span[1] > 1.05 * span[0] ? 'uneven' : 'level') : perYear > 0 ? 'rising' : 'falling';
  return { kind, perYear, years, span };
}

/** Shares of the year by position over the latest full reporting years, at most five. Null without two such years. */
function seasonOf({ values }: Fit, { season, positions }: Context): Facts['season'] {
  const full: number[][] = [];
  for (let start = positions.indexOf(1); start >= 0 && start + season <= values.length; start += season) {
    const year = Array.from(values.slice(start, start + season));
    if (year.every(Number.isFinite) && total(year) > 0) full.push(year);
  }
  if (full.length < 2 || values.some((value) => value < 0)) return null;
  const recent = full.slice(-5).map((year) => year.map((value) => value / total(year)));
  const shares = Array.from({ length: season }, (_, i) => mean(recent.map((year) => year[i])));
  const peak = peakOf(shares);
  const lowest = Math.min(...shares);
  return {
    strength: strengthOf(shares, recent),
    peak: peak.map((i) => i + 1),
    share: total(peak.map((i) => shares[i])),
    trough: shares.indexOf(lowest) + 1,
    troughShare: lowest,
    everyYear: full.every((year) => peak.includes(year.indexOf(Math.max(...year)))),
    fullYears: full.length,
  };
}

/** The highest position and, up to half a year in all, the neighbours whose share is clearly above an even one. */
function peakOf(shares: readonly number[]): number[] {
  const m = shares.length;
  const peak = [shares.indexOf(Math.max(...shares))];
  while (peak.length < Math.floor(m / 2)) {
    const before = (peak[0] + m - 1) % m;
    const after = (peak[peak.length - 1] + 1) % m;
    const next = shares[before] > shares[after] ? before : after;
    // Clearly: by 15%.
    if (shares[next] < 1.15 / m) break;
    if (next === before) peak.unshift(next);
    else peak.push(next);
  }
  return peak;
}

/**
 * No season to speak of: the positions' shares differ by less than a twentieth of an even share, or no more than the
 * years differ among themselves. Weak: by less than a quarter.
 */
function strengthOf(shares: readonly number[], years: readonly (readonly number[])[]): 'strong' | 'weak' | 'none' {
  const m = shares.length;
  const swing = (Math.max(...shares) - Math.min(...shares)) * m;
  // Analysis of variance: F of the positions against the rest. A random one is above 4 about once in twenty times
  // with four positions and four or five years, more rarely with more positions.
  const between = (years.length * total(shares.map((share) => (share - 1 / m) ** 2))) / (m - 1);
  const rest = total(years.map((year) => total(year.map((share, i) => (share - shares[i]) ** 2))));
  const within = rest / ((years.length - 1) * (m - 1));
  if (swing < 0.05 || between < 4 * within) return 'none';
  return swing < 0.25 ? 'weak' : 'strong';
}

/** The last figure against what the model expected one period before. */
function surpriseOf(fit: Fit, { season, periods }: Context): Facts['surprise'] {
  const last = fit.values.length - 1;
  const residual = fit.residuals[last];
  const standardized = fit.standardizedResiduals[last];
  if (!Number.isFinite(residual)) return null;
  const { to, from } = parseScale(fit.scale);
  const actual = fit.values[last];
  const expected = from(to(actual) - residual);
  const psi = psiWeights(fit, season + 1);
  // Inside half a standard deviation is what happens in four periods of ten; beyond 1.28 in two of ten.
  const size = Math.abs(standardized) < 0.5 ? 'none' : Math.abs(standardized) < 1.28 ? 'small' : 'large';
  return {
    period: periods[last],
    actual,
    expected,
    relative: expected > 0 ? (actual - expected) / expected : null,
    size,
    carryNext: psi[1],
    carryYear: season > 1 ? psi[season] : null,
  };
}

function relativeRangeOf({ totals }: Outlook): number | null {
  const { expected, range80 } = totals[0];
  return expected > 0 ? (range80[1] - range80[0]) / expected : null;
}

/** Only what this series has earned, worst first. */
function caveatsOf(fit: Fit, { season, events, periods }: Context, relativeRange: number | null): Caveat[] {
  const none = { count: null, share: null, what: null, from: null, to: null };
  const years = fit.values.length / season;
  const missing = fit.values.filter(Number.isNaN).length;
  return [
    ...(fit.settled ? [] : [{ ...none, id: 'unsettled-fit' as const }]),
    // Four full years is the least from which a season is learned with some trust.
    ...(season > 1 && years < 4 ? [{ ...none, id: 'short-history' as const, count: Math.floor(years) }] : []),
    ...(relativeRange !== null && relativeRange > 0.5
      ? [{ ...none, id: 'wide-range' as const, share: relativeRange }]
      : []),
    ...(fit.soldOut.length > 0
      ? [{ ...none, id: 'sold-out' as const, count: fit.soldOut.length, ...soldOutSpan(fit, periods) }]
      : []),
    ...(missing > 0
      ? [
          {
            ...none,
            id: 'missing-figures' as const,
            count: missing,
            from: periods[fit.values.findIndex(Number.isNaN)],
          },
        ]
      : []),
    ...events.map(({ what, from, to, effect }) => ({
      ...none,
      id: effect === 'passing' ? ('event-set-aside' as const) : ('lasting-event' as const),
      what,
      from,
      to,
    })),
    ...(fit.nearUnitRoots.length > 0 || fit.nearlyCancels ? [{ ...none, id: 'near-limit' as const }] : []),
    { ...none, id: 'ranges-untested' as const },
  ];
}

const soldOutSpan = ({ soldOut }: Fit, periods: readonly string[]) => ({
  from: periods[soldOut[0]],
  to: periods[soldOut[soldOut.length - 1]],
});

const total = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0);
const mean = (values: readonly number[]): number => total(values) / values.length;
