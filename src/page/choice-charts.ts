/** The charts of a choice sheet, with their titles, notes and text alternatives. */
import { periodIndex, periodText } from '../calendar/calendar.js';
import { barChart } from '../charts/bar-chart.js';
import { candidatesChart } from '../charts/candidates-chart.js';
import { historyChart, lowEnd } from '../charts/history-chart.js';
import { profileChart } from '../charts/profile-chart.js';
import { tickPlaces } from '../charts/ticks.js';
import type { Level, SeasonProfile } from '../record/choice.js';
import { scaleKind } from './choice-sentences.js';
import { type ChoiceWords, capital, formText, lastPeriod } from './choice-words.js';
import { plainText } from './document.js';

const yearName = (period: string): string => period.slice(0, 4);

export async function historyPart({ sheet, formats, say }: ChoiceWords) {
  const { series, figures } = sheet;
  const first = periodIndex(figures.start, series.every);
  const there = figures.values.flatMap((value, t) => (value === null ? [] : [{ t, value }]));
  const lowest = there.reduce((a, b) => (b.value < a.value ? b : a));
  const highest = there.reduce((a, b) => (b.value > a.value ? b : a));
  const name = (t: number) => formats.period(periodText(first + t, series.every), 'short');
  return {
    title: say('history.title', { unit: capital(series.unit) }),
    notes: [
      ...(lowEnd(there.map(({ value }) => value)) > 0 ? [say('history.not-from-zero')] : []),
      ...(figures.soldOut.length > 0 ? [say('history.sold-out')] : []),
    ],
    svg: await historyChart(sheet, {
      described: plainText(
        say('history.described', {
          series: series.name,
          unit: series.unit,
          first: name(0),
          last: name(figures.values.length - 1),
          lowest: formats.number(lowest.value, series.places),
          lowestPeriod: name(lowest.t),
          highest: formats.number(highest.value, series.places),
          highestPeriod: name(highest.t),
        }),
      ),
      number: formats.number,
      yearName,
    }),
  };
}

export async function profilePart(words: ChoiceWords) {
  const { sheet, formats, say, years } = words;
  const { profile, series } = sheet;
  if (profile === null)
    return { svg: null, nothing: say(`profile.nothing.${series.season === 1 ? 'yearly' : 'short'}`) };
  const { kind, positions } = profile;
  const place = (period: string) => formats.period(period, 'axis');
  const highest = positions.reduce((a, b) => (b.median > a.median ? b : a));
  const lowest = positions.reduce((a, b) => (b.median < a.median ? b : a));
  const facts = { years: years(positions[0].byYear.length), unit: series.unit };
  return {
    caption: say(`profile.caption.${kind}`, { ...facts, last: formats.period(lastPeriod(sheet), 'short') }),
    svg: await profileChart(profile, {
      described: plainText(
        say('profile.described', {
          ...facts,
          highestPlace: place(highest.period),
          highest: profileValue(highest.median, profile, words),
          lowestPlace: place(lowest.period),
          lowest: profileValue(lowest.median, profile, words),
        }),
      ),
      value: (value, ticks) =>
        kind === 'share' ? formats.share(value) : `${value > 0 ? '+' : ''}${formats.number(value, tickPlaces(ticks))}`,
      place,
    }),
  };
}

/** As per cent of the year's mean, or in the series' unit. */
export function profileValue(value: number, { kind }: SeasonProfile, { sheet, formats }: ChoiceWords): string {
  return kind === 'share' ? formats.share(value) : formats.number(value, sheet.series.places);
}

export async function levelsPart(words: ChoiceWords) {
  const { sheet, say } = words;
  const { regular, seasonal, before, after } = sheet.differencing;
  const { scale } = sheet.recommended;
  const key = words.has(`levels.after.${regular}${seasonal}`) ? `${regular}${seasonal}` : 'other';
  const shown = [
    { title: say(`levels.before.${scaleKind(scale)}`, { scale }), level: before },
    ...(regular + seasonal > 0 ? [{ title: say(`levels.after.${key}`), level: after }] : []),
  ].filter(({ level }) => level.autocorrelations.length > 0);
  return {
    note: say('levels.note'),
    charts: await Promise.all(
      shown.map(async ({ title, level }) => ({ title, svg: await correlogram(title, level, words) })),
    ),
  };
}

function correlogram(
  title: string,
  { autocorrelations, bound }: Level,
  { formats, say }: ChoiceWords,
): Promise<string> {
  return barChart(
    { bars: autocorrelations.map((value, i) => ({ step: i + 1, value })), bound },
    {
      described: plainText(
        say('levels.described', {
          what: plainText(title),
          count: formats.number(autocorrelations.length, 0),
          bound: formats.number(bound, 2),
          outside: formats.number(autocorrelations.filter((r) => Math.abs(r) > bound).length, 0),
        }),
      ),
      axis: plainText(say('levels.axis')),
      number: formats.number,
    },
  );
}

export async function forecastsPart({ sheet, formats, say, periods, count }: ChoiceWords) {
  const { series, figures } = sheet;
  const drawn = sheet.candidates.filter(({ isDrawn }) => isDrawn);
  const shown = Math.min(figures.values.length, Math.max(2 * series.season, 8));
  const isTested = drawn.slice(1).every(({ miss }) => miss !== null);
  const kind = drawn.length === 1 ? 'one' : isTested ? 'best' : 'some';
  return {
    title: say(`forecasts.title.${kind}`, { count: count(drawn.length) }),
    caption: say(`forecasts.caption.${kind}`, { recommended: drawn[0].label }),
    svg: await candidatesChart(sheet, {
      described: plainText(
        say('forecasts.described', {
          shown: formats.number(shown, 0),
          ahead: periods(sheet.ahead.length),
          names: drawn.map(({ label, form }) => `${label} ${formText(form)}`).join('; '),
        }),
      ),
      number: formats.number,
      yearName,
      name: ({ label, form }) => `${label}  ${formText(form)}`,
    }),
  };
}
