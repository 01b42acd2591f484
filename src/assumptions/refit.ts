/** The same model fitted again. */
import { type Fit, fitModel } from '../sarima/fit.js';

type Changes = Partial<Pick<Fit, 'values' | 'scale' | 'regressors' | 'soldOut' | 'fittedBy' | 'priors'>>;

/** The same form and constant with other figures, regressors or priors; null where they can't be fitted. */
export function refit(fit: Fit, changes: Changes): Fit | null {
  const { form, season, scale, constant, fittedBy, priors, values, regressors, soldOut } = { ...fit, ...changes };
  try {
    return fitModel(values, { form, season, scale, constant, fittedBy, priors, regressors, soldOut });
  } catch {
    // Too few figures, or a regressor that leaves no trace: there is no such fit.
    return null;
  }
}
