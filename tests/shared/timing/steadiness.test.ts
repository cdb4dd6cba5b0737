import { describe, expect, it } from 'vitest';
import { steadiness } from '@shared/timing/steadiness';

/** Marks every 2 s, each off by the next of these, ms. */
const tapped = (off_ms: number[], lap_s = 2) =>
  off_ms.map((off, i) => ({ at_us: Math.round((10 + i * lap_s) * 1e6 + off * 1000), missed: 0 }));
/** Twelve draws like those of a normal law with standard deviation 1. */
const DRAWS = [0.9, 0.3, -1.4, -0.6, 0.8, 1.3, -0.2, -0.9, -1.1, 0.4, 1.6, -0.5];
const swing = (ms: number, n = 12) => Array.from({ length: n }, (_, i) => ms * DRAWS[i % 12]!);

describe('steadiness', () => {
  it('says nothing before four laps', () => {
    expect(steadiness(tapped([0, 0, 0, 0]), 1)).toBeUndefined();
    expect(steadiness(tapped([0, 0, 0, 0, 0]), 1)).toBe('even');
  });

  it('tells 20 ms from 60 ms from 150 ms of scatter', () => {
    expect(steadiness(tapped(swing(20)), 1)).toBe('even');
    expect(steadiness(tapped(swing(60)), 1)).toBe('fair');
    expect(steadiness(tapped(swing(150)), 1)).toBe('uneven');
  });

  it('does not depend on how fast the pendulum is', () => {
    expect(steadiness(tapped(swing(60), 0.7), 1)).toBe(steadiness(tapped(swing(60), 3), 1));
  });

  it('a lap of 4 s among laps of 2 s is uneven, and forgotten three laps later', () => {
    const marks = tapped(swing(20, 14)).toSpliced(9, 1);
    expect(steadiness(marks.slice(0, 9), 1)).toBe('even');
    expect(steadiness(marks.slice(0, 10), 1)).toBe('uneven');
    expect(steadiness(marks.slice(0, 12), 1)).toBe('uneven');
    expect(steadiness(marks.slice(0, 13), 1)).toBe('even');
  });

  it('does not mind a missed pass that was said to be missed', () => {
    const marks = tapped(swing(20, 14)).toSpliced(9, 1);
    marks[9]!.missed = 1;
    expect(steadiness(marks.slice(0, 10), 1)).toBe('even');
    const both = tapped(swing(20, 14), 1).toSpliced(9, 1);
    both[9]!.missed = 1;
    expect(steadiness(both.slice(0, 10), 0.5)).toBe('even');
  });

  it('does not hold a mark beside the centre against the tapper', () => {
    const limping = tapped(
      Array.from({ length: 14 }, (_, i) => (i % 2 ? 180 : 0)),
      1,
    );
    expect(steadiness(limping, 0.5)).toBe('even');
    expect(steadiness(limping, 1)).toBe('uneven');
  });

  it('forgets how the run began', () => {
    expect(steadiness(tapped([200, -200, 200, -200, ...Array<number>(14).fill(0)]), 1)).toBe('even');
  });
});
