import type { RigReading } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { BobShape, Rig } from '../schemas/rig';
import { bodies, type Part } from './bodies';
import { inertiaOf, type Inertia } from './inertia';
import { pivotToCentre } from './rigLength';

/** What a rig's readings measure. */
export const LENGTHS = [
  ...(['centre', 'bobRadius', 'barLength', 'barWidth', 'offset'] as const),
  ...(['innerRadius', 'centreDistance', 'gyration'] as const),
] as const;
export const MASSES = ['bobMass', 'barMass'] as const;
export type RigQuantity = (typeof LENGTHS)[number] | (typeof MASSES)[number] | 'hub';
export type RigValues = Partial<Record<RigQuantity, number>>;

/** kg. One weighing on a school balance that shows tenths of a gram. Common practice, no source. */
export const USUAL_MASS_U = 1e-4;
/** Of a hub's inertia, when nothing is said of it. Common practice, no source. */
export const USUAL_HUB_U = 0.1;

const BOBS: Record<BobShape, (mass: number, distance: number, radius: number) => Part> = {
  ball: bodies.sphere,
  hollow_ball: bodies.hollowSphere,
  disc: bodies.disc,
};

/**
 * The readings of a rig that its kind goes by, in SI, each with its standard uncertainty. Masses that cancel
 * (a bar alone, a bob on a string) and are not given are left out.
 */
export function rigQuantities(rig: Rig): Partial<Record<RigQuantity, Measured>> {
  const length = (um: number | null | undefined, per = 1): Measured | undefined =>
    typeof um === 'number' ? { value: (um * 1e-6) / per, u: (rig.length_u_um * 1e-6) / per } : undefined;
  const mass = (mg: number | undefined): Measured | undefined =>
    mg === undefined ? undefined : { value: mg * 1e-6, u: massU(rig) };
  const bob = { centre: pivotToCentre(rig), bobRadius: length(rig.bob_diameter_um, 2) };
  const body = { barLength: length(rig.bar_length_um), barMass: mass(rig.bar_mass_mg), hub: hubOf(rig) };
  const offset = length(rig.pivot_offset_um);
  const barWidth = length(rig.bar_width_um);
  const all = {
    string_bob: { ...bob, bobMass: mass(rig.bob_mass_mg) },
    bar: { ...body, offset, barWidth },
    bar_bob: { ...bob, ...body, offset, barWidth, bobMass: mass(rig.bob_mass_mg) },
    disc: { ...body, offset },
    ring: { ...body, offset, innerRadius: length(rig.inner_diameter_um, 2) },
    other: {
      centreDistance: length(rig.centre_distance_um),
      gyration: length(rig.gyration_um),
      barMass: body.barMass,
      hub: body.hub,
    },
  }[rig.kind];
  return Object.fromEntries(Object.entries(all).filter(([, given]) => given !== undefined));
}

/** kg, of one weighing. */
export const massU = (rig: Rig): number => (rig.mass_u_mg === undefined ? USUAL_MASS_U : rig.mass_u_mg * 1e-6);

/**
 * What a rig would have to say for its reduced length to follow, in the order a person should give it.
 * Empty when nothing is missing.
 *
 * @example missingReadings({ kind: 'bar_bob', bar_mass_mg: 120_000, … }) // ['bob_mass']
 */
export function missingReadings(rig: Rig): RigReading[] {
  const given = rigQuantities(rig);
  const missing = (...needed: [RigReading, boolean][]) => needed.flatMap(([name, isThere]) => (isThere ? [] : [name]));
  const centre = given.centre !== undefined && given.centre.value > 0;
  const pivotToBob: [RigReading, boolean] = [rig.length_readings.length === 0 ? 'length' : 'bob_diameter', centre];
  const barLength: [RigReading, boolean] = ['bar_length', given.barLength !== undefined];
  // Hung at its own centre of mass nothing swings.
  const offset: [RigReading, boolean] = ['pivot_offset', (given.offset?.value ?? 0) > 0];
  const rim: [RigReading, boolean] = ['pivot_offset', given.offset === undefined || given.offset.value > 0];
  const barMass: [RigReading, boolean] = ['bar_mass', given.barMass !== undefined];
  // A hub adds to the moment as it is, so the mass no longer cancels.
  const massForHub: [RigReading, boolean] = ['bar_mass', barMass[1] || given.hub === undefined];
  const isInside = (given.innerRadius?.value ?? 0) * 2 <= (given.barLength?.value ?? Infinity);
  return {
    string_bob: missing(pivotToBob),
    bar: missing(barLength, offset, massForHub),
    bar_bob: missing(pivotToBob, barLength, ['pivot_offset', given.offset !== undefined], barMass, [
      'bob_mass',
      given.bobMass !== undefined,
    ]),
    disc: missing(barLength, rim, massForHub),
    ring: missing(barLength, ['inner_diameter', isInside], rim, massForHub),
    other: missing(
      ['centre_distance', given.centreDistance !== undefined],
      ['gyration', given.gyration !== undefined],
      massForHub,
    ),
  }[rig.kind];
}

/**
 * The body a rig stands for, without the mass of a string: that one is among the corrections.
 *
 * @param rig     of which nothing is missing
 * @param values  in SI, as `rigQuantities` names them; a mass that cancels is taken as 1 kg
 */
export function rigInertia(rig: Rig, values: RigValues): Inertia {
  return inertiaOf(partsOf(rig, values), values.hub ?? 0);
}

function partsOf(rig: Rig, values: RigValues): Part[] {
  const { barMass = 1, bobMass = 1, centre = 0, bobRadius, barLength = 0 } = values;
  const bob = () =>
    bobRadius === undefined ? bodies.point(bobMass, centre) : BOBS[rig.bob_shape ?? 'ball'](bobMass, centre, bobRadius);
  const bar = () => bodies.bar(barMass, values.offset ?? 0, barLength, values.barWidth);
  const radius = barLength / 2;
  const inner = Math.min(values.innerRadius ?? radius, radius);
  return {
    string_bob: () => [bob()],
    bar: () => [bar()],
    bar_bob: () => [bar(), bob()],
    disc: () => [bodies.disc(barMass, values.offset ?? radius, radius)],
    ring: () => [bodies.ring(barMass, values.offset ?? inner, radius, inner)],
    other: () => [bodies.custom(barMass, values.centreDistance ?? 0, values.gyration ?? 0)],
  }[rig.kind]();
}

function hubOf(rig: Rig): Measured | undefined {
  const { hub_inertia_g_mm2: hub, hub_inertia_u_g_mm2: u } = rig;
  if (hub === undefined || hub === 0) return undefined;
  return { value: hub * 1e-9, u: u === undefined ? USUAL_HUB_U * hub * 1e-9 : u * 1e-9 };
}
