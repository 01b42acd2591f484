/**
 * The logarithm of the gamma function for x > 0, to about 15 digits: Stirling's series, the argument first raised
 * above 10 by Γ(x) = Γ(x + 1)/x (Abramowitz & Stegun, "Handbook of Mathematical Functions", 1964, 6.1.41 and 6.1.15).
 */
export function logGamma(x: number): number {
  let z = x;
  let raised = 1;
  while (z < 10) raised *= z++;
  const u = 1 / (z * z);
  const series = 1 / 12 - u * (1 / 360 - u * (1 / 1260 - u * (1 / 1680 - u * (1 / 1188 - (u * 691) / 360360))));
  return (z - 0.5) * Math.log(z) - z + 0.5 * Math.log(2 * Math.PI) + series / z - Math.log(raised);
}
