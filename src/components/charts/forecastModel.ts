import { forecast } from '@shared/analysis/forecast';
import type { TimingPlan } from '@shared/analysis/planner/timingPlan';
import { degrees } from '@shared/units/angle';

/** What a planned pendulum will do, swing by swing. */
export interface ForecastPoint {
  /** Place in the points, for the walk. */
  mark: number;
  swing: number;
  time_s: number;
  amplitude_deg: number;
}

const MOST_POINTS = 60;

/** The fall of the amplitude to the end of the plan, and on to `needed` swings where that is more. */
export function forecastPoints(plan: TimingPlan, needed: number | null): ForecastPoint[] {
  const swings = Math.max(plan.swings, needed ?? 0);
  const { passes } = forecast({ ...plan, amplitude: plan.amplitude.value, swings });
  const stride = Math.ceil(swings / MOST_POINTS);
  const ends = [plan.swings, needed, passes.at(-1)!.swing];
  return passes
    .filter(({ swing }) => Number.isInteger(swing) && (swing % stride === 0 || ends.includes(swing)))
    .map(({ swing, time, amplitude }, mark) => ({ mark, swing, time_s: time, amplitude_deg: degrees(amplitude) }));
}
