import type { Analysis, Result } from '@shared/schemas/analysis';
import { formatMeasured } from '@shared/units/formatMeasured';

export type Agreement = 'agrees' | 'differs' | 'otherInputs';

/** Whether the server's analysis of record prints what the one computed here prints, to the last digit. */
export function agreement(here: Analysis, official: Analysis): Agreement {
  if (here.input_digest !== official.input_digest) return 'otherInputs';
  return printed(here) === printed(official) ? 'agrees' : 'differs';
}

function printed({ period_s, small_period_s, g_m_s2, swings, marks_used, flags }: Analysis): string {
  const text = (result: Result | null) => result && formatMeasured(result.value, result.expanded_u).text;
  const noticed = flags.map(({ code, mark, answered }) => [code, mark, answered]);
  return JSON.stringify([text(period_s), text(small_period_s), text(g_m_s2), swings, marks_used, noticed]);
}
