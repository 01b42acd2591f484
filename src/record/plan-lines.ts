/** A model as the lines of a plan that ask for it. */
import { Document } from 'yaml';
import type { Model } from '../advice/forms.js';
import { parseForm } from '../sarima/form.js';
import { defaultPriors, type Priors, statedPriors } from '../sarima/priors.js';

/** As deep as the keys of a series stand in a plan. */
const INDENT = '    ';

/** YAML, a key a line, indented as a series' keys are. Priors are stated where they are not the form's usual ones. */
export function planLines(model: Model): string {
  const document = new Document({
    model: model.form,
    scale: model.scale,
    constant: model.constant ? 'yes' : 'no',
    'fitted-by': model.fittedBy,
  });
  const priors = unusualPriors(model);
  if (priors !== null) document.set('priors', document.createNode(priors));
  for (const name of Object.keys(priors?.coefficients ?? {}))
    document.setIn(['priors', 'coefficients', name], document.createNode(priors?.coefficients?.[name], { flow: true }));
  return document.toString({ indent: INDENT.length, lineWidth: 0 }).trimEnd().replaceAll(/^/gm, INDENT);
}

/** What differs from the usual priors; null where nothing does. A ridge without a constant has nothing to pull. */
function unusualPriors({ form: text, scale, constant, priors }: Model): Partial<Priors> | null {
  if (priors === null) return null;
  const form = parseForm(text);
  const usual = statedPriors(form, defaultPriors(form, scale, constant), null);
  const own = statedPriors(form, priors, null);
  const coefficients = Object.entries(own.coefficients).filter(([name, { centre, spread, on }]) => {
    const other = usual.coefficients[name];
    return centre !== other.centre || spread !== other.spread || on !== other.on;
  });
  const parts = {
    ...(coefficients.length > 0 ? { coefficients: Object.fromEntries(coefficients) } : {}),
    ...(constant && own.ridge !== usual.ridge ? { ridge: own.ridge } : {}),
  };
  return Object.keys(parts).length > 0 ? parts : null;
}
