import type { BoardAnswer, BoardPoint } from '@shared/schemas/accounts';
import type { Deps } from '../deps';
import { topOfFeed } from '../models/feedOrder';
import type { BoardActor } from '../policies/actor';

type PointRow = {
  run_id: string;
  feed_seq: number;
  bench: number;
  small_period_s: number | null;
  small_period_u_s: number | null;
  length_m: number | null;
  open_flags: number;
};

/** A class's dots that are new or have changed since the cursor: benches and figures, nothing anybody wrote. */
export async function boardAfter(
  { database, now }: Deps,
  { schoolClass }: BoardActor,
  after: number,
): Promise<BoardAnswer> {
  // A cursor beyond the end is from another life of the database: start over.
  const from = after > (await topOfFeed(database)) ? 0 : after;
  const rows = await database.select<PointRow>(
    `SELECT run_id, feed_seq, bench, small_period_s, small_period_u_s, length_m, open_flags FROM current_analyses
     WHERE class_id = $1 AND feed_seq > $2 AND bench IS NOT NULL ORDER BY feed_seq`,
    [schoolClass.id, from],
  );
  return {
    class_name: schoolClass.name,
    code: schoolClass.code,
    server_wall_ms: now(),
    cursor: rows.at(-1)?.feed_seq ?? from,
    points: rows.map(presentPoint),
  };
}

const presentPoint = (row: PointRow): BoardPoint => ({
  run_id: row.run_id,
  bench: row.bench,
  small_period_s: row.small_period_s === null ? null : { value: row.small_period_s, u: row.small_period_u_s ?? 0 },
  length_m: row.length_m,
  open_flags: row.open_flags,
});
