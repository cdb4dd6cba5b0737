import { describe, expect, test } from 'vitest';
import type { EditChange } from '@shared/schemas/edit';
import { flagsOf as flags, jittered, namesOf as named } from '../../factories/flagged';
import {
  angleReading,
  evenTimes,
  rawEdits,
  rawKeyedRun,
  rawSplitsRun,
  rawTapRun,
  stringRig,
} from '../../factories/rawRuns';

const without = (times: number[], ...lost: number[]) => times.filter((_, i) => !lost.includes(i));

describe('double and missed', () => {
  test.each([
    { mode: 0.5, lap: 1 },
    { mode: 1, lap: 2 },
    { mode: 5, lap: 10 },
  ])('are found side by side with a mark every $mode swings', ({ mode, lap }) => {
    const times = without(jittered(25, lap, 0.035), 9, 17);
    const struck = [...times.slice(0, 5), times[4]! + 0.12, ...times.slice(5)];
    expect(named(rawTapRun({ times: struck, capture: { swings_per_mark: mode } }))).toEqual([
      'double 5',
      'missed 10',
      'missed 17',
    ]);
  });

  test('are found in a limping run of every pass', () => {
    const times = evenTimes(30, 1).map((t, i) => t + (i % 2) * 0.2);
    expect(named(rawTapRun({ times: without(times, 12), capture: { swings_per_mark: 0.5 } }))).toEqual(['missed 12']);
  });

  test('one late mark, which makes a long lap and a short one, is neither, but stands off', () => {
    const times = jittered(21, 1, 0.02);
    times[10]! += 0.4;
    expect(named(rawTapRun({ times }))).toEqual(['outlier 10']);
  });

  test('tell how many marks are missing', () => {
    const [flag] = flags(rawTapRun({ times: without(jittered(21, 2, 0.03), 8, 9) }));
    expect(flag).toMatchObject({
      code: 'missed',
      mark: 8,
      seen: { count: 2 },
      choices: ['insert_gap', 'keep_flagged'],
    });
  });

  test.each([
    { lap: 2, jitter: 0.06, most: 0.01 },
    { lap: 1.27, jitter: 0.1, most: 0.02 },
    { lap: 0.63, jitter: 0.06, most: 0.02 },
    { lap: 0.63, jitter: 0.1, most: 0.08 },
  ])(
    'of good runs with laps of $lap s and jitter $jitter s at most $most are flagged',
    ({ lap, jitter, most }) => {
      const count = 400;
      const isFlagged = (seed: number) =>
        flags(rawTapRun({ times: jittered(21, lap, jitter, seed).sort((a, b) => a - b) })).some(
          ({ code }) => code === 'double' || code === 'missed',
        );
      const flagged = Array.from({ length: count }, (_, i) => isFlagged(i + 1)).filter(Boolean).length;
      expect(flagged / count).toBeLessThanOrEqual(most);
    },
    60_000,
  );

  test('of runs with one mark lost nineteen in twenty are seen, with laps of 0.63 s and jitter 0.06 s too', () => {
    const count = 200;
    const found = Array.from({ length: count }, (_, i) => {
      const lost = 1 + (i % 19);
      return named(rawTapRun({ times: without(jittered(21, 0.63, 0.06, i + 1), lost) })).includes(`missed ${lost}`);
    }).filter(Boolean).length;
    expect(found / count).toBeGreaterThanOrEqual(0.95);
  }, 60_000);

  test('answered by its edit a flag stays, answered; withdrawn, it is open again', () => {
    const run = rawTapRun({ times: without(jittered(21, 2, 0.03), 8) });
    const gap: EditChange = { kind: 'insert_gap', before_mark: 8, count: 1 };
    const [edit] = rawEdits(run, gap);
    expect(flags(run).map(({ answered }) => answered)).toEqual([false]);
    expect(flags(run, gap).map(({ code, answered }) => [code, answered])).toEqual([['missed', true]]);
    expect(flags(run, gap, { kind: 'withdraw', edit_id: edit!.id }).map(({ answered }) => answered)).toEqual([false]);
  });

  test('a flag kept on purpose is answered and stays', () => {
    const run = rawTapRun({ times: without(jittered(21, 2, 0.03), 8) });
    const [flag] = flags(run, { kind: 'keep_flagged', flag: 'missed', mark: 8 });
    expect(flag).toMatchObject({ code: 'missed', mark: 8, answered: true });
  });
});

describe('late_first_mark', () => {
  test('is a first press a quarter of a swing off, and leaving it out answers it', () => {
    const times = jittered(21, 2, 0.03);
    times[0]! += 0.5;
    const run = rawTapRun({ times });
    expect(named(run)).toEqual(['late_first_mark 0']);
    expect(flags(run)[0]!.seen.late_ms).toBeGreaterThan(400);
    expect(flags(run, { kind: 'leave_out_mark', mark: 0 }).map(({ answered }) => answered)).toEqual([true]);
  });

  test('is raised on about one good run in two hundred', () => {
    const count = 600;
    const raised = Array.from(
      { length: count },
      (_, i) => named(rawTapRun({ times: jittered(21, 2, 0.05, i + 1) })).length,
    );
    expect(raised.filter((n) => n > 0).length / count).toBeLessThanOrEqual(0.012);
  }, 60_000);
});

describe('the count', () => {
  // 1 m: T0 = 2.006 s with g = 9.80665.
  const amplitudes = [angleReading(0, 10), angleReading(20, 9)];

  test('half swings tapped as swings are seen from the length, and re-reading them answers it', () => {
    const run = rawTapRun({ times: jittered(21, 1.0041, 0.02), rig: stringRig(), amplitudes });
    expect(named(run)).toEqual(['half_swings']);
    const reread = flags(run, { kind: 'reread_as_half_swings' });
    expect(reread.map(({ code, answered }) => [code, answered])).toEqual([['half_swings', true]]);
  });

  test.each([
    { written: 20, timed: 19 },
    { written: 20, timed: 21 },
    { written: 50, timed: 49 },
  ])('a total of $timed swings written as $written is seen from the length', ({ written, timed }) => {
    const run = rawKeyedRun({ counted_to: written, total: timed * 2.0095, rig: stringRig(), amplitudes });
    const [flag] = flags(run);
    expect(flag).toMatchObject({ code: 'count_from_one', seen: { swings: written, swings_that_fit: timed } });
  });

  test('a right total raises nothing, with and without amplitude and length', () => {
    for (const parts of [{ rig: stringRig(), amplitudes }, { rig: stringRig() }, {}]) {
      expect(named(rawKeyedRun({ counted_to: 20, total: 20 * 2.0095, ...parts }))).toEqual([]);
    }
  });

  test('a length of quite another size is not taken for a miscount but told as what fits no pendulum', () => {
    const rig = stringRig({ length_readings: [{ to: 'centre', um: 500_000 }] });
    expect(named(rawKeyedRun({ counted_to: 20, total: 40.19, rig, amplitudes }))).toEqual(['implausible']);
  });

  test('is not judged where the program counted: splits and taps are never count_from_one', () => {
    const times = jittered(20, 2.0064 * (20 / 19), 0.01);
    expect(named(rawSplitsRun({ times, rig: stringRig(), amplitudes }))).toEqual(['implausible']);
  });
});

describe('what the pad wrote down', () => {
  test('a run cut short and clocks that parted are flags', () => {
    const events = [
      { kind: 'clock_gap' as const, at_us: 7_000_000, after_mark: 3, wall_minus_mono_ms: 4_200 },
      { kind: 'hidden' as const, at_us: 6_000_000, after_mark: 2 },
    ];
    const run = rawTapRun({ times: jittered(11, 2, 0.02), capture: { events, ended: 'cut_short' } });
    expect(named(run)).toEqual(['clock_gap 3', 'cut_short']);
    expect(flags(run)[0]!.seen).toEqual({ wall_minus_mono_s: 4.2 });
  });
});
