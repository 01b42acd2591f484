/** How far to trust a brief: its track record in sentences. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

/** A rule that missed by this much less, or more, did about as well: so few forecasts tell no finer. */
const ABOUT_AS_WELL = 0.05;

/** Fewer results than this say nothing of how wide a range should be. */
const ENOUGH = 12;

export function trustSentences(
  { series, outlook, trackRecord, judgement }: BriefRecord,
  theme: Theme,
  formats: Formats,
): string[] {
  const every = theme.say(`every.${series.every}.other`);
  if (trackRecord === null || trackRecord.miss === null) return [theme.say('trust.untested', { every })];
  const { origins, count, miss, inside80 } = trackRecord;
  const rule = betterRule(trackRecord);
  const ratio = rule.miss / miss;
  const [told, toldRule] = [missText(miss, theme, formats), missText(rule.miss, theme, formats)];
  const key =
    told === toldRule
      ? 'as-well'
      : ratio > 1 + ABOUT_AS_WELL
        ? 'better'
        : ratio < 1 - ABOUT_AS_WELL
          ? 'worse'
          : 'as-well';
  const inside = Math.round(inside80 * count);
  return [
    theme.say('trust.missed', {
      origins: countedPeriods(origins, series.every, theme, formats),
      ahead: countedPeriods(
        Math.min(outlook.periods.length, trackRecord.missByStep.length),
        series.every,
        theme,
        formats,
      ),
      miss: told,
    }),
    theme.say(`trust.${key}`, { rule: theme.say(`trust.rule.${rule.id}`), miss: toldRule }),
    theme.say(inside === count ? 'trust.all-inside' : 'trust.inside', {
      inside: formats.number(inside, 0),
      count: formats.number(count, 0),
      due: formats.number(Math.round(0.8 * count), 0),
    }),
    ...(count < ENOUGH
      ? []
      : inside80 < 0.7
        ? [theme.say('trust.narrow')]
        : inside80 > 0.95
          ? [theme.say('trust.wide')]
          : []),
    ...(judgement === null ? [] : [theme.say('trust.judged')]),
  ];
}

/** The plain rule that missed by less. */
function betterRule({ lastYearMiss, lastYearPlusChangeMiss }: NonNullable<BriefRecord['trackRecord']>) {
  const [last, plus] = [lastYearMiss ?? Number.POSITIVE_INFINITY, lastYearPlusChangeMiss ?? Number.POSITIVE_INFINITY];
  return last <= plus ? { id: 'last-year', miss: last } : { id: 'last-year-plus-change', miss: plus };
}

/** Whole per cent, and in words below one. */
export function missText(miss: number, theme: Theme, formats: Formats): string {
  return miss < 0.005 ? theme.say('trust.tiny') : formats.share(miss);
}

/** What these rest on is no test with a probability. */
const WITHOUT_CHANCE = ['enough-history', 'settled-fit', 'odd-quarters'];

/** A row an assumption: what it says, whether it is borne out, the figure behind it, what follows. */
export function assumptionRows({ assumptions, series }: BriefRecord, theme: Theme, formats: Formats) {
  const every = theme.say(`every.${series.every}.one`);
  const others = theme.say(`every.${series.every}.other`);
  return {
    title: theme.say('assume.title'),
    heads: ['says', 'status', 'figure', 'follows'].map((key) => theme.say(`assume.${key}`)),
    rows: assumptions.map(({ id, status, statistic, pValue, details, periods }) => {
      const facts = {
        every,
        'every-other': others,
        statistic: statistic === null ? '' : formats.number(statistic, 2),
        chance: pValue === null ? '' : pValue < 0.005 ? theme.say('assume.tiny') : formats.number(100 * pValue, 0),
        years: formats.number(details.years ?? 0, 0),
        ratio: formats.number(details.ratio ?? 0, 2),
        list: periods.map((outlier) => periodText(outlier, theme, formats, series)).join('; '),
      };
      const hasFigure = status !== 'untested' && (pValue !== null || WITHOUT_CHANCE.includes(id));
      const figure = !hasFigure ? 'untested' : periods.length > 0 ? 'found' : 'figure';
      return {
        says: theme.say(`assume.${id}.says`, facts),
        status: theme.say(`assume.state.${status}`),
        isWarning: status === 'fails' || status === 'doubtful',
        figure: theme.say(figure === 'untested' ? 'assume.too-short' : `assume.${id}.${figure}`, facts),
        follows: theme.say(
          status === 'holds' || status === 'untested' ? 'assume.nothing' : `assume.${id}.follows`,
          facts,
        ),
      };
    }),
  };
}

function periodText(
  outlier: BriefRecord['assumptions'][number]['periods'][number],
  theme: Theme,
  formats: Formats,
  { places, unit }: BriefRecord['series'],
): string {
  const change = outlier.forecastChange;
  return theme.say(`assume.odd.${outlier.kind}`, {
    period: formats.period(outlier.period, 'short'),
    change: `${change > 0 ? '+' : ''}${formats.number(change, places)} ${unit}`,
  });
}
