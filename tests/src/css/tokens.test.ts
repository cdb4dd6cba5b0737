import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';

const css = readFileSync(join(import.meta.dirname, '../../../src/css/tokens.css'), 'utf8');
const tokensIn = (block: string) =>
  Object.fromEntries([...block.matchAll(/--([\w-]+):\s*(#[0-9a-f]{6})/g)].map((hit) => [hit[1]!, hit[2]!]));
const [day, night] = css.split(":root[data-theme='dark']") as [string, string];
const themes = { day: tokensIn(day), night: { ...tokensIn(day), ...tokensIn(night) } };

/** Relative luminance and contrast ratio as WCAG 2.2 defines them. */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const channel = parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  }) as [number, number, number];
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}
function contrast(a: string, b: string): number {
  const [light, dark] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
  return (light + 0.05) / (dark + 0.05);
}

const TEXT: [string, string][] = [
  ...['ink', 'ink-soft', 'action', 'brass', 'alarm'].flatMap(
    (ink) =>
      [
        [ink, 'paper'],
        [ink, 'sheet'],
      ] as [string, string][],
  ),
  ['ink', 'action-wash'],
  ['ink-soft', 'action-wash'],
  ['action', 'action-wash'],
  ['ink', 'brass-wash'],
  ['action', 'brass-wash'],
  ['brass', 'brass-wash'],
  ['alarm', 'alarm-wash'],
  ['on-action', 'action'],
  ['on-action', 'action-deep'],
  ['on-action', 'alarm'],
  ['pad-ink-soft', 'pad'],
  ['pad-action', 'pad'],
  ['pad-alarm', 'pad'],
  ['pad-glow', 'pad'],
];
/** Edges of controls and the focus ring: WCAG 2.2, 1.4.11 and 2.4.13. */
const SHAPES: [string, string][] = [
  ['line-strong', 'paper'],
  ['line-strong', 'sheet'],
  ['focus', 'paper'],
  ['focus', 'sheet'],
];

it('the formula gives the ratio WCAG publishes for black on white', () => {
  expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
});

describe.each(['day', 'night'] as const)('by %s', (theme) => {
  it.each(TEXT)('%s on %s reads at 4.5 : 1', (ink, ground) => {
    expect(contrast(themes[theme][ink]!, themes[theme][ground]!)).toBeGreaterThanOrEqual(4.5);
  });
  it.each(SHAPES)('%s stands out from %s at 3 : 1', (shape, ground) => {
    expect(contrast(themes[theme][shape]!, themes[theme][ground]!)).toBeGreaterThanOrEqual(3);
  });
  it('the count on the pad stands at 10 : 1 or more', () => {
    expect(contrast(themes[theme]['pad-ink']!, themes[theme].pad!)).toBeGreaterThanOrEqual(10);
  });
});
