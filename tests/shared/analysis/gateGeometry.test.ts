import { describe, expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { amplitudeFromBlock } from '@shared/physics/blockSpeed';
import type { GateCapture } from '@shared/schemas/run';
import { degrees } from '@shared/units/angle';
import reference from '../../reference/photogate.json';
import { rawGateRun, sealed } from '../../factories/rawRuns';

/** photogate.json: motion integrated with 190-bit arithmetic, or exact elliptic integrals, in units of √(L/g): T0 = 2π. */
const SMALL_PERIOD = 2 * Math.PI;
const flag = (width: number) => ({ flag_width_um: Math.round(width * 1e6), flag_distance_um: 1_000_000 });

describe('amplitudeFromBlock', () => {
  test.each(reference.width.table.filter((row) => Number(row.amplitude_deg) >= 10))(
    'gives back $amplitude_deg° from a flag of $w_over_L of the length to 2e-4',
    ({ amplitude_deg, w_over_L, blocked_time }) => {
      const found = degrees(amplitudeFromBlock(Number(w_over_L), Number(blocked_time), SMALL_PERIOD)!);
      // Uncorrected, the speed is low by up to (ω dt)²/24: 5e-3 in this table. What is left is of fourth order.
      expect(Math.abs(found / Number(amplitude_deg) - 1)).toBeLessThan(2e-4);
    },
  );

  test('is undefined for a speed no swing reaches', () => {
    expect(amplitudeFromBlock(0.02, 0.001, SMALL_PERIOD)).toBeUndefined();
  });
});

describe('a gate with a flag and no amplitude read', () => {
  const runs = reference.runs.map((run) => ({
    name: `${run.amplitude_deg}°, gamma ${run.gamma}, beta ${run.beta}, c ${run.c}`,
    deg: Number(run.amplitude_deg),
    blocks: run.block.map((on, i): [number, number] => [Number(on), Number(run.unblock[i])]),
    half: Number(run.flag_half_width_rad),
  }));
  const analysed = (blocks: [number, number][], capture: Partial<GateCapture>) =>
    analyseRun({ run: sealed(rawGateRun({ blocks, capture })), edits: [] });

  test.each(runs)('finds T0 to 5e-5 and the amplitude at its first block: $name', ({ deg, blocks, half }) => {
    const { small_period_s: period, amplitude, flags } = analysed(blocks, flag(2 * half));
    expect(Math.abs(period!.value / SMALL_PERIOD - 1)).toBeLessThan(5e-5);
    expect(Math.abs(period!.value - SMALL_PERIOD)).toBeLessThan(3 * period!.u);
    // The first block comes a quarter of a swing after the start, so the amplitude is already a little less.
    expect(amplitude!.start_deg.value).toBeLessThan(1.001 * deg);
    expect(amplitude!.start_deg.value).toBeGreaterThan(0.97 * deg);
    expect(flags).toEqual([]);
  });

  test('would be wrong by 1e-4 from the leading edges alone, which is why marks are midpoints', () => {
    const { blocks, half } = runs[0]!;
    const edges = blocks.map(([on]): [number, number] => [on - 1e-5, on + 1e-5]);
    const period = (analysis: ReturnType<typeof analysed>) => analysis.period_s!.value;
    const low = period(analysed(edges, {})) / period(analysed(blocks, flag(2 * half))) - 1;
    expect(low).toBeLessThan(-1e-4);
    expect(low).toBeGreaterThan(-2e-4);
  });

  test('knows its amplitude less well from a coarse clock', () => {
    const { blocks, half } = runs[0]!;
    const u = (reading_step_us: number) =>
      analysed(blocks, { ...flag(2 * half), reading_step_us }).amplitude!.start_deg.u;
    expect(u(20_000)).toBeGreaterThan(1.5 * u(1));
  });
});
