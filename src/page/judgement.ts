/** The planner's judgement, kept apart: what the figures alone say, what was added, and why. */
import type { BriefRecord } from '../record/record.js';
import type { Formats } from './formats.js';
import { capital, countedPeriods } from './sentences.js';
import type { Theme } from './theme.js';

/** Page 1's sentences; none where the brief says what the figures alone say. */
export function judgedSentences(record: BriefRecord, theme: Theme, formats: Formats): string[] {
  const { judgement, printed, series } = record;
  if (judgement === null) return [];
  const alone = formats.number(judgement.printed.answer, printed.answer.places);
  return [theme.say('judged.alone', { alone, unit: series.unit }), ...entrySentences(record, theme, formats)];
}

export function judgementView(record: BriefRecord, theme: Theme, formats: Formats) {
  const { judgement, printed, outlook, series, plan } = record;
  if (judgement === null) return null;
  const names = [
    ...outlook.periods.map(({ period }) => formats.period(period, 'short')),
    capital(countedPeriods(outlook.periods.length, series.every, theme, formats)),
  ];
  const shown = [...printed.periods, printed.total];
  const number = (value: number) => formats.number(value, printed.places);
  const rows = [...judgement.printed.periods, judgement.printed.total].map(({ alone, added }, i) => ({
    name: names[i],
    cells: [number(alone), `${added > 0 ? '+' : ''}${number(added)}`, number(shown[i].expected)],
  }));
  const heads = ['alone', 'change', 'shown'].map((key) => theme.say(`judged.heads.${key}`));
  // A few periods stand beside one another, and so take less of the page.
  const isWide = rows.length <= MOST_COLUMNS;
  const isLong = rows.length > MOST_ROWS;
  const corner = theme.say(`figures.period.${series.every}`);
  return {
    title: theme.say('judged.title'),
    text: [
      ...entrySentences(record, theme, formats),
      ...(plan.preparedBy === null ? [] : [theme.say('judged.by', { by: plan.preparedBy })]),
    ].join(' '),
    corner,
    heads: isWide ? rows.map(({ name }) => name) : heads,
    rows: isWide
      ? heads.map((name, i) => ({ name, cells: rows.map(({ cells }) => cells[i]) }))
      : isLong
        ? rows.slice(-1)
        : rows,
    /** Every period's row, where there is room for the total alone; else null. */
    annex: isLong ? { title: theme.say('judged.title'), text: '', corner, heads, rows } : null,
  };
}

/** More periods than this stand below one another, and more than that go into the annex. */
const MOST_COLUMNS = 6;
const MOST_ROWS = 14;

function entrySentences({ judgement, series }: BriefRecord, theme: Theme, formats: Formats): string[] {
  return (judgement?.entries ?? []).map(({ what, from, to, change, because }) => {
    const amount = formats.amount(Math.abs(change.value), series.places);
    return theme.say(`judged.${change.value < 0 ? 'less' : 'more'}`, {
      change:
        change.kind === 'percent'
          ? formats.percent(Math.abs(change.value), Number.isInteger(change.value) ? 0 : 1)
          : theme.say('judged.each', {
              amount,
              unit: series.unit,
              every: theme.say(`every.${series.every}.one`),
            }),
      span:
        to === null
          ? theme.say('judged.from', { period: formats.period(from, 'long') })
          : theme.say('judged.during', { span: formats.span(from, to) }),
      what,
      because: closed(because),
    });
  });
}

/** The planner's words with a full stop where they end without one. */
export const closed = (text: string): string => (/[.!?…]$/.test(text.trim()) ? text.trim() : `${text.trim()}.`);
