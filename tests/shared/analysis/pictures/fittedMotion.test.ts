import { expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { amplitudeAtSwing, fittedMotion } from '@shared/analysis/pictures/fittedMotion';
import { evenInstants, statesAt } from '@shared/analysis/pictures/statesAt';
import type { Motion } from '@shared/schemas/analysis';
import { degrees, radians } from '@shared/units/angle';
import damped from '../../../reference/damped.json';
import period from '../../../reference/period.json';
import { rawTapRun, sealed } from '../../../factories/rawRuns';
import { timingCase } from '../../../factories/timingCases';

const analysisOf = (id: string) => analyseRun({ run: sealed(timingCase(id).run), edits: [] });

/** A motion as an analysis states it, with ω0 = 1 so that reference times hold as they are. */
function stated(amplitude_deg: number, swings: number, parts: Partial<Motion> = {}) {
  const none = { value: 0, u: 0 };
  const motion: Motion = {
    ...{ event: 'pass', path: 'integrated', converged: true, release_swing: 0, release_s: 0 },
    release_deg: { value: amplitude_deg, u: 0 },
    ...{ gamma_per_s: none, beta: none, c: none },
    chances: { viscous: 0, quadratic: 0, dry: 0 },
    ...{ law: 'not_known', gate_angle_deg: null },
    ...parts,
  };
  const small_period_s = { value: 2 * Math.PI, u: 0, dof: null, coverage_factor: 2, expanded_u: 0 };
  return { motion, small_period_s, swings };
}

test('the passes of the reference runs are met, time and speed, by what an analysis states of them', () => {
  // tests/reference/damped.json: 190-bit arithmetic, outside of this program.
  const runs = damped.runs.filter(({ amplitude_deg, stuck }) => Number(amplitude_deg) <= 150 && !stuck);
  expect(runs.length).toBeGreaterThan(3);
  for (const run of runs) {
    const [gamma, beta, c] = [run.gamma, run.beta, run.c].map((one) => ({ value: Number(one), u: 0 }));
    const motion = fittedMotion(stated(Number(run.amplitude_deg), 5, { gamma_per_s: gamma!, beta: beta!, c: c! }))!;
    const passes = run.down_crossing_times.slice(0, 5).map(Number);
    const states = statesAt(motion, passes);
    states.forEach((state, i) => {
      expect(Math.abs(state.angle)).toBeLessThan(1e-8);
      expect(state.rate).toBeCloseTo(-Number(run.down_crossing_speeds[i]), 7);
    });
  }
});

test('without damping the motion comes back after the exact period, and to its amplitude', () => {
  // tests/reference/period.json: elliptic integrals.
  const rows = (period as { table: { theta0_deg: string; ratio: string }[] }).table.filter(
    (row) => Number(row.theta0_deg) >= 1 && Number(row.theta0_deg) <= 170,
  );
  for (const { theta0_deg, ratio } of rows) {
    const amplitude_deg = Number(theta0_deg);
    const motion = fittedMotion(stated(amplitude_deg, 3))!;
    expect(motion.turn(6).time / (3 * 2 * Math.PI)).toBeCloseTo(Number(ratio), 8);
    expect(degrees(amplitudeAtSwing(motion, 3))).toBeCloseTo(amplitude_deg, 6);
  }
});

test('energy is kept along an undamped curve from 120°', () => {
  const motion = fittedMotion(stated(120, 2))!;
  const energy = -Math.cos(radians(120));
  for (const { angle, rate } of statesAt(motion, evenInstants(0, motion.turn(4).time, 101))) {
    expect(rate ** 2 / 2 - Math.cos(angle)).toBeCloseTo(energy, 9);
  }
});

test('the averaged law draws the same curve as integration where little is lost', () => {
  const gamma_per_s = { value: 0.002, u: 0 };
  const [one, other] = (['integrated', 'averaged'] as const).map((path) =>
    fittedMotion(stated(40, 30, { gamma_per_s, path }))!,
  );
  const at = evenInstants(1, 180, 400);
  const [exact, drawn] = [statesAt(one!, at), statesAt(other!, at)];
  exact.forEach(({ angle, rate }, i) => {
    expect(drawn[i]!.angle).toBeCloseTo(angle, 3);
    expect(drawn[i]!.rate).toBeCloseTo(rate, 3);
  });
});

test.each(['simple-5', 'simple-30', 'simple-60-pass', 'rod-90', 'dry-40', 'missed-two', 'every-5th'])(
  'the drawn motion of %s goes through each event when the analysis says it does',
  (id) => {
    const analysis = analysisOf(id);
    const motion = fittedMotion(analysis)!;
    const used = analysis.marks.filter(({ swing }) => swing !== null);
    const states = statesAt(
      motion,
      used.map(({ time_s, residual_s }) => time_s - residual_s!),
    );
    const isPass = analysis.motion!.event === 'pass';
    // The stated T0 is moved a little by the doubt which event was marked, and these times are not.
    const top = 2 * motion.angularFrequency * Math.sin(radians(analysis.motion!.release_deg.value) / 2);
    for (const { angle, rate } of states) {
      expect(Math.abs(isPass ? angle * motion.angularFrequency : rate)).toBeLessThan(0.03 * top);
    }
  },
);

test('a run of 1000 swings is sampled with as many points as were asked for', () => {
  const times = Array.from({ length: 1001 }, (_, i) => 2 * i);
  const run = rawTapRun({
    times,
    amplitudes: [0, 1000].map((swing) => ({ swing, as_read: { form: 'angle', mdeg: swing ? 4000 : 8000 }, u: 500 })),
  });
  const analysis = analyseRun({ run: sealed(run), edits: [] });
  expect(analysis.motion?.path).toBe('averaged');
  const motion = fittedMotion(analysis)!;
  expect(statesAt(motion, evenInstants(0, 2000, 600))).toHaveLength(600);
  expect(degrees(amplitudeAtSwing(motion, 1000))).toBeCloseTo(analysis.amplitude!.end_deg.value, 2);
});

test('a bob that dry friction stops stays where it stopped', () => {
  const motion = fittedMotion(stated(10, 20, { c: { value: 0.02, u: 0 } }))!;
  expect(motion.turnCount).toBeLessThan(41);
  const [late] = statesAt(motion, [1000]);
  expect(late!.rate).toBe(0);
  expect(Math.sin(Math.abs(late!.angle))).toBeLessThanOrEqual(0.02);
});

test('without an amplitude there is no motion to draw', () => {
  const analysis = analyseRun({ run: sealed(rawTapRun()), edits: [] });
  expect(fittedMotion(analysis)).toBeUndefined();
});
