/**
 * The likelihood of one prepared series as a least squares problem in the free numbers z, by the fastest of the exact
 * ways to it.
 */
import { type Arma, createArma, expand } from './arma.js';
import { difference } from './difference.js';
import { diffuseStart } from './diffuse.js';
import { createFilter, type FilterSpace, filterErrors } from './filter.js';
import { type Form, formText } from './form.js';
import { createLikelihood, type Innovations, predictionErrors } from './likelihood.js';
import type { Problem } from './minimize.js';
import { type ConcentratedSpace, concentrate, createConcentrated, minusLogLikelihood } from './objective.js';
import { toCoefficients } from './partial.js';
import { differenceWeights } from './polynomial.js';
import { differencedColumns, type Prepared } from './prepare.js';
import type { Penalty } from './priors.js';

export interface Engine {
  readonly arma: Arma;
  readonly innovations: Innovations;
  readonly concentrated: ConcentratedSpace;
  /** Errors that count: those of the differenced series less the missing figures. */
  readonly observations: number;
  readonly problem: Problem;
}

/**
 * The engine for searching: gaps as unknown figures of the fast recursion while that is the shorter way. Throws an Error
 * where the gaps leave a part of the season unknown.
 */
export function createEngine(form: Form, prepared: Prepared, penalty: Penalty): Engine {
  const arma = createArma(form);
  const { gaps, columns, startColumns } = prepared;
  const delta = differenceWeights(form);
  if (gaps.length > 0 && !diffuseStart(columns[0], delta).settled)
    throw new Error(
      `model ${formText(form)}: the figures leave a part of the season unknown; every position of the season needs a figure`,
    );
  if (gaps.length * (arma.r + gaps.length / 2) > (arma.r + delta.length) ** 2)
    return createFilterEngine(form, prepared, penalty);
  const unknowns = gaps.map((t) => indicator(form, columns[0].length, t));
  const [series, ...regressors] = gaps.length > 0 ? startColumns : differencedColumns(form, columns);
  const space = createLikelihood(arma, [series, ...unknowns, ...regressors]);
  return engineOf(arma, space, () => predictionErrors(space), penalty, unknowns.length);
}

/** A figure's own column, differenced: 1 in its period, 0 in all others. */
export function indicator({ d, D, m }: Form, length: number, period: number): Float64Array {
  const column = new Float64Array(length);
  column[period] = 1;
  return difference(column, d, D, m);
}

/** The engine on the undifferenced series, whatever its gaps; its errors are those of the figures themselves. */
export function createFilterEngine(
  form: Form,
  prepared: Prepared,
  penalty: Penalty,
): Engine & { readonly filter: FilterSpace } {
  const arma = createArma(form);
  const filter = createFilter(arma, prepared.columns);
  return { ...engineOf(arma, filter, () => filterErrors(filter), penalty, 0), filter };
}

/**
 * The engine for figures that are known as a distribution only: `startColumns` with the means in their place, and
 * beside them the directions of their spread, differenced; what is minimized is the expected value.
 */
export function createExpectedEngine(
  form: Form,
  startColumns: readonly Float64Array[],
  spreads: readonly Float64Array[],
  penalty: Penalty,
): Engine {
  const arma = createArma(form);
  const space = createLikelihood(arma, [...startColumns, ...spreads]);
  return engineOf(arma, space, () => predictionErrors(space), penalty, 0, spreads.length);
}

function engineOf(
  arma: Arma,
  innovations: Innovations,
  run: () => boolean,
  penalty: Penalty,
  unknowns: number,
  spreads = 0,
): Engine {
  const ridge = new Float64Array(innovations.columns.length - 1 - spreads);
  ridge.set(penalty.ridge, unknowns);
  const concentrated = createConcentrated(innovations.count, ridge, unknowns, spreads);
  const observations = innovations.count - unknowns;
  const rows = new Float64Array(concentrated.residuals.length);
  const penalties = new Float64Array(penalty.rows);
  const evaluate = (z: Float64Array) => {
    toCoefficients(arma.blocks, z, arma.coefficients);
    expand(arma);
    if (!run() || !concentrate(concentrated, innovations)) return Number.POSITIVE_INFINITY;
    // log Σ(e/√f)² + mean log f as the log of one sum of squares.
    const logDeterminant = innovations.logDeterminant + concentrated.logInformation;
    const share = Math.exp(logDeterminant / (2 * observations));
    const { residuals } = concentrated;
    for (let t = 0; t < rows.length; t++) rows[t] = residuals[t] * share;
    return minusLogLikelihood(innovations, concentrated) + penalty.fill(penalties, z, arma.coefficients);
  };
  return {
    arma,
    innovations,
    concentrated,
    observations,
    problem: { parameters: arma.coefficients.length, weight: observations, rows, penalties, evaluate },
  };
}
