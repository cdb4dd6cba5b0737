import { effectScope, nextTick } from 'vue';
import { describe, expect, it } from 'vitest';
import { planOf, USUAL_FORM } from '@/composables/planner/plannerForm';
import { usePlanner } from '@/composables/planner/usePlanner';
import { angleReading, stringRig } from '../../factories/rawRuns';

describe('planOf', () => {
  it('turns the usual form into a plan in SI', () => {
    const plan = planOf(USUAL_FORM)!;
    expect(plan.smallPeriod).toBeCloseTo(2.00641, 5);
    expect(plan).toMatchObject({ length: { value: 1, u: 0.001 }, jitter: 0.07, way: 'line', swingsPerMark: 1 });
  });

  it('is null while any field it needs is open', () => {
    for (const key of [
      'length_um',
      'amplitude_mdeg',
      'swings',
      'repeats',
      'jitter_ms',
      'lag1',
      'kept_percent',
    ] as const) {
      expect(planOf({ ...USUAL_FORM, [key]: null })).toBeNull();
    }
    expect(planOf({ ...USUAL_FORM, period_s: null })).not.toBeNull();
    expect(planOf({ ...USUAL_FORM, from: 'period', period_s: null })).toBeNull();
  });
});

describe('usePlanner', () => {
  it('takes over length, amplitude, marks and swings of the rig set up last', async () => {
    const scope = effectScope();
    await scope.run(async () => {
      const { form, outcome, takeOver } = usePlanner({ quietMs: 0 });
      takeOver({
        rig: stringRig({ length_readings: [{ to: 'centre', um: 500_000 }], length_u_um: 2_000 }),
        amplitudes: [angleReading(0, 15)],
        swings_per_mark: 0.5,
        planned_swings: 30,
      });
      await nextTick();
      expect(form).toMatchObject({
        length_um: 500_000,
        length_u_um: 2_000,
        amplitude_mdeg: 15_000,
        mode: 'pass',
        swings: 30,
      });
      expect(outcome.value).toMatchObject({
        kind: 'target',
        prediction: { smallPeriod: { value: expect.closeTo(1.4187, 3) as number } },
      });
    });
    scope.stop();
  });
});
