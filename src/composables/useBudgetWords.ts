import { useI18n } from 'vue-i18n';
import { CLOCK_RATE_U, HAND_U } from '@shared/analysis/timingShares';
import type { Analysis, BudgetLine } from '@shared/schemas/analysis';
import type { RunView } from '@shared/timing/runView';
import { formatMeasured, formatSeconds } from '@shared/units/formatMeasured';
import { msPlaces } from '@shared/units/msPlaces';
import { useSettings } from '@/stores/useSettings';
import { useAmplitudeWords } from './useAmplitudeWords';

/** What a budget is of, and the run it belongs to. */
export interface BudgetOf {
  result: 't' | 't0' | 'g';
  analysis: Analysis;
  view: RunView;
}

/** How one line of a budget was got, with this run's own numbers, and what would make it smaller. */
export interface LineWords {
  sentences: string[];
  smaller: string;
}

/** Lines that are of g alone; the others come to g through T0. */
const OF_G = ['length', 'mass', 'hub', 'air', 'string', 'support'];

export function useBudgetWords() {
  const { t } = useI18n();
  const settings = useSettings();
  const { degrees } = useAmplitudeWords();
  const options = () => ({ decimalMark: settings.decimalMark });

  /** Two significant digits. */
  const size = (number: number) => (number === 0 ? '0' : formatMeasured(number, number, options()).u);
  const ms = (seconds: number) => size(seconds * 1000);
  const decimal = (number: number, places: number) => formatSeconds(number, { places, ...options() });

  function lineWords(line: BudgetLine, of: BudgetOf): LineWords {
    const { result, analysis } = of;
    if (OF_G.includes(line.term)) {
      const length = analysis.length_m
        ? formatMeasured(analysis.length_m.value, analysis.length_m.u, options()).text
        : '';
      return {
        sentences: [t(`budget.${line.term}.share`, { length, u: size(line.u) })],
        smaller: t(`budget.${line.term}.smaller`),
      };
    }
    if (result !== 'g') return periodWords(line, of);
    // The same line in the budget of T0, and what it counts in g.
    const { small_period_s, g_m_s2 } = analysis;
    const inPeriod = (line.u * (small_period_s?.value ?? 0)) / (2 * (g_m_s2?.value ?? 1));
    const words = periodWords({ ...line, u: inPeriod }, { ...of, result: 't0' });
    const share = t('budget.asShare', { period: ms(inPeriod), u: size(line.u) });
    return { ...words, sentences: [...words.sentences, share] };
  }

  function periodWords(line: BudgetLine, of: BudgetOf): LineWords {
    const { analysis, view } = of;
    const named = { u: ms(line.u), result: t(`budget.of.${of.result}`), swings: analysis.swings ?? 0 };
    const isGate = view.capture.kind === 'gate';
    switch (line.term) {
      case 'timing':
        return { sentences: timing(line, of, named), smaller: t('budget.timing.smaller') };
      case 'reading': {
        const isWatch = view.capture.kind === 'keyed_total' || view.capture.kind === 'keyed_splits';
        const said = { ...named, step: ms(view.readingStep), each: ms(view.readingStep / Math.sqrt(12)) };
        return {
          sentences: [t(isWatch ? 'budget.reading.watch' : 'budget.reading.clock', said)],
          smaller: t('budget.reading.smaller'),
        };
      }
      case 'hand': {
        const plain = ms((Math.SQRT2 * HAND_U) / Math.max(named.swings, 0.5));
        const said = { ...named, plain, hand: decimal(HAND_U * 1000, 0), marks: analysis.marks_used };
        return {
          sentences: [t(view.capture.kind === 'keyed_total' ? 'budget.hand.total' : 'budget.hand.few', said)],
          smaller: t('budget.hand.smaller'),
        };
      }
      case 'clock': {
        const rate = decimal(CLOCK_RATE_U * 1e6, 0);
        const most = decimal(CLOCK_RATE_U * Math.sqrt(3) * 1e6, 0);
        return {
          sentences: [t('budget.clock.rate', { ...named, rate, most })],
          smaller: t('budget.clock.smaller'),
        };
      }
      case 'amplitude':
        return {
          sentences: [amplitude(of, named)],
          smaller: t(widthOf(view) === null ? 'budget.amplitude.smaller' : 'budget.amplitude.smallerGate'),
        };
      case 'decay': {
        const isUnread = analysis.amplitude?.decay_known === false;
        const how = isUnread ? 'unread' : isGate && widthOf(view) !== null ? 'gate' : 'between';
        return {
          sentences: [t(`budget.decay.${how}`, named)],
          smaller: t(isUnread ? 'budget.decay.smallerUnread' : 'budget.decay.smaller'),
        };
      }
      default:
        throw new RangeError(`useBudgetWords: ${line.term} is no line of a period`);
    }
  }

  function timing(
    { type }: BudgetLine,
    { analysis, view }: BudgetOf,
    named: Record<string, string | number>,
  ): string[] {
    if (type === 'B') return [t('budget.timing.gateFew', named)];
    const { marks_used: marks, jitter_s, lag1 } = analysis;
    if (jitter_s === null || marks < 2) return [t('budget.timing.allowed', named)];
    const step = view.swingsPerMark;
    const line = (jitter_s * Math.sqrt(12 / (marks ** 3 - marks))) / step;
    const said = {
      ...named,
      marks,
      jitter: decimal(jitter_s * 1000, Math.max(1, msPlaces(jitter_s))),
      line: ms(line),
    };
    return [
      lag1 === null ? t('budget.timing.marksFew', said) : t('budget.timing.marks', { ...said, lag1: decimal(lag1, 2) }),
      t('budget.timing.allowed', named),
    ];
  }

  function amplitude({ analysis, view }: BudgetOf, named: Record<string, string | number>): string {
    const width = widthOf(view);
    if (width !== null) return t('budget.amplitude.gate', { ...named, width: decimal(width / 1000, 1) });
    const found = analysis.amplitude;
    return t('budget.amplitude.eye', {
      ...named,
      start: found ? degrees(found.start_deg) : '',
      end: found ? degrees(found.end_deg) : '',
      longer: size(100 * ((found?.ratio ?? 1) - 1)),
    });
  }

  return { lineWords };
}

/** Width of a gate's flag, µm; null where the amplitude was read by eye. */
const widthOf = ({ capture }: RunView) =>
  capture.kind === 'gate' && capture.flag_distance_um !== null ? capture.flag_width_um : null;
