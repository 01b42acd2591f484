/**
 * How well advised models forecast, and how often ranges hold, on series whose next values are known.
 *
 *     node test/bench/advice.mjs --series FILE [--every N]
 *
 * A line of FILE is {"id", "m", "h", "x": [figures], "xx": [the h values that followed]}, all of one season. Prints what
 * each ingredient of the choice and of the ranges adds, coverage of totals, and the forecasts with the priors chosen anew
 * on four fifths of the series and judged on the other. It measures what the build left in dist/.
 */
import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { choose, IN_FAVOUR_OF_LOG, logAdvantage } from '../../dist/advice/choose.js';
import { seasonalModel, seasonlessModel } from '../../dist/advice/forms.js';
import { seasonEvidence } from '../../dist/advice/season.js';
import { calibrate, uncalibrated } from '../../dist/outlook/calibrate.js';
import { makeOutlook } from '../../dist/outlook/outlook.js';
import { fitModel } from '../../dist/sarima/fit.js';
import { predict, predictMeans } from '../../dist/sarima/predict.js';
import { parseScale } from '../../dist/sarima/scale.js';
import { studentQuantile } from '../../dist/stats/student.js';

const { values: options } = parseArgs({
  options: { series: { type: 'string' }, every: { type: 'string', default: '1' } },
});
if (options.series === undefined) throw new Error('which series? --series FILE');
const rows = readFileSync(options.series, 'utf8')
  .trim()
  .split('\n')
  .map((line) => JSON.parse(line))
  .filter((_, i) => i % Number(options.every) === 0);
const season = rows[0].m;

const mean = (numbers) => numbers.reduce((a, b) => a + b, 0) / numbers.length;
const inside = (value, [low, high]) => (value >= low && value <= high ? 1 : 0);
const scaleOf = ({ x }) => mean(x.slice(season).map((value, t) => Math.abs(value - x[t])));
const isPositive = ({ x }) => x.every((value) => value > 0);

/** sMAPE in per cent, and MASE (Hyndman & Koehler 2006). */
function scored(row, forecasts) {
  const at = (f) => mean(row.xx.map((actual, i) => f(actual, forecasts[i])));
  return {
    smape: at((a, f) => (200 * Math.abs(a - f)) / (Math.abs(a) + Math.abs(f))),
    mase: at((a, f) => Math.abs(a - f)) / scaleOf(row),
  };
}
const middles = (row, fit) => Array.from(predictMeans(fit, row.h), parseScale(fit.scale).from);
const summary = (scores) =>
  `${mean(scores.map(({ smape }) => smape)).toFixed(2)} / ${mean(scores.map(({ mase }) => mase)).toFixed(3)}`;

/** The model of `make` fitted plain and, where it can be, on logarithms; null where there are too few figures. */
function bothScales(row, make) {
  try {
    const at = (scale) => fitModel(row.x, { ...make(scale), season });
    return { plain: at('plain'), log: isPositive(row) ? at('log') : null };
  } catch {
    return null;
  }
}
const likelier = ({ plain, log }) =>
  log !== null && logAdvantage(plain, log) + (season >= 8 ? IN_FAVOUR_OF_LOG : 0) > 0 ? log : plain;
const repeated = (row) => row.xx.map((_, i) => row.x[row.x.length - season + (i % season)]);
const hasSeason = (row) => seasonEvidence(isPositive(row) ? row.x.map(Math.log) : row.x, season) >= 1;

const seasonal = rows.map((row) => bothScales(row, (scale) => seasonalModel(season, scale)));
const seasonless = rows.map((row) => bothScales(row, (scale) => seasonlessModel(season, scale)));
const chosen = rows.map((row) => choose(Float64Array.from(row.x), { season, ahead: row.h }));
const judged = (pick) =>
  summary(rows.map((row, i) => scored(row, seasonal[i] === null ? repeated(row) : middles(row, pick(i, row)))));
console.table({
  'last year’s figure': summary(rows.map((row) => scored(row, repeated(row)))),
  'seasonal form, plain': judged((i) => seasonal[i].plain),
  'seasonal form, logarithms where they can be': judged((i) => seasonal[i].log ?? seasonal[i].plain),
  'the likelier of the two': judged((i) => likelier(seasonal[i])),
  'and a form without a season where there is none': judged((i, row) =>
    likelier((hasSeason(row) ? seasonal : seasonless)[i]),
  ),
  'and the veto: the advice': judged((i) => chosen[i].fit),
});

/** Without a factor, or with Student's t or all of it taken away: spread and degrees of freedom. */
const WITHOUT = {
  'the calibrated ranges': ({ spread, freedom }) => [spread, freedom],
  'without freedom': ({ spread, freedom, factors }) => [spread.map((s) => s / factors.freedom), freedom],
  'without estimates': ({ spread, freedom, factors }) => [spread.map((s, h) => s / factors.estimates[h]), freedom],
  'without recent': ({ spread, freedom, factors }) => [spread.map((s) => s / factors.recent), freedom],
  'without horizon': ({ spread, freedom, factors }) => [spread.map((s, h) => s / factors.horizon[h]), freedom],
  'normal, not Student’s t': ({ spread }) => [spread, Number.POSITIVE_INFINITY],
  'the bare model': (_, prediction) => [uncalibrated(prediction).spread, Number.POSITIVE_INFINITY],
};
const ranges = {};
for (const [name, without] of Object.entries(WITHOUT)) {
  const found = rows.map((row, i) => {
    const { fit } = chosen[i];
    const { from } = parseScale(fit.scale);
    const prediction = predict(fit, row.h);
    const [spread, freedom] = without(calibrate(fit, prediction), prediction);
    const floor = row.x.every((value) => value >= 0) ? 0 : Number.NEGATIVE_INFINITY;
    const range = (level, h) =>
      [1 - level, level].map((p) =>
        Math.max(from(prediction.mean[h] + studentQuantile(p, freedom) * spread[h]), floor),
      );
    const at = (f) => mean(row.xx.map((actual, h) => f(actual, h)));
    return {
      80: at((a, h) => inside(a, range(0.9, h))),
      95: at((a, h) => inside(a, range(0.975, h))),
      score: at((a, h) => {
        const [low, high] = range(0.975, h);
        return (high - low + 40 * Math.max(low - a, 0, a - high)) / scaleOf(row);
      }),
    };
  });
  ranges[name] = {
    '80% holds': (100 * mean(found.map((each) => each[80]))).toFixed(1),
    '95% holds': (100 * mean(found.map((each) => each[95]))).toFixed(1),
    'interval score': mean(found.map(({ score }) => score)).toFixed(2),
  };
}
console.table(ranges);

const SPANS = { 'two periods': [0, 2], 'the year': [0, season], 'all ahead': [0, rows[0].h] };
const totals = Object.fromEntries(Object.keys(SPANS).map((name) => [name, { 80: [], 95: [] }]));
rows.forEach((row, i) => {
  const steps = Object.values(SPANS).map(([from, to]) => Array.from({ length: to - from }, (_, k) => from + k));
  const spans = steps.map((each) => ({ kind: 'ahead', year: null, known: 0, steps: each }));
  const holdAtZero = row.x.every((value) => value >= 0);
  makeOutlook(chosen[i].fit, { ahead: row.h, seed: 1, holdAtZero, spans }).totals.forEach((total, k) => {
    const actual = steps[k].reduce((sum, h) => sum + row.xx[h], 0);
    const into = Object.values(totals)[k];
    into[80].push(inside(actual, total.range80));
    into[95].push(inside(actual, total.range95));
  });
});
console.table(
  Object.fromEntries(
    Object.entries(totals).map(([name, held]) => [
      name,
      { '80% holds': (100 * mean(held[80])).toFixed(1), '95% holds': (100 * mean(held[95])).toFixed(1) },
    ]),
  ),
);

/** Settings of the seasonal form's priors to choose from; everything else of the advice stays as it is. */
function grid() {
  const of = (centre, spread) => ({ centre, spread, on: 'coefficient' });
  const all = [];
  if (season === 4)
    for (const phi of [0.88, 0.9, 0.93])
      for (const spread of [0.02, 0.05])
        for (const Theta of [-0.75, -0.85])
          for (const theta of [-0.4, -0.3])
            for (const [plain, log] of [
              [0.5, 4],
              [1, 4],
              [2, 8],
            ])
              all.push((isLog) => ({
                coefficients: {
                  phi1: of(phi, spread),
                  theta1: of(theta, 0.3),
                  theta2: of(0.1, 0.2),
                  Theta1: of(isLog ? Theta + 0.1 : Theta, 0.2),
                },
                ridge: isLog ? log : plain,
              }));
  if (season === 12)
    for (const theta of [-0.6, -0.7])
      for (const spread of [0.1, 0.2])
        for (const theta2 of [0, 0.1])
          for (const Spread of [0.1, 0.2])
            for (const plain of [32, 64])
              all.push((isLog) => ({
                coefficients: {
                  phi1: of(0.95, 0.02),
                  theta1: of(theta, spread),
                  theta2: of(theta2, 0.1),
                  Theta1: of(-0.7, Spread),
                },
                ridge: isLog ? 16 : plain,
              }));
  return all;
}
const FOLDS = 5;
const settings = grid();
if (settings.length > 0) {
  const scores = settings.map((priors) =>
    rows.map((row, i) => {
      if (seasonal[i] === null) return scored(row, repeated(row));
      if (!hasSeason(row)) return scored(row, middles(row, likelier(seasonless[i])));
      const make = (scale) => ({ ...seasonalModel(season, scale), priors: priors(scale === 'log') });
      return scored(row, middles(row, likelier(bothScales(row, make))));
    }),
  );
  const judgedOn = Array.from({ length: FOLDS }, (_, fold) => {
    const loss = (of) => {
      const others = of.filter((_, i) => i % FOLDS !== fold);
      return mean(others.map(({ smape }) => smape)) / 14 + mean(others.map(({ mase }) => mase));
    };
    const best = scores.reduce((a, b) => (loss(b) < loss(a) ? b : a));
    return best.filter((_, i) => i % FOLDS === fold);
  });
  console.log(`priors chosen in ${FOLDS} folds out of ${settings.length} settings: ${summary(judgedOn.flat())}`);
}
