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
    const said = cause.fields.find((field) => field.path === path)?.message;
    return said ? asSentence(said) : null;
  }

  return { words, fieldWords };
}

/** The server names a field and goes on in the middle of a sentence; beside the field it has to be a whole one. */
function asSentence(said: string): string {
  const whole = said.charAt(0).toUpperCase() + said.slice(1);
  return /[.!?]$/.test(whole) ? whole : `${whole}.`;
}
