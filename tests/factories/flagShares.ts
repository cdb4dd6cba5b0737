import { analyseRun } from '@shared/analysis/analyseRun';
import { FLAG_CODES, type FlagCode } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { noise } from './noise';
import { noisyRuns, type Scenario } from './noisyRuns';
import { FAULTS, type Fault } from './plantedFaults';
import { sealed, stringRig } from './rawRuns';

/** In how many of so many runs each flag is raised. */
export interface FlagShares {
  runs: number;
  raised: Record<FlagCode, number>;
}

/** Flags of clean noisy copies of a scenario, with the length of its pendulum read to a millimetre. */
export function falseAlarms(scenario: Scenario, copies: number, seed: number): FlagShares {
  const next = cleanRuns(scenario, seed);
  return sharesOf(copies, next);
}

/** Flags of copies of a fault's scenario with the fault planted in each, one of them chosen by chance. */
export function detections(fault: Fault, copies: number, seed: number): FlagShares {
  const { uniform } = noise(seed + 1000);
  const next = cleanRuns(fault.scenario, seed);
  return sharesOf(copies, () => fault.plant(next(), uniform, fault.scenario.smallPeriod));
}

export { FAULTS };

/** Standard uncertainty of the length, m. */
const LENGTH_U = 0.001;
const STANDARD_GRAVITY = 9.80665;

function cleanRuns(scenario: Scenario, seed: number): () => RawRun {
  const { normal } = noise(seed + 500);
  const next = noisyRuns(scenario, seed);
  const length = STANDARD_GRAVITY * (scenario.smallPeriod / (2 * Math.PI)) ** 2;
  return () => {
    const um = Math.round(1e6 * (length + LENGTH_U * normal()));
    return { ...next(), rig: stringRig({ length_readings: [{ to: 'centre', um }], length_u_um: 1e6 * LENGTH_U }) };
  };
}

function sharesOf(runs: number, next: () => RawRun): FlagShares {
  const raised = Object.fromEntries(FLAG_CODES.map((code) => [code, 0])) as Record<FlagCode, number>;
  for (let i = 0; i < runs; i += 1) {
    const { flags } = analyseRun({ run: sealed(next()), edits: [] });
    for (const code of new Set(flags.map((flag) => flag.code))) raised[code] += 1;
  }
  return { runs, raised };
}
