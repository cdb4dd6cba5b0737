import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { RawRun } from '@shared/schemas/run';
import { gateRawRun, keyedSplitsRun, keyedTotalRun } from '@shared/timing/enteredRuns';
import { gateBlocks } from '@shared/timing/gateBlocks';
import { parseGateTable } from '@shared/timing/parseGateTable';
import { parseSplits } from '@shared/timing/parseSplits';
import { angleReading, stringRig, uuid } from '../../factories/rawRuns';

describe('parseSplits', () => {
  test.each([
    ['2.01\n4.03\n6.02', 'one a line'],
    ['2,01 4,03 6,02', 'decimal commas and spaces'],
    ['2,01; 4,03; 6,02', 'semicolons'],
    ['2.01, 4.03, 6.02', 'commas between'],
    ['2.01,4.03,6.02', 'commas without spaces'],
    ['2,01, 4,03, 6,02', 'commas for both'],
    ['0:02.01\t0:04.03\r\n0:06.02\r\n', 'minutes, tabs, Windows lines'],
    ['\uFEFF0\n2.01\n4.03\n6.02', 'a byte order mark and the first press'],
  ])('reads %j: %s', (text) => {
    expect(parseSplits(text)).toEqual({
      mark_us: [0, 2_010_000, 4_030_000, 6_020_000],
      reading_step_us: 10_000,
      problems: [],
    });
  });

  test('names what it cannot read with its line, and keeps the rest', () => {
    const { mark_us, problems } = parseSplits('2.01\nabout 4\n6.02\n5.90\n8 s');
    expect(mark_us).toEqual([0, 2_010_000, 4_000_000, 6_020_000, 8_000_000]);
    expect(problems).toEqual([
      { code: 'not_a_time', line: 2, seen: 'about' },
      { code: 'not_rising', line: 4, seen: '5.90' },
      { code: 'not_a_time', line: 5, seen: 's' },
    ]);
  });

  test.each([
    ['2,01 8.1', '2,01'],
    ['2.01\n4,03\n6.02', '4,03'],
    ['1,234.5', '1,234.5'],
    ['2.01,4.03,6', '2.01,4.03,6'],
  ])('tells mixed decimal marks in %j and makes no reading of %j', (text, seen) => {
    const { problems, mark_us } = parseSplits(text);
    expect(problems.map(({ code, seen }) => [code, seen])).toContainEqual(['mixed_marks', seen]);
    expect(mark_us).not.toContain(1_000_000);
    expect(mark_us).not.toContain(2_000_000);
  });

  test('the first press may stand before commas too', () => {
    expect(parseSplits('0,2.01,4.03')).toMatchObject({ mark_us: [0, 2_010_000, 4_030_000], problems: [] });
  });

  test('says when there are too few or too many', () => {
    expect(parseSplits('').problems).toMatchObject([{ code: 'too_few' }]);
    const many = Array.from({ length: 2_500 }, (_, i) => String(i + 1)).join('\n');
    expect(parseSplits(many).problems).toMatchObject([{ code: 'too_many', seen: '2501' }]);
  });
});

describe('parseGateTable', () => {
  test.each([
    ['0.000,0.021\n1.003,1.024', 'commas'],
    ['0.000\t0.021\n1.003\t1.024', 'tabs'],
    ['0,000;0,021\n1,003;1,024', 'semicolons and decimal commas'],
    ['0,000\t0,021\n1,003\t1,024', 'tabs and decimal commas'],
    ['  0.000   0.021\n  1.003   1.024\n', 'runs of spaces'],
    ['0,000 0,021\n1,003 1,024', 'spaces and decimal commas'],
    ['0.000, 0.021\r\n1.003, 1.024\r\n\r\n', 'commas with spaces, blank lines'],
    ['"0.000","0.021"\n"1.003","1.024"', 'quotes'],
  ])('finds the columns of %j: %s', (text) => {
    const table = parseGateTable(text);
    expect(table.columns).toHaveLength(2);
    expect(gateBlocks(table, { blockedColumn: 0, clearedColumn: 1, unit: 's' })).toEqual({
      block_us: [
        [0, 21_000],
        [1_003_000, 1_024_000],
      ],
      reading_step_us: 1_000,
      problems: [],
    });
  });

  test('takes the names from the header, past a title and a byte order mark, and shows samples', () => {
    const table = parseGateTable('\uFEFFBench 3\nNo;Blocked (s);Cleared (s)\n1;0,0;0,021\n2;1,003;1,024\n');
    expect(table.columns.map(({ name }) => name)).toEqual(['No', 'Blocked (s)', 'Cleared (s)']);
    expect(table.columns[1]).toMatchObject({ samples: ['0,0', '1,003'], numbers: 1 });
    expect(table.rows[0]).toEqual({ row: 3, cells: ['1', '0,0', '0,021'] });
  });

  test('of blank text has no columns', () => {
    expect(parseGateTable(' \n\n')).toEqual({ columns: [], rows: [] });
  });

  test('takes any text without throwing, and no row with something in it is lost', () => {
    fc.assert(
      fc.property(fc.string({ unit: fc.constantFrom('1', '.', ',', ';', '\t', ' ', '\n', '"', 'x', '-') }), (text) => {
        const table = parseGateTable(text);
        const read = gateBlocks(table, { blockedColumn: 0, clearedColumn: 1, unit: 'ms' });
        expect(read.block_us.length + read.problems.length).toBeGreaterThanOrEqual(Math.min(table.rows.length, 1));
      }),
    );
  });
});

describe('gateBlocks', () => {
  const pick = { blockedColumn: 0, clearedColumn: 1, unit: 's' } as const;
  const read = (text: string) => gateBlocks(parseGateTable(text), pick);

  test('names every row it cannot use, with line and reason, and reads the others', () => {
    const { block_us, problems } = read(
      ['blocked,cleared', '0,0.02', '1,late', '2,2.02', '2.01,2.03', '4,3.9', '5,', '6,6.02 s', '7,7.02'].join('\n'),
    );
    expect(problems).toEqual([
      { code: 'not_a_number', row: 3, seen: 'late' },
      { code: 'overlaps', row: 5, seen: '2.01 – 2.03' },
      { code: 'cleared_before_blocked', row: 6, seen: '4 – 3.9' },
      { code: 'empty', row: 7, seen: '' },
      { code: 'has_unit', row: 8, seen: '6.02 s' },
    ]);
    expect(block_us.map(([on]) => on / 1e6)).toEqual([0, 2, 7]);
  });

  test('does not sort: a row earlier than the one before is named', () => {
    expect(read('0,0.02\n2,2.02\n1,1.02\n3,3.02').problems).toEqual([{ code: 'overlaps', row: 3, seen: '1 – 1.02' }]);
  });

  test('reads edges that stand in one column in turns, and says when one is left over', () => {
    const table = parseGateTable('0\n20\n1000\n1021\n2000');
    const { block_us, problems } = gateBlocks(table, { blockedColumn: 0, clearedColumn: null, unit: 'ms' });
    expect(block_us).toEqual([
      [0, 20_000],
      [1_000_000, 1_021_000],
    ]);
    expect(problems).toEqual([{ code: 'odd_count', row: 5, seen: '2000' }]);
  });

  test('keeps the digits of times since 1970', () => {
    const { block_us } = read('1750000000.0001,1750000000.0201\n1750000001.0032,1750000001.0233');
    expect(block_us).toEqual(
      [
        [0, 20_000],
        [1_003_100, 1_023_200],
      ].map((pair) => pair.map((us) => expect.closeTo(us, -1))),
    );
  });

  test('of 10,000 rows says that there are too many and still shows them all', () => {
    const text = Array.from({ length: 10_000 }, (_, i) => `${i}.0,${i}.02`).join('\n');
    const { block_us, problems } = read(text);
    expect(block_us).toHaveLength(10_000);
    expect(problems).toEqual([{ code: 'too_many', row: 0, seen: '10000' }]);
  });

  test('of nothing says so', () => {
    expect(read('').problems).toEqual([{ code: 'no_rows', row: 0, seen: '' }]);
  });
});

describe('entered runs', () => {
  const context = {
    id: uuid(5),
    wall_ms: 1_750_000_000_000,
    zone_offset_min: 120,
    app_version: '0.1.0',
    cautions_seen_wall_ms: null,
    device_id: uuid(6),
    rig: stringRig(),
    amplitudes: [angleReading(0, 10)],
    note: ' third try ',
  };

  test.each([
    keyedTotalRun({ counted_to: 20, first_count: 'zero', total_us: 40_120_000, reading_step_us: 10_000 }, context),
    keyedSplitsRun({ swings_per_mark: 1, ...parsed('2.01 4.03') }, context),
    gateRawRun({ ...blocks('0 0.02\n1 1.02'), flag_width_um: 25_000, flag_distance_um: 1_000_000 }, context),
  ])('keep the schema: $capture.kind', (run) => {
    expect(RawRun.parse(run)).toEqual({ ...run, note: 'third try' });
    expect(run.made).toEqual({
      wall_ms: 1_750_000_000_000,
      zone_offset_min: 120,
      app_version: '0.1.0',
      cautions_seen_wall_ms: null,
      device_id: uuid(6),
    });
  });

  function parsed(text: string) {
    const { mark_us, reading_step_us } = parseSplits(text);
    return { mark_us, reading_step_us };
  }
  function blocks(text: string) {
    const { block_us, reading_step_us } = gateBlocks(parseGateTable(text), {
      blockedColumn: 0,
      clearedColumn: 1,
      unit: 's',
    });
    return { block_us, reading_step_us };
  }
});
