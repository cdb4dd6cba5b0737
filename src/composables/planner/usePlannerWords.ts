import { useI18n } from 'vue-i18n';
import type { EffectVerdict, TargetVerdict } from '@shared/analysis/planner/judgePlan';
import { degrees } from '@shared/units/angle';
import { formatMeasured } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';
import type { PlannerOutcome } from './usePlanner';

/** A verdict in words: the one sentence, and what would help. `tone` is never told by colour alone. */
export interface VerdictWords {
  tone: 'good' | 'near' | 'far';
  /** A word or two that stand for the tone. */
  short: string;
  sentence: string;
  more: string[];
}

export function usePlannerWords() {
  const { t } = useI18n();
  const settings = useSettings();
  const decimalMark = () => settings.decimalMark;

  /** Two significant digits. */
  const size = (number: number) =>
    number === 0 ? '0' : formatMeasured(number, number, { decimalMark: decimalMark() }).u;
  const percent = (share: number) => `${size(share * 100)}\u00a0%`;
  const ms = (seconds: number) => `${size(seconds * 1000)}\u00a0ms`;
  const angle = (rad: number) => `${String(Math.round(degrees(rad) * 10) / 10).replace('.', decimalMark())}°`;

  function minutes(seconds: number): string {
    const whole = Math.round(seconds);
    return whole < 100
      ? t('planner.seconds', { n: whole })
      : t('planner.minutes', { m: Math.floor(whole / 60), s: String(whole % 60).padStart(2, '0') });
  }

  function targetWords(verdict: TargetVerdict, wanted: number, result: string): VerdictWords {
    const { code, reached, swingsNeeded, repeatsNeeded, term } = verdict;
    const said = { result, reached: percent(reached ?? 0), wanted: percent(wanted) };
    const swings = swingsNeeded === null ? [] : [t('planner.verdict.swings', { n: swingsNeeded }, swingsNeeded)];
    const repeats =
      repeatsNeeded === null || repeatsNeeded === 1
        ? []
        : [t('planner.verdict.repeats', { n: repeatsNeeded }, repeatsNeeded)];
    if (code === 'meets')
      return {
        tone: 'good',
        short: t('planner.short.meets'),
        sentence: t('planner.verdict.meets', said),
        more: swings,
      };
    if (code === 'floor') {
      const left = t('planner.verdict.floorMore', { term: t(`planner.terms.${term!}`) });
      return { tone: 'far', short: t('planner.short.floor'), sentence: t('planner.verdict.floor', said), more: [left] };
    }
    if (code === 'no_result') return nothing();
    return {
      tone: 'near',
      short: t('planner.short.notYet'),
      sentence: t('planner.verdict.notYet', said),
      more: [...swings, ...repeats],
    };
  }

  function effectWords(verdict: EffectVerdict, other: number): VerdictWords {
    const { code, difference, sigma, swingsNeeded } = verdict;
    if (code === 'no_result') return nothing();
    const said = { angle: angle(other), difference: ms(difference), sigma: size(sigma) };
    const tone = { sees: 'good', hint: 'near', cannot_see: 'far' } as const;
    const more =
      swingsNeeded === null
        ? [t('planner.verdict.neverSeen')]
        : [t('planner.verdict.seenWith', { n: swingsNeeded }, swingsNeeded)];
    return { tone: tone[code], short: t(`planner.short.${code}`), sentence: t(`planner.verdict.${code}`, said), more };
  }

  const nothing = (): VerdictWords => ({
    tone: 'far',
    short: t('planner.short.nothing'),
    sentence: t('planner.verdict.nothing'),
    more: [],
  });

  function verdictWords(
    outcome: PlannerOutcome,
    goal: 'small_period' | 'gravity' | 'amplitude_effect',
  ): VerdictWords | null {
    if (outcome.kind === 'unfilled') return null;
    if (outcome.kind === 'effect') return effectWords(outcome.verdict, outcome.wanted);
    return targetWords(outcome.verdict, outcome.wanted, t(goal === 'gravity' ? 'planner.g' : 'planner.t0'));
  }

  return { verdictWords, percent, ms, angle, minutes, size };
}
