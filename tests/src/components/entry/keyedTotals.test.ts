import { describe, expect, it } from 'vitest';
import { isBlank, readTotal, type TotalRow } from '@/components/entry/keyedTotals';

const row = (parts: Partial<TotalRow> = {}): TotalRow => ({
  key: 0,
  time: '40.12',
  said: '20',
  first_count: 'zero',
  ...parts,
});

describe('readTotal', () => {
  it.each(['40.12', '40,12', '0:40.12', ' 40.12 '])('reads %j as 40.12 s to the hundredth', (time) => {
    expect(readTotal(row({ time })).reading).toEqual({
      counted_to: 20,
      first_count: 'zero',
      total_us: 40_120_000,
      reading_step_us: 10_000,
    });
  });

  it.each([
    ['time', 'abc', 'not_a_time'],
    ['time', '40 s', 'has_unit'],
    ['time', '0.00', 'zero_time'],
    ['time', '', 'empty'],
    ['said', '20.5', 'not_a_count'],
    ['said', '0', 'not_a_count'],
    ['said', '1001', 'not_a_count'],
    ['said', 'twenty', 'not_a_number'],
  ])('says what is wrong with %s %j: %s', (field, typed, code) => {
    const { reading, problems } = readTotal(row({ [field]: typed }));
    expect(reading).toBeNull();
    expect(problems[field as 'time']).toMatchObject({ code, seen: typed });
  });

  it('knows that from one to one is no swing', () => {
    expect(readTotal(row({ said: '1', first_count: 'one' })).problems.said?.code).toBe('no_swing');
    expect(readTotal(row({ said: '1', first_count: 'zero' })).reading).not.toBeNull();
  });

  it('wants the first count answered, and takes "not sure"', () => {
    expect(readTotal(row({ first_count: null })).problems.first_count?.code).toBe('not_answered');
    expect(readTotal(row({ first_count: 'not_sure' })).reading?.first_count).toBe('not_sure');
  });

  it('calls a row blank only when nothing was typed', () => {
    expect(isBlank(row({ time: ' ', said: '' }))).toBe(true);
    expect(isBlank(row({ time: '', said: '2' }))).toBe(false);
  });
});
