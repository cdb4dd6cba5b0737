/**
 * Colours of a chart, read from the tokens at draw time so that light, dark and high contrast follow
 * the page. Data colours are Okabe and Ito's, cut down to those with 3:1 on the ground they stand on.
 */

export interface ChartTheme {
  ink: string;
  soft: string;
  line: string;
  ground: string;
  alarm: string;
  brass: string;
  /** Colours for data, in the order benches take them. */
  series: string[];
  font: string;
  /** Size of one rem, px: grows with the reader's text size. */
  rem: number;
}

/** Tokens that reach 3:1 on a white sheet: five, so that with eight shapes forty benches all differ. */
const ON_LIGHT = [1, 2, 3, 4, 8];
const ON_DARK = [1, 2, 3, 4, 5, 6, 7];

export function readChartTheme(element: Element): ChartTheme {
  const style = getComputedStyle(element);
  const token = (name: string, otherwise: string) => style.getPropertyValue(name).trim() || otherwise;
  const ground = token('--sheet', '#FFFFFF');
  return {
    ink: token('--ink', '#1B2430'),
    soft: token('--ink-soft', '#4A5563'),
    line: token('--line', '#D9D2C3'),
    ground,
    alarm: token('--alarm', '#B3261E'),
    brass: token('--brass', '#8F5A00'),
    series: (isDark(ground) ? ON_DARK : ON_LIGHT).map((n) => token(`--series-${n}`, '#0072B2')),
    font: style.fontFamily || 'sans-serif',
    rem: parseFloat(getComputedStyle(document.documentElement).fontSize) || 16,
  };
}

/** Whether a #RRGGBB ground is nearer to black than to white. */
export function isDark(colour: string): boolean {
  const [, r, g, b] = /^#(..)(..)(..)/.exec(colour) ?? [];
  if (!r || !g || !b) return false;
  return 0.299 * parseInt(r, 16) + 0.587 * parseInt(g, 16) + 0.114 * parseInt(b, 16) < 128;
}
