import type { Transaction } from 'sequelize';
import type { Analysis } from '@shared/schemas/analysis';
import { feedOrder } from '../models/feedOrder';
import { insertRows } from '../models/insertRows';
import type { Database } from '../models/openDatabase';
import type { Inputs } from './analysisQueue';

export interface Computed {
  run: Inputs;
  /** The last edit taken into account; 0 for none. */
  edit_seq: number;
  isSetAside: boolean;
  analysis: Analysis;
}

/**
 * Keeps analyses and puts them in force. One of the same inputs is kept once; coming back to earlier
 * inputs, or setting the run aside or taking it back, puts the earlier row in force again and says so in
 * the feed, which is what boards follow.
 */
export async function storeAnalyses(database: Database, computed: readonly Computed[], atMs: number): Promise<void> {
  if (computed.length === 0) return;
  await database.writeTransaction(async (transaction) => {
    const nextSeq = await feedOrder(database, transaction);
    for (const one of computed) await storeOne(database, one, nextSeq, atMs, transaction);
  });
}

async function storeOne(
  database: Database,
  { run, edit_seq, isSetAside, analysis }: Computed,
  nextSeq: () => number,
  atMs: number,
  transaction: Transaction,
): Promise<void> {
  const [held] = await database.select<{ seq: number; bytes: number; current: number | null; set_aside: 0 | 1 | null }>(
    `SELECT a.seq, length(a.body) AS bytes, c.analysis_seq AS current, c.set_aside FROM analyses a
       LEFT JOIN current_analyses c ON c.run_id = a.run_id
     WHERE a.run_id = $1 AND a.input_digest = $2`,
    [run.id, analysis.input_digest],
    transaction,
  );
  if (held && held.current === held.seq && Boolean(held.set_aside) === isSetAside) {
    await database.run('UPDATE current_analyses SET edit_seq = $1 WHERE run_id = $2', [edit_seq, run.id], transaction);
    return;
  }
  const feed_seq = nextSeq();
  const body = JSON.stringify(analysis);
  const { input_digest, method } = analysis;
  if (!held) {
    const row = { seq: feed_seq, run_id: run.id, input_digest, method, body, computed_ms: atMs };
    await insertRows(database, 'analyses', [row], transaction);
  }
  const analysis_seq = held?.seq ?? feed_seq;
  const { class_id, bench, owner_id } = run;
  const bytes = held?.bytes ?? body.length;
  const feedRow = { seq: feed_seq, kind: 'analysis', ref_seq: analysis_seq, bytes, class_id, bench, owner_id };
  await insertRows(database, 'feed', [feedRow], transaction);
  await database.run('DELETE FROM current_analyses WHERE run_id = $1', [run.id], transaction);
  const current = {
    run_id: run.id,
    analysis_seq,
    feed_seq,
    edit_seq,
    class_id,
    bench,
    small_period_s: analysis.small_period_s?.value ?? null,
    small_period_u_s: analysis.small_period_s?.u ?? null,
    small_period_expanded_u_s: analysis.small_period_s?.expanded_u ?? null,
    length_m: analysis.length_m?.value ?? null,
    open_flags: analysis.flags.filter(({ answered }) => !answered).length,
    set_aside: isSetAside ? 1 : 0,
  };
  await insertRows(database, 'current_analyses', [current], transaction);
}
