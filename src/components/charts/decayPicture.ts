import type { ChartTheme } from '@/composables/chartTheme';
import type { Picture } from '@/composables/useChart';
import type { AmplitudeDecay } from '@shared/analysis/pictures/amplitudeDecay';
import { degrees } from '@shared/units/angle';
import type { DecayRow } from './decayModel';
import { paintBar, paintCurve, paintLine, paintMarker, paintShade } from './paint';
import { runAxes } from './axes';

/** Swings are counted in whole numbers. */
const WHOLE_STEPS = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000];

/** How the amplitude fell: curve with a band of ±2 u, readings with bars of ±2 u. */
export function decayPicture(
  { curve, readings }: AmplitudeDecay,
  chosen: DecayRow | null,
  names: { x: string; y: string },
  theme: ChartTheme,
): Picture {
  const all = [...curve, ...readings];
  const swings = all.map(({ swing }) => swing);
  const [first, last] = [Math.min(0, ...swings), Math.max(1, ...swings)];
  const top = Math.max(...all.map(({ amplitude, u }) => degrees(amplitude + 2 * u)));
  const room = 0.03 * (last - first);
  const axes = runAxes(theme);
  return {
    x: {
      ...axes.x,
      range: [first - room, last + room],
      label: names.x,
      steps: WHOLE_STEPS,
      tickText: String,
    },
    y: {
      ...axes.y,
      range: [0, Math.min(1.06 * top, 190)],
      label: names.y,
    },
    paint: (brush) => {
      const edge = (by: number) =>
        curve.map(({ swing, amplitude, u }) => [brush.x(swing), brush.y(degrees(amplitude + by * u))] as const);
      paintShade(brush, edge(2), edge(-2), theme.series[0]!, 0.22);
      paintCurve(brush, edge(0), { colour: theme.series[0]!, width_px: 2.5 });
      if (chosen) {
        const x = brush.x(chosen.swing);
        paintLine(brush, [x, brush.top], [x, brush.top + brush.height], { colour: theme.brass, width_px: 1.5 });
        const on = chosen.reading ?? chosen.curve;
        if (on) paintMarker(brush, ['ring', 11], x, brush.y(on.value), theme.brass);
      }
      for (const { swing, amplitude, u, from } of readings) {
        const [x, y] = [brush.x(swing), brush.y(degrees(amplitude))];
        paintBar(brush, x, [brush.y(degrees(amplitude - 2 * u)), brush.y(degrees(amplitude + 2 * u))], theme.ink);
        paintMarker(brush, [from === 'eye' ? 'square' : 'triangle', 5], x, y, theme.ink);
      }
    },
  };
}
