/** The page's colours and type, as charts use them. */
import type { Config } from 'vega-lite';

export const INK = '#1d1b18';
export const QUIET = '#6b665e';
export const HAIRLINE = '#d9d4cb';
export const ACCENT = '#0f5c5c';
export const BAND = '#cfe0de';
export const PAPER = '#ffffff';

/** Each colour follows the page's custom property, so that a chart turns dark with its page. */
export const properties: Readonly<Record<string, string>> = {
  [INK]: '--ink',
  [QUIET]: '--quiet',
  [HAIRLINE]: '--hairline',
  [ACCENT]: '--accent',
  [BAND]: '--band',
  [PAPER]: '--paper',
};

/** The size of every label, in px of the chart: 8.5 pt on paper. */
export const LABEL = 11.5;

export const config: Config = {
  font: 'Brief Sans',
  background: 'transparent',
  padding: 2,
  view: { stroke: null },
  axis: {
    labelFontSize: LABEL,
    titleFontSize: LABEL,
    labelColor: QUIET,
    titleColor: QUIET,
    titleFontWeight: 400,
    gridColor: HAIRLINE,
    gridWidth: 0.7,
    domainColor: HAIRLINE,
    tickColor: HAIRLINE,
    labelPadding: 5,
  },
  axisY: { domain: false, ticks: false },
  axisX: { grid: false },
  text: { fontSize: LABEL, color: INK },
};
