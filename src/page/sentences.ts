/** Page 1's sentences: which key of the wording fits the facts, and what it is filled with. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { frequencySentence } from './frequency.js';
import type { Theme } from './theme.js';

/** "four quarters": in words where the wording has the number, else in figures. */
export function countedPeriods(
  count: number,
  every: BriefRecord['series']['every'],
  theme: Theme,
  formats: Formats,
): string {
  const number = theme.has(`count.${count}`) ? theme.say(`count.${count}`) : formats.number(count, 0);
  return `${number} ${theme.say(`every.${every}.${plural(formats, count)}`)}`;
}

export const capital = (text: string): string => text.slice(0, 1).toLocaleUpperCase() + text.slice(1);

const plural = (formats: Formats, count: number): string => (formats.plural(count) === 'one' ? 'one' : 'other');

export function answerSentence({ series, outlook, printed }: BriefRecord, theme: Theme, formats: Formats): string {
  const { answer } = printed;
  const count = outlook.periods.length;
  const form = count === 1 ? 'one' : 'other';
  const words = {
    count: theme.has(`count.${count}`) ? theme.say(`count.${count}`) : formats.number(count, 0),
    every: theme.say(`every.${series.every}.${plural(formats, count)}`),
  };
  const { change } = answer;
  // Under half a per cent and above three times last year's figure a percentage says nothing.
  const kind = change === null || Math.abs(change) > 300 ? 'alone' : change > 0 ? 'more' : change < 0 ? 'less' : 'same';
  return theme.say(`answer.${kind}`, {
    expected: formats.number(answer.expected, answer.places),
    unit: series.unit,
    ahead: theme.say(`answer.ahead.${form}`, words),
    last: theme.say(`answer.last.${form}`, words),
    change: change === null ? '' : formats.share(Math.abs(change) / 100),
    low: formats.number(answer.range80[0], answer.places),
    high: formats.number(answer.range80[1], answer.places),
  });
}

/** At most three, in the order of the season, the direction, the latest surprise. */
export function reasons({ series, facts, printed }: BriefRecord, theme: Theme, formats: Formats): string[] {
  const every = theme.say(`every.${series.every}.one`);
  const said: string[] = [];
  const { season, direction, surprise } = facts;
  const { answer } = printed;
  if (season !== null && season.share !== null) {
    const key = season.strength !== 'strong' ? season.strength : season.everyYear ? 'always' : 'mostly';
    said.push(
      theme.say(`why.season.${key}`, {
        peak: peakName(season.peak, series.season, formats),
        share: formats.share(season.share),
        every,
        years: formats.number(season.fullYears, 0),
      }),
    );
  }
  if (direction.kind !== 'unknown' && direction.perYear !== null) {
    const years = countedPeriods(direction.years, 'year', theme, formats);
    said.push(
      theme.say(`why.direction.${direction.kind}`, {
        years,
        share: formats.share(Math.abs(direction.perYear)),
        low: direction.span === null ? '' : formats.number(roundedTo(direction.span[0], answer.step), answer.places),
        high: direction.span === null ? '' : formats.number(roundedTo(direction.span[1], answer.step), answer.places),
      }),
    );
  }
  if (surprise !== null) {
    const places = Math.min(printed.places, series.places);
    const side = surprise.actual > surprise.expected ? 'above' : 'below';
    const key = surprise.size === 'none' ? 'none' : surprise.carryNext < 0.1 ? `${side}-gone` : side;
    said.push(
      theme.say(`why.surprise.${key}`, {
        period: formats.period(surprise.period, 'short'),
        actual: formats.amount(surprise.actual, series.places),
        expected: formats.number(roundedTo(surprise.expected, printed.step), places),
        carry: formats.share(Math.round(surprise.carryNext * 20) / 20),
        every,
      }),
    );
  }
  return said;
}

const roundedTo = (value: number, step: number): number => Math.round(value / step) * step;

/** Neighbouring positions as one span: quarters 2 and 3 are April – September. */
function peakName(peak: readonly number[], season: number, formats: Formats): string {
  const [first, last] = [formats.position(peak[0]), formats.position(peak[peak.length - 1])];
  if (peak.length === 1 || season === 1) return first;
  const separator = /\s*[–-]\s*/;
  const [start] = first.split(separator);
  const end = last.split(separator).at(-1);
  return `${start}\u2009–\u2009${end}`;
}

/** More would bury the worst. */
const MOST_CAVEATS = 2;

/** The worst first; what the figures can't know comes last. */
export function caveatSentences(
  { facts, judgement, purchase, printed, series }: BriefRecord,
  theme: Theme,
  formats: Formats,
): string[] {
  const order = purchase?.decided ?? purchase?.best;
  const said = facts.caveats.flatMap(({ id, count, share, what, from, to }): string[] => {
    const key = `caveats.${id}`;
    const facts = {
      count: count === null ? '' : formats.number(count, 0),
      share: share === null ? '' : formats.share(share),
      what: what ?? '',
      alone: judgement === null ? '' : formats.number(judgement.printed.answer, printed.answer.places),
      unit: series.unit,
      short: order === undefined ? '' : frequencySentence('order.short', order.chanceShort, theme, formats),
      span: from === null ? '' : formats.span(from, to ?? from),
    };
    if (theme.has(key)) return [theme.say(key, facts)];
    return theme.has(`${key}.other`) ? [theme.say(`${key}.${plural(formats, count ?? 0)}`, facts)] : [];
  });
  return [...said.slice(0, MOST_CAVEATS), theme.say('caveats.outside')];
}
