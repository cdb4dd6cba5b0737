import type { Brush } from '@/composables/useChart';
import { shapePath, type Shape } from './markers';

/** Shape and radius, CSS px. */
type Marker = readonly [Shape, number];

const stamps = new Map<string, HTMLCanvasElement>();
/** Room for the farthest tip of a star and the outline, in radii. */
const REACH = 1.6;

/**
 * A marker drawn once, to be stamped thousands of times: filled, and outlined so that neighbours stay apart;
 * or hollow, for what is not settled.
 */
export function markerStamp(
  brush: Brush,
  [shape, radius_px]: Marker,
  colour: string,
  fill: 'full' | 'hollow' = 'full',
): HTMLCanvasElement {
  const { theme, px } = brush;
  const key = [shape, radius_px, colour, fill, theme.ground, px(1)].join();
  const known = stamps.get(key);
  if (known) return known;
  const half = Math.ceil(px(radius_px * REACH));
  const stamp = Object.assign(document.createElement('canvas'), { width: 2 * half, height: 2 * half });
  const context = stamp.getContext('2d')!;
  const path = new Path2D(shapePath(shape, radius_px));
  context.translate(half, half);
  context.scale(px(1), px(1));
  const isFull = fill === 'full';
  context.fillStyle = isFull ? colour : theme.ground;
  context.strokeStyle = isFull ? theme.ground : colour;
  context.lineWidth = isFull ? 1.5 : Math.max(2, radius_px * 0.3);
  if (isFull) context.stroke(path);
  context.fill(path);
  if (!isFull) context.stroke(path);
  stamps.set(key, stamp);
  return stamp;
}

export function stampAt({ context }: Brush, stamp: HTMLCanvasElement, x: number, y: number): void {
  context.drawImage(stamp, Math.round(x - stamp.width / 2), Math.round(y - stamp.height / 2));
}

export function paintMarker(brush: Brush, marker: Marker, x: number, y: number, colour: string): void {
  stampAt(brush, markerStamp(brush, marker, colour), x, y);
}

export function paintLine(
  brush: Brush,
  from: readonly [number, number],
  to: readonly [number, number],
  stroke: { colour: string; width_px: number; dash_px?: number[] },
): void {
  const { context, px } = brush;
  context.save();
  context.strokeStyle = stroke.colour;
  context.lineWidth = px(stroke.width_px);
  context.setLineDash((stroke.dash_px ?? []).map(px));
  context.beginPath();
  context.moveTo(...from);
  context.lineTo(...to);
  context.stroke();
  context.restore();
}

type Points = readonly (readonly [x: number, y: number])[];

/** A line through points, in canvas pixels. */
export function paintCurve(
  brush: Brush,
  points: Points,
  stroke: { colour: string; width_px: number; dash_px?: number[] },
): void {
  const { context, px } = brush;
  context.save();
  clipToPlot(brush);
  context.strokeStyle = stroke.colour;
  context.lineWidth = px(stroke.width_px);
  context.lineJoin = 'round';
  context.setLineDash((stroke.dash_px ?? []).map(px));
  context.beginPath();
  points.forEach(([x, y], i) => (i === 0 ? context.moveTo(x, y) : context.lineTo(x, y)));
  context.stroke();
  context.restore();
}

/** The ground between two lines with the same x, in canvas pixels. */
export function paintShade(brush: Brush, upper: Points, lower: Points, colour: string, opacity: number): void {
  const { context } = brush;
  context.save();
  clipToPlot(brush);
  context.globalAlpha = opacity;
  context.fillStyle = colour;
  context.beginPath();
  [...upper, ...[...lower].reverse()].forEach(([x, y], i) => (i === 0 ? context.moveTo(x, y) : context.lineTo(x, y)));
  context.fill();
  context.restore();
}

/** An upright bar with caps, in canvas pixels. */
export function paintBar(brush: Brush, x: number, [from, to]: readonly [number, number], colour: string): void {
  const cap = brush.px(4);
  const stroke = { colour, width_px: 1.75 };
  paintLine(brush, [x, from], [x, to], stroke);
  for (const end of [from, to]) paintLine(brush, [x - cap, end], [x + cap, end], stroke);
}

function clipToPlot({ context, left, top, width, height }: Brush): void {
  context.beginPath();
  context.rect(left, top, width, height);
  context.clip();
}
