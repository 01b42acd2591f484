/** What explaining needs to know of the series beside the fit. Arrays run from the first figure to the last period ahead. */
export interface Context {
  /** Decimal places shown. */
  readonly places: number;
  /** Periods in a year. */
  readonly season: number;
  /** SDMX text of each period. */
  readonly periods: readonly string[];
  /** Position of each period in its reporting year, from 1. */
  readonly positions: readonly number[];
  readonly events: readonly {
    readonly what: string;
    readonly from: string;
    readonly to: string | null;
    readonly effect: 'passing' | 'lasting';
    readonly coefficient: string;
  }[];
}
