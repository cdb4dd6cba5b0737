import { defineStore } from 'pinia';
import { reactive, toRefs, watch } from 'vue';
import type { MethodProfile } from '@shared/analysis/summariseRepeats';
import { savedSettings, saveSettings } from '@/db/appStore';

export interface Settings {
  theme: 'system' | 'light' | 'dark';
  /** Which thumb reaches for undo. */
  hand: 'left' | 'right';
  haptics: boolean;
  soundTick: boolean;
  gloveMode: boolean;
  /** The dot on the pad that says how evenly the taps come. */
  steadinessDot: boolean;
  decimalMark: '.' | ',';
  /** Where the device is used, for normal gravity; null until somebody says it. To a tenth of a degree. */
  latitudeDeg: number | null;
  heightM: number | null;
  /** How the mean of repeats is stated. */
  repeatProfile: MethodProfile;
}

const DEFAULTS: Settings = {
  theme: 'system',
  hand: 'right',
  haptics: true,
  soundTick: false,
  gloveMode: false,
  steadinessDot: true,
  decimalMark: '.',
  latitudeDeg: null,
  heightM: null,
  repeatProfile: 'gum',
};

/** How this device is set. Kept on the device, for whoever uses it. */
export const useSettings = defineStore('settings', () => {
  const settings = reactive<Settings>({ ...DEFAULTS });

  const ready = savedSettings().then((saved) => {
    Object.assign(settings, saved);
    watch(settings, () => void saveSettings({ ...settings }));
  });

  return { ...toRefs(settings), ready };
});
