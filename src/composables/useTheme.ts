import { Dark } from 'quasar';
import { watchEffect } from 'vue';
import { useSettings } from '@/stores/useSettings';

/** Follows the theme setting, and the device's own while it says `system`. Call it once, in the app's root. */
export function useTheme(): void {
  const settings = useSettings();
  watchEffect(() => {
    Dark.set(settings.theme === 'system' ? 'auto' : settings.theme === 'dark');
    document.documentElement.dataset.theme = Dark.isActive ? 'dark' : 'light';
  });
}
