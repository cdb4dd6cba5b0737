import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { viscousGuess } from '@shared/analysis/forecast';
import { judgeAmplitudeEffect, judgeTarget } from '@shared/analysis/planner/judgePlan';
import { dominantTerm, predictPlan } from '@shared/analysis/planner/predictPlan';
import type { TimingPlan } from '@shared/analysis/planner/timingPlan';
import { timingUncertainty } from '@shared/analysis/planner/timingUncertainty';
import { analyseRun } from '@shared/analysis/analyseRun';
import { periodRatio } from '@shared/physics/periodRatio';
import { radians } from '@shared/units/angle';
import hand from '../../../reference/hand-timing.json';
import { noise } from '../../../factories/noise';
import { angleReading, rawTapRun, sealed } from '../../../factories/rawRuns';

/** Nothing in the way but timing: no damping, an angle that is known, a clock that is right. */
function plan(parts: Partial<TimingPlan> = {}): TimingPlan {
  return {
    smallPeriod: 2,
    length: null,
    amplitude: { value: radians(5), u: 0 },
    readsEnd: false,
    damping: { viscous: 0, quadratic: 0, dry: 0 },
    way: 'line',
    swingsPerMark: 1,
    swings: 20,
    repeats: 1,
    jitter: 0.07,
    lag1: 0,
    readingStep: 0,
    ...parts,
  };
}

const usual = (parts: Partial<TimingPlan> = {}) =>
  plan({
    length: { value: 0.994, u: 0.001 },
    amplitude: { value: radians(10), u: radians(1) },
    readsEnd: true,
    damping: viscousGuess(0.9, 20),
    readingStep: 0.001,
    ...parts,
  });

describe('timing of independent taps', () => {
  // hand-timing.json: σ√(12/(n(n+1)(n+2))) and √2σ/n, computed.
  test.each(hand.table)('$n_intervals swings, line and ends', ({ n_intervals, ...row }) => {
    const elapsed = Array.from({ length: n_intervals + 1 }, (_, i) => i);
    const line = timingUncertainty(plan({ jitter: 1 }), elapsed)!;
    const ends = timingUncertainty(plan({ jitter: 1, way: 'ends' }), elapsed)!;
    expect(line.jitterU).toBeCloseTo(Number(row.sd_ols_over_sigma), 12);
    expect(ends.jitterU).toBeCloseTo(Number(row.sd_endpoint_over_sigma), 12);
    expect((line.jitterU / ends.jitterU) ** 2).toBeCloseTo(Number(row.variance_ratio_ols_over_endpoint), 12);
  });

  test.each(hand.swings_needed)(
    '$rel_precision of T = $T_s s with $sigma_s s taps needs $n_ols swings by line, $n_endpoint by ends',
    ({ rel_precision, sigma_s, T_s, n_ols, n_endpoint }) => {
      // A swing too small to lengthen T, and a target a little wider for the clock's 2.9e-5.
      const clock = 50e-6 / Math.sqrt(3);
      const target = { of: 'smallPeriod', relative: Math.hypot(Number(rel_precision), clock) } as const;
      const given = { amplitude: { value: 1e-2, u: 0 }, smallPeriod: Number(T_s), jitter: Number(sigma_s) };
      // With the end read as well there is no decay to reckon with.
      const needed = (way: 'line' | 'ends') =>
        judgeTarget(plan({ ...given, readsEnd: true, way }), target).swingsNeeded;
      expect(needed('line')).toBe(n_ols);
      // 1415 swings are more than one run may have.
      expect(needed('ends')).toBe(n_endpoint > 1000 ? null : n_endpoint);
    },
  );

  test('repeats go by their root: four runs halve what timing brings', () => {
    expect(predictPlan(plan({ repeats: 4 }))!.timingU).toBeCloseTo(predictPlan(plan())!.timingU / 2, 15);
  });
});

describe('taps that err together', () => {
  // Computed for n = 20: the gain of the line over the ends falls from 2.0 to 1.4 at lag-1 0.4 and to 1.1 at 0.6.
  test.each([
    [0, 2.0],
    [0.4, 1.4],
    [0.6, 1.1],
  ])('at lag-1 %d the line through 21 marks is %d times as good as the ends', (lag1, gain) => {
    const elapsed = Array.from({ length: 21 }, (_, i) => i);
    const line = timingUncertainty(plan({ lag1 }), elapsed)!.jitterU;
    const ends = timingUncertainty(plan({ way: 'ends' }), elapsed)!.jitterU;
    expect(Math.abs(ends / line - gain)).toBeLessThan(0.08);
  });

  test('passes of the two directions cost a degree of freedom, and correlation costs more', () => {
    const spare = (parts: Partial<TimingPlan>) =>
      timingUncertainty(
        plan(parts),
        Array.from({ length: 21 }, (_, i) => i / 2),
      )!.spare;
    expect(spare({ swingsPerMark: 0.5 })).toBe(18);
    expect(spare({ swingsPerMark: 1 })).toBe(19);
    expect(spare({ swingsPerMark: 1, lag1: 0.4 })).toBeCloseTo((19 * 0.6) / 1.4, 12);
  });

  test('every pass brings less than √2 when neighbours err together', () => {
    const gain = (lag1: number) =>
      predictPlan(usual({ lag1 }))!.timingU / predictPlan(usual({ lag1, swingsPerMark: 0.5 }))!.timingU;
    expect(gain(0)).toBeGreaterThan(1.3);
    expect(gain(0.4)).toBeLessThan(gain(0));
  });
});

describe('does T depend on the amplitude? 10° and 20° at 2 s with 70 ms taps', () => {
  const at10 = { amplitude: { value: radians(10), u: 0 } };
  const other = { otherAmplitude: radians(20) };
  // Computed: T(20°)/T(10°) − 1 = 0.575 %; start and stop at N = 10 0.8 σ, line at N = 20 3.2 σ, at N = 40 8.8 σ.
  test.each([
    ['ends', 10, 0.8, 'cannot_see'],
    ['line', 20, 3.2, 'sees'],
    ['line', 40, 8.8, 'sees'],
  ] as const)('%s, %i swings: %d standard uncertainties, %s', (way, swings, sigma, code) => {
    const verdict = judgeAmplitudeEffect(plan({ ...at10, way, swings }), other);
    expect(verdict.sigma).toBeCloseTo(sigma, 1);
    expect(verdict.code).toBe(code);
    expect(verdict.difference).toBeCloseTo(2 * (periodRatio(radians(20)) - periodRatio(radians(10))), 12);
  });

  test('says how many swings would show it', () => {
    const short = judgeAmplitudeEffect(plan({ ...at10, swings: 10 }), other);
    expect(short.code).toBe('cannot_see');
    const enough = judgeAmplitudeEffect(plan({ ...at10, swings: short.swingsNeeded! }), other);
    expect(enough.sigma).toBeGreaterThanOrEqual(3);
    expect(judgeAmplitudeEffect(plan({ ...at10, swings: short.swingsNeeded! - 1 }), other).sigma).toBeLessThan(3);
  });

  test('a swing that dies away shows less of it', () => {
    const sigma = (damping: TimingPlan['damping']) => judgeAmplitudeEffect(plan({ ...at10, damping }), other).sigma;
    expect(sigma(viscousGuess(0.5, 20))).toBeLessThan(0.7 * sigma(viscousGuess(1, 20)));
  });
});

describe('budget of a usual plan', () => {
  test('names the term that brings most: timing for few swings, length for many', () => {
    expect(dominantTerm(predictPlan(usual({ swings: 10 }))!.gravityBudget)).toBe('timing');
    expect(
      dominantTerm(
        predictPlan(usual({ swings: 100, amplitude: { value: radians(5), u: radians(0.5) } }))!.gravityBudget,
      ),
    ).toBe('length');
    expect(
      dominantTerm(predictPlan(usual({ swings: 200, amplitude: { value: radians(40), u: radians(2) } }))!.budget),
    ).toBe('amplitude');
  });

  test('leaving out the reading at the end brings in the decay', () => {
    const u = (readsEnd: boolean) =>
      predictPlan(usual({ readsEnd, swings: 60, amplitude: { value: radians(20), u: radians(1) } }))!.budget.find(
        ({ term }) => term === 'decay',
      )!.u;
    expect(u(false)).toBeGreaterThan(5 * u(true));
  });

  test('g carries twice the relative uncertainty of T0, and that of the length', () => {
    const { smallPeriod, gravity } = predictPlan(usual())!;
    const relative = Math.hypot((2 * smallPeriod.u) / smallPeriod.value, 0.001 / 0.994);
    expect(gravity!.u / gravity!.value).toBeCloseTo(relative, 12);
  });

  test('1 mm of 25 cm is 0.4 % of g', () => {
    const { gravity, gravityBudget } = predictPlan(usual({ smallPeriod: 1.003, length: { value: 0.25, u: 0.001 } }))!;
    expect(gravityBudget.find(({ term }) => term === 'length')!.u / gravity!.value).toBeCloseTo(0.004, 12);
  });

  test('what it predicts is what the analysis of such runs states, within a third', () => {
    const { normal } = noise(11);
    const amplitude = radians(10);
    const times = Array.from({ length: 31 }, (_, n) => n * 2 * periodRatio(amplitude));
    const stated = Array.from({ length: 40 }, () => {
      const run = rawTapRun({
        times: times.map((t) => t + 5 + 0.07 * normal()),
        amplitudes: [angleReading(0, 10, 1), angleReading(30, 9.9, 1)],
      });
      return analyseRun({ run: sealed(run), edits: [] }).small_period_s!.u;
    }).sort((a, b) => a - b);
    const predicted = predictPlan(
      plan({ amplitude: { value: amplitude, u: radians(1) }, readsEnd: true, swings: 30 }),
    )!;
    const ratio = stated[20]! / predicted.smallPeriod.u;
    expect(ratio).toBeGreaterThan(0.75);
    expect(ratio).toBeLessThan(1.33);
  });
});

describe('judgeTarget', () => {
  test('says what keeps a plan from its target when nothing helps', () => {
    const verdict = judgeTarget(usual({ length: { value: 0.25, u: 0.002 }, smallPeriod: 1.003 }), {
      of: 'gravity',
      relative: 1e-3,
    });
    expect(verdict).toMatchObject({ code: 'floor', swingsNeeded: null, repeatsNeeded: null, term: 'length' });
  });

  test('what stands in the way is what repeats leave, not what one run shows', () => {
    const few = usual({ swings: 10 });
    expect(dominantTerm(predictPlan(few)!.gravityBudget)).toBe('timing');
    expect(judgeTarget(few, { of: 'gravity', relative: 5e-4 })).toMatchObject({ code: 'floor', term: 'length' });
  });

  test('says when the plan is good enough, and how few swings would do', () => {
    const verdict = judgeTarget(usual({ swings: 40 }), { of: 'smallPeriod', relative: 5e-3 });
    expect(verdict.code).toBe('meets');
    expect(verdict.swingsNeeded).toBeLessThan(15);
  });

  test('offers repeats too', () => {
    const verdict = judgeTarget(plan({ swings: 10 }), { of: 'smallPeriod', relative: 2e-3 });
    // 0.0953 × 0.07 / 2 = 3.34e-3 for one run, so three.
    expect(verdict).toMatchObject({ code: 'swings', repeatsNeeded: 3 });
  });

  test('has no result where the bob is at rest before the end', () => {
    const verdict = judgeTarget(usual({ damping: viscousGuess(0.1, 2), swings: 50 }), {
      of: 'smallPeriod',
      relative: 1e-3,
    });
    expect(verdict).toMatchObject({ code: 'no_result', reached: null });
  });

  test('without a reading at the end the decay limits how long is good, and fewer swings may do', () => {
    const given = { readsEnd: false, amplitude: { value: radians(20), u: radians(0.2) }, swings: 100 };
    const verdict = judgeTarget(usual(given), { of: 'smallPeriod', relative: 3e-3 });
    expect(verdict).toMatchObject({ code: 'swings', term: 'decay' });
    expect(verdict.swingsNeeded).toBeLessThan(20);
  });

  test('does not ask for more swings than there are before it is at rest', () => {
    const dying = usual({
      damping: viscousGuess(0.5, 10),
      swings: 10,
      jitter: 0.01,
      amplitude: { value: radians(3), u: 0 },
    });
    const { swingsNeeded } = judgeTarget(dying, { of: 'smallPeriod', relative: 4e-4 });
    expect(swingsNeeded).toBeGreaterThan(10);
    expect(predictPlan({ ...dying, swings: swingsNeeded! })).toBeDefined();
  });

  test('every k-th swing: swings come in steps of k', () => {
    const verdict = judgeTarget(plan({ swingsPerMark: 4, swings: 8 }), { of: 'smallPeriod', relative: 1e-3 });
    expect(verdict.swingsNeeded! % 4).toBe(0);
  });
});

test('more swings, more repeats or less jitter never make timing worse', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 3, max: 60 }),
      fc.double({ min: 0.005, max: 0.2, noNaN: true }),
      fc.double({ min: 0, max: 0.7, noNaN: true }),
      fc.constantFrom(0.5, 1, 2),
      (n, jitter, lag1, swingsPerMark) => {
        const u = (parts: Partial<TimingPlan>) =>
          predictPlan(usual({ swings: 2 * n, jitter, lag1, swingsPerMark, ...parts }))!.timingU;
        const here = u({});
        expect(u({ swings: 2 * n + 2 })).toBeLessThan(here);
        expect(u({ repeats: 2 })).toBeLessThan(here);
        expect(u({ jitter: jitter / 2 })).toBeLessThan(here);
      },
    ),
  );
});

test('predictPlan names what is out of range', () => {
  expect(() => predictPlan(plan({ smallPeriod: 0 }))).toThrow(/smallPeriod is 0/);
  expect(() => predictPlan(plan({ lag1: 1 }))).toThrow(/lag1 is 1/);
  expect(() => predictPlan(plan({ amplitude: { value: 4, u: 0 } }))).toThrow(/amplitude is 4/);
});
