/**
 * Joint paths of the bare model: correlated normal deviates, one row a step ahead.
 *
 * Latin hypercube samples (McKay, Beckman & Conover, Technometrics 21, 1979) in mirrored pairs, turned so that the
 * first coordinate points along the sum over all steps: the total's distribution is then stratified too, and its
 * range hardly moves from seed to seed.
 */
import { createGenerator } from '../stats/generator.js';
import { normalQuantile } from '../stats/normal.js';

/** `ahead` by `count` deviates, row by row, with joint covariance `covariance` (ahead by ahead). `count` is even. */
export function jointDeviates(covariance: Float64Array, ahead: number, count: number, seed: number): Float64Array {
  const mixing = turnedTowardsSum(lowerFactor(covariance, ahead), ahead);
  const half = count / 2;
  const independent = stratifiedNormals(ahead, half, seed);
  const deviates = new Float64Array(ahead * count);
  for (let h = 0; h < ahead; h++)
    for (let i = 0; i < half; i++) {
      let value = 0;
      for (let j = 0; j < ahead; j++) value += mixing[h * ahead + j] * independent[j * half + i];
      deviates[h * count + i] = value;
      deviates[h * count + half + i] = -value;
    }
  return deviates;
}

/** For each of `rows` coordinates one normal deviate from each of `count` equally likely strata, in random order. */
function stratifiedNormals(rows: number, count: number, seed: number): Float64Array {
  const { uniform } = createGenerator(seed);
  const normals = new Float64Array(rows * count);
  for (let j = 0; j < rows; j++) {
    const row = normals.subarray(j * count, (j + 1) * count);
    for (let i = 0; i < count; i++) row[i] = normalQuantile((i + uniform()) / count);
    for (let i = count - 1; i > 0; i--) {
      const k = Math.floor(uniform() * (i + 1));
      [row[i], row[k]] = [row[k], row[i]];
    }
  }
  return normals;
}

/** Cholesky factor, lower triangle; a step without variance of its own gets a zero column. */
function lowerFactor(covariance: Float64Array, size: number): Float64Array {
  const L = new Float64Array(size * size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      let sum = covariance[i * size + j];
      for (let k = 0; k < j; k++) sum -= L[i * size + k] * L[j * size + k];
      if (i === j) L[i * size + i] = Math.sqrt(Math.max(sum, 0));
      else L[i * size + j] = L[j * size + j] > 0 ? sum / L[j * size + j] : 0;
    }
  return L;
}

/** L H with the Householder reflection H whose first column is L'1/|L'1|; H changes no covariance. */
function turnedTowardsSum(L: Float64Array, size: number): Float64Array {
  const direction = new Float64Array(size);
  for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) direction[j] += L[i * size + j];
  const length = Math.hypot(...direction);
  if (!(length > 0)) return L;
  // H = I − 2vv'/v'v with v = e₁ − direction maps e₁ on the direction.
  const v = direction.map((x, j) => (j === 0 ? 1 : 0) - x / length);
  const square = v.reduce((sum, x) => sum + x * x, 0);
  if (square < 1e-30) return L;
  const turned = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    let along = 0;
    for (let j = 0; j < size; j++) along += L[i * size + j] * v[j];
    for (let j = 0; j < size; j++) turned[i * size + j] = L[i * size + j] - (2 * along * v[j]) / square;
  }
  return turned;
}
