import type { Analysis, Flag } from '@shared/schemas/analysis';

/** Flags nobody has answered yet, in the order of the run. */
export const openFlags = (analysis: Pick<Analysis, 'flags'>): Flag[] => analysis.flags.filter((flag) => !flag.answered);
