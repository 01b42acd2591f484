/** How long fits take, over forms and lengths, on series that are made here. */
import { bench, describe } from 'vitest';
import { fitModel } from '../../src/sarima/fit.js';
import { createGenerator } from '../../src/stats/generator.js';

function series(n: number, m: number): number[] {
  const { normal } = createGenerator(n + m);
  const y: number[] = [];
  for (let t = 0; t < n; t++) y.push((t >= m ? y[t - m] : 200 + 20 * (t % m)) + 5 * normal());
  return y;
}

for (const [m, n] of [
  [4, 44],
  [12, 110],
] as const)
  describe(`season ${m}, ${n} figures`, () => {
    const y = series(n, m);
    for (const brackets of ['(0,1,1)x(0,1,1)', '(1,0,0)x(0,1,1)', '(1,1,1)x(0,1,1)', '(2,1,1)x(1,1,1)'])
      bench(`${brackets}${m}`, () => {
        fitModel(y, { form: `${brackets}${m}` });
      });
  });
