/** What one write has to go by: the plan, what was asked of it, and where it goes. */
import type { SeriesFigures } from '../figures/figures.js';
import type { Theme } from '../page/theme.js';
import type { Plan, PlannedSeries } from '../plan/plan.js';
import type { Archive } from '../record/archive.js';

export interface WriteOptions {
  /** The archive's folder; `out` beside the plan unless given. */
  readonly out?: string;
  /** Names of the series to write; all unless given. */
  readonly only?: readonly string[];
  readonly trial?: boolean;
  readonly pdf?: boolean;
  readonly replace?: boolean;
  /** Takes what the user should know while it goes on. */
  readonly report?: Reporter;
  /** Stops the work before anything is filed; what is being filed is filed to the end. */
  readonly signal?: AbortSignal;
}

export interface Reporter {
  readonly message: (text: string) => void;
  readonly progress: (done: number, of: number, what: string) => void;
}

export const SILENT: Reporter = { message: () => undefined, progress: () => undefined };

export interface Work {
  readonly plan: Plan;
  readonly wanted: readonly PlannedSeries[];
  readonly figures: ReadonlyMap<string, SeriesFigures>;
  readonly theme: Theme;
  readonly archive: Archive;
  readonly options: WriteOptions;
  readonly report: Reporter;
}

/** The folder of the archive that the briefs go to. */
export const folderOf = ({ plan, options }: Work): string => (options.trial ? 'trial' : plan.issued);
