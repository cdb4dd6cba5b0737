import type { RawRun } from '@shared/schemas/run';
import file from '../reference/timing-cases.json';
import { angleReading, rawGateRun, rawKeyedRun, rawTapRun, stringRig } from './rawRuns';

/** A run from the reference file: integrated motion with the noise of hands, and the truth it was made from. */
export function timingCase(id: string): { run: RawRun; smallPeriod: number } {
  const found = file.cases.find((one) => one.id === id);
  if (!found) throw new Error(`no timing case ${id}`);
  const { capture } = found;
  const amplitudes = found.amplitudes.map(({ swing, angleDeg, uDeg }) => angleReading(swing, angleDeg, uDeg));
  const rig = found.lengthM
    ? stringRig({ length_readings: [{ to: 'centre', um: found.lengthM * 1e6 }], length_u_um: found.lengthM * 1e4 })
    : null;
  const run = { amplitudes, rig };
  return { run: rawOf(capture, run), smallPeriod: found.truth.T0 };
}

function rawOf(capture: (typeof file.cases)[number]['capture'], run: Pick<RawRun, 'amplitudes' | 'rig'>): RawRun {
  if (capture.marks) {
    return rawTapRun({ ...run, times: capture.marks, capture: { swings_per_mark: capture.swingsPerMark } });
  }
  if (capture.blocks) {
    const flag_width_um = Math.round((capture.flagWidthDeg! * Math.PI * 1e6) / 180);
    const blocks = capture.blocks as [number, number][];
    return rawGateRun({ ...run, blocks, capture: { flag_width_um, flag_distance_um: 1_000_000 } });
  }
  return rawKeyedRun({ ...run, counted_to: capture.swings!, total: capture.totalTime! });
}
