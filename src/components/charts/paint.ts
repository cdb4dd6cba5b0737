import type { Brush } from '@/composables/useChart';

/** Fills, and outlines against the ground so that overlapping marks stay apart. */
export function paintMarker(brush: Brush, path: string, x: number, y: number, colour: string): void {
  const { context, theme, px } = brush;
  const shape = new Path2D(path);
  context.save();
  context.translate(x, y);
  context.scale(px(1), px(1));
  context.fillStyle = colour;
  context.strokeStyle = theme.ground;
  context.lineWidth = 1.5;
  context.stroke(shape);
  context.fill(shape);
  context.restore();
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
