import { cos, sin } from './elementary';

/**
 * T/T0 of an undamped pendulum: how much longer a swing of this amplitude takes than a very small one.
 * T/T0 = 1/agm(1, cos(A/2)); the same for every rigid pendulum.
 *
 * @param amplitude  rest to turning point, rad, in [0, π)
 * @returns          ≥ 1; right to 1e-14 below 175° and to 1e-12 above (there the rounding of the
 *                   amplitude itself to a double is what remains)
 * @throws {RangeError} outside [0, π)
 * @example periodRatio(Math.PI / 2) // 1.18034059902
 * @see Villarino, arXiv:1202.2782; Carvalhaes & Suppes, Am. J. Phys. 76, 1150 (2008)
 */
export function periodRatio(amplitude: number): number {
  mustBeAmplitude('periodRatio', amplitude);
  let a = 1;
  let b = cos(amplitude / 2);
  while (a - b > 1e-9 * a) [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
  return 2 / (a + b); // the next step would change it by (a − b)²/16 only
}

/**
 * d(T/T0)/dA: by how much a small error of the amplitude moves the ratio; about A/8.
 *
 * @param amplitude  rad, in [0, π)
 * @returns          per rad, ≥ 0
 * @throws {RangeError} outside [0, π)
 * @example periodRatioSlope(Math.PI / 18) // 0.0219…
 * @see E − k'²K from the same arithmetic-geometric means: Abramowitz & Stegun 17.6.3, 17.6.4
 */
export function periodRatioSlope(amplitude: number): number {
  mustBeAmplitude('periodRatioSlope', amplitude);
  if (amplitude === 0) return 0;
  const k = sin(amplitude / 2);
  const kPrime = cos(amplitude / 2);
  let a = 1;
  let b = kPrime;
  let c = sin(amplitude / 4) ** 2; // (a − b)/2 without the cancellation at small amplitudes
  let weight = 1;
  let sum = (k * k) / 2;
  while (c > 1e-14) {
    sum -= weight * c * c;
    [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
    c = (a - b) / 2;
    weight *= 2;
  }
  return sum / (2 * a * k * kPrime); // [E − k'²K]/(π k k') with K = π/(2a)
}

function mustBeAmplitude(name: string, amplitude: number): void {
  if (!(amplitude >= 0 && amplitude < Math.PI)) {
    throw new RangeError(`${name}: amplitude is ${amplitude} rad, it must be from 0 to below π`);
  }
}
