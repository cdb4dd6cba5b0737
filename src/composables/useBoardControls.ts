import { onScopeDispose, readonly, ref } from 'vue';
import { useSettings } from '@/stores/useSettings';

const STEP = 1.15;
const LEAST = 0.6;
/** Four steps up: what is large already grows half as fast, and the picture keeps its room at 1080 lines. */
const MOST = STEP ** 4;
/** The controls go away when nobody has moved for so long: the Board is for looking at. */
const QUIET_MS = 4000;

/** What a Board can be told, by key or by button: freeze, blank, text size, bright or dark, picture or table. */
export function useBoardControls() {
  const settings = useSettings();
  const isFrozen = ref(false);
  const isBlank = ref(false);
  const isTable = ref(false);
  const isQuiet = ref(false);
  const textScale = ref(1);

  const toggle = (flag: { value: boolean }) => () => {
    flag.value = !flag.value;
  };
  const resize = (factor: number) => () => {
    textScale.value = Math.min(MOST, Math.max(LEAST, textScale.value * factor));
  };
  const actions = {
    freeze: toggle(isFrozen),
    blank: toggle(isBlank),
    table: toggle(isTable),
    bigger: resize(STEP),
    smaller: resize(1 / STEP),
    theme: () => {
      settings.theme = document.documentElement.dataset.theme === 'dark' ? 'light' : 'dark';
    },
  };

  const KEYS: Record<string, keyof typeof actions> = {
    f: 'freeze',
    b: 'blank',
    t: 'table',
    '+': 'bigger',
    '=': 'bigger',
    '-': 'smaller',
    d: 'theme',
  };
  function onKey(event: KeyboardEvent) {
    const action = KEYS[event.key.toLowerCase()];
    if (!action || event.ctrlKey || event.metaKey || event.altKey) return;
    event.preventDefault();
    actions[action]();
  }

  let timer: ReturnType<typeof setTimeout> | undefined;
  function stir() {
    isQuiet.value = false;
    clearTimeout(timer);
    timer = setTimeout(() => {
      isQuiet.value = true;
    }, QUIET_MS);
  }
  stir();
  onScopeDispose(() => clearTimeout(timer));

  return {
    isFrozen: readonly(isFrozen),
    isBlank: readonly(isBlank),
    isTable: readonly(isTable),
    isQuiet: readonly(isQuiet),
    textScale: readonly(textScale),
    ...actions,
    onKey,
    stir,
  };
}
