/** A choice sheet in one line, for the table on the command line; plain text. */
import type { ChoiceSheet } from '../record/choice.js';
import { keyOf } from './choice-sentences.js';
import { choiceWords, estimatesOf, yesOrNo } from './choice-words.js';
import { plainText } from './document.js';
import type { Theme } from './theme.js';

export interface ChoiceLine {
  readonly name: string;
  readonly model: string;
  readonly why: string;
  readonly missed: string;
}

export function choiceLine(sheet: ChoiceSheet, theme: Theme): ChoiceLine {
  const words = choiceWords(sheet, theme);
  const { say, miss } = words;
  const { recommended, trackRecord, reasons } = sheet;
  const { form, scale, constant } = recommended;
  // How it is estimated stands with the model.
  const why = reasons.filter(({ id }) => id !== 'shrunk' && id !== 'unrestricted');
  return {
    name: sheet.series.name,
    model: plainText(
      say('line.model', {
        form,
        scale,
        constant: say(`line.constant.${yesOrNo(constant)}`),
        fitted: say(`line.fitted.${estimatesOf(recommended)}`),
      }),
    ),
    why: plainText(why.map((reason) => say(keyOf('short', reason, words))).join(', ')),
    missed: plainText(
      trackRecord === null || trackRecord.miss === null
        ? say('line.untested')
        : say('line.missed', { miss: miss(trackRecord.miss), lastYear: miss(trackRecord.lastYearMiss) }),
    ),
  };
}

export function choiceHeads(theme: Theme): ChoiceLine {
  const head = (key: keyof ChoiceLine) => plainText(theme.say(`choice.line.heads.${key}`));
  return { name: head('name'), model: head('model'), why: head('why'), missed: head('missed') };
}
