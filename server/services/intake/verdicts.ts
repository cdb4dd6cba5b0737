import type { SyncItem, Verdict } from '@shared/schemas/sync';
import type { FieldMessage } from '../../errors';
import { presentReceipt, type Received } from '../../presenters/receipt';

/** Why an item was not taken. later: nothing is wrong with it, send it again. */
export interface Reason {
  verdict: 'conflict' | 'refused' | 'later';
  code: string;
  message: string;
  fields?: FieldMessage[];
}

export const taken = (item: SyncItem, verdict: 'stored' | 'already', row: Received): Verdict => ({
  verdict,
  type: item.type,
  id: item.id,
  digest: item.digest,
  receipt: presentReceipt(row),
});

export const notTaken = (item: SyncItem, { verdict, code, message, fields = [] }: Reason): Verdict => ({
  verdict,
  type: item.type,
  id: item.id,
  digest: item.digest,
  code,
  message,
  fields,
});

export const hasReceipt = (verdict: Verdict) => verdict.verdict === 'stored' || verdict.verdict === 'already';

/** Refused or in conflict: sending it again changes nothing. */
export const isNeverTaken = (verdict: Verdict) => verdict.verdict === 'refused' || verdict.verdict === 'conflict';

export const OTHER_BYTES: Reason = {
  verdict: 'conflict',
  code: 'other_content',
  message: 'The server holds this id with other content. Both copies are kept; export this one and tell the teacher.',
};
export const NOT_YOURS: Reason = {
  verdict: 'refused',
  code: 'not_yours',
  message: 'This id belongs to somebody else, and nothing of theirs was changed. Sign in as the person who made it.',
};
export const CLASS_NOT_YOURS: Reason = {
  verdict: 'refused',
  code: 'class_not_yours',
  message: 'This class is not one of yours. Choose a class of your own, or none.',
  fields: [{ path: 'class_id', message: 'not one of your classes' }],
};
export const DAY_IS_FULL: Reason = {
  verdict: 'later',
  code: 'day_is_full',
  message: 'This account has handed in all that one day allows. The rest goes tomorrow.',
};
export const RUN_UNKNOWN: Reason = {
  verdict: 'later',
  code: 'run_unknown',
  message: 'The run this edit belongs to has not arrived yet. It goes when the run is in.',
};
export const RUN_NOT_TAKEN: Reason = {
  verdict: 'refused',
  code: 'run_not_taken',
  message: 'The run this edit belongs to was not taken, so the edit has nothing to lie over.',
};
export const NOT_YOUR_RUN: Reason = {
  verdict: 'refused',
  code: 'not_your_run',
  message: 'Whoever timed this run, or the teacher, sets it aside or takes it back. Ask one of them.',
};
export const EDIT_OF_STAFF: Reason = {
  verdict: 'refused',
  code: 'edit_of_staff',
  message: 'A teacher or volunteer made the edit this one would withdraw. Ask them to withdraw it.',
};
