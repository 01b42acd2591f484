/** The sentences of a choice sheet: which key of the wording fits the facts, and what it is filled with. */
import type { ChoiceSheet, Level } from '../record/choice.js';
import { type ChoiceWords, estimatesOf, formText, yesOrNo } from './choice-words.js';

export function answerSentence({ sheet, say }: ChoiceWords): string {
  const { recommended } = sheet;
  const { form, scale, constant } = recommended;
  return say('answer', {
    form: formText(form),
    on: say(`on.${scaleKind(scale)}`, { scale }),
    estimates: say(`estimates.${estimatesOf(recommended)}.${yesOrNo(constant)}`),
  });
}

/** What the recommended model's forecasts do. */
export const doesSentence = ({ sheet: { recommended }, say }: ChoiceWords): string =>
  say(`does.${recommended.shape}.${yesOrNo(recommended.constant)}`);

export const scaleKind = (scale: string): string => scale.split(' ')[0];

type Reason = ChoiceSheet['reasons'][number];

export const reasonSentences = (words: ChoiceWords): string[] =>
  words.sheet.reasons.map((reason) => {
    const { formats, sheet, say } = words;
    const { figures, difference, ratio } = reason.numbers;
    return say(keyOf('reason', reason, words), {
      figures: figures === undefined ? '' : formats.number(figures, 0),
      difference: difference === undefined ? '' : formats.number(Math.abs(difference), 1),
      ratio: ratio === undefined ? '' : formats.number(ratio, 1),
      scale: sheet.recommended.scale,
    });
  });

/** The key of a reason's sentence in a part of the wording, in the variant that its numbers call for. */
export function keyOf(part: 'reason' | 'short', reason: Reason, { sheet, has }: ChoiceWords): string {
  const key = `${part}.${reason.id}`;
  const variant = `${key}.${variantOf(reason, sheet)}`;
  return has(variant) ? variant : key;
}

function variantOf({ id, numbers }: Reason, { season }: ChoiceSheet): string {
  if (id === 'season') return season?.verdict === 'clear' ? 'clear' : 'faint';
  const difference = numbers.difference ?? 0;
  // Printed with one decimal it would be nothing.
  if (Math.abs(difference) < 0.05) return 'same';
  return difference > 0 === (id === 'log-likelier') ? 'lower' : 'higher';
}

/** What a planner should know before she takes the advice. */
export function warnings(words: ChoiceWords): string[] {
  const { sheet, say } = words;
  return [
    ...(verdictOf(sheet)?.kind === 'worse' ? [verdictSentence(words)] : []),
    ...(sheet.eventsLeftOut ? [say('events-left-out')] : []),
  ];
}

export function testSentences({ sheet, formats, say }: ChoiceWords): string[] {
  const { before, after, regular, seasonal } = sheet.differencing;
  const kpss = (place: 'before' | 'after', { kpss: test }: Level) =>
    test === null
      ? say(place === 'before' ? 'tests.too-few' : 'tests.too-few-after')
      : say(`tests.${place}.${test.status}`, {
          statistic: formats.number(test.statistic, 2),
          chance:
            test.pValue < 0.005 ? say('tiny', { least: formats.number(0.01, 2) }) : formats.number(test.pValue, 2),
        });
  const isDifferenced = regular + seasonal > 0 && before.kpss !== null;
  const { season } = sheet;
  return [
    kpss('before', before),
    ...(isDifferenced ? [kpss('after', after)] : []),
    season === null
      ? say(sheet.series.season === 1 ? 'tests.season.yearly' : 'tests.season.too-few')
      : say(`tests.season.${season.verdict}`, { evidence: formats.number(season.evidence, 1) }),
  ];
}

export function trackSentences(words: ChoiceWords): string[] {
  const { sheet, formats, say, periods, share } = words;
  const { trackRecord } = sheet;
  if (trackRecord === null || trackRecord.miss === null) return [say('track.untested')];
  const { origins, count, missByStep, inside80, inside95 } = trackRecord;
  return [
    say('track.tested', {
      origins: periods(origins),
      ahead: periods(missByStep.length),
      count: formats.number(count, 0),
    }),
    verdictSentence(words),
    say('track.inside', { inside80: share(inside80), inside95: share(inside95) }),
  ];
}

/** A rule that missed by this much less, or more, did about as well: so few forecasts tell no finer. */
const ABOUT_AS_WELL = 0.05;
/** Misses that print the same are the same. */
const NO_DIFFERENCE = 0.0005;

/** The advice beside the better of the two plain rules; null where it could not be tested. */
function verdictOf({ trackRecord, recommended }: ChoiceSheet) {
  if (trackRecord === null || trackRecord.miss === null) return null;
  const { miss, lastYearMiss, lastYearPlusChangeMiss } = trackRecord;
  const [last, plus] = [lastYearMiss ?? Number.POSITIVE_INFINITY, lastYearPlusChangeMiss ?? Number.POSITIVE_INFINITY];
  const rule = last <= plus ? ('last-year' as const) : ('last-year-plus-change' as const);
  const ruleMiss = Math.min(last, plus);
  const isClose = Math.abs(ruleMiss - miss) <= Math.max(ABOUT_AS_WELL * miss, NO_DIFFERENCE);
  const isTheRule = recommended.shape === rule && !recommended.constant;
  const kind = isClose ? 'as-well' : ruleMiss > miss ? 'better' : isTheRule ? 'the-rule' : 'worse';
  return { kind, miss, rule, ruleMiss };
}

function verdictSentence({ sheet, say, miss }: ChoiceWords): string {
  const verdict = verdictOf(sheet);
  if (verdict === null) return say('track.untested');
  return say(`track.${verdict.kind}`, {
    miss: miss(verdict.miss),
    rule: say(`rule.${verdict.rule}`),
    ruleMiss: miss(verdict.ruleMiss),
  });
}
