import type { ChartTheme } from '@/composables/chartTheme';
import type { Brush, Picture } from '@/composables/useChart';
import { degrees } from '@shared/units/angle';
import type { MotionMark, MotionModel, Stretch } from './motionModel';
import { paintCurve, paintLine, paintMarker, paintShade } from './paint';
import { runAxes, withMinus } from './axes';

interface Parts {
  model: MotionModel;
  stretch: Stretch;
  /** The mark the reader stands on. */
  chosen: MotionMark | null;
  /** What is drawn: the angle, or how fast it changes. */
  of: 'angle' | 'rate';
}

/** The fitted motion over time with the marks on it where they were pressed. */
export function motionPicture(
  { model, stretch, chosen, of }: Parts,
  names: { x: string; y: string },
  size: { width: number },
  theme: ChartTheme,
): Picture {
  const reach = 1.12 * model.top[of];
  const axes = runAxes(theme);
  const onMark = (mark: MotionMark) => (of === 'angle' ? mark.angle_deg : mark.rate_deg_s);
  const [from, to] = stretch.range_s;
  const room = 0.015 * (to - from);
  return {
    x: { ...axes.x, range: [from - room, to + room], label: names.x },
    y: {
      ...axes.y,
      range: [-reach, reach],
      label: names.y,
      tickText: withMinus,
    },
    paint: (brush) => {
      paintLine(brush, [brush.left, brush.y(0)], [brush.left + brush.width, brush.y(0)], {
        colour: theme.soft,
        width_px: 1,
      });
      paintMotion(brush, stretch, of);
      const shown = model.marks.filter(({ time_s }) => time_s >= from - room && time_s <= to + room);
      const radius = Math.min(4.5, Math.max(2.2, size.width / Math.max(shown.length, 1) / 3));
      for (const mark of shown) {
        const [x, y] = [brush.x(mark.time_s), brush.y(onMark(mark))];
        if (mark === chosen) {
          paintLine(brush, [x, brush.top], [x, brush.top + brush.height], { colour: theme.brass, width_px: 1.5 });
          paintMarker(brush, ['ring', radius + 6], x, y, theme.brass);
        }
        paintMarker(brush, ['circle', radius], x, y, theme.series[0]!);
      }
    },
  };
}

function paintMotion(brush: Brush, { curve, outline }: Stretch, of: Parts['of']): void {
  const { theme } = brush;
  const stroke = { colour: theme.ink, width_px: 1.75 };
  if (curve.length > 0) {
    paintCurve(
      brush,
      curve.map((state) => [brush.x(state.time), brush.y(degrees(state[of]))]),
      stroke,
    );
    return;
  }
  const [upper, lower] = [1, -1].map((side) =>
    outline.map((row) => [brush.x(row.time), brush.y(side * degrees(row[of]))] as const),
  );
  paintShade(brush, upper!, lower!, theme.soft, 0.25);
  paintCurve(brush, upper!, stroke);
  paintCurve(brush, lower!, stroke);
}
