import type { ChartTheme } from '@/composables/chartTheme';
import type { Picture } from '@/composables/useChart';
import type { ForecastPoint } from './forecastModel';
import { paintCurve, paintLine, paintMarker } from './paint';
import { runAxes } from './axes';

/** Amplitude over time as foreseen: a line to the end of the plan, dashes on to the swings needed. */
export function forecastPicture(
  points: ForecastPoint[],
  { planned, chosen }: { planned: number; chosen: ForecastPoint | null },
  names: { x: string; y: string },
  theme: ChartTheme,
): Picture {
  const last = points.at(-1)!.time_s;
  const top = points[0]!.amplitude_deg;
  const axes = runAxes(theme);
  return {
    x: { ...axes.x, range: [-0.03 * last, 1.03 * last], label: names.x },
    y: { ...axes.y, range: [0, 1.15 * top], label: names.y },
    paint: (brush) => {
      const place = ({ time_s, amplitude_deg }: ForecastPoint) => [brush.x(time_s), brush.y(amplitude_deg)] as const;
      const within = points.filter(({ swing }) => swing <= planned);
      const beyond = points.filter(({ swing }) => swing >= planned);
      const stroke = { colour: theme.series[0]!, width_px: 2.5 };
      paintCurve(brush, beyond.map(place), { ...stroke, dash_px: [6, 5] });
      paintCurve(brush, within.map(place), stroke);
      paintMarker(brush, ['circle', 5], ...place(within.at(-1)!), theme.series[0]!);
      if (beyond.length > 1) paintMarker(brush, ['triangle', 5.5], ...place(points.at(-1)!), theme.ink);
      if (!chosen) return;
      const [x, y] = place(chosen);
      paintLine(brush, [x, brush.top], [x, brush.top + brush.height], { colour: theme.brass, width_px: 1.5 });
      paintMarker(brush, ['ring', 11], x, y, theme.brass);
    },
  };
}
