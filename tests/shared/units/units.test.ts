import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { formatMeasured, formatSeconds } from '@shared/units/formatMeasured';
import { parseDecimal } from '@shared/units/parseDecimal';
import { parseLength } from '@shared/units/parseLength';
import { parseStopwatch } from '@shared/units/parseStopwatch';

const problem = (parsed: { ok: boolean; problem?: { code: string } }) => (parsed.ok ? 'read' : parsed.problem!.code);

describe('parseDecimal', () => {
  test.each([
    ['40.12', 40.12],
    ['40,12', 40.12],
    ['  40,12 ', 40.12],
    ['1 000,5', 1000.5],
    ['12\u202f345', 12345],
    ['−3', -3],
    ['.5', 0.5],
    ['7.', 7],
  ])('reads %j', (text, value) => {
    expect(parseDecimal(text)).toEqual({ ok: true, value });
  });

  test.each([
    ['', 'empty'],
    ['   ', 'empty'],
    ['40.12 s', 'has_unit'],
    ['20°', 'has_unit'],
    ['99.8cm', 'has_unit'],
    ['1,234.5', 'two_marks'],
    ['1.2.3', 'two_marks'],
    ['twenty', 'not_a_number'],
    ['4 2', 'not_a_number'],
    ['1e400', 'has_unit'],
    ['--3', 'not_a_number'],
    ['NaN', 'not_a_number'],
    ['Infinity', 'not_a_number'],
  ])('does not guess at %j: %s', (text, code) => {
    expect(problem(parseDecimal(text))).toBe(code);
  });

  test('reads back any number as it was written, with either mark', () => {
    fc.assert(
      fc.property(fc.integer({ min: -1e9, max: 1e9 }), (n) => {
        const text = (n / 1000).toFixed(3);
        expect(parseDecimal(text)).toEqual({ ok: true, value: Number(text) });
        expect(parseDecimal(text.replace('.', ','))).toEqual({ ok: true, value: Number(text) });
      }),
    );
  });

  test('quotes what was typed, cut to forty signs', () => {
    expect(parseDecimal('x'.repeat(80))).toMatchObject({ problem: { seen: 'x'.repeat(40) } });
  });
});

describe('parseStopwatch', () => {
  test.each([
    ['40.12', 40_120_000, 10_000],
    ['40,12', 40_120_000, 10_000],
    ['0:40.12', 40_120_000, 10_000],
    ['1:02:03', 3_723_000_000, 1_000_000],
    ['2:05,5', 125_500_000, 100_000],
    ['40', 40_000_000, 1_000_000],
    ['0.123456', 123_456, 1],
  ])('reads %j with the step of its last digit', (text, us, step_us) => {
    expect(parseStopwatch(text)).toEqual({ ok: true, us, step_us });
  });

  test.each([
    ['', 'empty'],
    ['40.12 s', 'has_unit'],
    ['1:75', 'sixty_or_more'],
    ['1:60:00', 'sixty_or_more'],
    ['1.2.3', 'not_a_time'],
    ['-4', 'not_a_time'],
    ['40.1234567', 'too_fine'],
    ['12:00:01', 'too_long'],
  ])('does not take %j: %s', (text, code) => {
    expect(problem(parseStopwatch(text))).toBe(code);
  });
});

test('parseLength gives whole micrometres and refuses what no pendulum has', () => {
  expect(parseLength('99,8', 'cm')).toEqual({ ok: true, um: 998_000 });
  expect(parseLength('0.0255', 'm')).toEqual({ ok: true, um: 25_500 });
  expect(problem(parseLength('0', 'mm'))).toBe('out_of_range');
  expect(problem(parseLength('998', 'm'))).toBe('out_of_range');
  expect(problem(parseLength('1 m', 'm'))).toBe('has_unit');
});

describe('formatMeasured', () => {
  test.each([
    // JCGM 100:2008, 7.2.2 and 7.2.6: m_S = 100,021 47 g with u = 0,35 mg; R = 10.057 62 Ω with u = 27 mΩ gives 10.058(27).
    [100.02147, 0.00035, '100.02147 ± 0.00035'],
    [10.05762, 0.027, '10.058 ± 0.027'],
    [2.006412, 0.001234, '2.0064 ± 0.0012'],
    [9.81, 0.0996, '9.81 ± 0.10'],
    [9.8134, 0.2, '9.81 ± 0.20'],
    [9812.4, 123, '9810 ± 120'],
    [-0.00004, 0.02, '0.000 ± 0.020'],
    [-1.5, 0.25, '−1.50 ± 0.25'],
    [2.00641, 0.00000012, '2.00641000 ± 0.00000012'],
  ])('rounds %d with u %d to %s', (value, u, text) => {
    expect(formatMeasured(value, u).text).toBe(text);
  });

  test('takes a decimal comma, and leaves a value with no uncertainty alone', () => {
    expect(formatMeasured(2.006412, 0.001234, { decimalMark: ',' })).toEqual({
      value: '2,0064',
      u: '0,0012',
      text: '2,0064 ± 0,0012',
    });
    expect(formatMeasured(0.1 + 0.2, 0).text).toBe('0.3');
  });

  test('shows value and u to the same place, within half of it', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.double({ min: 1e-9, max: 1e3, noNaN: true }),
        (value, u) => {
          const shown = formatMeasured(value, u);
          const places = (text: string) => text.split('.')[1]?.length ?? 0;
          expect(places(shown.value)).toBe(places(shown.u));
          expect(Math.abs(Number(shown.value.replace('−', '-')) - value)).toBeLessThanOrEqual(0.0501 * u + 1e-9);
          expect(Math.abs(Number(shown.u) / u - 1)).toBeLessThanOrEqual(0.0501);
        },
      ),
    );
  });

  test('refuses what cannot be stated', () => {
    expect(() => formatMeasured(NaN, 1)).toThrow(RangeError);
    expect(() => formatMeasured(1, -1)).toThrow(RangeError);
  });
});

test('formatSeconds keeps the places it is told', () => {
  expect(formatSeconds(40.1, { places: 2, decimalMark: ',' })).toBe('40,10');
  expect(formatSeconds(-0.0001, { places: 2 })).toBe('0.00');
});
