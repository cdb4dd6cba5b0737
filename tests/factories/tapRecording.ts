import type { TapEvent, TapRecording } from '@shared/timing/tapRecording';

/** 12 March 2030, 09:00 UTC, on the wall; the page has been open for twenty seconds. */
const WALL_START = Date.UTC(2030, 2, 12, 9);
const PAGE_START = 20_000;

type What =
  | { kind: 'mark'; input?: 'touch' | 'pen' | 'mouse' | 'key' | 'assistive' }
  | { kind: 'undo' }
  | { kind: 'missed' }
  | { kind: 'rejected'; why: 'bounce' | 'palm' | 'key_repeat' | 'untrusted' }
  | { kind: 'event'; what: 'hidden' | 'shown' | 'frozen' | 'resumed' | 'page_hidden' | 'rotated' | 'screen_may_sleep' };

/** One thing on the pad, `at` ms after the first contact. */
export const pad = {
  mark: (at: number, input: 'touch' | 'pen' | 'mouse' | 'key' | 'assistive' = 'touch') =>
    ({ at, kind: 'mark', input }) as const,
  undo: (at: number) => ({ at, kind: 'undo' }) as const,
  missed: (at: number) => ({ at, kind: 'missed' }) as const,
  rejected: (at: number, why: 'bounce' | 'palm' | 'key_repeat' | 'untrusted') =>
    ({ at, kind: 'rejected', why }) as const,
  event: (at: number, what: Extract<What, { kind: 'event' }>['what']) => ({ at, kind: 'event', what }) as const,
};

/** Turns a script of happenings into the rows the pad writes. `wallStep` moves the wall clock from that row on, ms. */
export function tapEvents(script: readonly (What & { at: number; wallStep?: number })[]): TapEvent[] {
  let wall = WALL_START;
  return script.map(({ at, wallStep = 0, ...what }, i) => {
    wall += wallStep;
    const row = { seq: i + 1, at_ms: PAGE_START + at, wall_ms: Math.round(wall + at) };
    return (what.kind === 'mark' ? { ...row, ...what, input: what.input ?? 'touch' } : { ...row, ...what }) as TapEvent;
  });
}

export function tapRecording(parts: Partial<TapRecording> = {}): TapRecording {
  return {
    id: '01900000-0000-7000-8000-000000000001',
    plan: { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] },
    started_wall_ms: WALL_START,
    zone_offset_min: 60,
    clock_step_us: 100,
    isolated: false,
    events: [],
    ...parts,
  };
}
