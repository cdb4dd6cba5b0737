import { setTimeout as rest } from 'node:timers/promises';
import type { Logger } from 'pino';
import { analyseRun, METHOD, type Sealed } from '@shared/analysis/analyseRun';
import type { Analysis } from '@shared/schemas/analysis';
import type { RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { inForce, setAside } from '@shared/timing/foldRun';
import type { Database } from '../models/openDatabase';
import { selectWhereIn } from '../models/selectWhereIn';
import { storeAnalyses, type Computed } from './storeAnalyses';

/** Computes analyses of record away from the requests that ask for them, one run at a time. */
export interface AnalysisQueue {
  /** Analyses in force of those runs, waiting at most that long; runs that are not done by then are left out. */
  ready(runIds: readonly string[], withinMs: number): Promise<Analysis[]>;
  /** Queues those of the runs, or of all, that have no analysis of their present edits by the present method. */
  addMissing(among?: readonly string[]): Promise<number>;
  /** Resolves when nothing is left to do. */
  settled(): Promise<void>;
  /** Ends after the batch in work; what is left is found again by addMissing. */
  stop(): Promise<void>;
}

/** Analyses stored in one transaction: enough to share its cost, few enough to be heard of soon. */
const BATCH = 10;
/** With more than this ahead nobody waits: a whole class handing in at once gets its receipts first. */
const MOST_AHEAD = 60;

export function createAnalysisQueue(database: Database, log: Logger, now: () => number): AnalysisQueue {
  const waiting = new Set<string>();
  let inWork = new Set<string>();
  let listeners: (() => void)[] = [];
  let worker: Promise<void> | null = null;
  let stopped = false;

  const isDone = (ids: readonly string[]) => ids.every((id) => !waiting.has(id) && !inWork.has(id));

  async function work(): Promise<void> {
    while (waiting.size > 0 && !stopped) {
      inWork = new Set([...waiting].slice(0, BATCH));
      for (const id of inWork) waiting.delete(id);
      try {
        await storeAnalyses(database, await computeEach([...inWork]), now());
      } catch (error) {
        log.error({ err: error, runs: [...inWork] }, 'analyses could not be stored');
      }
      inWork = new Set();
      tellListeners();
    }
    worker = null;
  }

  /** After each run as long a rest as it took, so that requests get half of the time. A run that cannot be computed stops no other. */
  async function computeEach(runIds: string[]): Promise<Computed[]> {
    const done: Computed[] = [];
    for (const run of await loadInputs(database, runIds)) {
      const start = performance.now();
      try {
        const edits = run.edits.map(unsealed<RawEdit>);
        const analysis = analyseRun({ run: unsealed<RawRun>(run), edits });
        const isSetAside = setAside(inForce(edits.map(({ content }) => content))) !== null;
        done.push({ run, edit_seq: run.edits.at(-1)?.seq ?? 0, isSetAside, analysis });
      } catch (error) {
        log.error({ err: error, run: run.id }, 'a run could not be analysed');
      }
      await rest(performance.now() - start);
    }
    return done;
  }

  function tellListeners(): void {
    const told = listeners;
    listeners = [];
    for (const tell of told) tell();
  }

  return {
    async ready(runIds, withinMs) {
      const deadline = performance.now() + withinMs;
      while (!isDone(runIds) && !stopped && waiting.size <= MOST_AHEAD && performance.now() < deadline) {
        await Promise.race([
          new Promise<void>((resolve) => listeners.push(resolve)),
          new Promise<void>((resolve) => setTimeout(resolve, deadline - performance.now()).unref()),
        ]);
      }
      const done = runIds.filter((id) => isDone([id]));
      const rows = await selectWhereIn<{ body: string }>(
        database,
        'SELECT a.body FROM current_analyses c JOIN analyses a ON a.seq = c.analysis_seq',
        'c.run_id',
        done,
      );
      return rows.map(({ body }) => JSON.parse(body) as Analysis);
    },
    async addMissing(among) {
      const rows = await database.select<{ id: string }>(
        `SELECT r.id FROM runs r
           LEFT JOIN current_analyses c ON c.run_id = r.id
           LEFT JOIN analyses a ON a.seq = c.analysis_seq
         WHERE (a.seq IS NULL OR a.method <> $1
             OR c.edit_seq < (SELECT max(e.seq) FROM edits e WHERE e.run_id = r.id))
           ${among ? 'AND r.id IN (SELECT value FROM json_each($2))' : ''}`,
        [METHOD.id, ...(among ? [JSON.stringify(among)] : [])],
      );
      for (const { id } of rows) waiting.add(id);
      if (waiting.size > 0 && !stopped) worker ??= work();
      return rows.length;
    },
    async settled() {
      while (worker) await worker;
    },
    async stop() {
      stopped = true;
      tellListeners();
      await worker;
    },
  };
}

export interface Inputs {
  id: string;
  digest: string;
  raw: string;
  class_id: string | null;
  bench: number | null;
  owner_id: string;
  /** In the server's order, which is the order of folding. */
  edits: { seq: number; digest: string; raw: string }[];
}

async function loadInputs(database: Database, runIds: string[]): Promise<Inputs[]> {
  // Runs are read last: an edit that arrives in between is in the queue again by itself.
  const edits = await selectWhereIn<{ seq: number; run_id: string; digest: string; raw: string }>(
    database,
    'SELECT seq, run_id, digest, raw FROM edits',
    'run_id',
    runIds,
  );
  edits.sort((a, b) => a.seq - b.seq);
  const runs = await selectWhereIn<Omit<Inputs, 'edits'>>(
    database,
    'SELECT id, digest, raw, class_id, bench, owner_id FROM runs',
    'id',
    runIds,
  );
  return runs.map((run) => ({ ...run, edits: edits.filter(({ run_id }) => run_id === run.id) }));
}

/** Both were checked when they came in, and no code changes them. */
const unsealed = <Content>({ digest, raw }: { digest: string; raw: string }): Sealed<Content> => ({
  digest,
  content: JSON.parse(raw) as Content,
});
