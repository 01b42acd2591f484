/** Periods that sold out against likelihoods that R maximizes as they are written down, with its own normal integrals. */
import { afterAll, beforeAll, expect, test } from 'vitest';
import { fitModel } from '../../src/sarima/fit.js';
import { openR, type R } from './r.js';

let r: R;
beforeAll(async () => {
  r = await openR();
}, 180_000);
afterAll(() => r.close());

test('without dependence it is the censored normal mean (Tobin 1958)', async () => {
  const x = await r.numbers('{ set.seed(4); x <<- round(pmin(rnorm(40, 10, 2), 11), 3); x }');
  const soldOut = x.flatMap((value, t) => (value === 11 ? [t] : []));
  const [mean, spread, loglik] = await r.numbers(`{
    cut <- x == 11
    minus <- function(p) -sum(dnorm(x[!cut], p[1], exp(p[2]), log = TRUE)) -
      sum(pnorm(x[cut], p[1], exp(p[2]), lower.tail = FALSE, log.p = TRUE))
    o <- optim(c(10, 0.7), minus, control = list(reltol = 1e-14, maxit = 5000))
    c(o$par[1], exp(o$par[2]), -o$value) }`);
  const fit = fitModel(x, { form: '(0,0,0)', constant: true, soldOut });
  expect(soldOut.length).toBeGreaterThan(5);
  expect(fit.constantValue).toBeCloseTo(mean, 4);
  expect(Math.sqrt(fit.innovationVariance)).toBeCloseTo(spread, 4);
  expect(fit.logLikelihood).toBeCloseTo(loglik, 4);
});

test.each([
  [[20], 1e-6],
  // Far from one another two bounds hardly interact; next to one another the probability is approximated.
  [[20, 60], 1e-6],
  [[20, 21], 2e-3],
])('a first-order autoregression of LakeHuron, periods %j sold out', async (periods, slack) => {
  const [phi, variance, level, loglik] = await r.numbers(`{
    y <- as.numeric(LakeHuron); n <- length(y); cut <- c(${periods.join(',')}); seen <- setdiff(1:n, cut)
    minus <- function(p) {
      f <- min(max(tanh(p[1]), -0.99), 0.99); s <- exp(max(p[2], -3))
      S <- s^2 / (1 - f^2) * f^abs(outer(1:n, 1:n, "-"))
      A <- S[cut, seen, drop = FALSE] %*% solve(S[seen, seen])
      m <- p[3] + A %*% (y[seen] - p[3]); V <- S[cut, cut, drop = FALSE] - A %*% S[seen, cut, drop = FALSE]
      L <- chol(S[seen, seen])
      ll <- -sum(log(diag(L))) - sum(backsolve(L, y[seen] - p[3], transpose = TRUE)^2) / 2 -
        length(seen) / 2 * log(2 * pi)
      chance <- if (length(cut) == 1) pnorm(y[cut], m, sqrt(V), lower.tail = FALSE) else
        integrate(function(u) dnorm(u, m[1], sqrt(V[1, 1])) * pnorm(y[cut[2]], m[2] + V[2, 1] / V[1, 1] * (u - m[1]),
          sqrt(V[2, 2] - V[1, 2]^2 / V[1, 1]), lower.tail = FALSE),
          y[cut[1]], max(y[cut[1]], m[1]) + 9 * sqrt(V[1, 1]), rel.tol = 1e-9)$value
      -ll - log(chance)
    }
    o <- optim(c(1.2, -0.33, 579.1), minus, control = list(reltol = 1e-14, maxit = 5000))
    c(tanh(o$par[1]), exp(o$par[2])^2, o$par[3], -o$value) }`);
  const values = await r.numbers('LakeHuron');
  const fit = fitModel(values, { form: '(1,0,0)', constant: true, soldOut: periods.map((period) => period - 1) });
  expect(Math.abs(fit.logLikelihood - loglik)).toBeLessThan(slack);
  expect(fit.phi[0]).toBeCloseTo(phi, 4);
  expect(fit.innovationVariance).toBeCloseTo(variance, 4);
  expect(fit.constantValue).toBeCloseTo(level, 3);
});
