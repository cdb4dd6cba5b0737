import { createI18n } from 'vue-i18n';

/** Every message file; its name is the top key: en/pad.json holds `pad.…`. */
const files = import.meta.glob<{ default: Record<string, unknown> }>('./en/*.json', { eager: true });

const en = Object.fromEntries(
  Object.entries(files).map(([path, file]) => [path.slice('./en/'.length, -'.json'.length), file.default]),
);

export const i18n = createI18n({ legacy: false, locale: 'en', fallbackLocale: 'en', messages: { en } });
