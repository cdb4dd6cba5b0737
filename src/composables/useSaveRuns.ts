import { ref } from 'vue';
import type { RunEntry } from '@/stores/useRuns';
import { useTrouble } from './useTrouble';
import { fileName } from './fileName';
import { shareOrSaveFile } from './shareOrSaveFile';

/** Runs as a file, format `swaymark-runs`: from what this device holds, network or not. No names are in it. */
export function useSaveRuns() {
  const { trouble, isBusy, attempt } = useTrouble();
  const saved = ref<number | null>(null);

  async function save(entries: readonly RunEntry[], words: string[]): Promise<void> {
    saved.value = null;
    await attempt(async () => {
      const { exportRuns } = await import('@shared/schemas/runFile');
      const text = exportRuns(
        entries.map(({ row, raw, counted }) => ({
          run: { digest: row.digest, content: raw },
          edits: counted.map((edit) => ({ digest: edit.row.digest, content: edit.raw })),
        })),
      );
      await shareOrSaveFile(fileName(words, Date.now(), 'json'), text, 'application/json');
      saved.value = entries.length;
    });
  }
  return { save, saved, trouble, isBusy };
}
