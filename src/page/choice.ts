/**
 * A choice sheet: one self-contained HTML document for the planner.
 *
 *   sheet -> recommendation and its reasons, charts, tables -> choice.hbs -> the type that the text needs
 */
import type { ChoiceSheet } from '../record/choice.js';
import { forecastsPart, historyPart, levelsPart, profilePart } from './choice-charts.js';
import {
  answerSentence,
  doesSentence,
  reasonSentences,
  testSentences,
  trackSentences,
  warnings,
} from './choice-sentences.js';
import {
  candidatesTable,
  forecastsTable,
  historyTable,
  levelsTable,
  profileTable,
  trackTable,
} from './choice-tables.js';
import { choiceWords, lastPeriod } from './choice-words.js';
import { pageStyle, plainText, withType } from './document.js';
import type { Theme } from './theme.js';

export async function renderChoice(sheet: ChoiceSheet, theme: Theme): Promise<string> {
  const words = choiceWords(sheet, theme);
  const { say, formats } = words;
  const { plan, series } = sheet;
  const view = {
    lang: say('lang'),
    logo: theme.logo,
    title: plainText(say('title', { series: series.name, firm: plan.preparedFor })),
    style: await pageStyle(theme, plan.paper, {
      left: theme.say('running', { series: series.name, brief: plainText(say('sheet')) }),
      foot: theme.say('foot'),
      page: theme.say('page'),
      of: theme.say('of'),
    }),
    preparedFor: plan.preparedFor,
    heading: plan.heading,
    issued: formats.date(sheet.issued),
    name: series.name,
    scope: say('scope', { span: formats.span(sheet.figures.start, lastPeriod(sheet)), unit: series.unit }),
    answer: answerSentence(words),
    does: doesSentence(words),
    reasons: reasonSentences(words),
    warnings: warnings(words),
    history: { ...(await historyPart(words)), table: historyTable(words) },
    profile: await profilePart(words),
    levels: await levelsPart(words),
    tests: testSentences(words),
    isTested: sheet.differencing.before.kpss !== null || sheet.season !== null,
    candidates: candidatesTable(words),
    forecasts: { ...(await forecastsPart(words)), table: forecastsTable(words) },
    track: { text: trackSentences(words).join(' '), table: trackTable(words) },
    planLines: sheet.planLines,
    disclaimer: theme.say('disclaimer'),
    numbers: [
      { title: say('numbers.profile'), table: profileTable(words) },
      { title: say('numbers.levels'), table: levelsTable(words) },
    ].filter(({ table }) => table !== null),
  };
  return withType(theme.choice(view));
}
