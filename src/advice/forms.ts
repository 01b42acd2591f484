/** The models that advice considers. */
import { formText, parseForm } from '../sarima/form.js';
import { defaultPriors, type Priors } from '../sarima/priors.js';

/** What a model is asked to be, without the figures it is for. */
export interface Model {
  readonly form: string;
  readonly scale: string;
  readonly constant: boolean;
  readonly fittedBy: 'maximum-likelihood' | 'shrunk';
  readonly priors: Priors | null;
}

/**
 * The mainstay: yearly changes that fade towards a drift, a season that is learned slowly. Published comparisons find
 * such shrinkage better on short business series than any choice among unrestricted forms.
 */
export function seasonalModel(season: number, scale: string): Model {
  return shrunk(`(1,0,2)x(0,1,1)${season}`, scale, true);
}

/** A season that comes back a little less each year, around a wandering level. */
export function fadingSeasonModel(season: number, scale: string): Model {
  return shrunk(`(0,1,2)x(1,0,1)${season}`, scale, false);
}

/**
 * Without a season: over a few periods a year a trend that fades (Gardner & McKenzie, "Forecasting trends in time
 * series", Management Science 31, 1985, whose damped trend this form is), over many a wandering level (Muth, "Optimal
 * properties of exponentially weighted forecasts", Journal of the American Statistical Association 55, 1960).
 */
export function seasonlessModel(season: number, scale: string): Model {
  const on = 'coefficient';
  const model = season < 8 ? shrunk('(1,1,2)', scale, false) : shrunk('(0,1,1)', scale, false);
  const coefficients: Priors['coefficients'] =
    season < 8
      ? {
          phi1: { centre: 0.85, spread: 0.1, on },
          theta1: { centre: -1, spread: 0.3, on },
          theta2: { centre: 0.2, spread: 0.3, on },
        }
      : { theta1: { centre: -0.6, spread: 0.3, on } };
  return { ...model, priors: { coefficients, ridge: 0 } };
}

/** By maximum likelihood, for comparison: the form that Box & Jenkins fitted to the airline passengers, and its kin. */
export function unrestrictedModels(season: number, scale: string): Model[] {
  const free = (form: string, constant: boolean): Model => ({
    form,
    scale,
    constant,
    fittedBy: 'maximum-likelihood',
    priors: null,
  });
  return season === 1
    ? [free('(0,1,1)', false), free('(0,1,1)', true), free('(1,1,0)', true), free('(0,2,1)', false)]
    : [free(`(0,1,1)x(0,1,1)${season}`, false), free(`(1,0,0)x(0,1,1)${season}`, true)];
}

/** Last year's figure again, or without a season the last one. */
export function repeatModel(season: number, scale: string): Model {
  const form = season === 1 ? '(0,1,0)' : `(0,0,0)x(0,1,0)${season}`;
  return { form, scale, constant: false, fittedBy: 'maximum-likelihood', priors: null };
}

function shrunk(text: string, scale: string, constant: boolean): Model {
  const form = parseForm(text);
  return {
    form: formText(form),
    scale,
    constant,
    fittedBy: 'shrunk',
    priors: defaultPriors(form, scale, constant),
  };
}
