import { expect, it } from 'vitest';
import { MAX_BENCH } from '@shared/schemas/limits';
import { benchShape, shapePath, SHAPES } from '@/components/charts/markers';
import { isDark, readChartTheme } from '@/composables/chartTheme';

const looks = (colours: number) => Array.from({ length: MAX_BENCH }, (_, i) => `${benchShape(i + 1)} ${i % colours}`);

it('all benches differ in shape and colour together, by day with five colours and by night with seven', () => {
  expect(new Set(looks(5)).size).toBe(MAX_BENCH);
  expect(new Set(looks(7)).size).toBe(MAX_BENCH);
});

it('a chart takes five colours by day', () => {
  expect(readChartTheme(document.body).series).toHaveLength(5);
});

it('every shape is a closed path', () => {
  for (const shape of SHAPES) expect(shapePath(shape, 8)).toMatch(/^M[-\d. ALMZ]+Z$/);
});

it('isDark tells the sheets of day and night apart', () => {
  expect(isDark('#ffffff')).toBe(false);
  expect(isDark('#18212c')).toBe(true);
});
