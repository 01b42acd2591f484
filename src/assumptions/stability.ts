/** The model fits the recent past as well as the distant past. */
import { ORDINARY } from '../sarima/diffuse.js';
import type { Fit } from '../sarima/fit.js';
import { polynomialCoefficients } from '../sarima/form.js';
import { effectsOf, filtered } from '../sarima/predict.js';
import { defaultPriors } from '../sarima/priors.js';
import { toScale } from '../sarima/scale.js';
import { fUpperTail } from '../stats/f.js';
import { type Assumption, assumption, statusOf, untested } from './assumption.js';
import { refit } from './refit.js';

/** The last third should hold at least so many surprises. */
const FEWEST_LAST = 4;

/**
 * A forecast breakdown: the model fitted to the first two thirds forecasts the last third, one step at a time with its
 * coefficients held, worse than it fitted (Giacomini & Rossi, "Detecting and predicting forecast breakdowns", Review of
 * Economic Studies 76, 2009; as an F test Chow, "Tests of equality between sets of coefficients in two linear
 * regressions", Econometrica 28, 1960). Such forecasts miss by (n + k)/(n − k) more than the fit even if nothing breaks
 * (Akaike, "Fitting autoregressive models for prediction", Annals of the Institute of Statistical Mathematics 21, 1969).
 *
 * Two thirds of a short series fit an unrestricted model too well, which looks like a breakdown later: the early
 * estimates are always shrunk. Regressors' effects are those of the whole fit; what sold out counts as missing.
 */
export function checkStability(fit: Fit): Assumption {
  const n = fit.values.length;
  const cut = Math.floor((2 * n) / 3);
  const figures = withoutEffects(fit);
  const early = refit(fit, {
    values: figures.slice(0, cut),
    scale: 'plain',
    regressors: [],
    soldOut: [],
    fittedBy: 'shrunk',
    priors: fit.priors ?? defaultPriors(fit.form, fit.scale, fit.constant),
  });
  if (early === null) return untested('stable-over-time');
  const { first, last } = squaredSurprises({ ...early, values: figures }, cut);
  const n1 = first.length;
  const n2 = last.length;
  const k = polynomialCoefficients(fit.form) + (fit.constant ? 1 : 0);
  if (n2 < FEWEST_LAST || n1 - k < FEWEST_LAST) return untested('stable-over-time');
  const ratio = mean(last) / mean(first);
  const statistic = (ratio * (n1 - k)) / (n1 + k);
  const pValue = fUpperTail(statistic, n2, n1 - k);
  return assumption('stable-over-time', {
    status: statusOf(pValue),
    statistic,
    pValue,
    details: { ratio, from: cut, surprisesBefore: n1, surprisesAfter: n2 },
  });
}

/** On the model's scale, NaN where missing or sold out. */
function withoutEffects(fit: Fit): Float64Array {
  const effects = effectsOf({ ...fit, constant: false }, fit.values.length);
  const figures = toScale(fit.values, fit.scale).map((y, t) => y - effects[t]);
  for (const t of fit.soldOut) figures[t] = Number.NaN;
  return figures;
}

/** Squared one-step surprises in units of their own variance, before period `cut` and from it on. */
function squaredSurprises(fit: Fit, cut: number): { first: Float64Array; last: Float64Array } {
  const { columns, diffuse } = filtered(fit, effectsOf(fit, fit.values.length));
  const squares = columns[0].map((e) => e * e);
  const split = diffuse.kind.subarray(0, cut).reduce((count, kind) => count + (kind === ORDINARY ? 1 : 0), 0);
  return { first: squares.subarray(0, split), last: squares.subarray(split) };
}

function mean(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
