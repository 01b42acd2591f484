/** Each step's distribution by itself, without paths: for the many forecasts behind a track record. */
import type { Fit } from '../sarima/fit.js';
import { predict } from '../sarima/predict.js';
import { parseScale } from '../sarima/scale.js';
import { studentQuantile } from '../stats/student.js';
import { calibrate } from './calibrate.js';
import type { Expectation } from './outlook.js';

/** Levels over which a mean is taken: enough for its third digit. */
const LEVELS = 100;

/** The same ranges as those of the outlook's periods; means and all in the user's units. */
export function stepExpectations(fit: Fit, ahead: number, holdAtZero: boolean): Expectation[] {
  const { from } = parseScale(fit.scale);
  const prediction = predict(fit, ahead);
  const { spread, freedom } = calibrate(fit, prediction);
  const scores = scoresOf(freedom);
  const [outer, inner] = [studentQuantile(0.975, freedom), studentQuantile(0.9, freedom)];
  return Array.from(prediction.mean, (centre, h) => {
    const at = (score: number) => {
      const value = from(centre + score * spread[h]);
      return holdAtZero ? Math.max(value, 0) : value;
    };
    return {
      expected: scores.reduce((sum, score) => sum + at(score), 0) / LEVELS,
      middle: at(0),
      range80: [at(-inner), at(inner)],
      range95: [at(-outer), at(outer)],
    };
  });
}

const memo = new Map<number, Float64Array>();

/** Student's quantiles at the middles of LEVELS equal slices. */
function scoresOf(freedom: number): Float64Array {
  const known = memo.get(freedom);
  if (known !== undefined) return known;
  const scores = Float64Array.from({ length: LEVELS }, (_, k) => studentQuantile((k + 0.5) / LEVELS, freedom));
  memo.set(freedom, scores);
  return scores;
}
