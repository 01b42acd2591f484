/**
 * How long fits take and what they reach, on generated series or on those of a file, and how both compare with R's own
 * arima where `Rscript` is on the machine.
 *
 *     npm run bench -- [--series FILE]... [--fits N] [--list]
 *
 * A line of FILE is {"id", "m", "x": [figures]}. `--list` names every fit that R's log-likelihood exceeds by more than
 * 0.01. It times what the build left in dist/.
 */
import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { advise } from '../../dist/advice/advise.js';
import { fitModel } from '../../dist/sarima/fit.js';
import { parseForm } from '../../dist/sarima/form.js';
import { createGenerator } from '../../dist/stats/generator.js';

const FORMS = [
  '(0,1,1)x(0,1,1)',
  '(1,0,0)x(0,1,1)',
  '(1,1,1)x(0,1,1)',
  '(2,1,1)x(1,1,1)',
  '(2,0,0)x(1,0,0)',
  '(0,1,2)x(0,0,1)',
  '(1,0,1)x(0,1,1)',
  '(2,1,2)x(0,1,1)',
];
const PASSES = 3;

const { values: options } = parseArgs({
  options: {
    series: { type: 'string', multiple: true, default: [] },
    fits: { type: 'string', default: '240' },
    list: { type: 'boolean', default: false },
  },
});

/** Seasonal random walks of 40 to 120 figures. */
function generated() {
  return [4, 12].flatMap((m) =>
    Array.from({ length: 24 }, (_, i) => {
      const { normal } = createGenerator(100 * m + i);
      const x = [];
      for (let t = 0; t < 10 * m + 4 * (i % 4); t++)
        x.push(Math.max(1, (t < m ? 200 + 20 * (t % m) : x[t - m]) + 3 * normal()));
      return { id: `made${m}-${i}`, m, x };
    }),
  );
}

/** The i-th fit: a form, plain or log in turn, and in every fourth 2 to 5 figures taken out. */
function drawCases(rows, count) {
  const { uniform } = createGenerator(2026);
  const below = (n) => Math.floor(uniform() * n);
  return Array.from({ length: count }, (_, i) => {
    const brackets = FORMS[i % FORMS.length];
    const gaps = Math.floor(i / FORMS.length) % 4 === 3;
    for (;;) {
      const { id, m, x } = rows[below(rows.length)];
      const form = parseForm(`${brackets}${m}`);
      const { p, d, q, P, D, Q } = form;
      const removed = gaps ? Array.from({ length: 2 + below(4) }, () => 1 + below(x.length - 2)) : [];
      const figures = x.map((value, t) => (removed.includes(t) ? Number.NaN : value));
      const needed = Math.max(2 * m + p + q + P + Q + d + m * D + 3, 12) + removed.length;
      if (x.length < needed) continue;
      const isLog = Math.floor(i / (2 * FORMS.length)) % 2 === 1 && x.every((value) => value > 0);
      return { id, brackets, m, form, gaps, scale: isLog ? 'log' : 'plain', figures };
    }
  });
}

function fitAll(cases) {
  return cases.map(({ form, scale, figures }) => {
    const started = performance.now();
    const fit = fitModel(figures, { form, scale });
    const ms = performance.now() - started;
    if (!Number.isFinite(fit.logLikelihood)) throw new Error('a log-likelihood is not finite');
    return { ms, logLikelihood: fit.logLikelihood, evaluations: fit.evaluations };
  });
}

/** What R's arima says of the same cases, or null without R. */
function fitWithR(cases) {
  const script = path.join(path.dirname(fileURLToPath(import.meta.url)), 'arima.R');
  const input = cases
    .map(({ form: { p, d, q, P, D, Q, m }, scale, figures }) => {
      const scaled = scale === 'log' ? figures.map(Math.log) : figures;
      return [p, d, q, P, D, Q, m, ...scaled.map((value) => (Number.isNaN(value) ? 'NA' : value))].join(' ');
    })
    .join('\n');
  const { status, stdout } = spawnSync('Rscript', [script], { input, encoding: 'utf8', maxBuffer: 1e9 });
  if (status !== 0) return null;
  return stdout
    .trim()
    .split('\n')
    .map((line) => {
      const [seconds, logLikelihood, ...coefficients] = line.trim().split(/\s+/).map(Number);
      return { ms: 1000 * seconds, logLikelihood, coefficients };
    });
}

const sum = (numbers) => numbers.reduce((a, b) => a + b, 0);

const rows =
  options.series.length === 0
    ? generated()
    : options.series.flatMap((file) =>
        readFileSync(file, 'utf8')
          .trim()
          .split('\n')
          .map((line) => JSON.parse(line)),
      );
const cases = drawCases(rows, Number(options.fits));
let results = fitAll(cases);
for (let pass = 0; pass < PASSES; pass++)
  results = fitAll(cases).map((again, i) => (pass === 0 || again.ms < results[i].ms ? again : results[i]));
const reference = fitWithR(cases);

const table = [];
const groups = [...FORMS, null].flatMap((brackets) => [false, true, null].map((gaps) => ({ brackets, gaps })));
for (const { brackets, gaps } of groups) {
  if ((brackets === null) !== (gaps === null)) continue;
  const at = [...cases.keys()].filter(
    (i) => (brackets === null || cases[i].brackets === brackets) && (gaps === null || cases[i].gaps === gaps),
  );
  if (at.length === 0) continue;
  const ms = sum(at.map((i) => results[i].ms));
  const evaluations = sum(at.map((i) => results[i].evaluations));
  const theirs = reference === null ? Number.NaN : sum(at.map((i) => reference[i].ms));
  const below =
    reference === null
      ? Number.NaN
      : at.filter((i) => results[i].logLikelihood < reference[i].logLikelihood - 0.01).length;
  table.push({
    form: brackets === null ? 'all' : `${brackets}${gaps ? ' with gaps' : ''}`,
    fits: at.length,
    'evaluations a fit': (evaluations / at.length).toFixed(1),
    'µs an evaluation': ((1000 * ms) / evaluations).toFixed(2),
    'ms a fit': (ms / at.length).toFixed(3),
    ...(reference === null
      ? {}
      : {
          'R, ms a fit': (theirs / at.length).toFixed(2),
          'times as fast': (theirs / ms).toFixed(1),
          'below R': below,
        }),
  });
}
console.table(table);
console.table(
  [
    [4, 44],
    [12, 110],
  ].map(([season, length]) => {
    const { normal } = createGenerator(season);
    const x = [];
    for (let t = 0; t < length; t++) x.push((t < season ? 200 + 20 * (t % season) : x[t - season]) + 5 * normal());
    const once = () => {
      const started = performance.now();
      advise(x, { season, ahead: season });
      return performance.now() - started;
    };
    const times = Array.from({ length: 41 }, once);
    const warm = times.slice(20).sort((a, b) => a - b);
    return {
      advice: `season ${season}, ${length} figures`,
      'ms, the first': times[0].toFixed(0),
      'ms, middle of 21 after 20': warm[10].toFixed(1),
    };
  }),
);
if (reference === null) console.log('Rscript is not on this machine: nothing to compare with.');
else if (options.list)
  for (const [i, { id, form, scale, gaps, brackets, m }] of cases.entries()) {
    const short = reference[i].logLikelihood - results[i].logLikelihood;
    if (short > 0.01)
      console.log(
        JSON.stringify({
          case: i,
          id,
          form: `${brackets}${m}`,
          scale,
          gaps,
          short,
          orders: form,
          figures: cases[i].figures,
          theirs: reference[i].coefficients,
        }),
      );
  }
