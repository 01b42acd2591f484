/**
 * Joint paths of the bare model: correlated normal deviates, one row a step ahead.
 *
 *   covariance = LL' -> turned, so that the first coordinates point along the sums that matter -> even points
 *
 * The points are mirrored pairs. Their first coordinates are a Hammersley set under a random shift (Hammersley, Annals
 * of the New York Academy of Sciences 86, 1960; Cranley & Patterson, SIAM Journal on Numerical Analysis 13, 1976), which
 * is even in all of them jointly; the further ones are a Latin hypercube sample (McKay, Beckman & Conover,
 * Technometrics 21, 1979). So the range of a sum hardly moves from seed to seed.
 */
import { createGenerator } from '../stats/generator.js';
import { normalQuantile } from '../stats/normal.js';

/**
 * Steps by `count` deviates, row by row, with joint covariance `covariance` (steps by steps). `count` is even. Each of
 * `sums` holds the weights, one a step, of a sum whose distribution is to be as exact as the points can make it.
 */
export function jointDeviates(
  covariance: Float64Array,
  sums: readonly (readonly number[])[],
  count: number,
  seed: number,
): Float64Array {
  const steps = Math.round(Math.sqrt(covariance.length));
  const mixing = turned(lowerFactor(covariance, steps), steps, sums);
  const half = count / 2;
  const independent = evenNormals(steps, half, seed);
  const deviates = new Float64Array(steps * count);
  for (let h = 0; h < steps; h++) {
    const row = deviates.subarray(h * count, h * count + half);
    for (let j = 0; j < steps; j++) {
      const weight = mixing[h * steps + j];
      if (weight !== 0) for (let i = 0; i < half; i++) row[i] += weight * independent[j * half + i];
    }
    for (let i = 0; i < half; i++) deviates[h * count + half + i] = -row[i];
  }
  return deviates;
}

/** Bases of the Hammersley set's coordinates after the first; larger ones would fill unevenly. */
const BASES = [2, 3, 5, 7, 11];

/** Keeps a probability off 0 and 1. */
const MARGIN = 2 ** -30;

/** `rows` coordinates of `count` points, row by row, as standard normal deviates. */
function evenNormals(rows: number, count: number, seed: number): Float64Array {
  const { uniform } = createGenerator(seed);
  const normals = new Float64Array(rows * count);
  for (let j = 0; j < rows; j++) {
    const row = normals.subarray(j * count, (j + 1) * count);
    if (j <= BASES.length) hammersley(row, j, uniform());
    else latinHypercube(row, uniform);
    for (let i = 0; i < count; i++) row[i] = normalQuantile(MARGIN + (1 - 2 * MARGIN) * row[i]);
  }
  return normals;
}

function hammersley(row: Float64Array, coordinate: number, shift: number): void {
  for (let i = 0; i < row.length; i++) {
    const point = coordinate === 0 ? i / row.length : radicalInverse(i, BASES[coordinate - 1]);
    row[i] = (point + shift) % 1;
  }
}

/** The digits of `index` in a base, mirrored at the point. */
function radicalInverse(index: number, base: number): number {
  let value = 0;
  for (let rest = index, digit = 1 / base; rest > 0; rest = Math.floor(rest / base), digit /= base)
    value += (rest % base) * digit;
  return value;
}

/** One value from each of equally likely strata, in random order. */
function latinHypercube(row: Float64Array, uniform: () => number): void {
  for (let i = 0; i < row.length; i++) row[i] = (i + uniform()) / row.length;
  for (let i = row.length - 1; i > 0; i--) {
    const k = Math.floor(uniform() * (i + 1));
    [row[i], row[k]] = [row[k], row[i]];
  }
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

/**
 * L Q with an orthonormal Q, which changes no covariance: its first columns span L'w for the weights w of the sums, the
 * others are the steps' own directions, the nearest first, whose surprises last longest.
 */
function turned(L: Float64Array, size: number, sums: readonly (readonly number[])[]): Float64Array {
  const wanted = sums.map((weights) =>
    Float64Array.from({ length: size }, (_, j) => weights.reduce((sum, w, i) => sum + w * L[i * size + j], 0)),
  );
  const own = Array.from({ length: size }, (_, j) => Float64Array.from({ length: size }, (_, i) => (i === j ? 1 : 0)));
  const Q = orthonormal([...wanted, ...own]);
  const result = new Float64Array(size * size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) for (let k = 0; k <= i; k++) result[i * size + j] += L[i * size + k] * Q[j][k];
  return result;
}

/** What is left of a unit vector that the ones before it span but for rounding. */
const DEPENDENT = 1e-6;

/** Gram & Schmidt, each vector cleared twice of those before it; one that adds no direction of its own is left out. */
function orthonormal(vectors: readonly Float64Array[]): Float64Array[] {
  const basis: Float64Array[] = [];
  for (const vector of vectors) {
    const rest = scaledToUnit(vector);
    for (let pass = 0; pass < 2; pass++)
      for (const unit of basis) {
        const along = dot(rest, unit);
        for (let i = 0; i < rest.length; i++) rest[i] -= along * unit[i];
      }
    if (dot(rest, rest) > DEPENDENT ** 2 && basis.length < vector.length) basis.push(scaledToUnit(rest));
  }
  return basis;
}

function scaledToUnit(vector: Float64Array): Float64Array {
  const length = Math.sqrt(dot(vector, vector));
  return vector.map((x) => (length > 0 ? x / length : 0));
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
