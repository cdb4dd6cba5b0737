/** Held by the tab that times a run, from arming to sealing. No reload, update or change of account meanwhile. */
export const RECORDING_LOCK = 'swaymark-recording';

/** True while any tab of this browser times a run. */
export async function isRecording(locks: LockManager | undefined = navigator.locks): Promise<boolean> {
  const { held } = (await locks?.query()) ?? {};
  return held?.some(({ name }) => name === RECORDING_LOCK) ?? false;
}
