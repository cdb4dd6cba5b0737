import { log } from '../physics/elementary';

/** ln Γ(z) for z > 0: recurrence up to 15, then Stirling's series. Abramowitz & Stegun 6.1.41. */
export function logGamma(z: number): number {
  let shift = 0;
  let x = z;
  while (x < 15) {
    shift += log(x);
    x += 1;
  }
  const s = 1 / (x * x);
  const series = (1 / 12 - s * (1 / 360 - s * (1 / 1260 - s * (1 / 1680 - s / 1188)))) / x;
  return (x - 0.5) * log(x) - x + 0.5 * log(2 * Math.PI) + series - shift;
}
