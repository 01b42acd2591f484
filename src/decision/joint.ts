/**
 * Several series together: how their surprises go together, and which of their paths belong to one future.
 */
import { CholeskyDecomposition, EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { jointDeviates } from '../outlook/paths.js';
import { ascending } from '../stats/sample.js';

export interface ResidualCorrelations {
  /** Series by series, row by row; positive semi-definite. */
  readonly matrix: Float64Array;
  /** How far the correlations were pulled towards none: 0 not at all, 1 altogether. */
  readonly lambda: number;
  /** Periods that two series have in common, series by series. */
  readonly counts: Uint32Array;
}

/** Two series with fewer periods in common than this count as uncorrelated. */
const FEWEST = 8;

/**
 * Correlations of the residuals of each two series over their common periods, r*ᵢⱼ = (1 − λ) rᵢⱼ, with the intensity
 * λ = Σ Var(rᵢⱼ) / Σ rᵢⱼ² over i < j, within [0, 1] (Schäfer & Strimmer, Statistical Applications in Genetics and
 * Molecular Biology 4, 2005, target D on the scale of correlations), and Var(r) about (1 − r²)²/(n − 1). Correlations
 * over different periods need not fit together: eigenvalues below zero are then taken as zero, and the diagonal brought
 * back to one (Rousseeuw & Molenberghs, Communications in Statistics: Theory and Methods 22, 1993; from memory). Raising
 * λ to where they fit would all but wipe out the correlation of many series.
 *
 * `residuals` holds one row a series, aligned by period, null where missing. Throws where rows differ in length.
 */
export function residualCorrelations(residuals: readonly (readonly (number | null)[])[]): ResidualCorrelations {
  const size = residuals.length;
  const rows = residuals.map((row) => Float64Array.from(row, (value) => value ?? Number.NaN));
  const odd = rows.find((row) => row.length !== rows[0].length);
  if (odd !== undefined)
    throw new Error(
      `residuals of ${rows[0].length} and of ${odd.length} periods are not aligned; give null where missing`,
    );
  const counts = new Uint32Array(size * size);
  const raw = identity(size);
  let [variances, squares] = [0, 0];
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      const { n, r } = pairCorrelation(rows[i], rows[j]);
      counts[i * size + j] = counts[j * size + i] = n;
      if (i === j || n < FEWEST || Number.isNaN(r)) continue;
      raw[i * size + j] = raw[j * size + i] = r;
      variances += (1 - r * r) ** 2 / (n - 1);
      squares += r * r;
    }
  const lambda = squares > 0 ? Math.min(variances / squares, 1) : 1;
  return { matrix: fitting(shrunk(raw, size, lambda), size), lambda, counts };
}

/** Of two rows, over the periods in which neither is NaN: how many, and their correlation; NaN where one doesn't vary. */
function pairCorrelation(x: Float64Array, y: Float64Array): { n: number; r: number } {
  let [n, sumX, sumY] = [0, 0, 0];
  for (let t = 0; t < x.length; t++)
    if (!Number.isNaN(x[t] + y[t])) {
      n++;
      sumX += x[t];
      sumY += y[t];
    }
  let [xx, yy, xy] = [0, 0, 0];
  for (let t = 0; t < x.length; t++)
    if (!Number.isNaN(x[t] + y[t])) {
      const [dx, dy] = [x[t] - sumX / n, y[t] - sumY / n];
      xx += dx * dx;
      yy += dy * dy;
      xy += dx * dy;
    }
  return { n, r: Math.min(Math.max(xy / Math.sqrt(xx * yy), -1), 1) };
}

/** The correlations where no eigenvalue is below zero, else the nearest in reach that fit together. */
function fitting(correlations: Float64Array, size: number): Float64Array {
  const matrix = Matrix.from1DArray(size, size, Array.from(correlations));
  if (new CholeskyDecomposition(matrix).isPositiveDefinite()) return correlations;
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(matrix, { assumeSymmetric: true });
  const lengths = realEigenvalues.map((eigenvalue) => Math.sqrt(Math.max(eigenvalue, 0)));
  const root = eigenvectorMatrix.mulRowVector(lengths);
  const clipped = root.mmul(root.transpose());
  return Float64Array.from({ length: size * size }, (_, at) => {
    const [i, j] = [Math.floor(at / size), at % size];
    return i === j ? 1 : clipped.get(i, j) / Math.sqrt(clipped.get(i, i) * clipped.get(j, j));
  });
}

function identity(size: number): Float64Array {
  return Float64Array.from({ length: size * size }, (_, at) => (at % (size + 1) === 0 ? 1 : 0));
}

function shrunk(raw: Float64Array, size: number, lambda: number): Float64Array {
  return raw.map((r, at) => (at % (size + 1) === 0 ? 1 : (1 - lambda) * r));
}

/**
 * Joint draws of several series: result[s][k] is the draw in which series s takes its k-th smallest value. A Gaussian
 * copula: each series keeps its own values, each of them once, and only their pairing carries the correlation.
 *
 * `correlation` is series by series, positive semi-definite; `weights`, one a series, say along which sum the draws
 * are to lie evenly; `count` is even; `seed` 32 bits unsigned. Throws where they don't fit together.
 */
export function jointDraws(
  correlation: Float64Array,
  weights: readonly number[],
  count: number,
  seed: number,
): Uint32Array[] {
  const size = weights.length;
  if (size === 0 || correlation.length !== size * size)
    throw new Error(`${correlation.length} correlations don't fit ${size} series`);
  if (count === 0 || count % 2 === 1) throw new Error(`${count} paths can't be paired: the number must be even`);
  const deviates = jointDeviates(correlation, [weights], count, seed);
  return Array.from({ length: size }, (_, s) => ascending(deviates.subarray(s * count, (s + 1) * count)));
}

/**
 * The sum of several series in each joint draw. `rows` holds one row of values a series, in any order, `signs` what each
 * counts for: +1 or −1. Its mean is the sum of their means, whatever the draws.
 */
export function jointSum(
  draws: readonly Uint32Array[],
  rows: readonly Float64Array[],
  signs: readonly number[],
): Float64Array {
  const total = new Float64Array(draws[0]?.length ?? 0);
  rows.forEach((row, s) => {
    if (row.length !== total.length)
      throw new Error(`series of ${total.length} and of ${row.length} paths can't be paired`);
    const sorted = row.toSorted();
    const own = draws[s];
    for (let k = 0; k < sorted.length; k++) total[own[k]] += signs[s] * sorted[k];
  });
  return total;
}
