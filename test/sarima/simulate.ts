import { createGenerator } from '../../src/stats/generator.js';

/** A path of φ(B)Φ(Bᵐ)w = θ(B)Θ(Bᵐ)ε, integrated, after a long run-in; the recursion is written out here. */
export function simulate(
  seed: number,
  n: number,
  at: { phi: number; theta: number; Phi: number; Theta: number; m: number; d: number; D: number },
): number[] {
  const { normal } = createGenerator(seed);
  const { phi, theta, Phi, Theta, m, d, D } = at;
  const total = n + 200;
  const e = Array.from({ length: total }, normal);
  const w: number[] = [];
  const past = (x: readonly number[], t: number) => (t >= 0 ? x[t] : 0);
  for (let t = 0; t < total; t++)
    w.push(
      phi * past(w, t - 1) +
        Phi * past(w, t - m) -
        phi * Phi * past(w, t - m - 1) +
        e[t] +
        theta * past(e, t - 1) +
        Theta * past(e, t - m) +
        theta * Theta * past(e, t - m - 1),
    );
  let y = w.slice(200);
  if (D === 1) for (let t = m; t < n; t++) y[t] += y[t - m];
  if (d === 1) for (let t = 1; t < n; t++) y[t] += y[t - 1];
  y = y.map((value) => 100 + value);
  return y;
}
