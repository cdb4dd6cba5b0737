import { computed, onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { GateChoice } from '@shared/timing/gateBlocks';
import { readGate, type GateReading } from './readGate';

/** From so many lines on the table is read in a worker and the page says so. */
const MANY_LINES = 1_000;
/** Far more than a run holds; what is larger is no gate table. */
export const MOST_FILE_BYTES = 5_000_000;
const TYPING_PAUSE_MS = 200;

/**
 * A pasted or chosen gate table and what it comes to. The text is never changed or dropped; `choice`
 * starts as a guess and is the person's from then on.
 */
export function useGateText() {
  const text = ref('');
  const choice = ref<GateChoice | null>(null);
  const reading = shallowRef<GateReading | null>(null);
  const isReading = ref(false);
  const lines = computed(() => text.value.split('\n').length);
  let worker: Worker | undefined;
  let asked = 0;
  let timer: ReturnType<typeof setTimeout> | undefined;

  function take(request: number, result: GateReading) {
    if (request !== asked) return;
    reading.value = result;
    isReading.value = false;
  }

  function read() {
    const request = (asked += 1);
    const given = choice.value && { ...choice.value };
    if (text.value.trim() === '') return take(request, { columns: [], rows: 0, choice: null, blocks: null });
    if (lines.value <= MANY_LINES || typeof Worker === 'undefined') return take(request, readGate(text.value, given));
    isReading.value = true;
    worker ??= new Worker(new URL('./gateWorker.ts', import.meta.url), { type: 'module' });
    worker.onmessage = ({ data }: MessageEvent<GateReading>) => take(asked, data);
    worker.onerror = () => take(asked, readGate(text.value, given));
    worker.postMessage({ text: text.value, choice: given });
  }

  watch(text, () => {
    clearTimeout(timer);
    timer = setTimeout(read, TYPING_PAUSE_MS);
  });
  watch(choice, read, { deep: true });
  onScopeDispose(() => {
    clearTimeout(timer);
    worker?.terminate();
  });

  return { text, choice, reading, isReading, lines };
}
