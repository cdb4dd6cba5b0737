import { v7 as uuidv7 } from 'uuid';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import type { RawRun } from '@shared/schemas/run';
import type { RunContext } from '@shared/timing/enteredRuns';
import { useRuns } from '@/stores/useRuns';
import { useMaker } from './useMaker';

/** Runs that were timed with something else and are entered here: made and kept all together. */
export function useEnteredRuns() {
  const runs = useRuns();
  const { maker } = useMaker();

  /**
   * @param makers  one for each run, given all that is not its times
   * @returns       ids of the kept runs, in order
   */
  async function keepAll(
    makers: ((context: RunContext) => RawRun)[],
    { rig, amplitudes }: { rig: Rig | null; amplitudes: AmplitudeReading[] },
  ): Promise<string[]> {
    const made = await maker();
    const wall_ms = Date.now();
    const ids: string[] = [];
    for (const make of makers) {
      const context = {
        id: uuidv7(),
        wall_ms,
        zone_offset_min: -new Date(wall_ms).getTimezoneOffset(),
        ...made,
        rig,
        amplitudes,
        note: '',
      };
      await runs.addRun(make(context));
      ids.push(context.id);
    }
    return ids;
  }
  return { keepAll };
}
