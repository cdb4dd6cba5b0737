import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { canonicalText } from '@shared/schemas/canonical';
import { MAX_RAW_BYTES } from '@shared/schemas/limits';
import { INPUTS, RawRun, type TapCapture } from '@shared/schemas/run';
import { sealTapRun } from '@shared/timing/sealTapRun';
import type { TapEvent } from '@shared/timing/tapRecording';
import { pad, tapEvents, tapRecording } from '../../factories/tapRecording';

const maker = { app_version: '0.1.0', device_id: '01900000-0000-7000-8000-0000000000aa', cautions_seen_wall_ms: null };

function seal(script: Parameters<typeof tapEvents>[0], ended: TapCapture['ended'] = 'held') {
  return sealTapRun(tapRecording({ events: tapEvents(script) }), ended, maker);
}

function capture(script: Parameters<typeof tapEvents>[0]): TapCapture {
  const run = RawRun.parse(seal(script));
  if (run.capture.kind !== 'tap') throw new Error('not a tap run');
  return run.capture;
}

describe('sealTapRun, marks', () => {
  it('counts whole µs from the first mark', () => {
    expect(capture([pad.mark(0.05), pad.mark(2006.15), pad.mark(4012.3)]).mark_us).toEqual([0, 2_006_100, 4_012_250]);
  });

  it('makes no run of a log without a mark', () => {
    expect(seal([pad.rejected(0, 'palm'), pad.event(10, 'hidden')])).toBeUndefined();
    expect(seal([pad.mark(0), pad.undo(500)])).toBeUndefined();
  });

  it('takes back the last five marks and no more', () => {
    const taps = [0, 1, 2, 3, 4, 5, 6].map((n) => pad.mark(n * 1000));
    const undos = [0, 1, 2, 3, 4, 5, 6].map((n) => pad.undo(6100 + n * 10));
    const { mark_us, rejected } = capture([...taps, ...undos]);
    expect(mark_us).toEqual([0, 1_000_000]);
    expect(rejected.map(({ why, at_us }) => [why, at_us])).toEqual(
      [6, 5, 4, 3, 2].map((n) => ['undone', n * 1_000_000]),
    );
  });

  it('lets five more be taken back after a new mark', () => {
    const taps = [0, 1, 2, 3, 4, 5, 6].map((n) => pad.mark(n * 1000));
    const five = (from: number) => [0, 1, 2, 3, 4].map((n) => pad.undo(from + n * 10));
    expect(capture([...taps, ...five(6100), pad.mark(7000), pad.undo(7100)]).mark_us).toEqual([0, 1_000_000]);
  });

  it('counts from the next mark when the first was taken back', () => {
    const { mark_us, rejected } = capture([pad.mark(0), pad.undo(300), pad.mark(1500), pad.mark(3500)]);
    expect(mark_us).toEqual([0, 2_000_000]);
    expect(rejected).toEqual([{ why: 'undone', at_us: -1_500_000 }]);
  });

  it('rejects a mark that is not later than the one before it', () => {
    const { mark_us, rejected } = capture([
      pad.mark(0),
      pad.mark(2000),
      pad.mark(2000),
      pad.mark(1500),
      pad.mark(4000),
    ]);
    expect(mark_us).toEqual([0, 2_000_000, 4_000_000]);
    expect(rejected).toEqual([
      { why: 'bounce', at_us: 2_000_000 },
      { why: 'bounce', at_us: 1_500_000 },
    ]);
  });

  it('holds 200 marks, each where the finger was', () => {
    const times = Array.from({ length: 201 }, (_, n) => n * 634.4);
    expect(capture(times.map((t) => pad.mark(t))).mark_us).toEqual(times.map((t) => Math.round(t * 1000)));
  });

  it('reads the log in the order of seq, however it was loaded', () => {
    const events = tapEvents([pad.mark(0), pad.mark(2000), pad.undo(2100), pad.mark(2200)]);
    const shuffled = tapRecording({ events: [events[3]!, events[1]!, events[0]!, events[2]!] });
    expect(sealTapRun(shuffled, 'held', maker)).toEqual(sealTapRun(tapRecording({ events }), 'held', maker));
  });
});

describe('sealTapRun, missed passes', () => {
  it('puts a gap before the next mark and no time', () => {
    const { mark_us, missed } = capture([
      pad.mark(0),
      pad.mark(2000),
      pad.missed(4300),
      pad.missed(6300),
      pad.mark(8000),
    ]);
    expect(mark_us).toEqual([0, 2_000_000, 8_000_000]);
    expect(missed).toEqual([{ before_mark: 2, count: 2 }]);
  });

  it('drops a gap that no mark follows', () => {
    expect(capture([pad.mark(0), pad.mark(2000), pad.missed(4300)]).missed).toEqual([]);
  });

  it('takes a gap back by undo before it takes a mark', () => {
    const { mark_us, missed } = capture([
      pad.mark(0),
      pad.mark(2000),
      pad.missed(3000),
      pad.undo(3100),
      pad.mark(4000),
    ]);
    expect(mark_us).toEqual([0, 2_000_000, 4_000_000]);
    expect(missed).toEqual([]);
  });

  it('keeps the gap when only the mark after it is taken back', () => {
    const script = [pad.mark(0), pad.missed(2300), pad.mark(4000), pad.undo(4200), pad.mark(4400)];
    expect(capture(script).missed).toEqual([{ before_mark: 1, count: 1 }]);
  });

  it('knows no missed pass before the first mark', () => {
    expect(capture([pad.missed(0), pad.mark(1000), pad.mark(3000)]).missed).toEqual([]);
  });
});

describe('sealTapRun, what happened beside the marks', () => {
  it('writes lifecycle events with the mark they came after, also those told late', () => {
    const script = [pad.mark(0), pad.mark(2000), pad.mark(4000), pad.event(2500, 'hidden'), pad.event(3500, 'shown')];
    expect(capture(script).events).toEqual([
      { kind: 'hidden', at_us: 2_500_000, after_mark: 1 },
      { kind: 'shown', at_us: 3_500_000, after_mark: 1 },
    ]);
  });

  it('says −1 for what happened before the first mark in force', () => {
    const script = [pad.mark(0), pad.event(300, 'rotated'), pad.undo(600), pad.mark(2000)];
    expect(capture(script).events).toEqual([{ kind: 'rotated', at_us: -1_700_000, after_mark: -1 }]);
  });

  it('marks a clock gap where the wall clock left the page clock by more than 50 ms', () => {
    const script = [pad.mark(0), pad.mark(2000), { ...pad.mark(4000), wallStep: 61_000 }, pad.mark(6000)];
    const { events, mark_us, clock } = capture(script);
    expect(events).toEqual([{ kind: 'clock_gap', at_us: 4_000_000, after_mark: 1, wall_minus_mono_ms: 61_000 }]);
    expect(mark_us).toEqual([0, 2_000_000, 4_000_000, 6_000_000]);
    expect(clock.anchors.map(({ at_us }) => at_us)).toEqual([0, 2_000_000, 4_000_000, 6_000_000]);
  });

  it('sees a clock set back', () => {
    const script = [pad.mark(0), { ...pad.mark(2000), wallStep: -3_600_000 }];
    expect(capture(script).events[0]).toMatchObject({ kind: 'clock_gap', wall_minus_mono_ms: -3_600_000 });
  });

  it('lets 50 ms pass', () => {
    expect(capture([pad.mark(0), { ...pad.mark(2000), wallStep: 50 }]).events).toEqual([]);
  });

  it('ties the first and the last mark to the wall clock', () => {
    const { clock } = capture([pad.mark(0), pad.mark(2000), pad.mark(4000)]);
    const [first, last] = clock.anchors;
    expect(clock.anchors).toHaveLength(2);
    expect(last!.wall_ms - first!.wall_ms).toBe(4000);
  });

  it('names the inputs of the marks in force, once each', () => {
    const script = [pad.mark(0, 'key'), pad.mark(2000), pad.mark(4000), pad.mark(6000, 'mouse'), pad.undo(6100)];
    expect(capture(script).inputs).toEqual(['touch', 'key']);
  });

  it('keeps everything rejected with its reason', () => {
    const script = [pad.mark(0), pad.rejected(70, 'bounce'), pad.rejected(900, 'palm'), pad.mark(2000)];
    expect(capture(script).rejected).toEqual([
      { why: 'bounce', at_us: 70_000 },
      { why: 'palm', at_us: 900_000 },
    ]);
  });
});

describe('sealTapRun, any log', () => {
  const what = fc.oneof(
    { weight: 6, arbitrary: fc.record({ kind: fc.constant('mark' as const), input: fc.constantFrom(...INPUTS) }) },
    { weight: 2, arbitrary: fc.record({ kind: fc.constant('undo' as const) }) },
    { weight: 2, arbitrary: fc.record({ kind: fc.constant('missed' as const) }) },
    fc.record({
      kind: fc.constant('rejected' as const),
      why: fc.constantFrom('bounce' as const, 'palm' as const, 'key_repeat' as const, 'untrusted' as const),
    }),
    fc.record({
      kind: fc.constant('event' as const),
      what: fc.constantFrom('hidden' as const, 'shown' as const, 'frozen' as const, 'page_hidden' as const),
    }),
  );
  const log = fc
    .array(
      fc.tuple(what, fc.double({ min: 0, max: 1e8, noNaN: true }), fc.integer({ min: 0, max: 8_640_000_000_000_000 })),
      { maxLength: 120 },
    )
    .map((rows) =>
      rows.map(([happening, at_ms, wall_ms], i) => ({ seq: i + 1, at_ms, wall_ms, ...happening }) as TapEvent),
    );

  it('gives a run that keeps the schema, or none', () => {
    fc.assert(
      fc.property(log, (events) => {
        const run = sealTapRun(tapRecording({ events }), 'cut_short', maker);
        if (run === undefined) return;
        expect(RawRun.parse(run)).toEqual(run);
      }),
      { seed: 20300312, numRuns: 500 },
    );
  });

  it('gives no run only where no mark is in force', () => {
    fc.assert(
      fc.property(log, (events) => {
        const has = (kind: TapEvent['kind']) => events.some((event) => event.kind === kind);
        if (has('mark') && !has('undo')) expect(sealTapRun(tapRecording({ events }), 'held', maker)).toBeDefined();
        if (!has('mark')) expect(sealTapRun(tapRecording({ events }), 'held', maker)).toBeUndefined();
      }),
      { seed: 20300312 },
    );
  });

  it('keeps the longest run with the most noise within the size that can be sent', () => {
    const script = Array.from({ length: 6000 }, (_, n) =>
      n % 3 === 0
        ? pad.mark(n * 7000)
        : n % 3 === 1
          ? pad.rejected(n * 7000, 'key_repeat')
          : { ...pad.event(n * 7000, 'screen_may_sleep'), wallStep: n % 2 ? 100 : -100 },
    );
    const run = RawRun.parse(seal(script));
    expect(canonicalText(run).length).toBeLessThan(MAX_RAW_BYTES);
  });
});
