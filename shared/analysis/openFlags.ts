import type { Analysis, Flag } from '../schemas/analysis';
import type { FlagCode } from '../schemas/edit';

/** Flags nobody has answered yet, in the order of the run. */
export const openFlags = (analysis: Pick<Analysis, 'flags'>): Flag[] => analysis.flags.filter((flag) => !flag.answered);

/** Flags that say the swings may be counted wrongly; the stated uncertainty does not cover that. */
const ABOUT_THE_COUNT: readonly FlagCode[] = ['double', 'missed', 'pause', 'half_swings', 'count_from_one'];

/** While such a flag is open the number stands for the marks as they are, not for the pendulum. */
export const isSettled = (analysis: Pick<Analysis, 'flags'>): boolean =>
  !openFlags(analysis).some(({ code }) => ABOUT_THE_COUNT.includes(code));
