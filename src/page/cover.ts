/** The cover: all series of a dated folder on one sheet. */
import { sparkline } from '../charts/sparkline.js';
import type { CoverRecord } from '../record/cover.js';
import { pageStyle, plainText, withType } from './document.js';
import { formatsOf } from './formats.js';
import type { Theme } from './theme.js';

export async function renderCover(cover: CoverRecord, theme: Theme, { trial }: { trial: boolean }): Promise<string> {
  const { plan, issued, rows } = cover;
  const dated = formatsOf(plan, 'quarter');
  const date = dated.date(issued);
  const count = rows.length;
  const lead = theme.say(`cover.lead.${dated.plural(count) === 'one' ? 'one' : 'other'}`, {
    count: theme.has(`count.${count}`) ? capital(theme.say(`count.${count}`)) : dated.number(count, 0),
    date,
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
    logo: theme.logo,
    preparedFor: plan.preparedFor,
    heading: plan.heading,
    issued: date,
    lead,
    heads: ['series', 'line', 'expected', 'range', 'change', 'flags'].map((key) => theme.say(`cover.${key}`)),
    rows: await Promise.all(
      rows.map(async (row) => {
        const formats = formatsOf(plan, row.series.every);
        const { answer, series } = row;
        const flags = row.caveats.map(({ id }) => theme.say(`cover.flag.${id}`)).filter((flag) => flag !== '');
        const years = formats.number(Math.max(1, Math.round(row.history.length / series.season)), 0);
        return {
          href: `${series.slug}.html`,
          name: series.name,
          scope: theme.say('cover.next', { unit: series.unit, span: formats.span(row.span[0], row.span[1]) }),
          svg: await sparkline(row, plainText(theme.say('cover.line-described', { series: series.name, years }))),
          expected: formats.number(answer.expected, answer.places),
          range: theme.say('figures.and', {
            low: formats.number(answer.range80[0], answer.places),
            high: formats.number(answer.range80[1], answer.places),
          }),
          change: answer.change === null ? '–' : formats.change(answer.change),
          flags: [...new Set(flags)].join(', '),
        };
      }),
    ),
    preparedBy: plan.preparedBy === null ? null : theme.say('prepared', { by: plan.preparedBy }),
    disclaimer: theme.say('disclaimer'),
  };
  return withType(theme.cover(view));
}

const capital = (text: string): string => text.slice(0, 1).toLocaleUpperCase() + text.slice(1);
