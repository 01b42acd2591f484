/** The page that shows how the forecast is made: the model in words and equations, the worked sum, the coefficients. */
import type { BriefRecord } from '../record/record.js';
import { eventName } from './coefficients.js';
import type { Formats } from './formats.js';
import type { Theme } from './theme.js';

export function madeOf(record: BriefRecord, theme: Theme, formats: Formats, equation: (tex: string) => string) {
  const { series, model, equation: shown, outlook } = record;
  const { regular, seasonal } = shown.differenced.definition;
  const every = theme.say(`every.${series.every}.one`);
  const scale = model.scale.split(' ')[0];
  const differencing = theme.has(`made.what.${regular}${seasonal}`) ? `${regular}${seasonal}` : 'other';
  const hasAr = shown.differenced.lags.length > 0;
  const hasMa = shown.differenced.surprises.length > 0;
  const then = hasAr && hasMa ? 'both' : hasAr ? 'ar' : hasMa ? 'ma' : 'none';
  const { tex } = shown;
  const titled = (key: string, text: string | null) =>
    text === null ? [] : [{ title: theme.say(`made.${key}`), html: equation(text) }];
  return {
    paragraph: [
      theme.say(`made.lead.${model.fittedBy}`, { period: formats.period(outlook.periods[0].period, 'long') }),
      theme.say(`made.scale.${scale}`, { what: theme.say(`made.what.${differencing}`, { every }) }),
      ...thenSentences(then, model.constant ? (regular + seasonal > 0 ? 'drift' : 'level') : null, theme),
      ...(differencing === '00' && scale === 'plain' ? [] : [theme.say('made.last', { unit: series.unit })]),
    ].join(' '),
    reason: model.reason === null ? null : theme.say('made.reason', { reason: model.reason }),
    notation: theme.say('made.notation', {
      form: formText(model.form),
      kind: theme.say(`made.kind.${model.form.includes('x') ? 'seasonal' : 'plain'}`),
      scale: theme.say(`made.on.${scale}`),
      fitted: theme.say(`made.fitted.${model.fittedBy}`),
    }),
    note: symbolsNote(record, theme, every),
    equations: [
      ...titled('backshift', tex.backshift),
      ...titled(record.figures.events.length > 0 ? 'variable' : 'power', tex.variableDefinition),
      ...titled('expanded', tex.symbols),
      ...titled('numbers', tex.numbers),
      ...(tex.differencedDefinition === null
        ? []
        : [
            {
              title: theme.say('made.differenced'),
              html: [tex.differencedDefinition, tex.differencedNumbers ?? ''].map(equation).join(''),
            },
          ]),
    ],
  };
}

/** What is done second: with nothing autoregressive or moving-average the constant is all there is. */
function thenSentences(then: string, constant: 'drift' | 'level' | null, theme: Theme): string[] {
  if (constant === null) return [theme.say(`made.then.${then}`)];
  if (then === 'none') return [theme.say(`made.then.${constant}`)];
  return [theme.say(`made.then.${then}`), theme.say(`made.${constant}`)];
}

/** What the letters of the equations stand for: only those that occur. */
function symbolsNote({ series, equation, figures }: BriefRecord, theme: Theme, every: string): string {
  const { regular, seasonal, season } = equation.differenced.definition;
  const facts = { every, 'every-other': theme.say(`every.${series.every}.other`), season: String(season) };
  const keys = [
    'base',
    ...(regular > 0 ? ['difference'] : []),
    ...(seasonal > 0 ? ['seasonal'] : []),
    ...(figures.events.length > 0 ? ['event'] : []),
  ];
  return keys.map((key) => theme.say(`made.symbols-note.${key}`, facts)).join(' ');
}

/** As HTML, the season's length set low. */
const formText = (form: string): string => form.replace(')x(', ') × (').replace(/\)(\d+)$/, ')<sub>$1</sub>');

type Worked = BriefRecord['equation']['workedSum'];

export function sumTable(record: BriefRecord, theme: Theme, formats: Formats) {
  const { series, printed, equation } = record;
  const sum = equation.workedSum;
  const period = formats.period(sum.period, 'short');
  const lead = sum.unit === 'units' ? 'value' : sum.unit === 'log-hundredths' ? 'difference' : 'transformed';
  const totalKey = sum.variable === 'value' ? 'value' : 'difference';
  const first = printed.periods[0].expected;
  return {
    title: theme.say('sum.title', { period }),
    lead: theme.say(`sum.lead.${lead}`, { unit: series.unit }),
    heads: ['what', 'known', 'weight', 'product'].map((key) => theme.say(`sum.${key}`)),
    rows: sum.terms.map((term) => ({
      what: `${termName(term, sum, record, theme, formats)}${standIn(term, record, theme)}`,
      known: term.value === null ? '' : formats.number(term.value, term.decimals.value),
      weight: term.weight === null ? '' : formats.number(term.weight, term.decimals.weight),
      product: formats.number(term.product, sum.decimals.product),
    })),
    total: {
      what: theme.say(`sum.total.${totalKey}`, { period, unit: series.unit }),
      product: formats.number(sum.total, sum.decimals.total),
    },
    back: sum.back.map((line) => ({
      what: `${backName(line, sum, record, theme, formats)}${standIn(line, record, theme)}`,
      product: formats.number(line.value, line.decimals),
      isResult: line.kind === 'expected',
    })),
    rounded:
      record.judgement !== null
        ? theme.say('judged.worked', { shown: formats.number(first, printed.places) })
        : first === sum.expected
          ? null
          : theme.say('sum.rounded', { shown: formats.number(first, printed.places) }),
  };
}

/** What a figure that was not observed stands in for. */
function standIn(
  { smoothed, period }: { readonly smoothed: boolean; readonly period: string | null },
  { figures }: BriefRecord,
  theme: Theme,
): string {
  if (!smoothed) return '';
  return theme.say(period !== null && figures.soldOut.includes(period) ? 'sum.demand' : 'sum.smoothed');
}

function termName(
  term: Worked['terms'][number],
  sum: Worked,
  record: BriefRecord,
  theme: Theme,
  formats: Formats,
): string {
  const period = term.period === null ? '' : formats.period(term.period, 'short');
  switch (term.kind) {
    case 'past':
      return term.period === null ? theme.say('sum.earlier') : theme.say(`sum.past.${sum.variable}`, { period });
    case 'surprise':
      return term.period === null ? theme.say('sum.earlier') : theme.say('sum.surprise', { period });
    case 'effect-off':
    case 'effect-on':
      return theme.say(`sum.${term.kind}`, { what: eventName(record, term.coefficient) });
    default:
      return theme.say(`sum.${term.kind}`);
  }
}

function backName(
  line: Worked['back'][number],
  sum: Worked,
  record: BriefRecord,
  theme: Theme,
  formats: Formats,
): string {
  const period = line.period === null ? formats.period(sum.period, 'short') : formats.period(line.period, 'short');
  if (line.kind === 'effect') return theme.say('sum.effect', { what: eventName(record, line.coefficient) });
  if (line.kind !== 'base') return theme.say(`sum.${line.kind}`, { period, unit: record.series.unit });
  const power = line.power ?? 1;
  const isLog = sum.unit === 'log-hundredths';
  const key = power > 0 ? (isLog ? 'times' : 'plus') : isLog ? 'divided' : 'minus';
  const isFirst = sum.back[0] === line && power > 0 && isLog;
  const words = theme.say(isFirst ? 'sum.base' : `sum.${key}`, { period });
  return Math.abs(power) === 1 ? words : `${words} (${Math.abs(power)}×)`;
}
