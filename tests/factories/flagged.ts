import { analyseRun } from '@shared/analysis/analyseRun';
import type { EditChange } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { noise } from './noise';
import { evenTimes, rawEdits, sealed } from './rawRuns';

/** Flags of a run with these edits. */
export function flagsOf(run: RawRun, ...changes: EditChange[]) {
  return analyseRun({ run: sealed(run), edits: rawEdits(run, ...changes).map(sealed) }).flags;
}

/** Their codes, with the mark where there is one. */
export const namesOf = (run: RawRun, ...changes: EditChange[]) =>
  flagsOf(run, ...changes).map(({ code, mark }) => (mark === null ? code : `${code} ${mark}`));

/** n instants one every `lap` s, each off by a hand's jitter, s. */
export function jittered(n: number, lap: number, jitter: number, seed = 1): number[] {
  const { normal } = noise(seed);
  return evenTimes(n, lap).map((t) => t + jitter * normal());
}
