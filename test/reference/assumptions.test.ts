/** The checks of assumptions against R, called live on R's data sets, and against what was published of these. */
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { checkAssumptions } from '../../src/assumptions/assumptions.js';
import { checkDifferencing } from '../../src/assumptions/differencing.js';
import { checkLeftover } from '../../src/assumptions/leftover.js';
import { checkNormality } from '../../src/assumptions/normality.js';
import { checkOutliers } from '../../src/assumptions/outliers.js';
import { checkSpread } from '../../src/assumptions/spread.js';
import { checkStability } from '../../src/assumptions/stability.js';
import { fitModel } from '../../src/sarima/fit.js';
import { parseForm, polynomialCoefficients } from '../../src/sarima/form.js';
import { chiSquaredUpperTail } from '../../src/stats/chi-squared.js';
import { fUpperTail } from '../../src/stats/f.js';
import { normalQuantile } from '../../src/stats/normal.js';
import { openR, type R } from './r.js';

let r: R;
beforeAll(async () => {
  r = await openR();
}, 180_000);
afterAll(() => r.close());

const relative = (found: number | null, theirs: number) => Math.abs((found ?? Number.NaN) / theirs - 1);
const vector = (values: ArrayLike<number>) =>
  `c(${Array.from(values, (value) => (Number.isNaN(value) ? 'NA' : value)).join(',')})`;

describe('distributions, to 10 digits', () => {
  test('pchisq', async () => {
    for (const freedom of [1, 2, 3.5, 7, 24, 150]) {
      const points = [0.01, 0.5, 1, freedom * 0.9, freedom, freedom * 1.2, freedom + 30, 4 * freedom];
      const theirs = await r.numbers(`pchisq(${vector(points)}, ${freedom}, lower.tail = FALSE)`);
      points.forEach((x, i) => {
        expect(relative(chiSquaredUpperTail(x, freedom), theirs[i]), `${x}, ${freedom}`).toBeLessThan(1e-10);
      });
    }
  });
  test('pf', async () => {
    for (const [above, below] of [
      [1, 3],
      [1, 36],
      [13, 13],
      [15, 22.5],
      [4, 400],
      [300, 250],
    ]) {
      const points = [0.01, 0.5, 0.95, 1, 1.3, 3, 12, 60];
      const theirs = await r.numbers(`pf(${vector(points)}, ${above}, ${below}, lower.tail = FALSE)`);
      points.forEach((x, i) => {
        // R’s own tail below 1e-40 is not asked for.
        if (theirs[i] > 1e-40) expect(relative(fUpperTail(x, above, below), theirs[i]), `${x}`).toBeLessThan(1e-10);
      });
    }
  });
  test('qnorm', async () => {
    const p = [1e-12, 0.001, 0.025, 0.3, 0.5, 0.9, 0.999];
    const theirs = await r.numbers(`qnorm(${vector(p)})`);
    p.forEach((level, i) => {
      expect(Math.abs(normalQuantile(level) - theirs[i])).toBeLessThan(1e-13);
    });
  });
});

/** Data set, scale, model, season. */
const CASES: readonly (readonly [string, 'plain' | 'log', string, number])[] = [
  ['UKgas', 'log', '(0,1,1)x(0,1,1)4', 4],
  ['JohnsonJohnson', 'plain', '(0,1,1)x(0,1,1)4', 4],
  ['austres', 'plain', '(0,1,1)x(0,1,1)4', 4],
  ['AirPassengers', 'log', '(0,1,1)x(0,1,1)12', 12],
  ['AirPassengers', 'plain', '(0,1,1)', 12],
  ['USAccDeaths', 'plain', '(0,1,1)x(0,1,1)12', 12],
  ['nottem', 'plain', '(1,0,0)x(0,1,1)12', 12],
  ['LakeHuron', 'plain', '(2,0,0)', 1],
  ['lh', 'plain', '(1,0,0)', 1],
];

async function fitOf([name, scale, form, season]: (typeof CASES)[number]) {
  const fit = fitModel(await r.numbers(name), { form, scale, season });
  return { fit, z: vector(fit.standardizedResiduals.filter((value) => !Number.isNaN(value))) };
}

describe.each(CASES)('%s, %s, %s', (...which) => {
  const [name, scale, form, season] = which;

  test('leftover pattern: Box.test(type = "Ljung-Box", fitdf = k), and what the seasonal lag adds to it', async () => {
    const { fit, z } = await fitOf(which);
    const { statistic, pValue, details } = checkLeftover(fit);
    const k = polynomialCoefficients(fit.form);
    const [q, p, n] = await r.numbers(`{ z <- ${z}; n <- length(z)
      b <- Box.test(z, max(${k} + 3, floor(min(2 * ${season}, n / 5))), "Ljung-Box", fitdf = ${k}); c(b$statistic, b$p.value, n) }`);
    expect(details.residuals).toBe(n);
    expect(relative(statistic, q)).toBeLessThan(1e-9);
    expect(Math.abs((pValue ?? Number.NaN) - p)).toBeLessThan(1e-10);
    if (season === 1) return;
    const [seasonal, correlation] = await r.numbers(`{ z <- ${z}
      q <- Box.test(z, ${season}, "Ljung-Box")$statistic - Box.test(z, ${season} - 1, "Ljung-Box")$statistic
      c(q, acf(z, ${season}, plot = FALSE)$acf[${season} + 1]) }`);
    expect(Math.abs(details.seasonalStatistic - seasonal)).toBeLessThan(1e-9 * q);
    expect(Math.abs(details.seasonalAutocorrelation - correlation)).toBeLessThan(1e-10);
  });

  test('even spread: Box.test on the squares, and the ratio of the last and first third written out', async () => {
    const { fit, z } = await fitOf(which);
    const { statistic, pValue, details } = checkSpread(fit);
    const [q, p, ratio, ratioP] = await r.numbers(`{ z <- ${z}; n <- length(z)
      b <- Box.test(z^2, max(3, floor(min(2 * ${season}, n / 5))), "Ljung-Box")
      h <- floor(n / 3); f <- sum(tail(z, h)^2) / sum(head(z, h)^2)
      c(b$statistic, b$p.value, f, 2 * min(pf(f, h, h), pf(f, h, h, lower.tail = FALSE))) }`);
    expect(relative(statistic, q)).toBeLessThan(1e-9);
    expect(Math.abs((pValue ?? Number.NaN) - p)).toBeLessThan(1e-10);
    expect(relative(details.ratio, ratio)).toBeLessThan(1e-10);
    expect(relative(details.ratioPValue, ratioP)).toBeLessThan(1e-9);
  });

  test('normal surprises: the moments written out', async () => {
    const { fit, z } = await fitOf(which);
    const { statistic, details } = checkNormality(fit);
    const [jb, skewness, kurtosis] = await r.numbers(`{ z <- ${z}; e <- z - mean(z); s <- mean(e^3) / mean(e^2)^1.5
      k <- mean(e^4) / mean(e^2)^2 - 3; c(length(z) / 6 * (s^2 + k^2 / 4), s, k) }`);
    expect(relative(statistic, jb)).toBeLessThan(1e-9);
    expect(Math.abs(details.skewness - skewness)).toBeLessThan(1e-10);
    expect(Math.abs(details.excessKurtosis - kurtosis)).toBeLessThan(1e-10);
  });

  test('differencing: KPSS written out on the differences', async () => {
    const { fit } = await fitOf(which);
    const { d, D, m } = parseForm(form);
    const { statistic } = checkDifferencing(fit);
    const [eta] = await r.numbers(`{ w <- ${scale === 'log' ? `log(as.numeric(${name}))` : `as.numeric(${name})`}
      ${d > 0 ? `w <- diff(w, differences = ${d})` : ''}
      ${D > 0 ? `w <- diff(w, lag = ${m}, differences = ${D})` : ''}
      n <- length(w); e <- w - mean(w); l <- floor(12 * (n / 100)^0.25)
      g <- acf(w, l, type = "covariance", plot = FALSE)$acf
      sum(cumsum(e)^2) / n^2 / (g[1] + 2 * sum((1 - 1:l / (l + 1)) * g[-1])) }`);
    expect(relative(statistic, eta)).toBeLessThan(1e-8);
  });

  test('stable over time: arima’s own residuals with the early coefficients fixed', async () => {
    const { fit } = await fitOf(which);
    const { p, d, q, P, D, Q, m } = fit.form;
    const scaled = (await r.numbers(name)).map(scale === 'log' ? Math.log : Number);
    const n = scaled.length;
    const cut = Math.floor((2 * n) / 3);
    const early = fitModel(scaled.slice(0, cut), { form, fittedBy: 'shrunk', season });
    const fixed = early.coefficients.map(({ value }) => value);
    const [before, after] = await r.numbers(`{ f <- arima(${vector(scaled)}, c(${p},${d},${q}),
        seasonal = list(order = c(${P},${D},${Q}), period = ${m}), include.mean = ${fit.constant ? 'TRUE' : 'FALSE'},
        fixed = ${vector(fixed)}, transform.pars = FALSE, method = "ML")
      e <- f$residuals^2; c(mean(e[${d + m * D + 1}:${cut}]), mean(e[${cut + 1}:${n}])) }`);
    const { details, statistic, pValue } = checkStability(fit);
    expect(relative(details.ratio, after / before)).toBeLessThan(1e-3);
    const n1 = cut - d - m * D;
    const k = polynomialCoefficients(fit.form) + (fit.constant ? 1 : 0);
    // Akaike’s factor takes the ratio down; the degrees of freedom are n₂ and n₁ − k.
    expect(relative(statistic, (details.ratio * (n1 - k)) / (n1 + k))).toBeLessThan(1e-12);
    const [theirs] = await r.numbers(`pf(${statistic}, ${n - cut}, ${n1 - k}, lower.tail = FALSE)`);
    expect(relative(pValue, theirs)).toBeLessThan(1e-9);
  });
});

describe('outliers', () => {
  test('UK gas, 1970: the third and fourth quarters, with the sizes and errors of arima(xreg =)', async () => {
    // The disrupted supply of these two quarters is told by Durbin & Koopman, "Time Series Analysis by State Space
    // Methods", in the section on UK gas consumption.
    const fit = fitModel(await r.numbers('UKgas'), { form: '(0,1,1)x(0,1,1)4', scale: 'log' });
    const { outliers } = checkOutliers(fit);
    const order = 'c(0,1,1), seasonal = list(order = c(0,1,1), period = 4), method = "ML"';
    const [third, fourth] = await r.numbers('which(abs(time(UKgas) - 1970.625) < 0.2) - 1');
    expect(outliers.map(({ period, kind }) => [period, kind])).toEqual([
      [third, 'additive'],
      [fourth, 'additive'],
    ]);
    const [a, b, errorA, errorB, now, ...then] = await r.numbers(`{ y <- log(as.numeric(UKgas)); n <- length(y)
      x <- cbind(1:n == ${third + 1}, 1:n == ${fourth + 1}) + 0; control <- list(reltol = 1e-14)
      f <- arima(y, ${order}, xreg = x, optim.control = control); se <- sqrt(diag(f$var.coef))
      alone <- sapply(1:2, function(i) exp(predict(arima(y, ${order}, xreg = x[, i], optim.control = control), 1, newxreg = 0)$pred))
      c(coef(f)[3:4], se[3:4], exp(predict(arima(y, ${order}, optim.control = control), 1)$pred), alone) }`);
    [a, b].forEach((size, i) => {
      expect(relative(outliers[i].size, size)).toBeLessThan(1e-3);
      expect(relative(outliers[i].t, size / [errorA, errorB][i])).toBeLessThan(0.02);
      expect(Math.abs(outliers[i].forecastChange - (then[i] - now))).toBeLessThan(0.001 * now);
    });
  });

  test('car drivers killed and injured: the fall with the seat belt law of February 1983', async () => {
    // Harvey & Durbin, Journal of the Royal Statistical Society A 149 (1986): down by about a quarter from then on.
    const [law] = await r.numbers('which(Seatbelts[, "law"] == 1)[1] - 1');
    const fit = fitModel(await r.numbers('UKDriverDeaths'), { form: '(1,0,0)x(1,0,0)12', scale: 'log' });
    const [outlier] = checkOutliers(fit).outliers;
    expect(outlier).toMatchObject({ period: law, kind: 'level-shift' });
    expect(outlier.size).toBeGreaterThan(-0.35);
    expect(outlier.size).toBeLessThan(-0.15);
    expect(outlier.forecastChange).toBeLessThan(0);
  });

  test('the Nile at Aswan: the fall in 1899', async () => {
    // Cobb, "The problem of the Nile", Biometrika 65 (1978).
    const [year] = await r.numbers('which(time(Nile) == 1899) - 1');
    const { outliers } = checkOutliers(fitModel(await r.numbers('Nile'), { form: '(0,0,0)' }));
    expect(outliers).toMatchObject([{ period: year, kind: 'level-shift' }]);
    const [size] = await r.numbers('mean(Nile[time(Nile) >= 1899]) - mean(Nile[time(Nile) < 1899])');
    expect(outliers[0].size).toBeCloseTo(size, 4);
  });
});

test('approval of presidents, with gaps: every check is made', async () => {
  const fit = fitModel(await r.numbers('presidents'), { form: '(3,0,0)', season: 4 });
  expect(checkAssumptions(fit).map(({ status }) => status)).not.toContain('untested');
});

test('air passengers, the textbook’s model on the log scale: the residuals pass', async () => {
  // Box, Jenkins, Reinsel & Ljung, "Time Series Analysis", 5th ed. 2015, section 9.2.4, find no lack of fit.
  const fit = fitModel(await r.numbers('AirPassengers'), { form: '(0,1,1)x(0,1,1)12', scale: 'log' });
  expect(checkLeftover(fit).status).toBe('holds');
  expect(checkDifferencing(fit).status).toBe('holds');
});
