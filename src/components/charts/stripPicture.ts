import type { Brush, Picture } from '@/composables/useChart';
import type { ChartTheme } from '@/composables/chartTheme';
import { paintCurve, paintLine, paintMarker } from './paint';
import { FLAG_SHAPES, largestBow_ms, stripReach_ms, type StripPoint } from './residualStrip';
import { runAxes, withMinus } from './axes';

interface Strip {
  points: StripPoint[];
  jitter_s: number | null;
  /** Where the plain line expects each mark, ms, by mark; empty draws no line. */
  bows_ms: Map<number, number>;
  /** Place in `points` of the mark the reader stands on. */
  chosen: number | null;
}

/** Swings are counted in whole numbers. */
const WHOLE_STEPS = [1, 2, 5, 10, 20, 50, 100, 200, 500];

/** The residual strip, ready for useChart. */
export function stripPicture(
  strip: Strip,
  names: { x: string; y: string },
  size: { width: number },
  theme: ChartTheme,
): Picture {
  const reach = stripReach_ms(strip.points, strip.jitter_s, largestBow_ms(strip.bows_ms) ?? 0);
  const swings = strip.points.map((point) => point.swing);
  const last = Math.max(1, ...swings);
  const axes = runAxes(theme);
  return {
    x: {
      ...axes.x,
      range: [Math.min(0, ...swings) - last * 0.03, last * 1.03],
      label: names.x,
      steps: WHOLE_STEPS,
      tickText: String,
    },
    y: {
      ...axes.y,
      range: [-reach, reach],
      label: names.y,
      tickText: withMinus,
    },
    paint: (brush) => {
      paintBand(brush, strip.jitter_s);
      paintBow(brush, strip);
      const radius = Math.min(5, Math.max(2.2, size.width / strip.points.length / 3));
      strip.points.forEach((point, i) => paintPoint(brush, point, radius, i === strip.chosen));
    },
  };
}

function paintBand(brush: Brush, jitter_s: number | null): void {
  const { context, theme, left, width } = brush;
  if (jitter_s !== null) {
    const [top, bottom] = [brush.y(2000 * jitter_s), brush.y(-2000 * jitter_s)];
    context.save();
    context.globalAlpha = 0.1;
    context.fillStyle = theme.series[0]!;
    context.fillRect(left, top, width, bottom - top);
    context.restore();
    for (const edge of [top, bottom]) {
      paintLine(brush, [left, edge], [left + width, edge], { colour: theme.soft, width_px: 1, dash_px: [3, 4] });
    }
  }
  paintLine(brush, [left, brush.y(0)], [left + width, brush.y(0)], { colour: theme.ink, width_px: 1.5 });
}

/** The plain line through the marks as the motion sees it: straight against time, bent here. */
function paintBow(brush: Brush, { points, bows_ms }: Strip): void {
  const on = points.filter(({ mark }) => bows_ms.has(mark));
  paintCurve(
    brush,
    on.map(({ mark, swing }) => [brush.x(swing), brush.y(bows_ms.get(mark)!)]),
    { colour: brush.theme.brass, width_px: 2.5, dash_px: [7, 5] },
  );
}

function paintPoint(brush: Brush, point: StripPoint, radius: number, isChosen: boolean): void {
  const { theme } = brush;
  const x = brush.x(point.swing);
  // A mark left out has no residual: it stands on the foot of the strip, struck through.
  const y = point.residual_ms === null ? brush.top + brush.height - brush.px(9) : brush.y(point.residual_ms);
  if (isChosen) {
    paintLine(brush, [x, brush.top], [x, brush.top + brush.height], { colour: theme.brass, width_px: 1.5 });
    paintMarker(brush, ['ring', radius + 6], x, y, theme.brass);
  }
  if (point.isLeftOut) return paintMarker(brush, ['cross', radius], x, y, theme.soft);
  paintMarker(brush, ['circle', radius], x, y, theme.series[0]!);
  point.flags.forEach((code, i) => {
    // Above its mark, or below when there is no room above.
    const room = y - brush.top > brush.px(18) ? -1 : 1;
    const away = room * brush.px(13 + 12 * i);
    paintMarker(brush, [FLAG_SHAPES[code], 5.5], x, y + away, point.isFlagOpen ? theme.alarm : theme.soft);
  });
}
