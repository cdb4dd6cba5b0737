import 'fake-indexeddb/auto';
import { afterEach, describe, expect, it } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { HAND_U } from '@shared/analysis/timingShares';
import { BudgetLine } from '@shared/schemas/analysis';
import type { RawRun } from '@shared/schemas/run';
import { foldRun } from '@shared/timing/foldRun';
import HowGot from '@/components/run/HowGot.vue';
import { useBudgetWords, type BudgetOf } from '@/composables/useBudgetWords';
import { rawGateRun, rawKeyedRun, rawTapRun, sealed, stringRig } from '../../../factories/rawRuns';
import { timingCase } from '../../../factories/timingCases';
import { mountApp } from '../../support/mountApp';

const opened: { unmount(): void }[] = [];
afterEach(() => opened.splice(0).forEach((wrapper) => wrapper.unmount()));

const of = (run: RawRun) => ({ analysis: analyseRun({ run: sealed(run), edits: [] }), view: foldRun(run, []) });

function openHowGot(run: RawRun) {
  const about = of(run);
  const { wrapper } = mountApp(HowGot, about);
  opened.push(wrapper);
  const term = (name: string, budget = 0) => {
    const buttons = wrapper.findAll('.budget').at(budget)!.findAll('button');
    return buttons.find((button) => button.text() === name)!;
  };
  return { ...about, wrapper, term };
}

/** The words as a component of the app gets them. */
function wordsOf(line: BudgetLine, about: BudgetOf) {
  let said: ReturnType<ReturnType<typeof useBudgetWords>['lineWords']> | undefined;
  const { wrapper } = mountApp({
    setup() {
      said = useBudgetWords().lineWords(line, about);
      return () => null;
    },
  });
  opened.push(wrapper);
  return said!;
}

describe('a line of the budget', () => {
  it('opens with a button that says whether it is open, and closes again', async () => {
    const { wrapper, term } = openHowGot(timingCase('simple-30').run);
    const button = term('Scatter of the marks');
    expect(button.attributes('aria-expanded')).toBe('false');
    await button.trigger('click');
    expect(button.attributes('aria-expanded')).toBe('true');
    const said = wrapper.find(`[id="${button.attributes('aria-controls')}"]`);
    expect(said.text()).toContain('To make it smaller:');
    await button.trigger('click');
    expect(wrapper.find('.budget__said').exists()).toBe(false);
  });

  it('of scatter names marks, jitter, correlation and what a straight line would know', async () => {
    const { wrapper, term, analysis } = openHowGot(timingCase('simple-30').run);
    await term('Scatter of the marks').trigger('click');
    const { jitter_s, lag1, marks_used: n } = analysis;
    // Slope of n evenly spaced points: σ√(12/(n³ − n)), any statistics text.
    const line_ms = 1000 * jitter_s! * Math.sqrt(12 / (n ** 3 - n));
    const text = wrapper.find('.budget__said').text().replaceAll('−', '-');
    expect(text).toContain(`${n} marks scatter by ${(jitter_s! * 1000).toFixed(1)} ms`);
    expect(text).toContain(`r₁ = ${lag1!.toFixed(2)}`);
    expect(text).toContain(`${Number(line_ms.toPrecision(2))}`);
    expect(text).toContain('JCGM 100:2008');
  });

  it('of the hand shows the two presses of a total and where 70 ms come from', async () => {
    const { wrapper, term, analysis } = openHowGot(timingCase('keyed-20').run);
    await term('Hand at start and stop').trigger('click');
    const text = wrapper.find('.budget__said').text();
    const plain = Number(((1000 * Math.SQRT2 * HAND_U) / analysis.swings!).toPrecision(2));
    expect(text).toContain(`√2 × 70/${analysis.swings} = ${plain} ms`);
    expect(text).toContain('Am. J. Phys. 87, 110');
  });

  it('of a gate speaks of its flag, of a run by eye of its readings', async () => {
    const gate = openHowGot(timingCase('gate-45').run);
    await gate.term('Amplitude readings').trigger('click');
    expect(gate.wrapper.find('.budget__said').text()).toMatch(/a flag \d+\.\d mm wide blocked the beam/);
    const eye = openHowGot(timingCase('simple-30').run);
    await eye.term('Amplitude readings').trigger('click');
    expect(eye.wrapper.find('.budget__said').text()).toMatch(/At 29\.\d+ ± .* falling to 23\.\d+/);
  });

  it('of g gives what it is in T₀ and what that counts', async () => {
    const { wrapper, term, analysis } = openHowGot({ ...timingCase('every-5th').run, rig: stringRig() });
    await term('Scatter of the marks', 1).trigger('click');
    const inT0 = analysis.budget.find(({ term }) => term === 'timing')!.u * 1000;
    expect(wrapper.find('.budget__said').text()).toContain(`${Number(inT0.toPrecision(2))} ms of T₀ count 2g/T₀ times`);
  });

  it('asks for the end reading where the amplitude was read once', () => {
    const run = timingCase('keyed-20').run;
    const about = { result: 't0' as const, ...of(run) };
    const words = wordsOf({ term: 'decay', type: 'B', u: 0.001, dof: null }, about);
    expect(words.smaller).toBe('read the amplitude at the end.');
  });
});

describe('every term a budget can have', () => {
  const runs = {
    tapped: timingCase('simple-30').run,
    'tapped without amplitude': rawTapRun(),
    'keyed without amplitude': rawKeyedRun(),
    gate: timingCase('gate-off').run,
    'gate of a few blocks': rawGateRun({ blocks: [0, 1, 2].map((t) => [t, t + 0.02] as [number, number]) }),
  };
  const terms = BudgetLine.shape.term.options;

  it.each(Object.keys(runs) as (keyof typeof runs)[])('is told in whole sentences for a run %s', (kind) => {
    const about = of(runs[kind]);
    for (const term of terms) {
      for (const result of ['t', 't0', 'g'] as const) {
        if (result !== 'g' && OF_G.has(term)) continue;
        const { sentences, smaller } = wordsOf({ term, type: 'A', u: 0.001234, dof: 5 }, { result, ...about });
        const text = [...sentences, smaller].join(' ');
        expect(text, `${term} of ${result}`).not.toMatch(/budget\.|[{}]|undefined|NaN|null|Infinity/);
        expect(text, `${term} of ${result}`).toMatch(/1\.2|0\.0012/);
        expect(smaller.endsWith('.')).toBe(true);
      }
    }
  });
  /** Lines that come with the rig and never stand in a budget of T. */
  const OF_G = new Set<string>(['length', 'mass', 'hub', 'air', 'string', 'support']);
});
