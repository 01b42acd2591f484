/** The tables of a choice sheet. */
import { periodIndex, periodText, position, yearOf } from '../calendar/calendar.js';
import { profileValue } from './choice-charts.js';
import { type ChoiceWords, capital, estimatesOf, formText } from './choice-words.js';

interface Row {
  readonly name: string;
  readonly cells: readonly string[];
}

interface Table {
  /** HTML, as are the cells. */
  readonly heads: readonly string[];
  readonly rows: readonly Row[];
  readonly total: Row | null;
  /** Whether its first column is the outlook. */
  readonly isOutlook: boolean;
}

const plainTable = (heads: readonly string[], rows: readonly Row[]): Table => ({
  heads,
  rows,
  total: null,
  isOutlook: false,
});

export function candidatesTable({ sheet, formats, say, miss, share }: ChoiceWords) {
  const columns = ['model', 'scale', 'estimate', 'aicc', 'miss', 'last-year', 'inside', 'leftover'];
  const groups = sheet.comparable.map((labels) => labels.join(say('candidates.and')));
  const compared =
    groups.length === 0
      ? say('candidates.aicc.nothing')
      : say('candidates.aicc.some', { groups: groups.join(say('candidates.or')) });
  return {
    heads: columns.map((column) => say(`candidates.heads.${column}`)),
    rows: sheet.candidates.map((candidate) => ({
      label: candidate.label,
      form: formText(candidate.form),
      isRecommended: candidate.isRecommended,
      notes: [
        ...(candidate.constant ? [say('candidates.constant')] : []),
        ...(candidate.isRecommended ? [say('candidates.recommended')] : []),
      ].join(', '),
      cells: [
        candidate.scale,
        say(`candidates.fitted.${estimatesOf(candidate)}`),
        candidate.aicc === null ? say('none') : formats.number(candidate.aicc, 1),
        miss(candidate.miss),
        miss(candidate.lastYearMiss),
        share(candidate.inside80),
        candidate.leftover === null ? say('none') : say(`candidates.leftover.${candidate.leftover}`),
      ],
    })),
    notes: [
      ...(sheet.candidates.some(({ miss: own }) => own !== null) ? [say('candidates.tested')] : []),
      ...(sheet.candidates.length === 1 ? [] : [`${say('candidates.aicc.lead')} ${compared}`]),
      ...(sheet.candidates.some(({ leftover }) => leftover !== null) ? [say('candidates.leftover-note')] : []),
    ],
  };
}

export function forecastsTable({ sheet, formats, say }: ChoiceWords): Table {
  const { series, figures } = sheet;
  const drawn = sheet.candidates.filter(({ isDrawn }) => isDrawn);
  const n = figures.values.length;
  const number = (value: number | null | undefined) =>
    value === null || value === undefined ? say('none') : formats.number(value, series.places);
  return {
    ...plainTable(
      [say(`forecasts.period.${series.every}`), ...drawn.map(({ label }) => label), say('forecasts.last-year')],
      sheet.ahead.map((period, h) => ({
        name: formats.period(period, 'short'),
        cells: [...drawn.map(({ middles }) => number(middles[h])), number(figures.values[n + h - series.season])],
      })),
    ),
    isOutlook: true,
  };
}

/** More rows than this show nothing more. */
const MOST_STEPS = 13;

/** Null where the advice could not be tested. */
export function trackTable({ sheet, formats, say, miss, share }: ChoiceWords): Table | null {
  const { trackRecord } = sheet;
  if (trackRecord === null || trackRecord.miss === null) return null;
  const { missByStep, lastYearMissByStep, lastYearPlusChangeMissByStep, inside80ByStep } = trackRecord;
  const every = Math.ceil(missByStep.length / MOST_STEPS);
  const columns = ['step', 'model', 'last-year', 'last-year-plus-change', 'inside'];
  const cells = (own: number | null, lastYear: number | null, plusChange: number | null, inside: number | null) => [
    ...[own, lastYear, plusChange].map(miss),
    share(inside),
  ];
  const rows = missByStep.map((own, h) => ({
    name: formats.number(h + 1, 0),
    cells: cells(own, lastYearMissByStep[h], lastYearPlusChangeMissByStep[h], inside80ByStep[h]),
  }));
  return {
    ...plainTable(
      columns.map((column) => capital(say(`track.heads.${column}`))),
      rows.filter((_, h) => (h + 1) % every === 0),
    ),
    total: {
      name: say('track.all'),
      cells: cells(
        trackRecord.miss,
        trackRecord.lastYearMiss,
        trackRecord.lastYearPlusChangeMiss,
        trackRecord.inside80,
      ),
    },
  };
}

/** All figures: a reporting year a row, or of periods that are counted in days so many in sequence. */
export function historyTable(words: ChoiceWords): Table {
  const { every } = words.sheet.series;
  return every === 'week' || every === 'four-weeks' ? sequenceTable(words) : yearsTable(words);
}

function yearsTable(words: ChoiceWords): Table {
  const { sheet, formats, say } = words;
  const { series, figures, plan } = sheet;
  const { every, season } = series;
  const first = periodIndex(figures.start, every);
  const placeOf = (t: number) => position(first + t, every, plan.yearStarts) - 1;
  const rows = new Map<number, { name: string; cells: string[] }>();
  figures.values.forEach((value, t) => {
    const year = yearOf(first + t, every, plan.yearStarts);
    const row = rows.get(year) ?? { name: String(year), cells: Array.from({ length: season }, () => '') };
    row.cells[placeOf(t)] = figureText(value, words);
    rows.set(year, row);
  });
  const places = Array.from({ length: season }, (_, i) =>
    season === 1 ? say('numbers.figure') : formats.period(periodText(first - placeOf(0) + i, every), 'axis'),
  );
  return plainTable([say('numbers.year'), ...places], [...rows.values()]);
}

/** As many columns as fit across the page. */
const COLUMNS = 13;

function sequenceTable(words: ChoiceWords): Table {
  const { sheet, formats, say } = words;
  const { every } = sheet.series;
  const { start, values } = sheet.figures;
  const first = periodIndex(start, every);
  const heads = [say('numbers.from'), ...Array.from({ length: COLUMNS }, (_, i) => formats.number(i + 1, 0))];
  const rows = Array.from({ length: Math.ceil(values.length / COLUMNS) }, (_, r) => ({
    name: formats.period(periodText(first + r * COLUMNS, every), 'short'),
    cells: Array.from({ length: COLUMNS }, (_, i) =>
      r * COLUMNS + i < values.length ? figureText(values[r * COLUMNS + i], words) : '',
    ),
  }));
  return plainTable(heads, rows);
}

const figureText = (value: number | null, { sheet, formats, say }: ChoiceWords): string =>
  value === null ? say('numbers.missing') : formats.number(value, sheet.series.places);

export function profileTable(words: ChoiceWords): Table | null {
  const { sheet, formats, say } = words;
  const { profile } = sheet;
  if (profile === null) return null;
  return plainTable(
    ['place', 'median', 'lowest', 'highest', 'latest'].map((column) => capital(say(`numbers.${column}`))),
    profile.positions.map(({ period, median, byYear }) => ({
      name: formats.period(period, 'axis'),
      cells: [median, Math.min(...byYear), Math.max(...byYear), byYear[byYear.length - 1]].map((value) =>
        profileValue(value, profile, words),
      ),
    })),
  );
}

export function levelsTable({ sheet, formats, say }: ChoiceWords): Table | null {
  const { before, after } = sheet.differencing;
  const lags = before.autocorrelations.length;
  if (lags === 0) return null;
  const number = (value: number | undefined) => (value === undefined ? say('none') : formats.number(value, 2));
  return plainTable(
    ['lag', 'before', 'after'].map((column) => capital(say(`numbers.${column}`))),
    Array.from({ length: lags }, (_, i) => ({
      name: formats.number(i + 1, 0),
      cells: [number(before.autocorrelations[i]), number(after.autocorrelations[i])],
    })),
  );
}
