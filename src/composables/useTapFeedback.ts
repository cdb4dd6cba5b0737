import { onScopeDispose } from 'vue';
import { useSettings } from '@/stores/useSettings';

/** Not more than three tone changes a second, whatever the pendulum. */
const LEAST_BETWEEN_TONES_MS = 340;

/** Two short ones: unlike the single one of a tap that counts, and weak enough to tap on. */
const NOT_COUNTED_MS = [10, 60, 10];

/**
 * What a person feels, hears and sees of a tap. Called after the time was taken; nothing here is waited for.
 *
 * @param surface  the element that changes its tone
 * @returns        `counted` for a tap that became a mark; `notCounted` for a contact that did not
 */
export function useTapFeedback(surface: () => HTMLElement | null) {
  const settings = useSettings();
  const isStill = window.matchMedia('(prefers-reduced-motion: reduce)');
  let lastTone = -Infinity;
  let audio: AudioContext | undefined;

  function tone(at_ms: number) {
    if (isStill.matches || at_ms - lastTone < LEAST_BETWEEN_TONES_MS) return;
    lastTone = at_ms;
    surface()?.animate([{ opacity: 1 }, { opacity: 0 }], { duration: 240, easing: 'ease-out' });
  }

  function tick() {
    audio ??= new AudioContext();
    const [oscillator, gain] = [audio.createOscillator(), audio.createGain()];
    oscillator.frequency.value = 1_100;
    gain.gain.setValueAtTime(0.15, audio.currentTime);
    gain.gain.exponentialRampToValueAtTime(0.001, audio.currentTime + 0.03);
    oscillator.connect(gain).connect(audio.destination);
    oscillator.start();
    oscillator.stop(audio.currentTime + 0.03);
  }

  onScopeDispose(() => void audio?.close());

  return {
    counted(at_ms: number): void {
      tone(at_ms);
      if (settings.haptics) navigator.vibrate?.(15);
      if (settings.soundTick) tick();
    },
    notCounted(): void {
      if (settings.haptics) navigator.vibrate?.(NOT_COUNTED_MS);
    },
  };
}
