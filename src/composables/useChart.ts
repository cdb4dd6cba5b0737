import { onScopeDispose, shallowRef, watch, type Ref, type WatchSource } from 'vue';
import type uPlot from 'uplot';
import { readChartTheme, type ChartTheme } from './chartTheme';
import { useChartTheme } from './useChartTheme';

/** Ranges, axes, and how to paint the data. Scales, axes and pixel ratio are uPlot's part. */
export interface Picture {
  x: Axis;
  y: Axis;
  /** Called after the axes are drawn, on every redraw. */
  paint(brush: Brush): void;
}

export interface Axis {
  range: readonly [number, number];
  label: string;
  /** Size of tick numbers and of the axis name, CSS px. */
  tick_px: number;
  name_px: number;
  /** Room for ticks and numbers, CSS px; the name's room comes on top. */
  size_px: number;
  /** Where ticks stand; left out, uPlot chooses. */
  ticks?: readonly number[];
  /** Text of a tick at this tick step; left out, the number as it is. */
  tickText?: (tick: number, step: number) => string;
  grid: boolean;
  /** Steps to choose from; left out, uPlot's own. */
  steps?: readonly number[];
  /** Least distance between ticks, CSS px. */
  space_px?: number;
}

/** Everything in canvas pixels; `px` turns CSS pixels into them. */
export interface Brush {
  context: CanvasRenderingContext2D;
  theme: ChartTheme;
  x: (onScale: number) => number;
  y: (onScale: number) => number;
  px: (css_px: number) => number;
  left: number;
  top: number;
  width: number;
  height: number;
}

export interface ChartOptions {
  /** Element the chart fills, and whose size it follows. */
  host: Ref<HTMLElement | null>;
  /** Whatever the picture is made from: a change of it redraws. */
  redrawOn: WatchSource;
  /** Null draws nothing. */
  picture: (size: { width: number; height: number }, theme: ChartTheme) => Picture | null;
}

/** Whether this browser can draw; where it cannot, tables say it all. */
export const canDraw = (): boolean => Boolean(document.createElement('canvas').getContext('2d'));

/**
 * Draws a picture with uPlot (loaded when first needed) and keeps it right: new data, new size, new
 * pixel ratio, other theme. Redraws are gathered into one a frame and nothing is animated. Where the
 * browser has no canvas, nothing happens.
 */
export function useChart(options: ChartOptions) {
  const themeChanges = useChartTheme();
  const chart = shallowRef<uPlot | null>(null);
  const size = shallowRef({ width: 0, height: 0 });
  if (!canDraw()) return { chart };

  let UPlot: typeof uPlot | null = null;
  let frame = 0;
  let isGone = false;

  const load = async () => {
    const [module] = await Promise.all([import('uplot'), import('uplot/dist/uPlot.min.css')]);
    UPlot = module.default;
    draw();
  };

  function draw() {
    const host = options.host.value;
    if (isGone || !UPlot || !host || size.value.width < 40 || size.value.height < 40) return;
    const theme = readChartTheme(host);
    const picture = options.picture(size.value, theme);
    chart.value?.destroy();
    chart.value = picture && new UPlot(uplotOptions(picture, size.value, theme), cornersOf(picture), host);
  }

  function redrawSoon() {
    cancelAnimationFrame(frame);
    frame = requestAnimationFrame(draw);
  }

  const observer = new ResizeObserver(([entry]) => {
    const { width, height } = entry!.contentRect;
    size.value = { width: Math.floor(width), height: Math.floor(height) };
  });

  watch(
    options.host,
    (host, before) => {
      if (before) observer.unobserve(before);
      if (!host) return;
      observer.observe(host);
      if (!UPlot) void load();
    },
    { immediate: true, flush: 'post' },
  );
  watch([themeChanges, size, options.redrawOn], redrawSoon);

  onScopeDispose(() => {
    isGone = true;
    cancelAnimationFrame(frame);
    observer.disconnect();
    chart.value?.destroy();
  });
  return { chart };
}

/** uPlot sets a scale only when there is data on it: the corners stand in, the paint function draws. */
function cornersOf({ x, y }: Picture): uPlot.AlignedData {
  return [[...x.range], [...y.range]];
}

function uplotOptions(picture: Picture, size: { width: number; height: number }, theme: ChartTheme): uPlot.Options {
  const axis = (spec: Axis, side: 2 | 3, scale: string): uPlot.Axis => ({
    scale,
    side,
    label: spec.label || undefined,
    // Whole pixels: uPlot scales a font by its last run of digits, so 12.8px would come out as 12.16px on a phone.
    labelFont: `600 ${Math.round(spec.name_px)}px ${theme.font}`,
    labelSize: spec.label ? spec.name_px * 1.5 : 0,
    labelGap: 0,
    font: `${Math.round(spec.tick_px)}px ${theme.font}`,
    size: spec.size_px,
    gap: spec.tick_px * 0.3,
    stroke: theme.ink,
    space: spec.space_px ?? spec.tick_px * 3.2,
    grid: { show: spec.grid, stroke: theme.line, width: 1 },
    ticks: { show: spec.grid, stroke: theme.line, width: 1, size: spec.tick_px * 0.35 },
    border: { show: true, stroke: theme.soft, width: 1 },
    ...(spec.steps ? { incrs: [...spec.steps] } : {}),
    ...(spec.ticks ? { splits: [...spec.ticks] } : {}),
    ...(spec.tickText
      ? { values: (_: uPlot, ticks: number[]) => ticks.map((t) => spec.tickText!(t, stepOf(ticks))) }
      : {}),
  });
  return {
    ...size,
    legend: { show: false },
    cursor: { show: false },
    select: { show: false, left: 0, top: 0, width: 0, height: 0 },
    padding: [picture.y.tick_px * 0.6, picture.x.tick_px * 1.4, 0, 0],
    scales: {
      x: { time: false, range: () => [...picture.x.range] },
      y: { range: () => [...picture.y.range] },
    },
    axes: [axis(picture.x, 2, 'x'), axis(picture.y, 3, 'y')],
    series: [{}, { paths: () => null, points: { show: false } }],
    hooks: { draw: [(u) => paint(u, picture, theme)] },
  };
}

function paint(u: uPlot, picture: Picture, theme: ChartTheme): void {
  const { left, top, width, height } = u.bbox;
  const ratio = u.ctx.canvas.width / u.width;
  u.ctx.canvas.setAttribute('aria-hidden', 'true');
  u.ctx.save();
  picture.paint({
    context: u.ctx,
    theme,
    x: (v) => u.valToPos(v, 'x', true),
    y: (v) => u.valToPos(v, 'y', true),
    px: (css) => css * ratio,
    left,
    top,
    width,
    height,
  });
  u.ctx.restore();
}

const stepOf = (ticks: readonly number[]) => (ticks.length > 1 ? Math.abs(ticks[1]! - ticks[0]!) : 1);
