import type { Analysis } from '@shared/schemas/analysis';
import type { RawEdit } from '@shared/schemas/edit';
import { FormatError, readEdit, readRun } from '@shared/schemas/readSealed';
import type { RawRun } from '@shared/schemas/run';
import type { SyncAnswer, SyncItem, SyncRequest, Verdict } from '@shared/schemas/sync';
import type { Deps } from '../../deps';
import { feedOrder } from '../../models/feedOrder';
import { isStaff, type SignedIn } from '../../policies/actor';
import { storeEdits } from './storeEdits';
import { storeRuns } from './storeRuns';
import { hasReceipt, notTaken, type Reason } from './verdicts';

export type RunItem = Extract<SyncItem, { type: 'run' }>;
export type EditItem = Extract<SyncItem, { type: 'edit' }>;

/** What every step of one batch needs to know. */
export interface Delivery {
  actor: SignedIn;
  owner_kind: 'staff' | 'student';
  device_id: string;
  received_ms: number;
  clock_skew_ms: number;
  /** Classes of a staff member, where runs may be put. */
  ownClassIds: ReadonlySet<string>;
  nextSeq: () => number;
}

/** Analyses that are ready this long after the batch came in travel with the answer; the rest come with the feed. */
const ANALYSES_WITHIN_MS = 1_500;

/**
 * Takes a batch: one verdict for every item, in the order sent. All that can be taken is stored in
 * one transaction, and only then is there a receipt; an item that cannot be taken stops no other.
 * Sending the same batch again changes nothing and gives the same receipts.
 */
export async function handIn(deps: Deps, actor: SignedIn, request: SyncRequest): Promise<SyncAnswer> {
  const received_ms = deps.now();
  const verdicts = new Map<SyncItem, Verdict>();
  const runs: RunItem[] = [];
  const edits: EditItem[] = [];
  for (const item of request.items) {
    const reason = whyNotReadable(deps, item);
    if (reason) verdicts.set(item, notTaken(item, reason));
    else if (item.type === 'run') runs.push(item);
    else edits.push(item);
  }
  const ownClasses = isStaff(actor)
    ? await deps.database.models.SchoolClass.findAll({ where: { owner_id: actor.id }, attributes: ['id'] })
    : [];
  await deps.database.writeTransaction(async (transaction) => {
    const delivery: Delivery = {
      actor,
      owner_kind: isStaff(actor) ? 'staff' : 'student',
      device_id: request.device_id,
      received_ms,
      clock_skew_ms: request.sent_wall_ms - received_ms,
      ownClassIds: new Set(ownClasses.map(({ id }) => id)),
      nextSeq: await feedOrder(deps.database, transaction),
    };
    // Runs first: an edit may come before its run in the same batch.
    await storeRuns(deps, delivery, runs, verdicts, transaction);
    await storeEdits(deps, delivery, edits, verdicts, transaction);
  });
  return {
    server_epoch: deps.epoch,
    verdicts: request.items.map((item) => verdicts.get(item)!),
    analyses: await analysesOf(deps, heldRuns(request.items, verdicts), received_ms),
    server_wall_ms: deps.now(),
  };
}

/** The receipts are given by now: whatever goes wrong here, the analyses come with the feed or not at all. */
async function analysesOf(deps: Deps, runIds: string[], received_ms: number): Promise<Analysis[]> {
  try {
    await deps.analyses.addMissing(runIds);
    return await deps.analyses.ready(runIds, ANALYSES_WITHIN_MS - (deps.now() - received_ms));
  } catch (error) {
    deps.log.error({ err: error, runs: runIds }, 'analyses could not be given');
    return [];
  }
}

function readRunItem(item: RunItem): Reason | undefined {
  const run: RawRun = readRun(item.raw, item.digest);
  return run.id === item.id ? undefined : ID_DIFFERS;
}

function readEditItem(item: EditItem): Reason | undefined {
  const edit: RawEdit = readEdit(item.raw, item.digest);
  return edit.id === item.id && edit.run_id === item.run_id ? undefined : ID_DIFFERS;
}

const ID_DIFFERS: Reason = {
  verdict: 'refused',
  code: 'id_differs',
  message: 'The id beside this item is not the one inside it. Send it as it was made.',
  fields: [{ path: 'id', message: 'not the id inside the item' }],
};

const NOT_READABLE: Reason = {
  verdict: 'refused',
  code: 'not_readable',
  message: 'The server could not read this item and took the others. Export it and tell the teacher.',
};

/** Nothing that is inside one item may stop the others. */
function whyNotReadable(deps: Deps, item: SyncItem): Reason | undefined {
  try {
    return item.type === 'run' ? readRunItem(item) : readEditItem(item);
  } catch (error) {
    if (error instanceof FormatError) {
      return { verdict: 'refused', code: error.code, message: error.message, fields: error.fields };
    }
    deps.log.error({ err: error, item: item.id }, 'an item could not be read');
    return NOT_READABLE;
  }
}

function heldRuns(items: readonly SyncItem[], verdicts: ReadonlyMap<SyncItem, Verdict>): string[] {
  const held = items.filter((item) => hasReceipt(verdicts.get(item)!));
  return [...new Set(held.map((item) => (item.type === 'run' ? item.id : item.run_id)))];
}
