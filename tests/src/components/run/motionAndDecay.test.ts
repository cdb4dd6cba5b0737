import 'fake-indexeddb/auto';
import { afterEach, describe, expect, it } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import type { Analysis } from '@shared/schemas/analysis';
import { foldRun } from '@shared/timing/foldRun';
import RunDecay from '@/components/run/RunDecay.vue';
import RunMotion from '@/components/run/RunMotion.vue';
import { motionModel, stretchOf } from '@/components/charts/motionModel';
import { rawTapRun, sealed } from '../../../factories/rawRuns';
import { timingCase } from '../../../factories/timingCases';
import file from '../../../reference/timing-cases.json';
import { mountApp } from '../../support/mountApp';

const opened: { unmount(): void }[] = [];
afterEach(() => opened.splice(0).forEach((wrapper) => wrapper.unmount()));

function show(id: string, parts: Partial<Analysis> = {}) {
  const { run } = timingCase(id);
  const analysis = { ...analyseRun({ run: sealed(run), edits: [] }), ...parts };
  const open = (component: typeof RunDecay | typeof RunMotion, more: object) => {
    const { wrapper } = mountApp(component, { analysis, mayEdit: true, ...more });
    opened.push(wrapper);
    return wrapper;
  };
  const decay = () => open(RunDecay, { view: foldRun(run, []) });
  const motion = () => open(RunMotion, {});
  return { analysis, decay, motion };
}
const cells = (row: { findAll(s: string): { text(): string }[] }) =>
  row.findAll('th, td').map((cell) => cell.text().replaceAll('−', '-'));

describe('the motion fold', () => {
  it('lists each mark where it was pressed and when the motion expects it', () => {
    const { analysis, motion } = show('simple-60-pass');
    const rows = motion().findAll('.number-table tbody tr');
    expect(rows).toHaveLength(analysis.marks_used);
    const { time_s, residual_s } = analysis.marks[3]!;
    expect(cells(rows[3]!).slice(2, 4)).toEqual([time_s.toFixed(3), (time_s - residual_s!).toFixed(3)]);
  });

  it('puts marks pressed on time at the lowest point, where the bob is fastest', () => {
    const { motion, analysis } = show('gate-45');
    const top =
      2 * (360 / analysis.small_period_s!.value) * Math.sin((analysis.motion!.release_deg.value * Math.PI) / 360);
    const [, , , , angle, rate] = cells(motion().findAll('.number-table tbody tr')[0]!);
    expect(Math.abs(Number(angle))).toBeLessThan(0.2);
    expect(Math.abs(Number(rate)) / top).toBeGreaterThan(0.98);
    expect(Math.abs(Number(rate)) / top).toBeLessThan(1.001);
  });

  it('draws start and stop of a keyed total', () => {
    const { motion, analysis } = show('keyed-20');
    const wrapper = motion();
    const rows = wrapper.findAll('.number-table tbody tr').map(cells);
    expect(rows.map(([, swing]) => Number(swing))).toEqual([0, analysis.swings]);
    expect(wrapper.find('figcaption').text()).toContain('through the lowest point at up to');
  });

  it('says so when the fit did not settle', () => {
    const { analysis } = show('simple-30');
    const { motion } = show('simple-30', { motion: { ...analysis.motion!, converged: false } });
    expect(motion().text()).toContain('did not settle');
  });

  it('says what is missing where marks and readings fit no motion', () => {
    const { motion } = show('simple-30', { motion: null, missing: [] });
    expect(motion().text()).toContain('fit no motion of a pendulum');
  });

  it('of a long run is an outline as a whole and a curve close up', () => {
    const times = Array.from({ length: 501 }, (_, i) => 2 * i);
    const amplitudes = timingCase('simple-30').run.amplitudes.map((one) => ({ ...one, swing: 10 * one.swing }));
    const model = motionModel(analyseRun({ run: sealed(rawTapRun({ times, amplitudes })), edits: [] }))!;
    const whole = stretchOf(model, null);
    expect(whole.curve).toHaveLength(0);
    expect(whole.outline.length).toBeLessThan(260);
    const close = stretchOf(model, 500);
    expect(close.curve.length).toBeGreaterThan(100);
    expect(close.curve.length).toBeLessThan(200);
    expect(close.range_s[0]).toBeLessThan(500);
    expect(close.range_s[1]).toBeGreaterThan(500);
  });
});

describe('the decay fold', () => {
  it('says how far the amplitude fell, and by which law where the run tells', () => {
    const { decay } = show('dry-40');
    const text = decay().find('figcaption').text();
    expect(text).toMatch(/In 20 swings the amplitude fell from 4\d\.\d.*° to 1\d/);
    expect(text).toContain('dry friction');
  });

  it('has the fitted amplitude and the reading beside each other', () => {
    const { decay, analysis } = show('simple-30');
    const rows = decay().findAll('.number-table tbody tr').map(cells);
    const last = rows.at(-1)!;
    expect(last[0]).toBe(String(analysis.swings));
    expect(last[1]).toContain(analysis.amplitude!.end_deg.value.toFixed(1));
    expect(last[2]).toMatch(/^23\.4/);
    const read = rows.filter(([, , reading]) => reading !== '–');
    expect(read.map(([swing]) => swing)).toEqual(['0', '10', '20']);
  });

  it('half of the amplitude is left when the reference run has half of it left', () => {
    // Truth of rod-90: integrated at high precision, tests/reference/timing-cases.json.
    const { truth } = file.cases.find(({ id }) => id === 'rod-90')!;
    const half = truth.amplitudeDegAfterSwings.findIndex((deg) => deg < 45);
    const { decay } = show('rod-90');
    const said = Number(/after about (\S+) swings/.exec(decay().text())![1]);
    expect(Math.abs(said - half)).toBeLessThanOrEqual(1);
  });

  it('of a gate shows what the blocks tell beside what was read', () => {
    const { decay } = show('gate-off');
    const read = decay()
      .findAll('.number-table tbody tr')
      .map(cells)
      .filter(([, , reading]) => reading !== '–');
    expect(read.length).toBeGreaterThan(5);
  });

  it('without an end reading asks for it, and Q is only said to be above something', () => {
    const { decay } = show('keyed-20');
    const text = decay().text();
    expect(text).toContain('The amplitude at the end was not read');
    expect(text).toMatch(/Q, mean of the run\s*above \d+/);
  });
});
