import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { amplitudeFromBlock } from '@shared/physics/blockSpeed';
import * as gate from '@shared/physics/photogate';
import { timeFromBottom } from '@shared/physics/timeFromBottom';
import { radians } from '@shared/units/angle';
import { periodRatio } from '@shared/physics/periodRatio';
import reference from '../../reference/photogate.json';

/** photogate.json is in units of ω = 1, so T0 = 2π; Jacobi functions with 60 digits. */
const T0 = 2 * Math.PI;
const relative = (found: number, wanted: number) => Math.abs(found / wanted - 1);

describe('a flag of finite width', () => {
  const rows = reference.width.table.map((row) => ({
    amplitude: radians(Number(row.amplitude_deg)),
    flag: Number(row.w_over_L),
    ...row,
  }));
  const title = '$amplitude_deg°, w/L = $w_over_L';

  test.each(rows)(`blocks the beam as long as the closed form says: ${title}`, ({ amplitude, flag, blocked_time }) => {
    expect(relative(gate.blockedTime({ flag }, amplitude, T0)!, Number(blocked_time))).toBeLessThan(1e-13);
  });

  test.each(rows)(`makes the speed low by (ω dt)²/24 to first order: ${title}`, (row) => {
    const dt = Number(row.blocked_time);
    const speed = gate.bottomSpeed(row.amplitude, T0);
    expect(relative(speed, Number(row.v_bottom_exact))).toBeLessThan(1e-14);
    expect(row.flag / dt / speed - 1).toBeCloseTo(Number(row.relative_bias), 9);
    expect(relative(gate.widthBias(dt, T0), Number(row.leading_order))).toBeLessThan(1e-7);
  });

  test.each(rows)(`gives back the amplitude: ${title}`, ({ amplitude, flag, blocked_time }) => {
    expect(relative(gate.exactAmplitudeFromBlock({ flag }, Number(blocked_time), T0)!, amplitude)).toBeLessThan(1e-12);
    // The first-order way in use on live screens leaves (ω dt)⁴/640 or so.
    expect(relative(amplitudeFromBlock(flag, Number(blocked_time), T0)!, amplitude)).toBeLessThan(2e-4);
  });

  test('gives back the amplitude also off centre', () => {
    fc.assert(
      fc.property(
        fc.double({ min: radians(3), max: radians(170), noNaN: true }),
        fc.double({ min: 0, max: 0.8, noNaN: true }),
        (amplitude, share) => {
          const setUp = { flag: 0.02, offCentre: share * (amplitude - 0.02) };
          const dt = gate.blockedTime(setUp, amplitude, 2)!;
          expect(relative(gate.exactAmplitudeFromBlock(setUp, dt, 2)!, amplitude)).toBeLessThan(1e-6);
        },
      ),
    );
  });

  test('does not get through a beam beyond its turning point', () => {
    expect(gate.blockedTime({ flag: 0.02, offCentre: 0.1 }, 0.1, T0)).toBeUndefined();
    expect(gate.exactAmplitudeFromBlock({ flag: 0.02 }, 10, T0)).toBeUndefined();
    expect(gate.exactAmplitudeFromBlock({ flag: 0.02 }, 0.001, T0)).toBeUndefined();
  });
});

describe('a beam off the lowest point', () => {
  const rows = reference.offset.table.map((row) => {
    const amplitude = radians(Number(row.amplitude_deg));
    return { amplitude, offCentre: Number(row.offset_over_amplitude) * amplitude, ...row };
  });

  test.each(rows)('$amplitude_deg°, $offset_over_amplitude of the amplitude: intervals alternate', (row) => {
    const { long, short } = gate.passIntervals(row.offCentre, row.amplitude, T0);
    expect(relative(long, Number(row.long_interval))).toBeLessThan(1e-13);
    expect(relative(short, Number(row.short_interval))).toBeLessThan(1e-13);
    expect(long + short).toBeCloseTo(T0 * periodRatio(row.amplitude), 13);
  });

  test.each(rows)('$amplitude_deg°, $offset_over_amplitude: comes back from them to first order', (row) => {
    const intervals = { long: Number(row.long_interval), short: Number(row.short_interval) };
    // First order in the amplitude: 45° leaves some per cent.
    expect(relative(gate.offCentreFrom(intervals, row.amplitude), row.offCentre)).toBeLessThan(row.amplitude ** 2 / 8);
  });
});

describe('edges and midpoints of a swing that dies away', () => {
  const run = reference.runs[0]!;
  const blocks = run.block.map((on, i) => [Number(on), Number(run.unblock[i])] as const);
  const swings = (at: (block: gate.Block) => number) => blocks.slice(2).map((block, i) => at(block) - at(blocks[i]!));

  test('the leading edge makes T low by the formula, 10° and γ = 0.002', () => {
    const byEdge = swings(([on]) => on);
    const byMiddle = swings(gate.blockMidpoint);
    const gamma = Number(run.gamma);
    const middle = Math.floor(byEdge.length / 2);
    const amplitude = radians(10) * Math.exp(-gamma * blocks[middle + 1]![0]);
    const found = byEdge[middle]! - byMiddle[middle]!;
    const said = gate.edgeBias(0.02, amplitude, amplitude * gamma * T0, T0);
    expect(found).toBeLessThan(0);
    expect(relative(said, found)).toBeLessThan(0.03);
  });

  test('the middle of both edges leaves nothing of it', () => {
    // Energy average of T over each swing; what remains is γ²/2 and the change within a swing.
    const gamma = Number(run.gamma);
    swings(gate.blockMidpoint).forEach((period, i) => {
      const amplitude = radians(10) * Math.exp(-gamma * gate.blockMidpoint(blocks[i + 1]!));
      expect(Math.abs(period / T0 / periodRatio(amplitude) - 1)).toBeLessThan(6e-6);
    });
  });
});

describe('timeFromBottom', () => {
  test('is a quarter of the period at the turning point', () => {
    for (const deg of [1, 30, 90, 150, 175]) {
      const amplitude = radians(deg);
      expect(relative(timeFromBottom(amplitude, amplitude, 2), periodRatio(amplitude) / 2)).toBeLessThan(1e-14);
    }
  });

  test('refuses angles beyond the amplitude', () => {
    expect(() => timeFromBottom(0.3, 0.2, 2)).toThrow(/angle is 0.3/);
    expect(() => timeFromBottom(0, Math.PI, 2)).toThrow(/amplitude is/);
  });
});
