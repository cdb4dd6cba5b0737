import { viscousGuess } from '@shared/analysis/forecast';
import { smallPeriodFrom, STANDARD_GRAVITY } from '@shared/physics/gravity';
import type { TimingPlan } from '@shared/analysis/planner/timingPlan';
import { radians } from '@shared/units/angle';

/** The planner as it is filled in; null where a field is empty or cannot be read. */
export interface PlannerForm {
  from: 'length' | 'period';
  length_um: number | null;
  length_u_um: number | null;
  period_s: number | null;
  amplitude_mdeg: number | null;
  amplitude_u_mdeg: number | null;
  end: 'read' | 'not_read';
  mode: 'swing' | 'pass' | 'every' | 'ends';
  /** Swings from mark to mark, for mode `every`. */
  every: number | null;
  swings: number | null;
  repeats: number | null;
  jitter_ms: number | null;
  lag1: number | null;
  /** Share of the amplitude left after `KEPT_SWINGS` swings. */
  kept_percent: number | null;
  goal: 'small_period' | 'gravity' | 'amplitude_effect';
  /** Relative standard uncertainty wanted. */
  target_percent: number | null;
  other_mdeg: number | null;
}

/** Swings after which the form asks what is left of the amplitude. */
export const KEPT_SWINGS = 20;

/** 70 ms: standard deviation of one anticipated tap, Am. J. Phys. 87, 110 (2019). The rest is a usual school rig. */
export const USUAL_FORM: PlannerForm = {
  from: 'length',
  length_um: 1_000_000,
  length_u_um: 1_000,
  period_s: 2,
  amplitude_mdeg: 10_000,
  amplitude_u_mdeg: 1_000,
  end: 'read',
  mode: 'swing',
  every: 2,
  swings: 20,
  repeats: 1,
  jitter_ms: 70,
  lag1: 0,
  kept_percent: 90,
  goal: 'small_period',
  target_percent: 0.1,
  other_mdeg: 20_000,
};

/** Last digit, s: of the phone's clock as it is shown, and of a hand stopwatch. */
const PHONE_STEP = 0.001;
const STOPWATCH_STEP = 0.01;

/** The plan a form stands for; null while something it needs is not there. */
export function planOf(form: PlannerForm): TimingPlan | null {
  const { length_um, length_u_um, period_s, amplitude_mdeg, amplitude_u_mdeg, swings, repeats, jitter_ms } = form;
  const { lag1, kept_percent, mode } = form;
  const swingsPerMark = { swing: 1, pass: 0.5, every: form.every, ends: 1 }[mode];
  const length = length_um === null || length_u_um === null ? null : { value: length_um / 1e6, u: length_u_um / 1e6 };
  const smallPeriod = form.from === 'period' ? period_s : length && smallPeriodFrom(length.value, STANDARD_GRAVITY);
  if (smallPeriod === null || swingsPerMark === null || amplitude_mdeg === null || amplitude_u_mdeg === null)
    return null;
  if (swings === null || repeats === null || jitter_ms === null || lag1 === null || kept_percent === null) return null;
  return {
    smallPeriod,
    length: form.from === 'period' ? null : length,
    amplitude: { value: radians(amplitude_mdeg / 1000), u: radians(amplitude_u_mdeg / 1000) },
    readsEnd: form.end === 'read',
    damping: viscousGuess(kept_percent / 100, KEPT_SWINGS),
    way: mode === 'ends' ? 'ends' : 'line',
    swingsPerMark,
    swings,
    repeats,
    jitter: jitter_ms / 1000,
    lag1,
    readingStep: mode === 'ends' ? STOPWATCH_STEP : PHONE_STEP,
  };
}
