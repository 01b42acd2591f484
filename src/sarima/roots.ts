/** What the fitted polynomials' roots say about the fit. */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';

interface Polynomials {
  readonly phi: readonly number[];
  readonly theta: readonly number[];
  readonly Phi: readonly number[];
  readonly Theta: readonly number[];
}

const NEAR_UNIT = 0.01;
const NEAR_EACH_OTHER = 0.05;

/** The polynomials (`phi`, `theta`, `Phi`, `Theta`) with a root within 0.01 of the unit circle, each in its own B. */
export function nearUnitRoots(fit: Polynomials): string[] {
  const names = ['phi', 'theta', 'Phi', 'Theta'] as const;
  return names.filter((name) =>
    inverseRoots(arOf(fit, name)).some(([re, im]) => Math.hypot(re, im) > 1 / (1 + NEAR_UNIT)),
  );
}

/** Whether a root of φ lies next to one of θ, or one of Φ next to one of Θ: then each undoes the other. */
export function nearlyCancels(fit: Polynomials): boolean {
  const meet = (a: 'phi' | 'Phi', b: 'theta' | 'Theta') => {
    const others = inverseRoots(arOf(fit, b));
    return inverseRoots(arOf(fit, a)).some(([re, im]) =>
      others.some(([re2, im2]) => Math.hypot(re - re2, im - im2) < NEAR_EACH_OTHER),
    );
  };
  return meet('phi', 'theta') || meet('Phi', 'Theta');
}

/** The coefficients a of 1 − a₁B − a₂B² − …. */
function arOf(fit: Polynomials, name: keyof Polynomials): readonly number[] {
  return name === 'theta' || name === 'Theta' ? fit[name].map((value) => -value) : fit[name];
}

/** Inverse roots of 1 − a₁B − …, the eigenvalues of its companion matrix. */
function inverseRoots(a: readonly number[]): [number, number][] {
  if (a.length === 0) return [];
  if (a.length === 1) return [[a[0], 0]];
  if (a.length === 2) {
    const half = a[0] / 2;
    const discriminant = half * half + a[1];
    const spread = Math.sqrt(Math.abs(discriminant));
    if (discriminant < 0) return [[half, spread]].concat([[half, -spread]]) as [number, number][];
    return [
      [half + spread, 0],
      [half - spread, 0],
    ];
  }
  const companion = Matrix.zeros(a.length, a.length);
  for (let j = 0; j < a.length; j++) companion.set(0, j, a[j]);
  for (let i = 1; i < a.length; i++) companion.set(i, i - 1, 1);
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(companion);
  return realEigenvalues.map((re, i) => [re, imaginaryEigenvalues[i]]);
}
