import { useI18n } from 'vue-i18n';
import { withoutSpacing } from '@shared/schemas/tidyTyped';
import { looksLikeClassCode } from './classCode';

/** Words for what is not right yet with a typed-in field; null when it may be sent. */
export function useFieldChecks() {
  const { t } = useI18n();
  return {
    required: (text: string) => (text.trim() ? null : t('errors.required')),
    code: (text: string) => (looksLikeClassCode(text) ? null : t('errors.code')),
    pin: (text: string) => (/^\d{6}$/.test(withoutSpacing(text)) ? null : t('errors.pin')),
    email: (text: string) => (/^\S+@\S+\.\S+$/.test(text.trim()) ? null : t('errors.email')),
    newPassword: (text: string) => (text.length >= 12 ? null : t('errors.password', { n: text.length })),
  };
}
