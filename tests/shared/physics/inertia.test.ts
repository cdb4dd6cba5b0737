import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bodies } from '@shared/physics/bodies';
import {
  centreOf,
  conjugateDistance,
  equivalentLength,
  hubInertiaFrom,
  inertiaOf,
  leastPeriod,
  physicalPeriod,
} from '@shared/physics/inertia';
import { smallPeriodFrom } from '@shared/physics/gravity';
import physical from '../../reference/physical-pendulum.json';

const G = Number(physical.g);
const periodOf = (...parts: Parameters<typeof inertiaOf>[0]) => physicalPeriod(inertiaOf(parts), G)!;

describe('bodies', () => {
  // The usual table of moments of inertia about the centre of mass (CRC Handbook, from memory), mass 2 kg.
  test.each([
    ['thin rod, mL²/12', bodies.bar(2, 0, 3), 1.5],
    ['rectangular plate about its normal, m(a² + b²)/12', bodies.bar(2, 0, 3, 1), 2 * (10 / 12)],
    ['disc about its axis, mr²/2', bodies.disc(2, 0, 3), 9],
    ['thin ring about its axis, mr²', bodies.ring(2, 0, 3), 18],
    ['thick ring, m(a² + b²)/2', bodies.ring(2, 0, 3, 1), 10],
    ['solid sphere, 2mr²/5', bodies.sphere(2, 0, 3), 7.2],
    ['hollow sphere, 2mr²/3', bodies.hollowSphere(2, 0, 3), 12],
    ['body of known radius of gyration', bodies.custom(2, 0, 3), 18],
    ['point', bodies.point(2, 0), 0],
  ])('%s', (_, part, moment) => {
    expect(inertiaOf([part]).moment).toBeCloseTo(moment, 13);
  });

  test('a string about its end has mL²/3, a disc about its rim 3mr²/2, a sphere about its surface 7mr²/5', () => {
    expect(inertiaOf([bodies.string(2, 3)]).moment).toBeCloseTo(6, 13);
    expect(inertiaOf([bodies.disc(2, 3, 3)]).moment).toBeCloseTo(27, 13);
    expect(inertiaOf([bodies.sphere(2, 3, 3)]).moment).toBeCloseTo(25.2, 13);
  });

  test('a ring without a hole is a disc', () => {
    expect(bodies.ring(1, 0.2, 0.1, 0)).toEqual(bodies.disc(1, 0.2, 0.1));
  });

  test('refuse what is no mass, no radius or a hole wider than the ring, by name', () => {
    expect(() => bodies.bar(0, 1, 1)).toThrow(/bodies.bar: mass is 0/);
    expect(() => bodies.disc(1, 1, -1)).toThrow(/radius is -1/);
    expect(() => bodies.ring(1, 1, 0.1, 0.2)).toThrow(/innerRadius is 0.2/);
    expect(() => bodies.point(1, NaN)).toThrow(/distance is NaN/);
  });
});

describe('physicalPeriod', () => {
  // physical-pendulum.json: closed forms with 20 digits.
  test.each(physical.rod_1m)('of a 1 m rod hung $d m from its middle', ({ d, T }) => {
    expect(periodOf(bodies.bar(0.3, Number(d), 1))).toBeCloseTo(Number(T), 13);
  });

  test('of a disc and a ring on their rims', () => {
    expect(periodOf(bodies.disc(1, 0.1, 0.1))).toBeCloseTo(Number(physical['disc_R_0.1_pivot_on_rim']), 14);
    expect(periodOf(bodies.ring(1, 0.1, 0.1))).toBeCloseTo(Number(physical['ring_R_0.1_pivot_on_rim']), 14);
  });

  test('of a rod with a bob', () => {
    const { rod_mass, rod_length, bob_mass, bob_centre, bob_radius, I, T, equivalent_length } = physical.rod_plus_bob;
    const rod = bodies.bar(Number(rod_mass), Number(rod_length) / 2, Number(rod_length));
    const body = inertiaOf([rod, bodies.sphere(Number(bob_mass), Number(bob_centre), Number(bob_radius))]);
    expect(body.moment).toBeCloseTo(Number(I), 14);
    expect(equivalentLength(body)).toBeCloseTo(Number(equivalent_length), 14);
    expect(physicalPeriod(body, G)).toBeCloseTo(Number(T), 13);
  });

  test('is that of the simple pendulum for a point', () => {
    expect(periodOf(bodies.point(0.1, 0.8))).toBeCloseTo(smallPeriodFrom(0.8, G), 14);
  });

  test('does not exist with the centre of mass at or above the pivot', () => {
    expect(physicalPeriod(inertiaOf([bodies.bar(1, 0, 1)]))).toBeUndefined();
    expect(physicalPeriod(inertiaOf([bodies.bar(1, -0.1, 1)]))).toBeUndefined();
  });
});

describe('the hub', () => {
  test.each([
    [1e-4, 0.0004],
    [5e-4, 0.002],
  ])('of %f kg m² on a 1 m rod with a 0.1 kg bob at its end lengthens T by about %f', (hub, share) => {
    // Computed share for a light rod, to one digit: I = 0.1 kg m² and half of hub/I.
    const parts = [bodies.point(0.1, 1), bodies.bar(0.05, 0.5, 1)];
    const longer = physicalPeriod(inertiaOf(parts, hub))! / physicalPeriod(inertiaOf(parts))! - 1;
    expect(longer / share).toBeGreaterThan(0.8);
    expect(longer / share).toBeLessThan(1.3);
  });

  test('comes back from the period it makes', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1e-2, noNaN: true }), (hub) => {
        const parts = [bodies.bar(0.12, 0.45, 0.9), bodies.sphere(0.5, 0.8, 0.03)];
        const period = physicalPeriod(inertiaOf(parts, hub), G)!;
        expect(hubInertiaFrom(period, inertiaOf(parts), G)).toBeCloseTo(hub, 14);
      }),
    );
  });

  test('is below 0 when T0 is shorter than the parts alone can be', () => {
    const body = inertiaOf([bodies.bar(0.3, 0.5, 1)]);
    expect(hubInertiaFrom(0.99 * physicalPeriod(body, G)!, body, G)).toBeLessThan(0);
  });
});

test('the least period of a 1 m rod is at its radius of gyration', () => {
  const { k, Tmin } = physical.rod_1m_Tmin_at_k;
  const least = leastPeriod(1 / Math.sqrt(12), G);
  expect(least.distance).toBeCloseTo(Number(k), 15);
  expect(least.period).toBeCloseTo(Number(Tmin), 14);
  for (const d of [0.25, 0.28, 0.3, 0.35]) expect(periodOf(bodies.bar(1, d, 1))).toBeGreaterThan(least.period);
});

test('conjugate pivots share a period, and their distances add to the equivalent length', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.05, max: 0.5, noNaN: true }), (d) => {
      const kc = 1 / Math.sqrt(12);
      const other = conjugateDistance(kc, d);
      const body = inertiaOf([bodies.bar(1, d, 1)]);
      expect(physicalPeriod(inertiaOf([bodies.bar(1, other, 1)]), G)! / physicalPeriod(body, G)!).toBeCloseTo(1, 12);
      expect(equivalentLength(body)).toBeCloseTo(d + other, 12);
    }),
  );
});

test('centreOf finds the radius of gyration about the centre of mass of what was put together', () => {
  const { distance, radiusOfGyration } = centreOf(inertiaOf([bodies.point(1, 0.2), bodies.point(1, 0.6)]));
  expect(distance).toBeCloseTo(0.4, 14);
  expect(radiusOfGyration).toBeCloseTo(0.2, 14);
});
