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
  small_period_expanded_u_s: number | null;
  length_m: number | null;
  open_flags: number;
  set_aside: 0 | 1;
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
    `SELECT run_id, feed_seq, bench, small_period_s, small_period_u_s, small_period_expanded_u_s, length_m, open_flags,
       set_aside FROM current_analyses
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

/** A board of an earlier version shows no run without a figure: that takes one set aside off it as well. */
const presentPoint = (row: PointRow): BoardPoint =>
  row.set_aside
    ? { ...placeOf(row), small_period_s: null, length_m: null, open_flags: 0, set_aside: true }
    : { ...placeOf(row), small_period_s: periodOf(row), length_m: row.length_m, open_flags: row.open_flags };

const placeOf = ({ run_id, bench }: PointRow) => ({ run_id, bench });

function periodOf(row: PointRow): BoardPoint['small_period_s'] {
  if (row.small_period_s === null) return null;
  const { small_period_s: value, small_period_u_s: u, small_period_expanded_u_s: expanded_u } = row;
  return { value, u: u ?? 0, expanded_u: expanded_u ?? 2 * (u ?? 0) };
}
