import { beforeEach, expect, it } from 'vitest';
import { useSafetySeen } from '@/composables/useSafetySeen';

const NOON = Date.UTC(2031, 4, 5, 12);
const HOUR = 3_600_000;
let now_ms = NOON;
const seen = () => useSafetySeen(localStorage, () => new Date(now_ms));

beforeEach(() => {
  localStorage.clear();
  now_ms = NOON;
});

it('nothing was acknowledged on a new device', () => {
  expect(seen().isSeen.value).toBe(false);
  expect(seen().seenToday_ms()).toBeNull();
});

it('an acknowledgement holds for the day, and a run made later that day keeps its time', () => {
  seen().see();
  now_ms = NOON + 3 * HOUR;
  expect(seen().isSeen.value).toBe(true);
  expect(seen().seenToday_ms()).toBe(NOON);
});

it('the next day asks again', () => {
  seen().see();
  now_ms = NOON + 24 * HOUR;
  expect(seen().seenToday_ms()).toBeNull();
});
