import type { Analysis } from '@shared/schemas/analysis';
import { canonicalText } from '@shared/schemas/canonical';
import type { RawEdit } from '@shared/schemas/edit';

/** Ids of edits that were taken out of force by a later `withdraw`. */
export function withdrawnIds(edits: readonly RawEdit[]): Set<string> {
  return new Set(edits.flatMap(({ change }) => (change.kind === 'withdraw' ? [change.edit_id] : [])));
}

export type Agreement = 'agrees' | 'differs' | 'otherInputs';

/** How the server's analysis of record stands to the one computed here. */
export function agreement(here: Analysis, official: Analysis): Agreement {
  if (here.input_digest !== official.input_digest) return 'otherInputs';
  return canonicalText(here) === canonicalText(official) ? 'agrees' : 'differs';
}
