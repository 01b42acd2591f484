/**
 * Why the outlook is what it is: the difference equation, the worked sum, what each coefficient means, the numbers as
 * they are printed, and the facts that sentences are chosen by. Facts and numbers only: the words are the templates'.
 */
import type { Outlook } from '../outlook/outlook.js';
import type { Fit } from '../sarima/fit.js';
import { psiWeights } from '../sarima/weights.js';
import type { Context } from './context.js';
import { type Expansion, expand, expandDifferenced, type LagTerm, weightTex } from './expand.js';
import { factsOf } from './facts.js';
import { meanings } from './meanings.js';
import { printedNumbers } from './printed.js';
import { typeset } from './typeset.js';
import { pastWeights } from './weights.js';
import { workedSum } from './worked-sum.js';

/** `alone` is what the figures alone say, which the equation explains; `outlook` what the brief says. */
export function explain(fit: Fit, { alone, outlook }: { alone: Outlook; outlook: Outlook }, context: Context) {
  return {
    equation: equationOf(fit, alone, context),
    printed: printedNumbers(outlook, context.places, lastYears(fit, outlook, context)),
    facts: factsOf(fit, outlook, context),
  };
}

function equationOf(fit: Fit, outlook: Outlook, context: Context) {
  const named = (effect: 'passing' | 'lasting') =>
    new Set(context.events.filter((event) => event.effect === effect).map((event) => event.coefficient));
  const { d, D, m } = fit.form;
  return {
    ...written(expand(fit)),
    differenced: { definition: { regular: d, seasonal: D, season: m }, ...written(expandDifferenced(fit)) },
    tex: typeset(fit),
    workedSum: workedSum(fit, {
      middle: outlook.periods[0].middle,
      expected: outlook.periods[0].expected,
      heldAtZero: outlook.heldAtZero,
      places: context.places,
      periods: context.periods,
    }),
    weights: pastWeights(fit, context.season),
    echo: Array.from(psiWeights(fit, 2 * context.season + 1), (effect, step) => ({ step, effect })),
    meanings: meanings(fit, named('lasting'), named('passing')),
  };
}

const written = ({ lags, surprises, constant }: Expansion) => ({
  lags: lags.map(writtenTerm),
  surprises: surprises.map(writtenTerm),
  constant,
});

const writtenTerm = ({ lag, weight, products }: LagTerm) => ({ lag, weight, tex: weightTex(products) });

/** For each period ahead the figure a year before; null where it is missing or itself ahead. */
function lastYears({ values }: Fit, { periods }: Outlook, { season }: Context): (number | null)[] {
  return periods.map((_, h) => {
    const value = values[values.length + h - season];
    return value === undefined || Number.isNaN(value) ? null : value;
  });
}
