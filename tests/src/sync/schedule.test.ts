import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { ApiError } from '@/api/ApiError';
import type { RoundOutcome } from '@/sync/round';
import { createSchedule, type ScheduleParts } from '@/sync/schedule';
import { locksOfOneBrowser } from '../support/locksOfOneBrowser';

const done = (over: object = {}): RoundOutcome => ({ kind: 'done', sent: 0, expectsMore: false, ...over });
const unreachable: RoundOutcome = { kind: 'cannot_reach', error: new ApiError('offline', 0, '', 'nothing answered') };

const tab = (round: () => Promise<RoundOutcome>, over: Partial<ScheduleParts> = {}) =>
  createSchedule({
    round,
    onOutcome: () => undefined,
    locks: locksOfOneBrowser(),
    setTimer: (work, ms) => setTimeout(work, ms),
    clearTimer: (timer) => clearTimeout(timer),
    random: () => 0.5,
    idle_ms: () => null,
    ...over,
  });

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

describe('R9: rounds come by themselves', () => {
  it('after trouble at 2, 4, 8 … s, never more than a minute apart', async () => {
    const at: number[] = [];
    const began = Date.now();
    const schedule = tab(() => {
      at.push((Date.now() - began) / 1000);
      return Promise.resolve(unreachable);
    });
    schedule.wake();
    await vi.advanceTimersByTimeAsync(250_000);
    expect(at).toEqual([0, 2, 6, 14, 30, 62, 122, 182, 242]);
  });

  it('a class does not come back all at once: retries are up to 30 % off', async () => {
    const firstRetry = async (random: number) => {
      const began = Date.now();
      let last = 0;
      const round = () => {
        last = Date.now() - began;
        return Promise.resolve(unreachable);
      };
      const schedule = tab(round, { random: () => random });
      schedule.wake();
      await vi.advanceTimersByTimeAsync(2_700);
      schedule.stop();
      return last;
    };
    expect([await firstRetry(0), await firstRetry(1)]).toEqual([1_400, 2_600]);
  });

  it('woken while a round runs, another follows at once', async () => {
    let end: (outcome: RoundOutcome) => void = () => undefined;
    const round = vi.fn(() => new Promise<RoundOutcome>((resolve) => (end = resolve)));
    const schedule = tab(round);
    schedule.wake();
    await vi.advanceTimersByTimeAsync(0);
    schedule.wake();
    expect(round).toHaveBeenCalledTimes(1);
    end(done());
    await vi.advanceTimersByTimeAsync(0);
    expect(round).toHaveBeenCalledTimes(2);
  });

  it('a storage error is told and tried again', async () => {
    const told: string[] = [];
    const round = vi.fn(() => Promise.reject(new Error('connection to storage lost')));
    tab(round, { onOutcome: ({ kind }) => told.push(kind) }).wake();
    await vi.advanceTimersByTimeAsync(2_000);
    expect(told).toEqual(['storage_failed', 'storage_failed']);
  });

  it('looks again within a second for an analysis that is being made', async () => {
    const round = vi.fn(() => Promise.resolve(done({ sent: 1, expectsMore: true })));
    tab(round).wake();
    await vi.advanceTimersByTimeAsync(1_000);
    expect(round).toHaveBeenCalledTimes(2);
  });

  it('a run that never gets an analysis does not keep the phone asking', async () => {
    const round = vi.fn(() => Promise.resolve(done({ expectsMore: true })));
    tab(round, { idle_ms: () => 30_000 }).wake();
    await vi.advanceTimersByTimeAsync(300_000);
    expect(round.mock.calls.length).toBeLessThan(20);
  });

  it('signed out, it waits to be woken', async () => {
    const round = vi.fn(() => Promise.resolve<RoundOutcome>({ kind: 'signed_out' }));
    const schedule = tab(round);
    schedule.wake();
    await vi.advanceTimersByTimeAsync(3_600_000);
    expect(round).toHaveBeenCalledTimes(1);
    schedule.wake();
    await vi.advanceTimersByTimeAsync(0);
    expect(round).toHaveBeenCalledTimes(2);
  });

  it('stopped, nothing comes any more', async () => {
    const round = vi.fn(() => Promise.resolve(unreachable));
    const schedule = tab(round);
    schedule.wake();
    await vi.advanceTimersByTimeAsync(0);
    schedule.stop();
    schedule.wake();
    await vi.advanceTimersByTimeAsync(600_000);
    expect(round).toHaveBeenCalledTimes(1);
  });
});

it('R10: of five tabs one uploads at a time', async () => {
  const locks = locksOfOneBrowser();
  let going = 0;
  let most = 0;
  let rounds = 0;
  const round = async () => {
    most = Math.max(most, ++going);
    await new Promise((resolve) => setTimeout(resolve, 400));
    going -= 1;
    rounds += 1;
    return done();
  };
  for (let i = 0; i < 5; i++) tab(round, { locks }).wake();
  await vi.advanceTimersByTimeAsync(20_000);
  expect(most).toBe(1);
  expect(rounds).toBe(5);
});
