import { FLAG_CODES, type FlagCode } from '@shared/schemas/edit';
import { detections, falseAlarms, FAULTS } from '../factories/flagShares';
import { SCENARIOS } from '../factories/noisyRuns';

/**
 * How often each flag is raised on clean noisy runs of each scenario (wanted: at most one in two hundred), and how
 * often it finds the fault it is named for. SEED and COPIES may be set in the environment.
 */
const copies = Number(process.env.COPIES ?? 500);
const seed = Number(process.env.SEED ?? 1);
const percent = (n: number, of: number) => `${((100 * n) / of).toFixed(2)} %`.padStart(9);
const others = (raised: Record<FlagCode, number>, but?: FlagCode) =>
  FLAG_CODES.filter((code) => code !== but && raised[code] > 0).map((code) => `${code} ${raised[code]}`);

console.log(`clean runs, ${copies} copies each, seed ${seed}: runs with any flag, and which`);
const all = Object.fromEntries(FLAG_CODES.map((code) => [code, 0])) as Record<FlagCode, number>;
let runs = 0;
for (const scenario of SCENARIOS) {
  const { raised } = falseAlarms(scenario, copies, seed);
  const planted = scenario.how.kind === 'gate' && scenario.how.offCentreDeg !== 0 ? 'off_centre' : undefined;
  console.log(`  ${scenario.name}: ${others(raised, planted).join(', ') || 'none'}`);
  for (const code of FLAG_CODES) if (code !== planted) all[code] += raised[code];
  runs += copies;
}
console.log(`false alarms over ${runs} clean runs`);
for (const code of FLAG_CODES) console.log(`${percent(all[code], runs)}  ${code}`);

console.log('planted faults found');
for (const fault of FAULTS) {
  const { raised } = detections(fault, copies, seed);
  const besides = others(raised, fault.code).join(', ');
  console.log(
    `${percent(raised[fault.code], copies)}  ${fault.code}: ${fault.what}${besides && `; besides: ${besides}`}`,
  );
}
