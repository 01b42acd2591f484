/**
 * Where the search for the likelihood's maximum starts: the conditional least squares estimate, whose errors follow
 * from the difference equation with zeros before the first (Box & Jenkins), a fraction of the exact likelihood's work.
 */
import { type Arma, expand } from './arma.js';
import type { Innovations } from './likelihood.js';
import { minimize } from './minimize.js';
import { concentrate, createConcentrated } from './objective.js';
import { toCoefficients } from './partial.js';

/** A little of the sign that differenced series usually show. */
const FIRST = 0.1;
const TOLERANCE = 0.01;

/** Start values for z. `data`: the differenced series and regressors, without gaps. */
export function startValues(arma: Arma, data: readonly Float64Array[]): { z: Float64Array; evaluations: number } {
  const z = firstGuess(arma);
  const skipped = arma.p;
  const count = data[0].length - skipped;
  const regressors = data.length - 1;
  if (z.length === 0 || count < z.length + regressors + 3) return { z, evaluations: 0 };
  const innovations: Innovations = {
    count,
    columns: data.map(() => new Float64Array(count)),
    starts: new Int32Array(data.length),
    root: new Float64Array(0),
    logDeterminant: 0,
  };
  const concentrated = createConcentrated(count, new Float64Array(regressors));
  const found = minimize(
    {
      parameters: z.length,
      weight: count,
      rows: concentrated.residuals,
      penalties: new Float64Array(0),
      evaluate: (at) => {
        toCoefficients(arma.blocks, at, arma.coefficients);
        expand(arma);
        for (let c = 0; c < data.length; c++) conditionalErrors(arma, data[c], innovations.columns[c]);
        return concentrate(concentrated, innovations)
          ? 0.5 * count * Math.log(concentrated.sumOfSquares)
          : Number.POSITIVE_INFINITY;
      },
    },
    z,
    TOLERANCE,
  );
  return { z: found.z.map((value) => Math.min(Math.max(value, -FARTHEST), FARTHEST)), evaluations: found.evaluations };
}

/** A start nearer the unit circle tells more of the zeros before the first figure than of the series. */
const FARTHEST = 2;

/** The guess that is free of the data: slightly negative moving averages, slightly positive autoregressions. */
export const firstGuess = (arma: Arma): Float64Array => guess(arma, { ar: FIRST, ma: -FIRST });

/** z with the first of each autoregressive block at `ar`, of each moving-average block at `ma`, all others 0. */
export function guess(arma: Arma, first: { readonly ar: number; readonly ma: number }): Float64Array {
  const z = new Float64Array(arma.coefficients.length);
  for (const { from, order, sign } of arma.blocks) if (order > 0) z[from] = sign > 0 ? first.ar : first.ma;
  return z;
}

/** eₜ = wₜ − Σ φₖ wₜ₋ₖ − Σ θₖ eₜ₋ₖ for t ≥ p, errors before that taken as zero. */
function conditionalErrors(arma: Arma, series: Float64Array, errors: Float64Array): void {
  const { p, ar, ma, arLags, maLags } = arma;
  for (let t = 0; t < errors.length; t++) {
    let e = series[t + p];
    for (let l = 0; l < arLags.length; l++) e -= ar[arLags[l] - 1] * series[t + p - arLags[l]];
    for (let l = 0; l < maLags.length; l++) {
      if (maLags[l] > t) break;
      e -= ma[maLags[l] - 1] * errors[t - maLags[l]];
    }
    errors[t] = e;
  }
}
