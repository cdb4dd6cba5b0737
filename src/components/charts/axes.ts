import type { ChartTheme } from '@/composables/chartTheme';

/** What the axes of all pictures of one run have alike: sizes, and lines across from the upright one. */
export function runAxes({ rem }: ChartTheme) {
  const type = { tick_px: rem * 0.8, name_px: rem * 0.8 };
  return { x: { ...type, size_px: rem * 1.8, grid: false }, y: { ...type, size_px: rem * 2.9, grid: true } };
}

/** A true minus sign, and no grouping. */
export const withMinus = (tick: number): string => (tick < 0 ? `−${-tick}` : String(tick));
