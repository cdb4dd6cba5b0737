import 'fake-indexeddb/auto';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, expect, it } from 'vitest';
import RunCorrections from '@/components/run/RunCorrections.vue';
import RunPlace from '@/components/run/RunPlace.vue';
import { useSettings } from '@/stores/useSettings';
import { analyseRun } from '@shared/analysis/analyseRun';
import { foldRun } from '@shared/timing/foldRun';
import { angleReading, evenTimes, rawTapRun, sealed, stringRig } from '../../../factories/rawRuns';
import { mountApp } from '../../support/mountApp';

let wrapper: VueWrapper;
afterEach(() => wrapper.unmount());

const steel = stringRig({ bob_diameter_um: 30_000, bob_mass_mg: 110_977, string_mass_mg: 300 });
/** A period of small swings, and the rig it was timed on. */
function timed(period: number, rig = steel) {
  const run = rawTapRun({
    times: evenTimes(21, period).map((time, i) => time + 0.01 * Math.sin(7 * i)),
    amplitudes: [angleReading(0, 1, 0.1), angleReading(20, 0.9, 0.1)],
    rig,
  });
  return { analysis: analyseRun({ run: sealed(run), edits: [] }), view: foldRun(run, []) };
}

it('every correction has its sign on T₀ and on g, and which way g would be off without it', () => {
  wrapper = mountApp(RunCorrections, { analysis: timed(2.006).analysis }).wrapper;
  const rows = wrapper.findAll('tbody tr').map((row) => row.findAll('th, td').map((cell) => cell.text()));
  // corrections.json: string −2.25e-4, buoyancy 7.6e-5, air that swings along 7.4e-5, bob 4.5e-5; g takes twice, × 9.8.
  expect(rows).toEqual([
    ['Mass of the string', '−220', '−0.0044', 'g would come out high'],
    ['Air carries part of the bob', '+76', '+0.0015', 'g would come out low'],
    ['Air swings along with the bob', '+74', '+0.0014', 'g would come out low'],
    ['Size of the bob', '+45', '+0.00088', 'g would come out low'],
  ]);
});

it('without masses it says where to give them', () => {
  wrapper = mountApp(RunCorrections, { analysis: timed(2.006, stringRig()).analysis }).wrapper;
  expect(wrapper.text()).toContain('under “Masses and small print”');
});

async function openPlace(run: ReturnType<typeof timed>) {
  wrapper = mountApp(RunPlace, run).wrapper;
  await useSettings().ready;
  await flushPromises();
  const type = (n: number, text: string) => wrapper.findAll('input')[n]!.setValue(text);
  const show = async () => {
    await wrapper.find('form').trigger('submit');
    await flushPromises();
  };
  return { type, show };
}

it('nothing of normal gravity is seen before it is asked for, and a place is kept to a tenth of a degree', async () => {
  const { type, show } = await openPlace(timed(2.006));
  expect(wrapper.text()).not.toMatch(/9\.\d/);
  await show();
  expect(wrapper.text()).not.toContain('Measured minus normal');
  expect(document.activeElement).toBe(wrapper.find('input').element);
  await type(0, '45.0321');
  await type(1, '0');
  await show();
  // WGS 84 at 45° and sea level: 9.80620 m/s².
  expect(wrapper.text()).toContain('9.80620 plus or minus 0.00080 m/s²');
  expect(wrapper.text()).toContain('They agree');
  expect(useSettings().latitudeDeg).toBe(45);
});

it('where the place is known one press shows it, and a g too low is said to be', async () => {
  const { show } = await openPlace(timed(2.03));
  expect(wrapper.findAll('input')).toHaveLength(0);
  expect(wrapper.text()).toContain('Latitude 45.0°, height 0 m');
  await show();
  expect(wrapper.text()).toContain('g of this run is lower than both uncertainties allow');
});

it('for a weighed bar and bob it says which hub would make the difference', async () => {
  // physical-pendulum.json, rod_plus_bob, with 1e-3 kg m² on the hub: T0 = 2π √(0.35358/(0.454 · 9.80620)).
  const rig = stringRig({
    kind: 'bar_bob',
    length_readings: [{ to: 'centre', um: 800_000 }],
    bob_diameter_um: 60_000,
    bob_mass_mg: 500_000,
    bar_length_um: 900_000,
    pivot_offset_um: 450_000,
    bar_mass_mg: 120_000,
    length_u_um: 100,
  });
  const { show } = await openPlace(timed(2 * Math.PI * Math.sqrt(0.35358 / (0.454 * 9.8062)), rig));
  await show();
  const said = /make them equal.*?(\d+) plus or minus (\d+) g cm²/.exec(wrapper.text())!;
  expect(Math.abs(Number(said[1]) - 10_000)).toBeLessThan(Number(said[2]));
  // ± 15 000: these taps cannot tell it from none.
  expect(wrapper.text()).toContain('It is not told from no hub at all.');
});
