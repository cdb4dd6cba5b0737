import { describe, expect, it } from 'vitest';
import { readGate } from '@/composables/gate/readGate';

const table = (rows: number, line: (i: number) => string, head = '') =>
  head + Array.from({ length: rows }, (_, i) => line(i)).join('\n');

describe('readGate', () => {
  it('takes the first two columns of plain numbers as blocked and cleared, in seconds', () => {
    const { choice, blocks } = readGate('0.0 0.03\n1.0 1.03', null);
    expect(choice).toEqual({ blockedColumn: 0, clearedColumn: 1, unit: 's' });
    expect(blocks?.block_us).toEqual([
      [0, 30_000],
      [1_000_000, 1_030_000],
    ]);
  });

  it('passes over a column that only counts the rows, and reads the unit off the names', () => {
    const text = table(4, (i) => `${i + 1};${i * 1000};${i * 1000 + 31}`, 'no;blocked (ms);cleared (ms)\n');
    const { choice, blocks } = readGate(text, null);
    expect(choice).toEqual({ blockedColumn: 1, clearedColumn: 2, unit: 'ms' });
    expect(blocks?.block_us[1]).toEqual([1_000_000, 1_031_000]);
  });

  it('finds cleared by its name when it stands first', () => {
    expect(readGate('unblocked,blocked\n0.03,0\n1.03,1.0', null).choice).toMatchObject({
      blockedColumn: 1,
      clearedColumn: 0,
    });
  });

  it('takes a single column as both edges in turns', () => {
    expect(readGate('0\n0.03\n1\n1.03', null).choice?.clearedColumn).toBeNull();
  });

  it('keeps what a person chose, and guesses anew when the table has no such column', () => {
    const given = { blockedColumn: 1, clearedColumn: 2, unit: 'us' as const };
    expect(readGate('1 0 31\n2 1000 1031', given).choice).toEqual(given);
    expect(readGate('0 0.03\n1 1.03', given).choice).toEqual({ blockedColumn: 0, clearedColumn: 1, unit: 's' });
  });

  it('chooses nothing where there are no numbers', () => {
    expect(readGate('some words\nand more', null)).toMatchObject({ choice: null, blocks: null });
  });

  it('says of 10,000 rows that they are too many, and loses none of them', () => {
    const { rows, blocks } = readGate(
      table(10_000, (i) => `${i} ${i}.03`),
      null,
    );
    expect(rows).toBe(10_000);
    expect(blocks?.problems).toEqual([{ code: 'too_many', row: 0, seen: '10000' }]);
  });
});
