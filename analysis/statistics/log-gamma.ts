/** ln Γ(x) for x > 0, by Stirling's series after shifting x above 8 (Abramowitz & Stegun 6.1.40, 6.1.15). */
export function logGamma(x: number): number {
  let shift = 0;
  let z = x;
  for (; z < 8; z++) shift += Math.log(z);
  const inverse = 1 / z;
  const square = inverse * inverse;
  const series =
    inverse * (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square * (1 / 1680 - square / 1188))));
  return (z - 0.5) * Math.log(z) - z + 0.5 * Math.log(2 * Math.PI) + series - shift;
}
