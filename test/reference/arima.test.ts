/** Seasonal ARIMA fits and forecasts against R's own arima and predict, called live on R's data sets. */
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { fitModel } from '../../src/sarima/fit.js';
import { parseForm } from '../../src/sarima/form.js';
import { predict } from '../../src/sarima/predict.js';
import { denseLogLikelihood } from '../sarima/dense.js';
import { openR, type R } from './r.js';

let r: R;
beforeAll(async () => {
  r = await openR();
}, 180_000);
afterAll(() => r.close());

const SEASONAL = [
  '(0,1,1)x(0,1,1)',
  '(1,0,0)x(0,1,1)',
  '(0,1,2)x(0,1,1)',
  '(1,1,0)x(0,1,1)',
  '(0,1,1)x(1,0,0)',
  '(1,0,1)x(0,1,1)',
];
const YEARLY = ['(1,0,0)', '(2,0,0)', '(0,1,1)', '(1,1,0)', '(0,1,2)', '(0,0,2)'];

/** Data set, season, scale, forms, and the positions at which figures are taken out (from 1). */
const CASES: readonly (readonly [string, number, 'plain' | 'log', readonly string[], readonly number[]])[] = [
  ['AirPassengers', 12, 'log', SEASONAL, []],
  ['AirPassengers', 12, 'plain', SEASONAL.slice(0, 2), [30, 31, 77]],
  ['UKgas', 4, 'log', SEASONAL, []],
  ['UKgas', 4, 'log', SEASONAL, [12, 50, 51, 90]],
  ['JohnsonJohnson', 4, 'log', SEASONAL, []],
  ['JohnsonJohnson', 4, 'plain', SEASONAL, []],
  ['austres', 4, 'plain', SEASONAL, []],
  ['presidents', 4, 'plain', SEASONAL, []],
  ['USAccDeaths', 12, 'plain', SEASONAL, []],
  ['nottem', 12, 'plain', SEASONAL.slice(0, 3), []],
  ['LakeHuron', 1, 'plain', YEARLY, []],
  ['LakeHuron', 1, 'plain', YEARLY.slice(0, 3), [20, 21, 60]],
  ['lh', 1, 'plain', YEARLY, []],
];

/** Where R's likelihood can be beaten or R's start covariance is inexact, only the likelihood is compared. */
const EQUAL = 1e-3;
const AHEAD = 4;
let compared = 0;

describe.each(CASES)('%s, season %i, %s', (name, m, scale, forms, gaps) => {
  test.each(forms)(`%s${gaps.length > 0 ? ' with gaps' : ''}`, async (brackets) => {
    const text = m === 1 ? brackets : `${brackets}${m}`;
    const { p, d, q, P, D, Q } = parseForm(text);
    const constant = d + D === 0;
    const [loglik, code, ...numbers] = await r.numbers(`{
      x <- as.numeric(${name}); x[c(${gaps.join(',') || '0'})] <- NA
      ${scale === 'log' ? 'x <- log(x)' : ''}
      s <- list(order = c(${P},${D},${Q}), period = ${m})
      fit <- tryCatch(arima(x, c(${p},${d},${q}), seasonal = s, method = "ML", include.mean = ${constant ? 'TRUE' : 'FALSE'},
        optim.control = list(reltol = 1e-12, maxit = 500)), error = function(e) NULL)
      if (is.null(fit)) c(NA, 1) else {
        f <- predict(fit, ${AHEAD})
        c(fit$loglik, fit$code, coef(fit), sqrt(diag(fit$var.coef)), f$pred, f$se)
      } }`);
    if (Number.isNaN(loglik) || code !== 0) return;
    const x = await r.numbers(`{ x <- as.numeric(${name}); x[c(${gaps.join(',') || '0'})] <- NA; x }`);
    const fit = fitModel(x, { form: text, scale, constant });
    if (fit.logLikelihood < loglik - 0.01) {
      // Near the unit circle R's start covariance is inexact: the dense density at R's own estimates judges.
      const at = (from: number, count: number) => numbers.slice(from, from + count);
      const theirs = { phi: at(0, p), theta: at(p, q), Phi: at(p + q, P), Theta: at(p + q + P, Q) };
      const scaled = scale === 'log' ? x.map(Math.log) : x;
      const dense = denseLogLikelihood(parseForm(text), theirs, scaled, constant ? [x.map(() => 1)] : []);
      expect(fit.logLikelihood).toBeGreaterThan(Number.isFinite(dense) ? dense - 0.01 : Number.NEGATIVE_INFINITY);
      return;
    }
    if (Math.abs(fit.logLikelihood - loglik) > EQUAL) return;
    compared++;
    const k = fit.coefficients.length;
    const [values, errors] = [numbers.slice(0, k), numbers.slice(k, 2 * k)];
    const [means, spreads] = [numbers.slice(2 * k, 2 * k + AHEAD), numbers.slice(2 * k + AHEAD)];
    fit.coefficients.forEach(({ value, name: coefficient }, i) => {
      if (errors[i] > 0) expect(Math.abs(value - values[i]), coefficient).toBeLessThan(0.02 * errors[i]);
    });
    const ours = predict(fit, AHEAD);
    for (let h = 0; h < AHEAD; h++) {
      expect(Math.abs(ours.mean[h] - means[h])).toBeLessThan(0.01 * spreads[h]);
      expect(Math.abs(ours.standardError[h] / spreads[h] - 1)).toBeLessThan(0.005);
    }
  });
});

test('enough of these fits agree with R’s in likelihood for their numbers to have been compared', () => {
  expect(compared).toBeGreaterThanOrEqual(40);
});

describe('seasons of every length against R', () => {
  /** Season, figures, forms. */
  const SEASONS: readonly (readonly [number, string, readonly string[]])[] = [
    [1, 'as.numeric(lh)', ['(1,0,1)', '(3,0,0)']],
    [2, 'colSums(matrix(log(AirPassengers), 6))', ['(0,1,1)x(0,1,1)', '(1,0,0)x(0,1,1)']],
    [4, 'log(as.numeric(UKgas))', ['(0,1,1)x(0,1,1)', '(1,0,1)x(0,1,1)']],
    [12, 'as.numeric(USAccDeaths)', ['(0,1,1)x(0,1,1)', '(1,0,1)x(0,1,1)']],
    [13, 'as.numeric(co2)[1:156]', ['(0,1,1)x(0,1,1)', '(1,1,0)x(0,1,1)']],
    [52, 'as.numeric(sunspot.month)[1:220]', ['(0,1,1)x(0,0,1)', '(1,0,0)x(0,1,0)', '(1,1,1)x(0,1,0)']],
  ];
  test.each(SEASONS.flatMap(([m, data, forms]) => forms.map((form) => [m, form, data] as const)))(
    'm = %i, %s',
    async (m, brackets, data) => {
      const text = m === 1 ? brackets : `${brackets}${m}`;
      const { p, d, q, P, D, Q } = parseForm(text);
      const x = await r.numbers(data);
      const [loglik, ...numbers] = await r.numbers(`{
        f <- arima(${data}, c(${p},${d},${q}), seasonal = list(order = c(${P},${D},${Q}), period = ${m}), method = "ML",
          include.mean = ${d + D === 0 ? 'TRUE' : 'FALSE'}, optim.control = list(reltol = 1e-12, maxit = 500))
        c(f$loglik, coef(f), sqrt(diag(f$var.coef))) }`);
      const fit = fitModel(x, { form: text });
      expect(fit.logLikelihood).toBeGreaterThan(loglik - 0.01);
      if (fit.logLikelihood > loglik + EQUAL) return;
      fit.coefficients.forEach(({ value, standardError, name }, i) => {
        const error = numbers[fit.coefficients.length + i];
        expect(Math.abs(value - numbers[i]), name).toBeLessThan(0.02 * error);
        expect(Math.abs((standardError ?? 0) / error - 1), `${name}’s error`).toBeLessThan(0.03);
      });
    },
  );
});

describe('regressors against R’s arima(xreg =)', () => {
  test.each([
    [
      'log(as.numeric(UKgas))',
      '(0,1,1)x(0,1,1)4',
      { step: 'as.numeric(time(UKgas) >= 1970)', blip: 'as.numeric(abs(time(UKgas) - 1980.25) < 0.01)' },
    ],
    // The seat belt law, a published example: Harvey & Durbin, Journal of the Royal Statistical Society A 149 (1986).
    [
      'log(as.numeric(UKDriverDeaths))',
      '(1,0,0)x(1,0,0)12',
      { law: 'as.numeric(Seatbelts[, "law"])', petrol: 'as.numeric(Seatbelts[, "PetrolPrice"])' },
    ],
  ])('%s, %s', async (data, text, columns) => {
    const { p, d, q, P, D, Q, m } = parseForm(text);
    const names = Object.keys(columns);
    const [loglik, ...numbers] = await r.numbers(`{
      f <- arima(${data}, c(${p},${d},${q}), seasonal = list(order = c(${P},${D},${Q}), period = ${m}), method = "ML",
        xreg = cbind(${Object.values(columns).join(', ')}), optim.control = list(reltol = 1e-14, maxit = 1000))
      c(f$loglik, coef(f), sqrt(diag(f$var.coef))) }`);
    const regressors = await Promise.all(
      names.map(async (name) => ({ name, values: await r.numbers(columns[name as keyof typeof columns] as string) })),
    );
    const fit = fitModel(await r.numbers(data), { form: text, regressors });
    expect(fit.logLikelihood).toBeGreaterThan(loglik - 1e-3);
    if (fit.logLikelihood > loglik + 0.01) return;
    fit.coefficients.forEach(({ value, standardError, name }, i) => {
      const error = numbers[fit.coefficients.length + i];
      expect(Math.abs(value - numbers[i]), name).toBeLessThan(0.05 * error);
      expect(Math.abs((standardError ?? 0) / error - 1), `${name}’s error`).toBeLessThan(0.05);
    });
  });
});

describe('printed values, to their last printed digit', () => {
  /** Each: R expression, options, [name, value, standard error], σ², log-likelihood, source. */
  const PRINTED = [
    [
      'AirPassengers',
      { form: '(0,1,1)x(0,1,1)12', scale: 'log' },
      [
        ['theta1', -0.4018, 0.0896],
        ['Theta1', -0.5569, 0.0731],
      ],
      0.001348,
      244.7,
      1e-6,
      'R, arima; Box & Jenkins’ series G',
    ],
    [
      'USAccDeaths',
      { form: '(0,1,1)x(0,1,1)12' },
      [
        ['theta1', -0.4303, 0.1228],
        ['Theta1', -0.5528, 0.1784],
      ],
      99347,
      -425.44,
      10,
      'R’s help page for arima',
    ],
    [
      'presidents',
      { form: '(3,0,0)', constant: true },
      [
        ['phi1', 0.7496, 0.0936],
        ['phi2', 0.2523, 0.114],
        ['phi3', -0.189, 0.0946],
        ['constant', 56.22, 4.28],
      ],
      81.12,
      -414.08,
      0.02,
      'R’s help page for arima',
    ],
    [
      'lh',
      { form: '(3,0,0)', constant: true },
      [
        ['phi1', 0.6448, 0.1394],
        ['phi2', -0.0634, 0.1668],
        ['phi3', -0.2198, 0.1421],
        ['constant', 2.3931, 0.0963],
      ],
      0.1787,
      -27.09,
      1e-4,
      'R’s help page for arima',
    ],
  ] as const;

  test.each(PRINTED)('%s', async (name, options, coefficients, variance, loglik, slack) => {
    const fit = fitModel(await r.numbers(name), options);
    for (const [key, value, error] of coefficients) {
      const found = fit.coefficients.find((coefficient) => coefficient.name === key);
      // R's search stops a little early, so an estimate may differ by a hundredth of its standard error.
      expect(Math.abs((found?.value ?? Number.NaN) - value), key).toBeLessThan(Math.max(6e-5, 0.01 * error));
      expect(Math.abs((found?.standardError ?? Number.NaN) - error), `${key}’s error`).toBeLessThan(
        Math.max(6e-5, 0.01 * error),
      );
    }
    expect(Math.abs(fit.innovationVariance - variance)).toBeLessThan(slack);
    expect(Math.abs(fit.logLikelihood - loglik)).toBeLessThan(0.051);
  });

  test('LakeHuron with year − 1920 as regressor', async () => {
    const values = await r.numbers('LakeHuron');
    const year = await r.numbers('time(LakeHuron) - 1920');
    const fit = fitModel(values, { form: '(2,0,0)', constant: true, regressors: [{ name: 'year', values: year }] });
    // R's help page for arima.
    const printed = [
      ['phi1', 1.0048, 0.0976],
      ['phi2', -0.2913, 0.1004],
      ['constant', 579.0993, 0.237],
      ['year', -0.0216, 0.0081],
    ] as const;
    printed.forEach(([name, value, error], i) => {
      expect(fit.coefficients[i].name).toBe(name);
      expect(Math.abs(fit.coefficients[i].value - value)).toBeLessThan(Math.max(6e-5, 0.01 * error));
      expect(Math.abs((fit.coefficients[i].standardError ?? 0) - error)).toBeLessThan(Math.max(6e-5, 0.01 * error));
    });
    expect(fit.innovationVariance).toBeCloseTo(0.4566, 3);
    expect(fit.logLikelihood).toBeCloseTo(-101.2, 1);
  });
});
