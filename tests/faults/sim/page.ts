import { createPinia } from 'pinia';
import { effectScope } from 'vue';
import { useCutShort } from '@/composables/useCutShort';
import { useMaker } from '@/composables/useMaker';
import { useRecorder } from '@/composables/useRecorder';
import { useRecordingLock } from '@/composables/useRecordingLock';
import { addEdit, addRun } from '@/db/runs';
import { useSession } from '@/stores/useSession';
import { useSync } from '@/stores/useSync';
import type { RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import type { TapInput } from '@shared/schemas/run';

/**
 * What a person does on a page, without the page: stores, composables, db, sync and api are the product's
 * own. This file is the entry of the bundle that every simulated tab evaluates for itself (tabCode.ts).
 */
export function openPage() {
  const pinia = createPinia();
  const session = useSession(pinia);
  const sync = useSync(pinia);
  const { maker, place } = useMaker();
  let pad: { recorder: ReturnType<typeof useRecorder>; end: () => void } | null = null;

  return {
    session,
    sync,

    /** Opens the pad for a new run; false where it may not be timed now. */
    async arm(id: string): Promise<boolean> {
      await session.ready;
      const { store } = session;
      if (!store || pad) return false;
      const scope = effectScope();
      const lock = scope.run(() => useRecordingLock())!;
      if (!(await lock.acquire())) {
        scope.stop();
        return false;
      }
      const plan = { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] };
      const clock = { step_us: 100, isolated: false };
      const options = { store, id, plan, place: place(), maker: await maker(), clock, gloved: () => false };
      pad = { recorder: scope.run(() => useRecorder(options))!, end: () => scope.stop() };
      return true;
    },

    tap: (at_ms: number, input: TapInput = 'touch') => pad?.recorder.tap(at_ms, input) ?? false,

    /** Whether all that was tapped so far is on disk, as far as the page can know. */
    isKept: () => pad !== null && !pad.recorder.isFailing.value,

    /** The run is over; its pad closes once it is saved. */
    async finish(): Promise<void> {
      if (!pad) return;
      await pad.recorder.finish('held');
      pad.end();
      pad = null;
    },

    async key(run: RawRun): Promise<void> {
      await session.ready;
      if (session.store) await addRun(session.store, run, place());
    },

    async edit(edit: Omit<RawEdit, 'made_seq'>): Promise<void> {
      await session.ready;
      if (session.store) await addEdit(session.store, edit);
    },

    /** Keeps every run that was cut short; tells which. */
    async keepCutShort(): Promise<string[]> {
      await session.ready;
      const scope = effectScope();
      try {
        const offered = scope.run(() => useCutShort())!;
        await offered.look();
        const kept: string[] = [];
        for (const recording of [...offered.cutShort.value]) kept.push(await offered.keep(recording));
        return kept;
      } finally {
        scope.stop();
      }
    },
  };
}

export type Page = ReturnType<typeof openPage>;
