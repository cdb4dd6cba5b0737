import { defineStore } from 'pinia';
import { shallowRef, watch } from 'vue';
import { ApiError } from '@/api/ApiError';
import * as api from '@/api/classes';
import { keepClass, keepClasses, watchClasses } from '@/db/desk';
import type { ClassView } from '@shared/schemas/accounts';
import { useSession } from './useSession';
import { useSync } from './useSync';

/** A teacher's classes: the server's list, kept on the device for when it cannot be reached. */
export const useClasses = defineStore('classes', () => {
  const session = useSession();
  const sync = useSync();
  const classes = shallowRef<ClassView[]>([]);
  /** Why the list on the screen may be old; null when it is fresh. */
  const error = shallowRef<ApiError | null>(null);
  const isLoading = shallowRef(false);

  watch(
    () => session.store,
    (store, _before, onCleanup) => {
      classes.value = [];
      error.value = null;
      if (!store) return;
      const watching = watchClasses(store).subscribe((kept) => (classes.value = kept));
      onCleanup(() => watching.unsubscribe());
    },
    { immediate: true },
  );

  /** Fetches the list. A failure leaves the kept one and says why in `error`. */
  async function load(): Promise<void> {
    const { store } = session;
    isLoading.value = true;
    try {
      const { classes: fresh } = await api.getClasses();
      // A change of account meanwhile: this answer is not the next one's.
      if (!store || store !== session.store) return;
      error.value = null;
      sync.noteContact();
      await keepClasses(store, fresh);
    } catch (cause) {
      if (store !== session.store) return;
      if (!(cause instanceof ApiError)) throw cause;
      error.value = cause;
    } finally {
      isLoading.value = false;
    }
  }

  /** One class by its id, as kept. */
  const byId = (id: string): ClassView | undefined => classes.value.find((view) => view.id === id);

  async function keep(answer: Promise<{ class: ClassView }>): Promise<ClassView> {
    const { class: view } = await answer;
    if (session.store) await keepClass(session.store, view);
    return view;
  }
  const refresh = (id: string) => keep(api.getClass(id));
  const make = (body: { name: string; teacher_word: string }) => keep(api.makeClass(body));
  const newCode = (id: string) => keep(api.newClassCode(id));
  const newBoardPass = (id: string) => keep(api.newBoardPass(id));
  const newPin = async (studentId: string): Promise<string> => (await api.newStudentPin(studentId)).pin;
  /** Turned down, with its reason, for one who has handed something in. */
  async function removeStudent(id: string, studentId: string): Promise<void> {
    await api.removeStudent(studentId);
    await refresh(id);
  }

  return { classes, error, isLoading, load, byId, refresh, make, newCode, newBoardPass, newPin, removeStudent };
});
