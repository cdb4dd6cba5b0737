import type { Analysis } from '@shared/schemas/analysis';
import { canonicalText } from '@shared/schemas/canonical';

export type Agreement = 'agrees' | 'differs' | 'otherInputs';

/** How the server's analysis of record stands to the one computed here. */
export function agreement(here: Analysis, official: Analysis): Agreement {
  if (here.input_digest !== official.input_digest) return 'otherInputs';
  return canonicalText(here) === canonicalText(official) ? 'agrees' : 'differs';
}
