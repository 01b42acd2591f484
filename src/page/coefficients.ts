/** What each coefficient means: its value, its range, a sentence fitted to it, and what hangs on its exact value. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

/** With what each was pulled towards, and where it would stand without, where the estimates are shrunk. */
export function meaningRows(record: BriefRecord, theme: Theme, formats: Formats) {
  const { equation, fit, model, series } = record;
  const { priors } = model;
  return {
    title: theme.say('meaning.title'),
    isPulled: priors !== null,
    heads: [
      theme.say('meaning.symbol'),
      theme.say('meaning.value'),
      theme.say('meaning.likely'),
      ...(priors === null ? [] : [theme.say('meaning.towards'), theme.say('meaning.free')]),
      theme.say('meaning.says'),
      theme.say('meaning.moves'),
    ],
    rows: equation.meanings.map((meaning, i) => {
      const places = decimalsFor(meaning);
      const number = (value: number) => formats.number(value, places);
      const moves = meaning.sensitivity;
      return {
        symbol: fit.coefficients[i].symbol,
        value: number(meaning.value),
        likely:
          meaning.range === null
            ? theme.say('meaning.unknown')
            : theme.say('figures.and', { low: number(meaning.range[0]), high: number(meaning.range[1]) }),
        towards: pullText(priors?.coefficients[fit.coefficients[i].name], theme, number),
        free: fit.unrestricted === null ? '–' : number(fit.unrestricted[i].value),
        says: meaningSentence(record, meaning, fit.coefficients[i].symbol, theme, formats),
        moves: moves === null ? '–' : movesText(Math.abs(moves), series, theme, formats),
      };
    }),
    notes: [
      theme.say('meaning.moves-note', { unit: series.unit }),
      ...(priors === null
        ? []
        : [
            theme.say('meaning.pulled', {
              count: formats.number(fit.coefficients.length, 0),
              effective: formats.number(fit.effectiveCoefficients, 1),
            }),
          ]),
    ].join(' '),
  };
}

/** In units, one place finer than they are shown where under ten; what is less still, as less than that. */
function movesText(moves: number, { places }: BriefRecord['series'], theme: Theme, formats: Formats): string {
  const finer = moves < 10 ? places + 1 : places;
  const least = 10 ** -finer;
  const amount = formats.number(Math.max(moves, least), finer);
  return moves < least ? theme.say('meaning.moves-less', { amount }) : amount;
}

function pullText(
  prior: NonNullable<BriefRecord['model']['priors']>['coefficients'][string] | undefined,
  theme: Theme,
  number: (value: number) => string,
): string {
  if (prior === undefined) return '–';
  const facts = { centre: number(prior.centre), spread: number(prior.spread) };
  return theme.say(prior.on === 'partial' ? 'meaning.pull-partial' : 'meaning.pull', facts);
}

/** Two places for numbers about one, fewer for large ones, more for the small ones that amounts may be. */
const decimalsFor = ({ value, lag }: Meaning): number => {
  const size = Math.abs(value);
  if (lag === 0 && size < 0.1) return size < 0.01 ? 4 : 3;
  return size >= 100 ? 0 : size >= 10 ? 1 : 2;
};

type Meaning = BriefRecord['equation']['meanings'][number];

function meaningSentence(
  record: BriefRecord,
  meaning: Meaning,
  symbol: string,
  theme: Theme,
  formats: Formats,
): string {
  if (meaning.size === 'none')
    return theme.say(isUncertain(meaning) ? 'meaning.none-uncertain' : 'meaning.none', { symbol });
  const says = sentenceOf(record, meaning, theme, formats);
  const isLevel = meaning.role === 'constant' && constantKey(record, meaning) === 'level';
  const mayBeNothing = !isLevel && meaning.range !== null && meaning.range[0] <= 0 && meaning.range[1] >= 0;
  return mayBeNothing ? `${says} ${theme.say('meaning.may-be-nothing')}` : says;
}

/** Whether it could be large enough to show, on either side. */
const isUncertain = ({ range }: Meaning): boolean => range !== null && Math.max(-range[0], range[1]) > 1 / 3;

function sentenceOf(record: BriefRecord, meaning: Meaning, theme: Theme, formats: Formats): string {
  const every = theme.say(`every.${record.series.every}.one`);
  const effect = effectText(record, meaning, theme, formats);
  switch (meaning.role) {
    case 'ar':
    case 'seasonal-ar':
    case 'ma':
    case 'seasonal-ma':
      return shareSentence(record, meaning, theme, formats);
    case 'constant':
      return theme.say(`meaning.constant.${constantKey(record, meaning)}`, { every, effect });
    default: {
      const what = eventName(record, meaning.coefficient);
      return theme.say(`meaning.${meaning.role}${effect === '' ? '-unmeasured' : ''}`, { what, effect });
    }
  }
}

/** A share of what was, or of a surprise, that is carried on. */
function shareSentence(record: BriefRecord, meaning: Meaning, theme: Theme, formats: Formats): string {
  const { series } = record;
  const { role, lag, value, lasting } = meaning;
  const isSeasonal = role.startsWith('seasonal');
  const steps = isSeasonal ? lag / series.season : lag;
  const facts = {
    every: theme.say(`every.${series.every}.one`),
    thing: thingOf(record, theme),
    share: formats.share(Math.abs(value)),
    times: formats.number(Math.abs(value), 1),
    rest: lasting === null ? '' : formats.share(lasting),
    later: theme.say('meaning.later', {
      count: countedPeriods(steps, isSeasonal ? 'year' : series.every, theme, formats),
    }),
  };
  return theme.say(`meaning.${role}.${shareKey(meaning)}${steps > 1 ? '-later' : ''}`, facts);
}

/** Under this a share of a surprise is told as next to nothing. */
const NEXT_TO_NOTHING = 0.015;

function shareKey({ role, value, lasting }: Meaning): string {
  if (role === 'ar' || role === 'seasonal-ar')
    return `${value < 0 ? 'reversed' : 'carried'}${Math.abs(value) > 1 ? '-more' : ''}`;
  if (lasting === null) return value < 0 ? 'reversed' : 'carried';
  return lasting > 1 ? 'grows' : lasting < NEXT_TO_NOTHING ? 'chance' : 'lasts';
}

/** What the model works in, in words: "gain over last year". */
function thingOf({ equation, model }: BriefRecord, theme: Theme): string {
  const { regular, seasonal } = equation.differenced.definition;
  const kind = regular + seasonal > 0 ? `${regular}${seasonal}` : model.constant ? 'departure' : 'figure';
  const scale = model.scale === 'log' ? 'log' : 'plain';
  return theme.say(`meaning.thing.${scale}.${theme.has(`meaning.thing.${scale}.${kind}`) ? kind : 'other'}`);
}

function constantKey({ equation }: BriefRecord, { value, percent, units }: Meaning): string {
  const { regular, seasonal } = equation.differenced.definition;
  if (regular + seasonal === 0) return 'level';
  const kind = seasonal > 0 ? 'yearly' : 'steady';
  if (percent === null && units === null) return `${kind}-unmeasured`;
  return `${kind}-${value < 0 ? 'down' : 'up'}`;
}

/** What an effect or a constant amounts to; empty where the scale gives it no number of its own. */
function effectText({ series, equation }: BriefRecord, meaning: Meaning, theme: Theme, formats: Formats): string {
  const { regular, seasonal } = equation.differenced.definition;
  const isDrift = meaning.role === 'constant' && regular + seasonal > 0;
  const { percent, units } = meaning;
  if (percent !== null) {
    const places = Math.abs(percent) < 10 ? 1 : 0;
    return isDrift ? formats.percent(Math.abs(percent), places) : formats.change(percent);
  }
  if (units === null) return '';
  const amount = isDrift ? Math.abs(units) : units;
  const places = Math.max(series.places, Math.abs(units) < 1 ? 2 : Math.abs(units) < 10 ? 1 : 0);
  return theme.say('meaning.amount', { amount: formats.number(amount, places), unit: series.unit });
}

export const eventName = ({ figures }: BriefRecord, coefficient: string | null): string =>
  figures.events.find((event) => event.coefficient === coefficient)?.what ?? coefficient ?? '';
