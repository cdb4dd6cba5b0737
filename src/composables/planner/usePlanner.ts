import { computed, onScopeDispose, reactive, shallowRef, watch } from 'vue';
import {
  judgeAmplitudeEffect,
  judgeTarget,
  type EffectVerdict,
  type TargetVerdict,
} from '@shared/analysis/planner/judgePlan';
import { predictPlan, type Prediction } from '@shared/analysis/planner/predictPlan';
import type { TimingPlan } from '@shared/analysis/planner/timingPlan';
import { readAmplitudes } from '@shared/analysis/readAmplitudes';
import { reducedLength } from '@shared/physics/reducedLength';
import type { RecordingPlan } from '@/db/localStore';
import { degrees, radians } from '@shared/units/angle';
import { planOf, USUAL_FORM, type PlannerForm } from './plannerForm';

/** What a filled-in planner says. `wanted` is what the verdict was asked about. */
export type PlannerOutcome =
  | { kind: 'unfilled' }
  | { kind: 'target'; plan: TimingPlan; prediction: Prediction | undefined; verdict: TargetVerdict; wanted: number }
  | { kind: 'effect'; plan: TimingPlan; prediction: Prediction | undefined; verdict: EffectVerdict; wanted: number };

/** Typing goes on while a plan is weighed, which takes a tenth of a second on a slow phone. */
const QUIET_MS = 150;

/**
 * The planner's form and what it says, a moment after the last change.
 *
 * @param options.quietMs  150 unless told; 0 answers at once
 */
export function usePlanner({ quietMs = QUIET_MS } = {}) {
  const form = reactive<PlannerForm>({ ...USUAL_FORM });
  const outcome = shallowRef<PlannerOutcome>(weigh(form));
  const isWaiting = shallowRef(false);
  let timer: ReturnType<typeof setTimeout> | undefined;

  function answer() {
    outcome.value = weigh(form);
    isWaiting.value = false;
  }
  watch(form, () => {
    clearTimeout(timer);
    if (quietMs === 0) return answer();
    isWaiting.value = true;
    timer = setTimeout(answer, quietMs);
  });
  // Without a length there is no g to aim at.
  watch(
    () => form.from,
    (from) => {
      if (from === 'period' && form.goal === 'gravity') form.goal = 'small_period';
    },
  );
  onScopeDispose(() => clearTimeout(timer));

  /** Takes over what was set up last: length, amplitude, marks and swings, as far as they are known. */
  function takeOver({ rig, amplitudes, swings_per_mark, planned_swings }: RecordingPlan) {
    const length = rig && reducedLength(rig);
    if (length)
      Object.assign(form, {
        from: 'length',
        length_um: Math.round(length.value * 1e6),
        length_u_um: Math.round(length.u * 1e6),
      });
    const [start] = readAmplitudes(amplitudes);
    if (start) {
      form.amplitude_mdeg = Math.round(1000 * degrees(start.amplitude));
      form.amplitude_u_mdeg = Math.round(1000 * degrees(start.u));
    }
    form.mode = swings_per_mark === 0.5 ? 'pass' : swings_per_mark === 1 ? 'swing' : 'every';
    if (swings_per_mark > 1) form.every = swings_per_mark;
    if (planned_swings !== null) form.swings = planned_swings;
  }

  return { form, outcome: computed(() => outcome.value), isWaiting: computed(() => isWaiting.value), takeOver };
}

function weigh(form: PlannerForm): PlannerOutcome {
  const plan = planOf(form);
  if (!plan) return { kind: 'unfilled' };
  const prediction = predictPlan(plan);
  if (form.goal === 'amplitude_effect') {
    if (form.other_mdeg === null) return { kind: 'unfilled' };
    const otherAmplitude = radians(form.other_mdeg / 1000);
    return {
      kind: 'effect',
      plan,
      prediction,
      verdict: judgeAmplitudeEffect(plan, { otherAmplitude }),
      wanted: otherAmplitude,
    };
  }
  if (form.target_percent === null) return { kind: 'unfilled' };
  const wanted = form.target_percent / 100;
  const of = form.goal === 'gravity' ? 'gravity' : 'smallPeriod';
  return { kind: 'target', plan, prediction, verdict: judgeTarget(plan, { of, relative: wanted }), wanted };
}
