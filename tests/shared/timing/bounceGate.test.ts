import { describe, expect, it } from 'vitest';
import { bounceGate, medianLap } from '@shared/timing/bounceGate';

const at = (...times: number[]) => times.map((at_us) => ({ at_us, wall_ms: 0, input: 'touch' as const, missed: 0 }));

describe('bounceGate', () => {
  it('is 60 ms before there is a lap', () => {
    expect(bounceGate([], false)).toBe(60_000);
    expect(bounceGate(at(0), false)).toBe(60_000);
  });

  it('is 15 % of the middle lap once that is longer', () => {
    expect(bounceGate(at(0, 2_000_000, 4_010_000, 6_000_000), false)).toBe(300_000);
  });

  it('is not widened by one slow lap at the start', () => {
    expect(bounceGate(at(0, 6_000_000), false)).toBe(60_000);
  });

  it('stays at 60 ms for passes of a 0.317 s half swing', () => {
    expect(bounceGate(at(0, 317_000, 634_000, 951_000), false)).toBe(60_000);
  });

  it('is at least 150 ms with gloves on', () => {
    expect(bounceGate(at(0, 634_000, 1_268_000, 1_902_000), true)).toBe(150_000);
    expect(bounceGate(at(0, 2_000_000, 4_000_000, 6_000_000), true)).toBe(300_000);
  });
});

describe('medianLap', () => {
  it('leaves out laps in which a pass was missed', () => {
    const marks = at(0, 2_000_000, 6_000_000, 8_100_000);
    marks[2]!.missed = 1;
    expect(medianLap(marks)).toBe(2_050_000);
  });

  it('is not moved by one lap far off', () => {
    expect(medianLap(at(0, 2_000_000, 4_000_000, 60_000_000))).toBe(2_000_000);
  });

  it('is undefined with one mark', () => {
    expect(medianLap(at(0))).toBeUndefined();
  });
});
