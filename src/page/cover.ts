/** The cover: all series of a dated folder on one sheet. */
import { sparkline } from '../charts/sparkline.js';
import type { CoverRecord } from '../record/cover.js';
import { budgetTables, ordersTable } from './cover-money.js';
import { pageStyle, plainText, withType } from './document.js';
import { type Formats, formatsOf } from './formats.js';
import { capital } from './sentences.js';
import type { Theme } from './theme.js';
import { missText } from './trust.js';

/** Characters of a range that stand on one line beside the other columns. */
const ONE_LINE = 20;

export async function renderCover(cover: CoverRecord, theme: Theme, { trial }: { trial: boolean }): Promise<string> {
  const { plan, issued, rows } = cover;
  const dated = formatsOf(plan, 'quarter');
  const date = dated.date(issued);
  const moneyFormats = formatsOf(plan, rows[0]?.series.every ?? 'quarter');
  const count = rows.length;
  const spans = rows.map(({ series, span }) => formatsOf(plan, series.every).span(...span));
  // What is true of every row is said once.
  const span = new Set(spans).size === 1 ? spans[0] : null;
  const leadKey = `cover.lead${span === null ? '' : '-span'}.${dated.plural(count) === 'one' ? 'one' : 'other'}`;
  const lead = theme.say(leadKey, {
    count: theme.has(`count.${count}`) ? capital(theme.say(`count.${count}`)) : dated.number(count, 0),
    date,
    span,
  });
  const view = {
    lang: plan.locale,
    title: `${plan.heading} · ${plan.preparedFor}, ${date}`,
    style: await pageStyle(theme, plan.paper, {
      left: theme.say('running', { series: plan.heading, brief: issued }),
      foot: theme.say('foot'),
      page: theme.say('page'),
      of: theme.say('of'),
    }),
    trial: trial ? theme.say('trial') : null,
    paper: plan.paper.toLowerCase(),
    logo: theme.logo,
    preparedFor: plan.preparedFor,
    heading: plan.heading,
    issued: date,
    lead,
    heads: ['series', 'line', 'expected', 'range', 'change', 'trust', 'flags'].map((key) => theme.say(`cover.${key}`)),
    rows: await Promise.all(
      rows.map(async (row, i) => {
        const formats = formatsOf(plan, row.series.every);
        const { answer, series } = row;
        const flags = row.caveats.map(({ id }) => theme.say(`cover.flag.${id}`)).filter((flag) => flag !== '');
        const range = theme.say('figures.and', {
          low: formats.number(answer.range80[0], answer.places),
          high: formats.number(answer.range80[1], answer.places),
        });
        const years = formats.number(Math.max(1, Math.round(row.history.length / series.season)), 0);
        return {
          href: `${series.slug}.html`,
          name: series.name,
          scope: span === null ? theme.say('cover.next', { unit: series.unit, span: spans[i] }) : series.unit,
          svg: await sparkline(row, plainText(theme.say('cover.line-described', { series: series.name, years }))),
          expected: formats.number(answer.expected, answer.places),
          range,
          isOneLine: range.length <= ONE_LINE,
          change: answer.change === null ? '–' : formats.change(answer.change),
          trust: trustText(row, theme, formats),
          flags: [...new Set(flags)].join(', '),
        };
      }),
    ),
    orders: ordersTable(cover, theme, moneyFormats),
    budget: budgetTables(cover, theme, moneyFormats),
    preparedBy: plan.preparedBy === null ? null : theme.say('prepared', { by: plan.preparedBy }),
    disclaimer: theme.say('disclaimer'),
  };
  return withType(theme.cover(view));
}

/** How far forecasts made this way missed, and how many fell inside their range. */
function trustText({ trackRecord }: CoverRecord['rows'][number], theme: Theme, formats: Formats): string {
  if (trackRecord === null || trackRecord.miss === null) return theme.say('cover.untested');
  const { count, miss, inside80 } = trackRecord;
  return theme.say('cover.track', {
    miss: missText(miss, theme, formats),
    inside: formats.number(Math.round(inside80 * count), 0),
    count: formats.number(count, 0),
  });
}
