import { computed, type Ref } from 'vue';
import { useI18n } from 'vue-i18n';
import type { RawRun, TapCapture } from '@shared/schemas/run';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

interface Fact {
  name: string;
  words: string;
}
interface Recorded {
  raw: RawRun;
  row: { clock_skew_ms: number | null; digest: string };
}

/** Facts of a raw run in words, none of them computed from its times. */
export function useRawFacts(recorded: Ref<Recorded>) {
  const { t, d } = useI18n();
  const settings = useSettings();
  const seconds = (s: number, places: number) => formatSeconds(s, { places, decimalMark: settings.decimalMark });
  const fact = (key: string, words: string): Fact => ({ name: t(`run.raw.${key}`), words });

  function skewWords(skew_ms: number | null): string {
    if (skew_ms === null) return t('run.raw.skewUnknown');
    if (Math.abs(skew_ms) < 1000) return t('run.raw.skewNone');
    const named = { seconds: seconds(Math.abs(skew_ms) / 1000, 0) };
    return t(skew_ms > 0 ? 'run.raw.skewAhead' : 'run.raw.skewBehind', named);
  }

  function cautionsWords(seen_ms: number | null): string {
    return seen_ms === null ? t('run.raw.cautionsNot') : d(seen_ms, { dateStyle: 'medium', timeStyle: 'short' });
  }

  function tapFacts({ inputs, rejected, events, ended, clock }: TapCapture): Fact[] {
    const rejectedWords = [...countBy(rejected.map(({ why }) => why))].map(
      ([why, count]) => `${count} × ${t(`run.raw.rejectedWhy.${why}`)}`,
    );
    const eventWords = events.map(({ kind, after_mark }) =>
      t(after_mark < 0 ? 'run.raw.eventBefore' : 'run.raw.eventAt', {
        what: t(`run.raw.event.${kind}`),
        mark: after_mark,
      }),
    );
    return [
      fact('inputs', inputs.map((input) => t(`run.raw.input.${input}`)).join(', ')),
      fact('ended', t(`run.raw.endedHow.${ended}`)),
      fact('rejected', rejectedWords.join(', ') || t('run.raw.noEvents')),
      fact('events', eventWords.join(', ') || t('run.raw.noEvents')),
      fact('clockStep', t('run.raw.us', { us: clock.step_us })),
    ];
  }

  function captureFacts({ capture }: RawRun): Fact[] {
    if (capture.kind === 'tap') return tapFacts(capture);
    const step = fact('readingStep', `${seconds(capture.reading_step_us / 1e6, 3)} s`);
    if (capture.kind === 'keyed_splits') return [step];
    if (capture.kind === 'keyed_total') {
      return [
        fact('total', `${seconds(capture.total_us / 1e6, 2)} s`),
        fact('countedTo', String(capture.counted_to)),
        fact('firstCount', t(`run.raw.firstCounts.${capture.first_count}`)),
        step,
      ];
    }
    const width = capture.flag_width_um === null ? [] : [fact('flagWidth', `${capture.flag_width_um / 1000} mm`)];
    return [fact('blocks', String(capture.block_us.length)), ...width, step];
  }

  return computed(() => {
    const { raw, row } = recorded.value;
    return [
      ...captureFacts(raw),
      fact('skew', skewWords(row.clock_skew_ms)),
      fact('cautions', cautionsWords(raw.made.cautions_seen_wall_ms)),
      fact('version', raw.made.app_version),
      fact('digest', row.digest),
    ];
  });
}

function countBy<Key>(keys: Key[]): Map<Key, number> {
  const counts = new Map<Key, number>();
  keys.forEach((key) => counts.set(key, (counts.get(key) ?? 0) + 1));
  return counts;
}
