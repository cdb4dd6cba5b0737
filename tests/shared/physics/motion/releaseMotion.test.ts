import { createRequire } from 'node:module';
import { describe, expect, test } from 'vitest';
import { passOf, releaseMotion, stateAt } from '@shared/physics/motion/motion';
import type { Damping } from '@shared/physics/motion/damping';
import { periodRatio } from '@shared/physics/periodRatio';
import { degrees, radians } from '@shared/units/angle';
import damped from '../../../reference/damped.json';

/** The package ships TypeScript that our stricter settings refuse; only what is used here is described. */
type Rates = (time: number, state: number[]) => number[];
const { Solver } = createRequire(import.meta.url)('odex') as {
  Solver: new (unknowns: number) => {
    absoluteTolerance: number;
    relativeTolerance: number;
    maxSteps: number;
    solve(rates: Rates, from: number, state: number[], to: number): { y: number[] };
  };
};

const undamped: Damping = { viscous: 0, quadratic: 0, dry: 0 };
const runs = damped.runs.map((run) => ({
  ...run,
  name: `${run.amplitude_deg}° ${run.kind}`,
  amplitude: radians(Number(run.amplitude_deg)),
  damping: { viscous: Number(run.gamma), quadratic: Number(run.beta), dry: Number(run.c) },
}));

/** Taylor series of order 46 in 190-bit arithmetic, made outside this project: tests/reference/damped.json. */
describe.each(runs)('releaseMotion at $name', (run) => {
  const motion = releaseMotion(run.amplitude, run.damping, 2 * run.up_crossing_times.length);
  const within = Number(run.amplitude_deg) > 150 ? 1e-7 : 1e-9;

  test(`passes the lowest point both ways within ${within}`, () => {
    run.down_crossing_times.forEach((time, i) => {
      expect(Math.abs(passOf(motion, 2 * i)!.time - Number(time))).toBeLessThan(within);
      expect(Math.abs(-passOf(motion, 2 * i)!.rate - Number(run.down_crossing_speeds[i]))).toBeLessThan(1e-9);
    });
    run.up_crossing_times.forEach((time, i) => {
      expect(Math.abs(passOf(motion, 2 * i + 1)!.time - Number(time))).toBeLessThan(within);
    });
  });

  test(`turns at the right time within ${within} and amplitude within 1e-9`, () => {
    run.turning_times.forEach((time, i) => {
      expect(Math.abs(motion.turns[i]!.time - Number(time))).toBeLessThan(within);
      expect(Math.abs(degrees(motion.turns[i]!.amplitude) - Number(run.turning_amplitudes_deg[i]))).toBeLessThan(1e-9);
    });
  });
});

/** F of the first integral: from rest at −A to rest at B, F(B) = F(−A). Mungan & Lipscombe, Eur. J. Phys. 34, 1243 (2013). */
describe('turning points satisfy the closed form', () => {
  test.each([5, 45, 90, 150, 170, 175])('with drag, from %i°', (angle) => {
    const beta = 0.05;
    const F = (x: number) => Math.exp(2 * beta * x) * (Math.cos(x) - 2 * beta * Math.sin(x));
    turnsOf(angle, { ...undamped, quadratic: beta }, (a, b) => F(b) - F(-a));
  });

  test.each([5, 45, 90, 150, 170, 175])('with dry friction, from %i°', (angle) => {
    const dry = 0.01;
    turnsOf(angle, { ...undamped, dry }, (a, b) => Math.cos(b) - Math.cos(a) - dry * (a + b));
  });

  test.each([5, 45, 90, 150, 170, 175])('with both, from %i°', (angle) => {
    const [beta, c] = [0.05, 0.01];
    const F = (x: number) =>
      Math.exp(2 * beta * x) * ((2 * (Math.cos(x) - 2 * beta * Math.sin(x))) / (1 + 4 * beta ** 2) - c / beta);
    turnsOf(angle, { viscous: 0, quadratic: beta, dry: c }, (a, b) => F(b) - F(-a));
  });

  function turnsOf(angle: number, damping: Damping, difference: (from: number, to: number) => number) {
    const { turns } = releaseMotion(radians(angle), damping, 6);
    expect(turns.length).toBeGreaterThan(2);
    turns.slice(1).forEach(({ amplitude }, i) => {
      expect(Math.abs(difference(turns[i]!.amplitude, amplitude))).toBeLessThan(1e-9 * amplitude);
    });
  }
});

/** The npm package odex: Gragg–Bulirsch–Stoer after Hairer, Nørsett & Wanner. It does not know the sign change, so no dry friction. */
test.each([30, 90, 150])('angle and angular velocity agree with odex to 1e-8 over ten swings from %i°', (angle) => {
  const damping = { viscous: 0.003, quadratic: 0.02, dry: 0 };
  const motion = releaseMotion(radians(angle), damping, 30);
  const solver = new Solver(2);
  solver.absoluteTolerance = 1e-12;
  solver.relativeTolerance = 1e-12;
  solver.maxSteps = 100_000;
  const motionOf: Rates = (_, [x, v]) => [
    v!,
    -Math.sin(x!) - 2 * damping.viscous * v! - damping.quadratic * v! * Math.abs(v!),
  ];
  for (const time of [0.5, 3, 17, 62]) {
    const { y } = solver.solve(motionOf, 0, [radians(angle), 0], time);
    const state = stateAt(motion, time);
    expect(Math.abs(state.angle - y[0]!)).toBeLessThan(1e-8);
    expect(Math.abs(state.rate - y[1]!)).toBeLessThan(1e-8);
  }
});

test.each([1, 60, 120, 175])('without damping, a swing from %i° takes 2π agm', (angle) => {
  const { turns } = releaseMotion(radians(angle), undamped, 2);
  expect(turns[2]!.time / (2 * Math.PI * periodRatio(radians(angle)))).toBeCloseTo(1, 10);
  expect(turns[2]!.amplitude).toBeCloseTo(radians(angle), 10);
});

test('dry friction holds the bob at the first turning point with |sin θ| ≤ c: 5°, c = 0.001 after 22 passes down', () => {
  // Where it stops is stated in physics texts as a fact of this run; the count was made with 190-bit arithmetic.
  const { turns, isStopped, halfSwings } = releaseMotion(radians(5), { ...undamped, dry: 0.001 }, 100);
  expect(isStopped).toBe(true);
  expect(Math.sin(turns.at(-1)!.amplitude)).toBeLessThanOrEqual(0.001);
  expect(Math.sin(turns.at(-2)!.amplitude)).toBeGreaterThan(0.001);
  expect(Math.ceil(halfSwings.length / 2)).toBe(22);
});

test('stops before the lowest point when friction is that strong, and says so', () => {
  const motion = releaseMotion(radians(20), { ...undamped, dry: 0.25 }, 10);
  expect(motion.isStopped).toBe(true);
  expect(passOf(motion, 0)).toBeUndefined();
});

test('a motion that creeps ends in bounded steps', () => {
  expect(releaseMotion(1, { ...undamped, viscous: 1.5 }, 10).isStopped).toBe(true);
});

test('passes of an angle off the lowest point lie on the curve, with direction and speed', () => {
  const motion = releaseMotion(1, { viscous: 0.01, quadratic: 0.05, dry: 0.001 }, 6);
  for (const turn of [0, 1, 2, 3]) {
    const pass = passOf(motion, turn, 0.1)!;
    const state = stateAt(motion, pass.time);
    expect(state.angle).toBeCloseTo(0.1, 12);
    expect(state.rate).toBeCloseTo(pass.rate, 12);
    expect(Math.sign(pass.rate)).toBe(turn % 2 === 0 ? -1 : 1);
  }
  expect(passOf(motion, 0, 2)).toBeUndefined();
});
