import type { FeedAnswer, FeedItem } from '@shared/schemas/sync';
import type { Deps } from '../deps';
import { topOfFeed } from '../models/feedOrder';
import type { FeedRow } from '../models/FeedRow';
import { selectWhereIn } from '../models/selectWhereIn';
import type { SignedIn } from '../policies/actor';
import type { Scope } from '../policies/permissions';
import {
  presentAnalysisItem,
  presentEditItem,
  presentRunItem,
  type EditForFeed,
  type RunForFeed,
} from '../presenters/feedItem';
import { createNameBook } from './nameBook';

export const MOST_FEED_ITEMS = 200;
/** Texts in one answer, bytes: a phone on a weak line should get somewhere. One item always fits. */
const MOST_FEED_BYTES = 2_000_000;

type Place = Pick<FeedRow, 'seq' | 'kind' | 'ref_seq' | 'bytes'>;

/**
 * What has happened since the cursor, in the server's order, of what this actor may hear of. Of a run's
 * analyses only the one in force is told: another comes later in the feed. The
 * cursor moves on to the last place that was looked at, heard or not, and everything up to there was
 * visible when it was read, so none is skipped.
 */
export async function feedAfter(
  deps: Deps,
  actor: SignedIn,
  scope: Scope,
  { after, limit }: { after: number; limit: number },
): Promise<FeedAnswer> {
  const top = await topOfFeed(deps.database);
  // A cursor beyond the end is from another life of the database: start over.
  const from = after > top ? 0 : after;
  const found = await placesInScope(deps, actor, scope, from, top, limit + 1);
  const taken = withinBytes(found.slice(0, limit));
  const more = taken.length < found.length;
  return {
    server_epoch: deps.epoch,
    server_wall_ms: deps.now(),
    cursor: more ? taken.at(-1)!.seq : top,
    more,
    items: await itemsAt(deps, actor, taken),
  };
}

function placesInScope(deps: Deps, actor: SignedIn, scope: Scope, from: number, top: number, most: number) {
  const [where, ...bind] = inScope(actor, scope);
  return deps.database.select<Place>(
    `SELECT seq, kind, ref_seq, bytes FROM feed WHERE seq > $1 AND seq <= $2 AND ${where} AND ${IS_IN_FORCE}
     ORDER BY seq LIMIT $3`,
    [from, top, most, ...bind],
  );
}

/** Runs and edits always are. */
const IS_IN_FORCE = `(kind <> 'analysis' OR seq =
  (SELECT c.feed_seq FROM analyses a JOIN current_analyses c ON c.run_id = a.run_id WHERE a.seq = ref_seq))`;

/** The condition for `feed` rows, and its bound values from $4 on. */
function inScope(actor: SignedIn, scope: Scope): [string, ...(string | number)[]] {
  if (actor.kind === 'student') return ['class_id = $4 AND bench = $5', actor.student.class_id, actor.student.bench];
  if (scope === 'all') return ['true'];
  if (scope === 'own') return ['owner_id = $4', actor.id];
  // The plus keeps SQLite walking along seq from the cursor, which is a short way for whoever is up to date.
  return ['(+owner_id = $4 OR +class_id IN (SELECT id FROM classes WHERE owner_id = $4))', actor.id];
}

function withinBytes(places: Place[]): Place[] {
  let bytes = 0;
  const end = places.findIndex((place, i) => (bytes += place.bytes) > MOST_FEED_BYTES && i > 0);
  return end < 0 ? places : places.slice(0, end);
}

async function itemsAt(deps: Deps, actor: SignedIn, places: Place[]): Promise<FeedItem[]> {
  const { database } = deps;
  const refs = (kind: Place['kind']) => places.filter((place) => place.kind === kind).map(({ ref_seq }) => ref_seq);
  const [runs, edits, analyses] = await Promise.all([
    selectWhereIn<RunForFeed>(database, 'SELECT * FROM runs', 'seq', refs('run')),
    selectWhereIn<EditForFeed>(database, 'SELECT * FROM edits', 'seq', refs('edit')),
    selectWhereIn<{ seq: number; body: string }>(database, 'SELECT seq, body FROM analyses', 'seq', refs('analysis')),
  ]);
  const author = await createNameBook(deps, actor, [
    ...runs.map((run) => run.owner_id),
    ...edits.map((edit) => edit.author_id),
  ]);
  const bySeq = {
    run: new Map(runs.map((row) => [row.seq, row])),
    edit: new Map(edits.map((row) => [row.seq, row])),
    analysis: new Map(analyses.map((row) => [row.seq, row])),
  };
  return places.flatMap(({ seq, kind, ref_seq }) => {
    try {
      if (kind === 'run') return presentRunItem(bySeq.run.get(ref_seq)!, author);
      if (kind === 'edit') return presentEditItem(bySeq.edit.get(ref_seq)!, author);
      return presentAnalysisItem(seq, bySeq.analysis.get(ref_seq)!.body);
    } catch (error) {
      // One damaged row must not hold up all that comes after it.
      deps.log.error({ err: error, kind, seq: ref_seq }, 'a row of the feed could not be read');
      return [];
    }
  });
}
