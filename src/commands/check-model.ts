/** Checks what a plan asks of its models, for the plan's reader, which knows none. */
import { type everies, seasonOf } from '../calendar/calendar.js';
import type { CheckModel } from '../plan/plan.js';
import { seasonFault } from '../record/plan-faults.js';
import { type Form, parseForm } from '../sarima/form.js';
import { parseScale } from '../sarima/scale.js';

export const checkModel: CheckModel = ({ model, scale, constant, every }) => {
  const remarks: { key: 'model' | 'scale' | 'constant'; message: string }[] = [];
  const tell = (key: 'model' | 'scale' | 'constant', check: () => void): void => {
    try {
      check();
    } catch (error) {
      remarks.push({ key, message: error instanceof Error ? error.message : String(error) });
    }
  };
  let form: Form | null = null;
  if (model !== 'advise')
    tell('model', () => {
      form = parseForm(model);
    });
  if (scale !== null) tell('scale', () => void parseScale(scale));
  if (form !== null) remarks.push(...formRemarks(form, model, constant, every));
  return remarks;
};

function formRemarks(form: Form, model: string, constant: boolean | null, every: (typeof everies)[number] | null) {
  const season = every === null || seasonOf(every) === form.m ? null : seasonFault(form, model, every);
  const both = form.d + form.D;
  return [
    ...(season === null ? [] : [{ key: 'model' as const, message: season }]),
    ...(constant === true && both > 1
      ? [
          {
            key: 'constant' as const,
            message: `constant can't be "yes" in a model that differences ${both} times, such as ${model}; write no`,
          },
        ]
      : []),
  ];
}
