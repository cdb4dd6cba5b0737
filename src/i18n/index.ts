import { createI18n } from 'vue-i18n';
import { byName } from './texts';

/** What the pad says, and what stands around every page: nothing else is fetched before a tap can be. */
const firstTexts = byName(
  import.meta.glob(['./en/common.json', './en/errors.json', './en/kit.json', './en/pad.json'], { eager: true }),
);

export const i18n = createI18n({
  legacy: false,
  locale: 'en',
  fallbackLocale: 'en',
  messages: { en: firstTexts },
});

let isWhole = false;

/** Brings the messages of all other pages. Asked before each of them is opened; a failure is asked again. */
export async function loadTexts(): Promise<void> {
  if (isWhole) return;
  const { laterTexts } = await import('./laterTexts');
  i18n.global.setLocaleMessage('en', { ...firstTexts, ...laterTexts });
  isWhole = true;
}
