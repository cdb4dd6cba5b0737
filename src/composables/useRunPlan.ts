import { shallowRef } from 'vue';
import type { RecordingPlan } from '@/db/localStore';
import { readMeta, writeMeta } from '@/db/meta';
import { useSession } from '@/stores/useSession';

export type { RecordingPlan };

/** After this long the rig has likely been changed: what was set up is offered, no longer taken. */
const FRESH_MS = 4 * 3600 * 1000;

interface KeptPlan {
  plan: RecordingPlan;
  kept_wall_ms: number;
}

export const FREE_PLAN: RecordingPlan = { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] };

/** What was set up last by this account on this phone: for the pad, and for "same as last time, but …". */
export function useRunPlan() {
  const session = useSession();
  const last = shallowRef<KeptPlan | null>(null);

  async function load(): Promise<void> {
    await session.ready;
    last.value = session.store ? ((await readMeta<KeptPlan>(session.store, 'last_rig')) ?? null) : null;
  }

  /** The plan a run made now goes by: nothing filled in when the last one is stale. */
  function current(wall_ms: number = Date.now()): RecordingPlan {
    const isFresh = last.value && Math.abs(wall_ms - last.value.kept_wall_ms) < FRESH_MS;
    return isFresh ? last.value!.plan : FREE_PLAN;
  }

  async function keep(plan: RecordingPlan): Promise<void> {
    // Forms hand in reactive objects, which storage cannot take.
    last.value = { plan: JSON.parse(JSON.stringify(plan)) as RecordingPlan, kept_wall_ms: Date.now() };
    if (session.store) await writeMeta(session.store, 'last_rig', last.value);
  }

  return { last, load, current, keep };
}
