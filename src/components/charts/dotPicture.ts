import type { Brush, Picture } from '@/composables/useChart';
import type { BenchDot, BenchSummary, Lane } from '@shared/analysis/summariseBenches';
import { benchShape } from './markers';
import { markerStamp, paintLine, stampAt } from './paint';

/** Sizes at 1080 lines, px: read from ten metres. */
const TICK = 30;
const NAME = 34;
const MARKER = 11;
const BAR = 3;
const LINE = 4;

interface Words {
  x: string;
  y: string;
  /** A period at this tick step, s. */
  tick: (period_s: number, step_s: number) => string;
  /** What stands beside a mark, if anything. */
  beside: (dot: BenchDot) => string;
  /** A period that stands beyond the picture. */
  beyond: (dot: BenchDot) => string;
}

/** One lane a bench, bench 1 on top; T0 along the foot. `scale` is 1 at 1080 lines. */
export function dotPicture(
  summary: BenchSummary,
  words: Words,
  size: { height: number },
  scale: number,
  hasMiddle: boolean,
): Picture {
  const { lanes } = summary;
  const laneHeight = (size.height - 3.6 * NAME * scale) / lanes.length;
  const laneType = Math.min(TICK * scale, laneHeight * 0.82);
  const place = (lane: number) => lanes.length - lane;
  return {
    x: {
      range: summary.range_s,
      label: words.x,
      tick_px: TICK * scale,
      name_px: NAME * scale,
      size_px: TICK * scale * 1.9,
      grid: true,
      space_px: TICK * scale * 4.5,
      tickText: words.tick,
    },
    y: {
      range: [0.4, lanes.length + 0.6],
      label: words.y,
      tick_px: laneType,
      name_px: NAME * scale,
      size_px: TICK * scale * 1.9,
      grid: false,
      space_px: 1,
      ticks: lanes.map((_, i) => place(i)).reverse(),
      tickText: (tick) => String(lanes[place(tick)]?.bench ?? ''),
    },
    paint: (brush) => {
      if (hasMiddle) paintMiddle(brush, summary, scale);
      const marker = Math.min(MARKER * scale, laneHeight * 0.36);
      const sizes = (runs: number) => ({ marker, scale, type: laneType, step: (0.7 * laneHeight) / (runs + 1) });
      lanes.forEach((lane, i) => paintLane(brush, lane, brush.y(place(i)), sizes(lane.dots.length), summary, words));
    },
  };
}

function paintMiddle(brush: Brush, { low_s, high_s, median_s }: BenchSummary, scale: number): void {
  const { context, theme, top, height } = brush;
  context.save();
  context.globalAlpha = 0.14;
  context.fillStyle = theme.brass;
  context.fillRect(brush.x(low_s), top, brush.x(high_s) - brush.x(low_s), height);
  context.restore();
  const x = brush.x(median_s);
  paintLine(brush, [x, top], [x, top + height], { colour: theme.brass, width_px: LINE * scale });
}

interface LaneSizes {
  /** Between two runs of one bench. */
  step: number;
  marker: number;
  scale: number;
  type: number;
}

function paintLane(brush: Brush, lane: Lane, y: number, sizes: LaneSizes, summary: BenchSummary, words: Words): void {
  const { theme, left, width } = brush;
  const colour = theme.series[(lane.bench - 1) % theme.series.length]!;
  paintLine(brush, [left, y], [left + width, y], { colour: theme.line, width_px: 1 });
  const placed = lane.dots.map((dot, i) => ({
    dot,
    // Runs of one bench stand a little above and below its line, so that their bars do not cover each other.
    y: y + brush.px(sizes.step) * (i - (lane.dots.length - 1) / 2),
  }));
  const within = placed.filter(({ dot }) => !summary.beyond.has(dot));
  paintBars(brush, within, colour, sizes);
  const marker = [benchShape(lane.bench), sizes.marker] as const;
  for (const { dot, y: own } of within) {
    const stamp = markerStamp(brush, marker, colour, dot.open_flags > 0 ? 'hollow' : 'full');
    stampAt(brush, stamp, brush.x(dot.period_s), own);
    const label = words.beside(dot);
    if (label) paintBeside(brush, label, dot, own, sizes);
  }
  for (const { dot, y: own } of placed) {
    if (summary.beyond.has(dot)) paintBeyond(brush, dot, own, colour, sizes, words);
  }
}

/** Bars and caps as filled boxes, which is much quicker than stroking: a class may hand in thousands. */
function paintBars(brush: Brush, placed: { dot: BenchDot; y: number }[], colour: string, sizes: LaneSizes): void {
  const { context, px, left, width } = brush;
  const cap = Math.round(px(sizes.marker * 0.7));
  const thick = Math.round(px(Math.max(1.5, BAR * sizes.scale)));
  context.save();
  context.fillStyle = colour;
  for (const { dot, y } of placed) {
    const line = Math.round(y - thick / 2);
    const ends = [brush.x(dot.period_s - dot.expanded_u_s), brush.x(dot.period_s + dot.expanded_u_s)] as const;
    const [from, to] = [Math.round(Math.max(left, ends[0])), Math.round(Math.min(left + width, ends[1]))];
    context.fillRect(from, line, to - from, thick);
    for (const end of ends) {
      if (end >= left && end <= left + width)
        context.fillRect(Math.round(end - thick / 2), line - cap, thick, 2 * cap + thick);
    }
  }
  context.restore();
}

/** Words to the right of a mark and its bar; to the left of both when there is no room. */
function paintBeside(brush: Brush, label: string, dot: BenchDot, y: number, { type, marker }: LaneSizes): void {
  const { context, theme, px, left, width } = brush;
  const from = Math.max(brush.x(dot.period_s + dot.expanded_u_s), brush.x(dot.period_s) + px(marker));
  context.save();
  context.fillStyle = theme.ink;
  context.font = `${px(type * 0.85)}px ${theme.font}`;
  context.textBaseline = 'middle';
  const isRight = from + px(marker * 0.8) + context.measureText(label).width <= left + width;
  const to = Math.min(brush.x(dot.period_s - dot.expanded_u_s), brush.x(dot.period_s) - px(marker));
  context.textAlign = isRight ? 'left' : 'right';
  context.fillText(label, isRight ? from + px(marker * 0.8) : to - px(marker * 0.8), y);
  context.restore();
}

/** Too far out for the picture: an arrow at the edge, with the number it stands for. */
function paintBeyond(
  brush: Brush,
  dot: BenchDot,
  y: number,
  colour: string,
  { marker, type }: LaneSizes,
  words: Words,
): void {
  const { context, theme, px, left, width } = brush;
  const isRight = brush.x(dot.period_s) > left;
  const tip = isRight ? left + width - px(2) : left + px(2);
  const inward = isRight ? -1 : 1;
  context.save();
  context.fillStyle = colour;
  context.beginPath();
  context.moveTo(tip, y);
  context.lineTo(tip + inward * px(marker * 1.8), y - px(marker));
  context.lineTo(tip + inward * px(marker * 1.8), y + px(marker));
  context.fill();
  context.fillStyle = theme.ink;
  context.font = `${px(type)}px ${theme.font}`;
  context.textBaseline = 'middle';
  context.textAlign = isRight ? 'right' : 'left';
  context.fillText(words.beyond(dot), tip + inward * px(marker * 2.6), y);
  context.restore();
}
