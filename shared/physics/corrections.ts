import { mustBeAboveZero, mustNotBeNegative } from './mustBe';

/**
 * Small effects on the small-amplitude period T0, each as the relative change it makes: positive where it
 * lengthens T, so that g = 4π²L/T² comes out low by twice as much if it is left out. Each is exact for that
 * effect alone; together they add up as far as anybody can time.
 *
 * All arguments in SI; every function throws a RangeError that names the argument out of range.
 *
 * @see Nelson & Olsson, Am. J. Phys. 54, 112 (1986) (from memory)
 */

/** Air at 20 °C and sea level, kg/m³. @see ISO 2533 rounded; a few per cent with weather and height */
export const AIR_DENSITY = 1.2;
/** Kinematic viscosity of air at 20 °C, m²/s. */
export const AIR_VISCOSITY = 1.51e-5;

/** The string's own mass lies higher than the bob: it adds mL²/3 and mL/2. Negative. */
export function stringMass(stringMass_: number, bobMass: number): number {
  mustNotBeNegative('stringMass', { stringMass: stringMass_ });
  mustBeAboveZero('stringMass', { bobMass });
  const share = stringMass_ / bobMass;
  return Math.sqrt((1 + share / 3) / (1 + share / 2)) - 1;
}

/** The air carries part of the bob: g counts 1 − ρair/ρbob. Positive. */
export function buoyancy(bobDensity: number, airDensity = AIR_DENSITY): number {
  mustNotBeNegative('buoyancy', { airDensity });
  if (!(bobDensity > airDensity && bobDensity < Infinity)) {
    throw new RangeError(`buoyancy: bobDensity is ${bobDensity} kg/m³, it must be above that of air, ${airDensity}`);
  }
  return 1 / Math.sqrt(1 - airDensity / bobDensity) - 1;
}

export interface BobInAir {
  /** m */
  radius: number;
  /** kg/m³ */
  bobDensity: number;
  /** s; how fast the swing turns around decides how thick a coat of air goes with it. */
  smallPeriod: number;
  airDensity?: number;
  airViscosity?: number;
}

/**
 * Depth to which a swinging surface takes the air with it: √(2ν/ω), m.
 * @see Stokes (1851); Landau & Lifshitz, Fluid Mechanics, § 24 (from memory)
 */
export function penetrationDepth(smallPeriod: number, airViscosity = AIR_VISCOSITY): number {
  mustBeAboveZero('penetrationDepth', { smallPeriod, airViscosity });
  return Math.sqrt((airViscosity * smallPeriod) / Math.PI);
}

/**
 * Air that swings with a ball adds κ times the mass it displaces, κ = 1/2 + (9/4) δ/r. Positive.
 *
 * @see Stokes, Trans. Camb. Phil. Soc. 9, 8 (1851); tested by Dolfo, Vigué & Lhuillier, Exp. Fluids 61, 97 (2020)
 */
export function addedMass(bob: BobInAir): number {
  const { radius, bobDensity, airDensity = AIR_DENSITY } = bob;
  mustBeAboveZero('addedMass', { radius, bobDensity });
  mustNotBeNegative('addedMass', { airDensity });
  return Math.sqrt(1 + (addedMassFactor(bob) * airDensity) / bobDensity) - 1;
}

/** κ of `addedMass`; 1/2 in a fluid without viscosity. */
export function addedMassFactor({ radius, smallPeriod, airViscosity }: BobInAir): number {
  return 0.5 + (9 / 4) * (penetrationDepth(smallPeriod, airViscosity) / radius);
}

/** A support that gives way sideways lengthens the pendulum by Mg/stiffness. Positive. Stiffness in N/m. */
export function yieldingSupport(mass: number, stiffness: number, length: number, gravity: number): number {
  mustBeAboveZero('yieldingSupport', { mass, stiffness, length, gravity });
  return Math.sqrt(1 + (mass * gravity) / (stiffness * length)) - 1;
}

/**
 * What the air's viscosity takes from a ball: γ of θ'' = … − 2γθ', 1/s.
 * γ = 6π η r (1 + r/δ)/(2M). @see Stokes (1851); Landau & Lifshitz, § 24 (from memory)
 */
export function viscousDamping(bob: BobInAir): number {
  const { radius, bobDensity, smallPeriod, airDensity = AIR_DENSITY, airViscosity = AIR_VISCOSITY } = bob;
  mustBeAboveZero('viscousDamping', { radius, bobDensity, smallPeriod });
  const mass = (4 / 3) * Math.PI * radius * radius * radius * bobDensity;
  const depth = penetrationDepth(smallPeriod, airViscosity);
  return (6 * Math.PI * airDensity * airViscosity * radius * (1 + radius / depth)) / (2 * mass);
}

/**
 * What drag as the square of the speed takes from a ball: β of θ'' = … − β θ'|θ'|, a number.
 * β = ρ Cd π r² L/(2M). `dragCoefficient` is about 0.5 for balls at Reynolds numbers of some hundreds.
 */
export function quadraticDamping(
  { radius, bobDensity, airDensity = AIR_DENSITY }: Omit<BobInAir, 'smallPeriod'>,
  length: number,
  dragCoefficient = 0.5,
): number {
  mustBeAboveZero('quadraticDamping', { radius, bobDensity, length });
  mustNotBeNegative('quadraticDamping', { airDensity, dragCoefficient });
  const mass = (4 / 3) * Math.PI * radius * radius * radius * bobDensity;
  return (airDensity * dragCoefficient * Math.PI * radius ** 2 * length) / (2 * mass);
}
