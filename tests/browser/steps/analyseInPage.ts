import { analyseRun } from '../../../shared/analysis/analyseRun';
import { canonicalText } from '../../../shared/schemas/canonical';

/** The client's own analysis as one text, to be compared byte for byte. */
export const analyse = (input: Parameters<typeof analyseRun>[0]): string => canonicalText(analyseRun(input));
