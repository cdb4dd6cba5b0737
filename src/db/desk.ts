import { liveQuery, type Observable } from 'dexie';
import type { BoardPoint, ClassView } from '@shared/schemas/accounts';
import type { LocalStore } from './localStore';
import { readMeta, writeMeta } from './meta';

/** The last known classes and Board pictures, for when the server cannot be reached. */

export function watchClasses(store: LocalStore): Observable<ClassView[]> {
  return liveQuery(() => store.classes.toArray());
}

/** Puts the server's list in place of the kept one. */
export function keepClasses(store: LocalStore, classes: ClassView[]): Promise<void> {
  return store.transaction('rw', store.classes, async () => {
    await store.classes.clear();
    await store.classes.bulkPut(classes);
  });
}

export async function keepClass(store: LocalStore, view: ClassView): Promise<void> {
  await store.classes.put(view);
}

/** What a Board shows besides its points. */
export interface BoardHead {
  class_name: string;
  code: string;
  server_wall_ms: number;
  cursor: number;
}

export async function boardPicture(
  store: LocalStore,
  pass: string,
): Promise<{ head: BoardHead | null; points: BoardPoint[] }> {
  const head = (await readMeta<BoardHead>(store, `board:${pass}`)) ?? null;
  const rows = await store.boardPoints.where({ pass }).toArray();
  return { head, points: rows.map(pointOf) };
}

/** Lays an answer over the kept picture: new and changed points only, or all of them after a fresh start. */
export function keepBoard(store: LocalStore, pass: string, head: BoardHead, points: BoardPoint[], fresh: boolean) {
  return store.transaction('rw', store.boardPoints, store.meta, async () => {
    if (fresh) await store.boardPoints.where({ pass }).delete();
    const [off, on] = [points.filter(({ set_aside }) => set_aside), points.filter(({ set_aside }) => !set_aside)];
    await store.boardPoints.bulkPut(on.map((point) => ({ ...point, pass })));
    await store.boardPoints.bulkDelete(off.map(({ run_id }) => [pass, run_id]));
    await writeMeta(store, `board:${pass}`, head);
  });
}

/** A row as it was kept; those of earlier versions hold no U, and had twice u shown. */
function pointOf({ run_id, bench, small_period_s: kept, length_m, open_flags }: BoardPoint): BoardPoint {
  const small_period_s = kept && { ...kept, expanded_u: kept.expanded_u ?? 2 * kept.u };
  return { run_id, bench, small_period_s, length_m, open_flags };
}
