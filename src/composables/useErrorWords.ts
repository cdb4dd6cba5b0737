import { useI18n } from 'vue-i18n';
import { ApiError } from '@/api/ApiError';

/** What a person is told when the server could not be asked, or said no: what was seen and what to do. */
export function useErrorWords() {
  const { t } = useI18n();

  /** Our server's own words where it gave some; else ours for the kind of trouble. */
  function words(cause: unknown): string {
    if (!(cause instanceof ApiError)) return t('errors.unexpected');
    if (cause.code !== '' && cause.kind !== 'server') return cause.message;
    return t(`errors.${cause.kind}`);
  }

  /** The words for one field of a form, or null. */
  function fieldWords(cause: unknown, path: string): string | null {
    if (!(cause instanceof ApiError)) return null;
    return cause.fields.find((field) => field.path === path)?.message ?? null;
  }

  return { words, fieldWords };
}
