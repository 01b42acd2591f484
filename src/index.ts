/** The library: what a program can do with seasonal ARIMA models and briefs. */

export { type Advice, advise, type Candidate } from './advice/advise.js';
export type { AdviceOptions, Reason } from './advice/choose.js';
export { type Advised, type ChoiceOptions, type ChoiceResult, writeChoiceSheets } from './commands/advise.js';
export { recheckArchive } from './commands/recheck.js';
export type { Rechecked, RecheckFault, RecheckOptions, RecheckResult } from './commands/rechecked.js';
export type { Reporter, WriteOptions } from './commands/work.js';
export { type WriteResult, writeBriefs } from './commands/write.js';
export { type ForecastPeriod, forecast } from './outlook/outlook.js';
export type { Difference } from './record/compare.js';
export type { LedgerFault } from './record/ledger-fault.js';
export { type Coefficient, type Fit, type FitOptions, fitModel, TooFewFigures } from './sarima/fit.js';
export { type Form, formText, parseForm } from './sarima/form.js';
