import { computed, type Ref } from 'vue';
import type { Rig } from '@shared/schemas/rig';

/** Readings that came later and are left out of a rig while they are not given. */
type Later = { [Key in keyof Rig]: undefined extends Rig[Key] ? Key : never }[keyof Rig] & keyof Rig;

/** Writable parts of a rig; any other part stays. The rig must be there when one is read. */
export function useRigParts(rig: Ref<Rig | null>) {
  function put(change: Partial<Rig>): void {
    if (!rig.value) return;
    const next = { ...rig.value, ...change };
    rig.value = Object.fromEntries(Object.entries(next).filter(([, given]) => given !== undefined)) as Rig;
  }
  return {
    part: <Key extends keyof Rig>(key: Key) =>
      computed<Rig[Key]>({ get: () => rig.value![key], set: (given) => put({ [key]: given }) }),

    /** Null stands for a reading that is not given. */
    later: <Key extends Later>(key: Key) =>
      computed<NonNullable<Rig[Key]> | null>({
        get: () => rig.value![key] ?? null,
        set: (given) => put({ [key]: given ?? undefined }),
      }),
  };
}
