import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import type { RawRun } from '@shared/schemas/run';
import { withdrawnIds } from './runHistory';

interface Told {
  raw: RawRun;
  edits: { raw: RawEdit }[];
}

/** The rig as last said: the newest edit in force, else what the run was sealed with. */
export function rigInForce(told: Told): Rig | null {
  return newest(told, 'set_rig')?.rig ?? told.raw.rig;
}

export function amplitudesInForce(told: Told): AmplitudeReading[] {
  return newest(told, 'set_amplitudes')?.amplitudes ?? told.raw.amplitudes;
}

function newest<Kind extends EditChange['kind']>({ edits }: Told, kind: Kind) {
  const raw = edits.map((edit) => edit.raw);
  const gone = withdrawnIds(raw);
  const found = raw.findLast(({ id, change }) => change.kind === kind && !gone.has(id));
  return found?.change as Extract<EditChange, { kind: Kind }> | undefined;
}
