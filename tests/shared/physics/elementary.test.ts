import { expect, test } from 'vitest';
import { asin, cos, exp, log, sin } from '@shared/physics/elementary';

/** Units in the last place of the engine's own value: another implementation, itself within one unit of the truth. */
function unitsOff(ours: number, engines: number): number {
  const unit = 2 ** (Math.floor(Math.log2(Math.abs(engines))) - 52);
  return Math.abs(ours - engines) / unit;
}

const everyFew = (from: number, to: number, step: number) =>
  Array.from({ length: Math.floor((to - from) / step) }, (_, i) => from + i * step);

test.each([
  { name: 'sin', ours: sin, engines: Math.sin, at: everyFew(-1000, 1000, 0.0371) },
  { name: 'cos', ours: cos, engines: Math.cos, at: everyFew(-1000, 1000, 0.0371) },
  { name: 'asin', ours: asin, engines: Math.asin, at: everyFew(-1, 1, 0.0000371) },
  { name: 'exp', ours: exp, engines: Math.exp, at: everyFew(-700, 700, 0.0371) },
  { name: 'log', ours: log, engines: Math.log, at: everyFew(0.001, 1000, 0.0371) },
])('$name is within two units in the last place of the engine’s', ({ ours, engines, at }) => {
  const worst = Math.max(...at.map((x) => (engines(x) === 0 ? 0 : unitsOff(ours(x), engines(x)))));
  expect(worst).toBeLessThanOrEqual(2);
});
