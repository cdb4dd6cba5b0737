import { computed, onScopeDispose, shallowRef } from 'vue';
import { ApiError } from '@/api/ApiError';
import { fetchBoard } from '@/api/board';
import { boardPicture, keepBoard, type BoardHead } from '@/db/desk';
import type { BoardPoint } from '@shared/schemas/accounts';
import { useSession } from './useSession';

const POLL_MS = 2_000;

/**
 * A Board's picture: asks for what is new every two seconds while the page can be seen, and keeps the
 * last picture on the device. Stops with the scope that called it.
 *
 * @param pass  the Board pass of the link
 */
export function useBoard(pass: string) {
  const session = useSession();
  const head = shallowRef<BoardHead | null>(null);
  const points = shallowRef<ReadonlyMap<string, BoardPoint>>(new Map());
  const error = shallowRef<ApiError | null>(null);
  const isLoading = shallowRef(true);
  let timer: ReturnType<typeof setTimeout> | undefined;
  let isOver = false;
  /** The next look takes the whole picture: what was kept may be of another life of the server. */
  let isFresh = true;

  const lay = (news: BoardPoint[], over: ReadonlyMap<string, BoardPoint>) => {
    const laid = new Map([...over, ...news.map((point) => [point.run_id, point] as const)]);
    for (const { run_id, set_aside } of news) if (set_aside) laid.delete(run_id);
    points.value = laid;
  };

  async function begin(): Promise<void> {
    await session.ready;
    if (session.store) {
      const kept = await boardPicture(session.store, pass);
      head.value = kept.head;
      lay(kept.points, new Map());
    }
    await look();
  }

  async function look(): Promise<void> {
    clearTimeout(timer);
    try {
      const { points: news, ...rest } = await fetchBoard(pass, isFresh ? 0 : (head.value?.cursor ?? 0));
      const wasFresh = isFresh;
      isFresh = !wasFresh && rest.cursor < (head.value?.cursor ?? 0);
      head.value = rest;
      error.value = null;
      lay(news, wasFresh ? new Map() : points.value);
      if (session.store && (wasFresh || news.length > 0)) await keepBoard(session.store, pass, rest, news, wasFresh);
    } catch (cause) {
      if (!(cause instanceof ApiError)) throw cause;
      error.value = cause;
    } finally {
      isLoading.value = false;
      if (!isOver && !document.hidden) timer = setTimeout(() => void look(), POLL_MS);
    }
  }

  const onShown = () => document.hidden || void look();
  document.addEventListener('visibilitychange', onShown);
  onScopeDispose(() => {
    isOver = true;
    clearTimeout(timer);
    document.removeEventListener('visibilitychange', onShown);
  });
  void begin();

  return {
    /** Class name, code and the server's time; null until something is known. */
    head,
    points: computed(() => [...points.value.values()]),
    /** Why the picture may be old; null when the last look succeeded. */
    error,
    isLoading,
  };
}
