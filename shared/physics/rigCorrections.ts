import type { CorrectionLine } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { Rig } from '../schemas/rig';
import { hypot } from '../statistics/hypot';
import { propagate } from '../statistics/propagate';
import { addedMass, AIR_DENSITY, buoyancy, stringMass, yieldingSupport } from './corrections';
import { STANDARD_GRAVITY } from './gravity';
import { equivalentLength } from './inertia';
import { massU, missingReadings, rigInertia, rigQuantities, type RigQuantity, type RigValues } from './rigBody';

/**
 * kg/m³, as a standard uncertainty: from 1.1 (warm, 1000 m up) to 1.3 (cold, sea level), rectangular.
 * @see ISO 2533 (from memory)
 */
const AIR_DENSITY_U = 0.1 / Math.sqrt(3);
/** Of the added mass: Stokes' coat is that of a ball alone in still air, at small speeds. Common practice, no source. */
const ADDED_MASS_U = 0.1;
/** Of a support's stiffness, for it is read by hand with a spring balance. Common practice, no source. */
const STIFFNESS_U = 0.2;
/** kg/m³. A bob as light as this is carried by the air so far that these formulas are none for it. */
const LIGHTEST_BOB = 12;

type Term = CorrectionLine['term'];
type Effects = Partial<Record<Term, number>>;
/** What the effects are worked out from. */
type Quantity = RigQuantity | 'stringMass' | 'stiffness' | 'airDensity' | 'coat';

/** Terms that are no part of the reduced length, by the line of a budget they stand in. */
const OUTSIDE_LENGTH = {
  air: ['buoyancy', 'added_mass'],
  string: ['string_mass'],
  support: ['yielding_support'],
} as const satisfies Record<string, readonly Term[]>;
export type CorrectionGroup = keyof typeof OUTSIDE_LENGTH;

export interface RigCorrections {
  /** Each effect's relative change of T0, largest first; 0 is not listed. */
  effects: { term: Term; period: number }[];
  /** By what g = 4π²L/T0² has to be multiplied, L being the reduced length. */
  factor: number;
  /** Relative standard uncertainty each group brings to g. */
  u: Record<CorrectionGroup, number>;
}

/**
 * The small effects a rig says enough about, each signed and sized:
 *
 * - string and bob: the bob's size; the string's mass with the bob's; with mass and diameter of a ball,
 *   buoyancy and the air that swings along
 * - the others: the hub
 * - any whose masses are given: a support that gives way
 *
 * Size of the bob and hub are counted in `reducedLength` and so not in `factor`.
 *
 * @param rig          as entered
 * @param smallPeriod  T0, s, > 0
 * @returns            undefined when the reduced length is not known
 * @example rigCorrections(metreOfStringWithSteelBall, 2.006)!.effects[0] // { term: 'string_mass', period: -2.25e-4 }
 */
export function rigCorrections(rig: Rig, smallPeriod: number): RigCorrections | undefined {
  if (missingReadings(rig).length > 0) return undefined;
  const quantities = { ...rigQuantities(rig), ...outsideQuantities(rig) } as Record<Quantity, Measured>;
  const at = (values: Record<Quantity, number>) => effectsOf(rig, values, smallPeriod);
  const factorOf = (effects: Effects, terms: readonly Term[]) =>
    terms.reduce((product, term) => product * (1 + (effects[term] ?? 0)) ** 2, 1);
  const u = (group: CorrectionGroup) => {
    const { value, shares } = propagate(quantities, (values) => factorOf(at(values), OUTSIDE_LENGTH[group]));
    return hypot(...Object.values<number>(shares)) / value;
  };
  const best = at(valuesOf(quantities));
  const effects = (Object.entries(best) as [Term, number][]).map(([term, period]) => ({ term, period }));
  return {
    effects: effects.filter(({ period }) => period !== 0).sort((a, b) => Math.abs(b.period) - Math.abs(a.period)),
    factor: factorOf(best, Object.values(OUTSIDE_LENGTH).flat()),
    u: { air: u('air'), string: u('string'), support: u('support') },
  };
}

function outsideQuantities(rig: Rig): Partial<Record<Quantity, Measured>> {
  const { string_mass_mg, support_stiffness_n_per_m: stiffness } = rig;
  return {
    airDensity: { value: AIR_DENSITY, u: AIR_DENSITY_U },
    coat: { value: 1, u: ADDED_MASS_U },
    ...(string_mass_mg !== undefined && { stringMass: { value: string_mass_mg * 1e-6, u: massU(rig) } }),
    ...(stiffness !== undefined && { stiffness: { value: stiffness, u: STIFFNESS_U * stiffness } }),
  };
}

function effectsOf(rig: Rig, values: Record<Quantity, number>, smallPeriod: number): Effects {
  const own = rig.kind === 'string_bob' ? stringEffects(rig, values, smallPeriod) : hubEffect(rig, values);
  return { ...own, ...supportEffect(rig, values) };
}

function stringEffects(rig: Rig, values: Record<Quantity, number>, smallPeriod: number): Effects {
  const { centre, bobRadius, bobMass, airDensity, coat } = values as RigValues & Record<'airDensity' | 'coat', number>;
  const effects: Effects = {};
  if (bobRadius !== undefined) effects.finite_bob = againstLength(rig, values, centre!);
  if (bobMass === undefined) return effects;
  if (values.stringMass !== undefined) effects.string_mass = stringMass(values.stringMass, bobMass);
  if (bobRadius === undefined || rig.bob_shape === 'disc') return effects;
  const bobDensity = bobMass / ((4 / 3) * Math.PI * bobRadius * bobRadius * bobRadius);
  if (!(bobDensity >= LIGHTEST_BOB)) return effects;
  effects.buoyancy = buoyancy(bobDensity, airDensity);
  effects.added_mass = coat * addedMass({ radius: bobRadius, bobDensity, smallPeriod, airDensity });
  return effects;
}

function hubEffect(rig: Rig, values: Record<Quantity, number>): Effects {
  if (values.hub === undefined) return {};
  return { hub: againstLength(rig, values, equivalentLength(rigInertia(rig, { ...values, hub: 0 }))!) };
}

/** T0 of the rig over that of a simple pendulum of some length, less 1. */
function againstLength(rig: Rig, values: RigValues, length: number): number {
  return Math.sqrt(equivalentLength(rigInertia(rig, values))! / length) - 1;
}

/**
 * A rigid body pushes its support with staticMoment × ω² θ: as a point of mass staticMoment²/moment on a
 * string of moment/staticMoment.
 */
function supportEffect(rig: Rig, values: Record<Quantity, number>): Effects {
  const isWeighed = rig.kind === 'string_bob' ? values.bobMass !== undefined : values.barMass !== undefined;
  if (values.stiffness === undefined || !isWeighed) return {};
  const { moment, staticMoment } = rigInertia(rig, values);
  const mass = staticMoment ** 2 / moment;
  return { yielding_support: yieldingSupport(mass, values.stiffness, moment / staticMoment, STANDARD_GRAVITY) };
}

const valuesOf = (quantities: Record<Quantity, Measured>) =>
  Object.fromEntries(Object.entries(quantities).map(([name, { value }]) => [name, value])) as Record<Quantity, number>;
