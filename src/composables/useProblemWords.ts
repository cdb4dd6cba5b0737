import { useI18n } from 'vue-i18n';
import type { ParseProblem } from '@shared/units/parseDecimal';

/** What was seen and what to do, for a text that could not be read. */
export function useProblemWords() {
  const { t } = useI18n();
  return (problem: ParseProblem) => t(`rig.problem.${problem.code}`, { seen: problem.seen });
}
