import type { RoundOutcome } from './round';

/** When rounds run: at once when woken, again by itself after trouble, one at a time among all tabs. */

export interface ScheduleParts {
  round: () => Promise<RoundOutcome>;
  onOutcome: (outcome: RoundOutcome) => void;
  locks: Pick<LockManager, 'request'>;
  setTimer: (work: () => void, ms: number) => unknown;
  clearTimer: (timer: never) => void;
  random: () => number;
  /** Pause until the next look at the feed while nothing waits; null to look only when woken. */
  idle_ms: () => number | null;
}

export interface Schedule {
  /** Something is there to send, or the network may be back. */
  wake: () => void;
  stop: () => void;
}

/** The lock every tab's uploader takes, and every change of account. */
export const UPLOAD_LOCK = 'swaymark-upload';

const FIRST_RETRY_MS = 2_000;
const LONGEST_RETRY_MS = 60_000;
const BUSY_RETRY_MS = 1_500;
const SOON_MS = 700;

export function createSchedule(parts: ScheduleParts): Schedule {
  let timer: unknown = null;
  let isRunning = false;
  let isWokenMeanwhile = false;
  let isStopped = false;
  let failures = 0;
  let looks = 0;

  const clear = () => {
    if (timer !== null) parts.clearTimer(timer as never);
    timer = null;
  };
  const later = (ms: number | null) => {
    clear();
    if (ms !== null && !isStopped) timer = parts.setTimer(start, ms);
  };

  /** Doubling, and up to 30 % off either way so that a class does not come back all at once. */
  const retryDelay = () => {
    const step = Math.min(LONGEST_RETRY_MS, FIRST_RETRY_MS * 2 ** (failures - 1));
    return Math.round(step * (0.7 + 0.6 * parts.random()));
  };

  const delayAfter = (outcome: RoundOutcome | null): number | null => {
    if (outcome === null) return BUSY_RETRY_MS;
    if (outcome.kind === 'signed_out' || outcome.kind === 'not_owner') return null;
    if (outcome.kind === 'done') {
      failures = 0;
      looks = outcome.sent > 0 ? 0 : looks + 1;
      const soon = outcome.expectsMore ? SOON_MS * 2 ** Math.min(looks, 8) : Infinity;
      const next = Math.min(soon, parts.idle_ms() ?? Infinity);
      return next === Infinity ? null : next;
    }
    failures += 1;
    return retryDelay();
  };

  /** null: another tab is at it. */
  const runLocked = async (): Promise<RoundOutcome | null> =>
    parts.locks.request(UPLOAD_LOCK, { ifAvailable: true }, (lock) => (lock ? parts.round() : null));

  async function run(): Promise<void> {
    isRunning = true;
    isWokenMeanwhile = false;
    let delay: number | null;
    try {
      const outcome = await runLocked();
      if (isStopped) return;
      if (outcome) parts.onOutcome(outcome);
      delay = delayAfter(outcome);
    } catch {
      delay = delayAfter({ kind: 'storage_failed' });
      parts.onOutcome({ kind: 'storage_failed' });
    } finally {
      isRunning = false;
    }
    later(isWokenMeanwhile ? 0 : delay);
  }

  function start(): void {
    clear();
    if (isStopped) return;
    if (isRunning) isWokenMeanwhile = true;
    else void run();
  }

  return {
    wake: start,
    stop: () => {
      isStopped = true;
      clear();
    },
  };
}
